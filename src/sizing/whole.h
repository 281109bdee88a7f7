/**
 * The structure as a whole: elastic critical load factors of the combinations in which strength is checked, and the
 * lowest natural frequency. For structures with beams, and for all that limit either; a truss of pin-ended bars without
 * such limits is left alone.
 */
#ifndef SCT_SIZING_WHOLE_H
#define SCT_SIZING_WHOLE_H

#include "analysis/stability.h"
#include "analysis/vibration.h"
#include "rules/second_order.h"

enum { SCT_WHOLE_MODES = 3 }; /* the lowest ones, limited together */

/* One combination. */
typedef struct sct_whole_buckling {
    int combination;
    double alpha[SCT_WHOLE_MODES]; /* critical load factors, ascending; INFINITY beyond those that exist */
    double error;                  /* of the first */
    bool is_proven;                /* no lower one exists */
    double sway;                   /* factor of the lowest mode in which joints sway */
    bool is_sway_bound;            /* it lies above that */
    sct_second_order order;        /* what it says about first-order results */
} sct_whole_buckling;

typedef struct sct_whole {
    const sct_structure *st;
    sct_fine *fine;
    sct_stability *stability;
    sct_vibration *vibration; /* NULL: no limit on it */
    int n;                    /* combinations */
    sct_whole_buckling *buckling;
    double frequency[SCT_WHOLE_MODES]; /* [Hz] ascending; INFINITY beyond those that exist */
    double mass;                       /* [kg] that vibrates */
    /* what the lowest mode of the combination with the lowest factor says of every member; of a PROVEN analysis */
    sct_member_mode (*of_mode)[2]; /* n_bars */
    int lowest;                    /* that combination's index in `buckling`; -1: nothing buckles */
} sct_whole;

/** combinations (n): those looked at. *whole = NULL with SCT_OK: nothing to look at. SCT_NO_MEMORY, SCT_TOO_LARGE. */
sct_status sct_whole_new(const sct_structure *st, sct_engine engine, sct_slack *slack, int n, const int combinations[],
                         sct_whole **whole);
void sct_whole_free(sct_whole *whole);

/** Factors and frequency of the solver's latest sizes and their response. Statuses of sct_mode_finder_run. */
sct_status sct_whole_analyse(sct_whole *whole, const sct_solver *solver, const sct_response *response,
                             sct_mode_search how);

/** Is anything about the whole limited in the model? */
bool sct_whole_is_limited(const sct_model *model);
/** Do moments depend on it? */
bool sct_whole_amplifies(const sct_model *model);

/** Largest limit / present value of factors and frequency. */
double sct_whole_utilisation(const sct_whole *whole);

/** What moments in a combination are multiplied by: 1 but for sway that is amplified. */
double sct_whole_amplification(const sct_whole *whole, int combination);

/** g (SCT_WHOLE_MODES) = ln(least factor / alpha) of buckling[k] as of the latest analysis; dg (NULL: not wanted)
 * SCT_WHOLE_MODES x n_vars. */
sct_status sct_whole_factor_limits(sct_whole *whole, sct_solver *solver, const sct_response *response, int k,
                                   double g[], double *dg);

/** g (SCT_WHOLE_MODES) = ln(least frequency / frequency), dg (SCT_WHOLE_MODES x n_vars, or NULL). */
sct_status sct_whole_frequency_limits(sct_whole *whole, double g[], double *dg);

/** The limit on the whole that is nearest to being broken: its g, and dg (n_vars). */
sct_status sct_whole_worst_limit(sct_whole *whole, sct_solver *solver, const sct_response *response, double *g,
                                 double *dg);

/** D (n_vars) = d ln(amplification)/dz of buckling[k]; 0 where it is 1. */
sct_status sct_whole_amplification_slope(sct_whole *whole, sct_solver *solver, const sct_response *response, int k,
                                         double D[]);
#endif
