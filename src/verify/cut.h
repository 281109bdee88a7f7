/* What a member carries inside, from the equilibrium of the part left of a cut, and how far it bows. */
#ifndef SCT_VERIFY_CUT_H
#define SCT_VERIFY_CUT_H

#include "verify/statics.h"

/* An element in one combination. */
typedef struct sct_cut_line {
    const sct_element *element;
    long double start[6]; /* what holds its start */
    long double kappa[2]; /* [1/m] curvature by temperature */
    int n;                /* loads of the combination, own weight among them */
    sct_element_load *loads;
    int n_breaks; /* where something begins, ends or acts: ascending, 0 and L among them */
    long double *breaks;
} sct_cut_line;

/* N tension positive; M_in = E I v'', V = dM/dx; see sct_station. */
typedef struct sct_cut {
    long double N, V[2], M[2], T;
} sct_cut;

/** Room that a line of an element needs: loads and breaks. */
int sct_cut_loads_at_most(const sct_element *element);
int sct_cut_breaks_at_most(const sct_element *element);

/** loads, breaks: the caller's room, which the line keeps. */
sct_cut_line sct_cut_line_make(const sct_model *model, const sct_statics *statics, int element, int combination,
                               sct_element_load loads[], long double breaks[]);

/** At x; right: of what acts there. */
sct_cut sct_cut_at(const sct_cut_line *line, long double x, bool right);

/** [m] from the chord at x along axis 1 (plane 0) or 2 (plane 1), by the unit load. */
long double sct_cut_bow(const sct_cut_line *line, int plane, long double x);

/** Some value at x, right of what acts there or left of it. */
typedef long double sct_cut_value(const sct_cut_line *line, const void *what, long double x, bool right);

/** The largest along the member: looked for between all breaks, to rounding for values that are smooth there. */
long double sct_cut_largest(const sct_cut_line *line, sct_cut_value *value, const void *what);
#endif
