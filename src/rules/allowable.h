/**
 * The general allowable stress rules: stress in tension and compression, column strength by Euler, with Johnson's
 * parabola above half the yield strength, slenderness. No published code; the user states allowables and safety.
 *
 *     tension       N / (A f_t) <= 1
 *     compression   |N| / (A f_c) <= 1
 *     column        |N| / (A sigma_cr / n) <= 1, about both axes, lambda = Lcr / i:
 *                   Euler    sigma_cr = pi^2 E / lambda^2
 *                   Johnson  sigma_cr = fy (1 - fy lambda^2 / (4 pi^2 E)) where lambda < pi sqrt(2 E / fy)
 *                   (they meet at fy / 2 with one tangent)
 *     slenderness   lambda <= limit
 * Source: Timoshenko and Gere, Theory of Elastic Stability; Johnson's parabola as in machine design handbooks
 * (from memory). Basis: allowable (unfactored actions).
 */
#ifndef SCT_RULES_ALLOWABLE_H
#define SCT_RULES_ALLOWABLE_H

#include "model/model.h"

/* What the rules need to know of one member. */
typedef struct sct_bar_rule {
    double E;        /* [Pa] */
    double yield;    /* [Pa]; needed by Johnson */
    double f_t, f_c; /* [Pa] allowable stresses */
    sct_buckling buckling;
    double safety;                                   /* n */
    double Lcr[2];                                   /* [m] about both axes */
    double slenderness_any, slenderness_compression; /* INFINITY: no limit */
} sct_bar_rule;

/** The rule data of a member whose joints are L [m] apart: its group's and material's numbers, its effective lengths.
 */
sct_bar_rule sct_bar_rule_of(const sct_model *model, int member, double L);

/* The critical stress and its first and second derivative in logarithms: s = ln sigma_cr as a function of
 * l = ln lambda. */
typedef struct sct_column {
    double sigma;  /* [Pa] sigma_cr */
    double s1, s2; /* ds/dl, d2s/dl2 */
    bool johnson;  /* the parabola holds */
} sct_column;

/** Critical stress at slenderness lambda > 0; sigma = INFINITY with SCT_BUCKLING_NONE. */
sct_column sct_column_strength(sct_buckling buckling, double E, double yield, double lambda);

/* One check with everything put in. */
typedef struct sct_bar_check {
    sct_check_kind kind;
    double value, limit;     /* stresses [Pa], or slenderness */
    double lambda, sigma_cr; /* column checks; else NAN */
    bool johnson;
    double utilisation; /* value / limit */
} sct_bar_check;

enum { SCT_MOST_BAR_CHECKS = 4 };

/**
 * All strength checks that apply to a bar with force N [N], area A and radii of gyration i (NAN where not stated; then
 * the column checks are left out). Returns how many were put into checks[SCT_MOST_BAR_CHECKS]; none for N = 0.
 */
int sct_bar_checks(const sct_bar_rule *rule, double N, double A, const double i[2],
                   sct_bar_check checks[SCT_MOST_BAR_CHECKS]);

/** The slenderness check of a bar about its worse axis; `compressed`: in some combination. utilisation 0 and kind
 * SCT_CHECK_NONE when no limit applies. *axis (may be NULL) is the worse axis. */
sct_bar_check sct_bar_slenderness(const sct_bar_rule *rule, const double i[2], bool compressed, int *axis);
#endif
