/**
 * Radius of gyration, and likewise section modulus and torsion constant, as a smooth function of the area, for a
 * descent over continuous areas: h = ln i over s = ln A. A free area states a relation, I = c A^2. A ladder gives the
 * upper hull of its sections in (ln A, ln i), joined by a C1 cubic that lies on or above the hull, so that no section
 * of the ladder has a larger radius at its area.
 */
#ifndef SCT_SIZING_ENVELOPE_H
#define SCT_SIZING_ENVELOPE_H

#include "model/model.h"

typedef struct sct_envelope {
    int n;                 /* knots; 0: no radius of gyration is stated */
    double *s, *h, *slope; /* ln A ascending, ln i, dh/ds at the knots; beyond the ends h is straight */
} sct_envelope;

typedef struct sct_curve {
    double h, h1, h2;
} sct_curve; /* value, first and second derivative */

/** I = c A^p (c NAN: nothing stated). */
sct_status sct_envelope_relation(sct_arena *arena, double c, double p, sct_envelope *envelope);

/** Any other property y = c A^p (c NAN: nothing stated), as h = ln y. */
sct_status sct_envelope_power(sct_arena *arena, double c, double p, sct_envelope *envelope);

/** The hull of n points (ln A ascending, h), never falling. A NAN among h: nothing is stated. */
sct_status sct_envelope_points(sct_arena *arena, int n, const double s[], const double h[], sct_envelope *envelope);

/** The hull of the listed sections about one axis. Never falls: beyond the largest radius it is flat. */
sct_status sct_envelope_ladder(sct_arena *arena, const sct_family *family, int n, const int sections[], int axis,
                               sct_envelope *envelope);

/** h and its derivatives at s = ln A; n > 0. */
sct_curve sct_envelope_at(const sct_envelope *envelope, double s);
#endif
