/**
 * The diagrams of one member: N, V, M, T and the deflection as exact polynomials between its loads, at any place and at
 * their true extremes. Signs and axes: beam.h. No allocation: the caller gives the pieces.
 */
#ifndef SCT_ANALYSIS_BEAM_DIAGRAM_H
#define SCT_ANALYSIS_BEAM_DIAGRAM_H

#include "analysis/beam.h"

/* Quantities along the member; V and M: add the plane (0 in plane, 1 out of plane). */
enum { SCT_BEAM_N, SCT_BEAM_V, SCT_BEAM_M = 3, SCT_BEAM_T = 5, SCT_BEAM_QUANTITIES };

/* The held member between two neighbouring places of change; all at x, right of what acts there. With t = x' - x,
 * q(t) = q[0] + (q[1] - q[0]) t/h:
 *     N(t) = N - int q0,   V(t) = V + int q,   M(t) = M + V t + int int q,   T(t) = T,
 *     EIv(t) = EIv + EIslope t + int int M,   EAu(t) = EAu + int N */
typedef struct sct_beam_piece {
    double x, h; /* it covers [x, x + h], h > 0 */
    double N, V[2], M[2], T;
    double q[2][3];            /* [N/m] at its start and its end, along the three axes */
    double EIv[2], EIslope[2]; /* E I times the deflection and its slope, against the chord */
    double EAu;                /* E A times the displacement along the member, beyond that of a uniform strain */
} sct_beam_piece;

/* The held member under its loads: depends on L, hinges and loads alone, not on E, I, A or the springs. */
typedef struct sct_beam_line {
    double L;
    int n; /* pieces, in order, without gaps */
    const sct_beam_piece *piece;
} sct_beam_line;

/* What the springs add: constant N and T, linear M. M[plane][end] = sum_k S_k mode_k[end] (sct_beam_mode). */
typedef struct sct_beam_state {
    double N, T, M[2][2];
} sct_beam_state;

/** Pieces that n loads need at most: 2 n + 1. */
int sct_beam_pieces_at_most(int n_loads);

/** The held member. `piece` is the caller's, sct_beam_pieces_at_most(n) long, and must outlive the line. */
sct_beam_line sct_beam_line_make(double L, const sct_beam_hinges *hinges, int n, const sct_beam_load loads[],
                                 sct_beam_piece piece[]);

/** The piece that holds x in [0, L]. side < 0: the one left of x where two meet; else the one right of it. The inside
 * of the member at its ends. */
int sct_beam_piece_at(const sct_beam_line *line, double x, int side);

/** All quantities at x of that piece (values at its ends: limits from inside). */
void sct_beam_values(const sct_beam_line *line, const sct_beam_state *state, int piece, double x,
                     double value[SCT_BEAM_QUANTITIES]);

/* How the member bends in one plane. */
typedef struct sct_beam_bending {
    int plane;
    double EI;
    double kappa;     /* [1/m] free curvature v'' of temperature: -expansion * gradient (warmer towards +axis) */
    double offset[2]; /* [m] of its ends from the line against which v counts; 0, 0: its own chord */
} sct_beam_bending;

/** v(x) = (sum_k S_k EIv_k + EIv_F)/EI - kappa x (L - x)/2 + offset[0] (1 - x/L) + offset[1] x/L.
 * So dv/dS_k = sct_beam_mode_bow / EI, dv/dkappa = -x (L - x)/2; v'' = M/EI + kappa. */
double sct_beam_deflection(const sct_beam_line *line, const sct_beam_state *state, const sct_beam_bending *bending,
                           double x);

/** dv/dx at x. */
double sct_beam_slope(const sct_beam_line *line, const sct_beam_state *state, const sct_beam_bending *bending,
                      double x);

/** dN/dx at x of a piece: minus the load along the member. */
double sct_beam_N_slope(const sct_beam_line *line, int piece, double x);

/** E A times the displacement along the member at x beyond the straight line between its ends' displacements. */
double sct_beam_held_EAu(const sct_beam_line *line, double x);

/* A greatest value along the member. */
typedef struct sct_beam_extreme {
    double value;
    double x;         /* where; the smallest x when several places are equal to rounding */
    int piece;        /* of the line: which side of a jump (sct_beam_values) */
    bool is_inside;   /* the slope is 0 there and 0 < x < L: it moves with the springs. Else x is an end or a break */
    double curvature; /* second derivative by x there, from inside the piece. When is_inside, at fixed coefficients:
                       * d2(value)/dS_i dS_j = -(df_i/dx)(df_j/dx)/curvature, f_i = influence of S_i */
} sct_beam_extreme;

/**
 * The maximum over [0, L] of sum_i c[i] quantity[i], at jumps with both limits. c[i] = +-1 alone: the largest and minus
 * the smallest value of one quantity; c_N = 1/A, c_M = +-1/W: the extreme fibre. The true extreme, not a sample; NAN
 * anywhere comes back as the value.
 */
sct_beam_extreme sct_beam_largest(const sct_beam_line *line, const sct_beam_state *state,
                                  const double c[SCT_BEAM_QUANTITIES]);

/** The same over 0 < x < L: the largest of the places of slope 0 and of the breaks between the ends; value -INFINITY
 * where there is none. */
sct_beam_extreme sct_beam_largest_inside(const sct_beam_line *line, const sct_beam_state *state,
                                         const double c[SCT_BEAM_QUANTITIES]);

/** The v(x) of largest |v|, with its sign. */
sct_beam_extreme sct_beam_largest_bow(const sct_beam_line *line, const sct_beam_state *state,
                                      const sct_beam_bending *bending);
#endif
