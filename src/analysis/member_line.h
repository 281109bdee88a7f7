/* A member between its joints: its own loads in a combination, and what its springs carry along it. beam.h and
 * beam_diagram.h hold the mechanics. */
#ifndef SCT_ANALYSIS_MEMBER_LINE_H
#define SCT_ANALYSIS_MEMBER_LINE_H

#include "analysis/beam_diagram.h"
#include "analysis/structure.h"

typedef struct sct_member_lines sct_member_lines;

/** The loads of all members, in local axes. NULL: out of memory. Borrows the structure. */
sct_member_lines *sct_member_lines_new(const sct_structure *st);
void sct_member_lines_free(sct_member_lines *lines);

/** Member `bar` held at its ends under its loads in a combination, own weight with area A included (that of a beam; a
 * bar's goes to its joints). Lives until the next call. */
sct_beam_line sct_member_line(sct_member_lines *lines, int bar, int combination, double A);

/** The same for its own weight alone, of unit area with unit factor. */
sct_beam_line sct_member_weight_line(sct_member_lines *lines, int bar);

/** Factor of own weight in a combination. */
double sct_weight_factor(const sct_structure *st, int combination);

/** What the springs (n_springs forces of one case or combination) carry along it. */
sct_beam_state sct_member_state(const sct_structure *st, const double S[], int bar);

/** The influence of one of its springs on that state: dN/dS, dT/dS, dM/dS. 0 for a sprung end. */
sct_beam_state sct_spring_influence(const sct_structure *st, const sct_spring *spring);

/** [1/m] free curvature of temperature in one plane in a combination. */
double sct_free_curvature(const sct_structure *st, int combination, int bar, int plane);
#endif
