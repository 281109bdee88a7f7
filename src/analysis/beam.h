/**
 * One straight Euler-Bernoulli member of length L: what its own loads put on its two joints, and its modes of bending.
 * Plain numbers, no structure. The diagrams of N, V, M, T and of the deflection along it: beam_diagram.h.
 *
 * Local axes: 0 along the member, 1 in plane, 2 = 0 x 1 out of plane. Planes: 0 (in plane, bends along axis 1, turns
 * about axis 2), 1 (out of plane, bends along axis 2, turns about axis 1 backwards: w' = -theta_1).
 * N tension, positive. M = E I v'', so M > 0 bends towards +axis (tension on the other side). V = dM/dx between loads.
 * T: the torque about axis 0 on the face that looks along +0. Hence
 *     N' = -q0,  V1' = q1,  V2' = q2;  at a point load N jumps by -F0, V1 by F1, V2 by F2, M_in by -M2, M_out by +M1,
 *     T by -M0.
 * Everything is the sum of what the springs of the member carry (linear along it) and of the held member under its own
 * loads (index F): both joints at rest, a hinged end turning freely.
 *     N(x) = S_N + N_F(x)               S_N = (E A / L)(elongation - free elongation); N_F has the mean 0
 *     T(x) = S_T + T_F(x)               S_T = (G J / L)(theta_0(L) - theta_0(0)); T_F has the mean 0 (S_T = 0 where
 *                                       an end is free to twist; T_F = 0 at that end)
 *     M(x) = sum_k S_k m_k(x) + M_F(x)  per plane, m_k linear: sct_beam_mode
 *     v(x) = sum_k S_k v_k(x) + v_F(x) - kappa x (L - x)/2
 */
#ifndef SCT_ANALYSIS_BEAM_H
#define SCT_ANALYSIS_BEAM_H

#include <stdbool.h>

/* One load on the member, in local axes; 0 <= a <= b <= L. */
typedef struct sct_beam_load {
    bool is_point;
    double a, b;         /* [m] from the start; a point load acts at a */
    double qa[3], qb[3]; /* [N/m] at a and at b, straight between; nothing when a = b */
    double F[3], M[3];   /* [N], [N m] of a point load, along and about the axes */
} sct_beam_load;

/* free_turn[turn][end]: is the end (0: start, 1: end) free to turn in plane (turn 0), out of plane (1), to twist (2)?
 */
typedef struct sct_beam_hinges {
    bool free_turn[3][2];
} sct_beam_hinges;

/** out[i] = factor * in[i]; in and out may be the same. For combinations of load cases: scale and append. */
void sct_beam_loads_scaled(double factor, int n, const sct_beam_load in[], sct_beam_load out[]);

/**
 * What the loads put on the two joints: minus the reactions of the held member.
 *
 * end  out, [start, end][3 forces, 3 moments] along and about the local axes. Exact for linear loads, to rounding of
 *      the sum of the loads' magnitudes: nothing cancels, however short a load or near a joint.
 *
 * Along the axis: a bar of uniform E A held at both ends. A moment at a hinged end acts on the member, not on the
 * joint. Free to twist at both ends: M[0] would find no hold and must be 0 (it is shared as if both ends held).
 */
void sct_beam_fixed_ends(double L, const sct_beam_hinges *hinges, int n, const sct_beam_load loads[], double end[2][6]);

/** Springs of bending in a plane: 2 (symmetric, antisymmetric), 1 with one hinge, 0 with two. */
int sct_beam_mode_count(const sct_beam_hinges *hinges, int plane);

/**
 * Mode k of bending: m_k at both ends, m_k(x) = mode[0] (1 - x/L) + mode[1] x/L = dM/dS_k.
 * No hinge: k = 0 symmetric (1, 1), k = 1 antisymmetric (-1, 1). Hinged at the start (0, 1), at the end (-1, 0).
 */
void sct_beam_mode(const sct_beam_hinges *hinges, int plane, int k, double mode[2]);

/** dM/dS at x of a mode. dV/dS is (mode[1] - mode[0]) / L. */
double sct_beam_mode_moment(double L, const double mode[2], double x);

/** E I dv/dS at x of a mode: v = 0 at both ends, E I v'' = m(x). */
double sct_beam_mode_bow(double L, const double mode[2], double x);

/** E I dv'/dS at x of a mode: its slope against the chord. */
double sct_beam_mode_slope(double L, const double mode[2], double x);
#endif
