/* Texts of models that use every word of frames. */
#ifndef TESTS_FRAME_TEXTS_H
#define TESTS_FRAME_TEXTS_H

/* Written with ' for ": a plane frame of one storey. */
static const char PLANE[] =
    "{'scantling': 1, 'dimensions': 2, 'units': {'length': 'm', 'force': 'kN', 'stress': 'MPa', 'temperature': 'K'},\n"
    " 'materials': {'S': {'E': 210000, 'G': '81 GPa', 'density': '7850 kg/m3', 'expansion': '12e-6 1/K',\n"
    "  'allowable': {'tension': 140, 'compression': 140}}},\n"
    " 'families': {'own': {'sections': {\n"
    "  'H': {'A': '2000 mm2', 'I': '3e6 mm4', 'W': {'in_plane': '6e4 mm3', 'out_of_plane': 5e-5}, 'J': '4e4 mm4'}}}},\n"
    " 'joints': {'A': {'at': [0, 0], 'support': 'fixed'}, 'B': {'at': [6, 0], 'support': ['x', 'y', 'rotation']},\n"
    "  'C': {'at': [0, 4], 'springs': {'y': '5000 kN/m', 'rotation': 200}}, 'M': {'at': [2, 4]}, 'D': {'at': [6, "
    "4]}},\n"
    " 'groups': {'post': {'material': 'S', 'area': '4000 mm2', 'shape': {'kind': 'square tube', 'width_to_wall': "
    "20}},\n"
    "  'beam': {'material': 'S', 'family': 'IPE'}, 'own': {'material': 'S', 'family': 'own'},\n"
    "  'said': {'material': 'S', 'area': '5000 mm2', 'second_moment': {'c': 2}, 'section_modulus': {'c': {'in_plane': "
    "0.1,\n"
    "   'out_of_plane': 0.2}}, 'torsion_constant': {'at': '5000 mm2', 'value': '7.1e6 mm4', 'power': 1.8}}},\n"
    " 'members': {'L': {'from': 'A', 'to': 'C', 'group': 'post', 'ends': 'fixed'},\n"
    "  'R': {'from': 'B', 'to': 'D', 'group': 'own', 'ends': [{'in_plane': '200 kN m/rad'}, 'pinned']},\n"
    "  'top': {'through': ['C', 'M', 'D'], 'group': 'beam', 'length_factor': {'in_plane': 0.8}, 'ends': ['fixed', "
    "'pinned']},\n"
    "  'tie': {'from': 'A', 'to': 'D', 'group': 'said', 'tension_only': true}},\n"
    " 'cases': {\n"
    "  'G': {'joints': {'D': [0, -4]}, 'moments': {'C': '12 kN m'}, 'loads': [\n"
    "   {'on': 'top', 'line': [0, -5], 'axes': 'projected'},\n"
    "   {'on': ['L', 'top'], 'from': 1, 'to': '4 m', 'line': [[0, -6], [0, '-12 kN/m']]},\n"
    "   {'on': 'top', 'at': '0.5 L', 'force': [0, -10], 'moment': 3, 'axes': 'member'},\n"
    "   {'on': 'top 2', 'at': 4, 'force': [0, -1]}]},\n"
    "  'T': {'settlements': {'A': [0, '-5 mm']}, 'rotations': {'A': '2 mrad'},\n"
    "   'members': {'L': {'gradient': '10 K/m'}, 'top': {'lack_of_fit': '3 mm', 'temperature': 20}}},\n"
    "  'N': {'notional': {'of': 'G', 'part': '1/200', 'direction': 'x'}}},\n"
    " 'combinations': {'all': {'for': 'allowable', 'sum': {'G': 1, 'T': 1, 'N': 1}}},\n"
    " 'limits': {'buckling': {'by': 'Euler', 'safety': 2},\n"
    "  'deflection': [{'joints': ['D', 'M'], 'relative_to': 'C', 'direction': 'y', 'at_most': '20 mm'},\n"
    "   {'between': [['C', 'A'], ['D', 'B']], 'direction': 'x', 'at_most': 'L/200', 'span': 4}],\n"
    "  'drift': [{'along': ['B', 'D'], 'direction': 'x', 'at_most': 'h/400'}],\n"
    "  'bow': [{'members': ['top', 'L'], 'axis': 'in_plane', 'at_most': 'L/300'}],\n"
    "  'critical_factor': {'at_least': 10}, 'amplify_sway': true,\n"
    "  'frequency': {'at_least': '3 Hz', 'mass': {'G': 1}}}}\n";

/* A bent and two straight runs in space, with `ENDS` and `MORE` for the first. */
static const char SPACE[] =
    "{'scantling': 1, 'dimensions': 3, 'units': {'length': 'm', 'force': 'kN', 'stress': 'MPa'},\n"
    " 'materials': {'S': {'E': 210000, 'G': 81000, 'density': '7850 kg/m3',\n"
    "  'allowable': {'tension': 140, 'compression': 140}}},\n"
    " 'joints': {'A': {'at': [0, 0, 0], 'support': 'fixed'}, 'B': {'at': [3, 0, 0]}, 'C': {'at': [6, 0, 0], 'support': "
    "['x', 'y', 'z', 'rotation x']},\n"
    "  'D': {'at': [3, 0, 4], 'springs': {'z': 7, 'rotation y': '3 kN m/rad'}}, 'E': {'at': [3, 4, 0]}},\n"
    " 'groups': {'g': {'material': 'S', 'area': '4000 mm2', 'shape': {'kind': 'round tube', 'diameter_to_wall': "
    "20}}},\n"
    " 'members': {'straight': {'through': ['A', 'B', 'C'], 'group': 'g'},\n"
    "  'bent': {'through': ['A', 'D', 'C'], 'group': 'g', 'ends': {'torsion': 'pinned'}},\n"
    "  'post': {'from': 'B', 'to': 'D', 'group': 'g', 'ends': [{'out_of_plane': 'pinned'}, 'pinned']},\n"
    "  'side': {'from': 'B', 'to': 'E', 'group': 'g', 'ends': 'fixed', 'up': [1, 0, 1], 'roll': '90 deg'}},\n"
    " 'cases': {'G': {'moments': {'B': [1, 2, 3]}, 'loads': [{'on': 'side', 'line': [0, 0, -5]}]}},\n"
    " 'combinations': {'all': {'for': 'allowable', 'sum': {'G': 1}}},\n"
    " 'limits': {'buckling': {'by': 'Euler', 'safety': 2}, 'bow': [{'members': ['side'], 'axis': 'out_of_plane', "
    "'at_most': '9 mm'}]}}\n";
#endif
