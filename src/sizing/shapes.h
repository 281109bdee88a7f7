/* The size of each group as smooth functions of z = ln A: radii of gyration, section moduli, torsion constant. */
#ifndef SCT_SIZING_SHAPES_H
#define SCT_SIZING_SHAPES_H

#include "sizing/bent.h"

typedef struct sct_group_curves {
    sct_envelope i[2], W[2], J; /* n = 0: not stated */
} sct_group_curves;

/** A free area's relations. */
sct_status sct_curves_of_area(sct_arena *arena, const sct_group *group, sct_group_curves *curves);

/** The hulls of n sections of a family, lightest first. */
sct_status sct_curves_of_ladder(sct_arena *arena, const sct_family *family, int n, const int sections[],
                                sct_group_curves *curves);

sct_shape sct_curves_shape(const sct_group_curves *curves, double A);
sct_shape_slopes sct_curves_slopes(const sct_group_curves *curves, double A);

/** ln I about one axis over z, from ln i: I = i^2 A. */
sct_curve sct_curve_of_I(sct_curve i, double A);

/** What the analysis needs: P and its derivatives. */
sct_properties sct_curves_properties(const sct_group_curves *curves, double A);
#endif
