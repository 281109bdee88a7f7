/**
 * A quantity that is linear in the response while its weights depend on the place x along a member and on that member's
 * size: a force, a displacement, a utilisation with bending, a bow. With S the spring forces and u the joints'
 * displacements of one combination,
 *
 *     q = sum_s w_s S_s + sum_j dir_j . u_j + (loads between the ends)
 *
 * its derivatives follow from those of S and u (analysis/sensitivity.h). q' = sum w S' + sum dir . u' + [own] e1, and
 *
 *     q'' = sum w S'' + sum dir . u'' + own t' + t own' + [own, own] e2 - r r'/q_xx,    t = sum w1 S',
 *     r = sum wx S' + sum dirx . u' + [own] ex: the place of an extreme along the member moves with the sizes, which
 * counts in the second derivative only (the first one by x is zero there).
 */
#ifndef SCT_SIZING_FORM_H
#define SCT_SIZING_FORM_H

#include "analysis/sensitivity.h"
#include "analysis/slack.h"

enum { SCT_FORM_SPRINGS = 8, SCT_FORM_JOINTS = 4 };

typedef struct sct_form {
    int combination;
    double value; /* q */
    int n_springs, spring[SCT_FORM_SPRINGS];
    double w[SCT_FORM_SPRINGS], w1[SCT_FORM_SPRINGS], wx[SCT_FORM_SPRINGS]; /* weight; its derivatives by own z, by x */
    int n_joints, joint[SCT_FORM_JOINTS];
    double dir[SCT_FORM_JOINTS][3], dirx[SCT_FORM_JOINTS][3]; /* and its derivative by x */
    int own;                                                  /* variable that the weights depend on; -1: none */
    double e1, e2, ex; /* of q at fixed response: by own z, twice by own z, by x and own z */
    double q_xx;       /* by x twice, where the place moves; 0: it stays */
} sct_form;

/* What gradients are made from. part: scratch, n_vars. */
typedef struct sct_form_source {
    sct_solver *solver;
    const sct_response *response;
    const double *du;
    sct_slack *slack; /* after sct_slack_derive with this du */
    double *part;
} sct_form_source;

/** row (n_vars) = dq/dz, with the bars slack that are. */
void sct_form_gradient(const sct_form *form, const sct_form_source *source, double row[]);

/** Adds weight * q'' to H (n_vars x n_vars), its part by S'' and u'' to the weights wN, wu of
 * sct_sensitivity_curvature. t, r: scratch, n_vars each; lambda: scratch, 2 n_ties. */
void sct_form_curvature(const sct_form *form, const sct_form_source *source, double weight, double *t, double *r,
                        double *lambda, double *wN, double *wu, double *H);
#endif
