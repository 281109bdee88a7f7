/**
 * Quadratic forms of the unknowns of a structure as sums of squares of linear functions of them,
 *
 *     x'B x = sum_j c_j (b_j'x)^2,
 *
 * as the stiffness is one (there b_j'x is the elongation of a spring). Products with B need no matrix, and derivatives
 * are those of the c_j.
 *
 * Geometric stiffness. A piece of length L under the force N + N1 t, t = 2x/L - 1, stores int (N + N1 t) v'^2 dx / 2
 * per plane. With psi the rotation of its chord and phi_1, phi_2 those of its ends against the chord, v cubic,
 * s = phi_2 - phi_1 and a = phi_1 + phi_2, in Legendre polynomials v' = psi + (s/2) P1 + (a/2) P2 and
 *     int v'^2 dx = L (psi^2 + s^2/12 + a^2/20),   diagonal in the natural modes of bending;
 *     int t v'^2 dx = L s (psi/3 + a/15) = L ((s + w)^2 - (s - w)^2)/4, w = psi/3 + a/15.
 * So c = N g + N1 g1. This is the consistent geometric stiffness of the cubic beam. Hinged at one end: s = 1.5 phi,
 * a = 0.5 phi, phi of the other (signs: squares.c); a pin-ended bar: L psi^2. Torsional and lateral-torsional buckling
 * are not in it.
 *
 * Mass. With v_m the mean displacement of the two ends across a plane, in Legendre polynomials of t = 2x/L - 1,
 *     v = (v_m - s L/12) + (psi L/2 - a L/20) P1 + (s L/12) P2 + (a L/20) P3,   int v^2 dx = L sum_k v_k^2 / (2k + 1)
 * and along the axis the two first terms with the displacements there: c = A g, g = density L/(2k + 1). This is the
 * consistent mass of the cubic beam. Rotary inertia is not in it.
 */
#ifndef SCT_ANALYSIS_SQUARES_H
#define SCT_ANALYSIS_SQUARES_H

#include "analysis/structure.h"
#include "numerics/factor.h"

typedef struct sct_square {
    int bar;      /* whose it is; -1: no member's */
    double g, g1; /* c = N g + N1 g1, or A g */
    double c;
    int first, n; /* b: places in the pools below */
} sct_square;

typedef struct sct_squares {
    int n_dof, count, n_pool, room, pool_room;
    sct_square *square;
    int *dof;
    double *b;
} sct_squares;

/** Lists the squares of the geometric stiffness, or of the mass, of all members; c = 0. SCT_OK, SCT_NO_MEMORY. The list
 * is empty before (all zero) and may be freed whatever the status. */
sct_status sct_squares_of_geometry(const sct_structure *st, sct_squares *squares);
sct_status sct_squares_of_mass(const sct_structure *st, sct_squares *squares);
void sct_squares_free(sct_squares *squares);

/** Adds c times the square of a joint's displacement in every direction that it is free to move in: a point mass.
 * SCT_OK, SCT_NO_MEMORY. */
sct_status sct_squares_add_joint(const sct_structure *st, int joint, double c, sct_squares *squares);

/** b'x of a square. */
static inline double sct_square_value(const sct_squares *squares, const sct_square *square, const double x[])
{
    double sum = 0.0;
    for (int i = square->first; i < square->first + square->n; i++) sum += squares->b[i] * x[squares->dof[i]];
    return sum;
}

/** Y = B X, as sct_multiply of numerics/subspace.h; `squares` is an sct_squares. */
void sct_squares_multiply(void *squares, int count, const double X[], double Y[]);

/** Adds factor * B to the values on a pattern that holds all pairs of unknowns of each member (that of the stiffness).
 */
void sct_squares_assemble(const sct_squares *squares, double factor, const sct_pattern *pattern, double values[]);
#endif
