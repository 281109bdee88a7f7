/**
 * Elastic critical load factors: the loads of a combination times alpha make the structure buckle, by K + alpha K_geo
 * with the first-order forces of the combination. K_geo of the forces along the members (own weight and loads along
 * them included, straight on each piece). Bending in both planes; torsional, lateral-torsional and local buckling are
 * not in it, nor is the buckling of pin-ended bars between their joints (fine.h).
 *
 * One object serves all combinations and designs: per design sct_solver_analyse_sizes of the structure's own solver and
 * sct_fine_update with the same sizes, then per combination sct_stability_find.
 */
#ifndef SCT_ANALYSIS_STABILITY_H
#define SCT_ANALYSIS_STABILITY_H

#include <math.h>

#include "analysis/modes.h"
#include "analysis/sensitivity.h"
#include "analysis/slack.h"

typedef struct sct_stability sct_stability;

/** Borrows the divided structure. `wanted` modes, >= 1. *status: SCT_OK, SCT_NO_MEMORY. */
sct_stability *sct_stability_new(sct_fine *fine, int wanted, sct_status *status);
void sct_stability_free(sct_stability *stability);

/** The slack bars of combinations, as found for the response that sct_stability_find is given: they have neither force
 * nor stiffness, until a small motion would make one taut. Structures with bars that carry tension only need it. */
void sct_stability_set_slack(sct_stability *stability, sct_slack *slack);

/**
 * The lowest modes of a combination; *modes lives until the next call (modes.h). Nothing is compressed, or nothing
 * buckles below the factor 10 000: SCT_OK with n = 0.
 *
 * response  of the structure's own solver with the sizes of the latest sct_fine_update
 * how       one object per combination where WARM is used
 *
 * Statuses of sct_mode_finder_run.
 */
sct_status sct_stability_find(sct_stability *stability, const sct_response *response, int combination,
                              sct_mode_search how, sct_modes *modes);

/** The lowest factor of what was found: INFINITY where n = 0. */
static inline double sct_critical_factor(const sct_modes *modes)
{
    return modes->n > 0 ? modes->lambda[0] : (double)INFINITY;
}

/**
 * D (n_vars) = d ln alpha / dz of mode i in the combination found last, z = ln A, when j = i: the forces change with
 * the sizes, too. For i, j in a cluster: entry (i, j) of its matrix of derivatives; to first order the values of ln
 * alpha are the eigenvalues of diag(ln alpha_i) + sum_v dz_v D_ij[v], so ln alpha >= c asks that this matrix minus c I
 * has no negative eigenvalue. The rows (i, i) alone are necessary, and enough away from clusters.
 *
 * solver, response  of the structure, as they were for sct_stability_find (n_cases solves)
 *
 * With x'K x = 1:  dalpha/alpha = x'(dK + alpha dK_geo) x, dK_geo from dN by the adjoint method.
 * Source: Haug, Choi and Komkov, Design Sensitivity Analysis of Structural Systems, 1986, chapter 1.
 * SCT_OK, SCT_NO_MEMORY.
 */
sct_status sct_stability_derivative(sct_stability *stability, sct_solver *solver, const sct_response *response,
                                    const sct_modes *modes, int i, int j, double D[]);

/**
 * The lowest modes as constraints g_i = ln(least / alpha_i) <= 0, i = 0 .. count - 1, with gradients dg (count x
 * n_vars). A mode that was not found is far away: g_i = ln 1e-6, its gradient 0.
 * `count` times sct_stability_derivative.
 */
sct_status sct_stability_limits(sct_stability *stability, sct_solver *solver, const sct_response *response,
                                const sct_modes *modes, double least, int count, double g[], double dg[]);

/**
 * How far mode i of the combination found last is one of sway: the part of the loads' work that the rotations of the
 * members' chords do, alpha sum N L psi^2. 0 where members bow between joints that stay (their effective length and the
 * check of the member cover that), 0.81 for a column that sways with a clamped or a hinged foot, 1 for pin-ended bars;
 * beyond these limits where members in tension take part.
 */
double sct_stability_sway(const sct_stability *stability, const sct_modes *modes, int i);

/** The lowest factor of a mode in which joints sway (a part of at least 0.05). *is_bound: no such mode was found among
 * those wanted, it lies above the value given: the largest found. INFINITY where fewer modes exist than were wanted. */
double sct_sway_factor(const sct_stability *stability, const sct_modes *modes, bool *is_bound);

/* What a mode says about one member in one plane of bending. */
typedef struct sct_member_mode {
    double share; /* of the energy of bending of the mode in all members, 0 .. 1 */
    double Lcr;   /* [m] effective length pi sqrt(E I / (alpha |N|)), |N| the greatest compression along the member;
                   * INFINITY where it is not compressed. It means something only where the member takes part in the
                   * mode: a member that carries little or hardly bends gets a length that is no property of it */
} sct_member_mode;

/** For the combination found last. */
sct_member_mode sct_stability_member(const sct_stability *stability, const sct_modes *modes, int mode, int member,
                                     int plane);
#endif
