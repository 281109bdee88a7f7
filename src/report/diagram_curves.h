/* What a diagram shows, as numbers: one curve for each member, or two for an envelope. */
#ifndef SCT_REPORT_DIAGRAM_CURVES_H
#define SCT_REPORT_DIAGRAM_CURVES_H

#include "diagram.h"

/* n places along a member and the values there, in order of x; two at one x are the sides of a jump. */
typedef struct sct_curve {
    int n;
    double *x, *v; /* [m] from the start, [N] or [N m] */
} sct_curve;

typedef struct sct_extreme {
    double x, v;
    int combination;
} sct_extreme;

typedef struct sct_member_curves {
    sct_curve curve[2];     /* of a combination: the first one; of an envelope: largest and smallest */
    sct_extreme extreme[2]; /* of an envelope: largest, smallest */
} sct_member_curves;

/** The curves of all members, in the arena of the scene; none for a member that carries nothing of the kind.
 * *largest: of all values, without sign. SCT_NO_MEMORY. */
sct_status sct_curves_of(const sct_scene *scene, const sct_diagram_of *of, sct_member_curves **curves, double *largest);

/** The value at x, between the neighbours. */
double sct_curve_at(const sct_curve *curve, double x);
#endif
