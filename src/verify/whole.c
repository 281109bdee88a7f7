/* Critical load factors and the frequency are the result's own: no second path finds eigenvalues. What follows from
 * them is worked out again. */
#include <math.h>

#include "verify/verifier.h"

static const double FIRST_ORDER = 10.0, AMPLIFYING = 3.0; /* EN 1993-1-1:2005, 5.2 (from memory) */

/* Which of the result's factors is that of a combination; -1: none. */
static int factor_of(const sct_verifier *v, int combination)
{
    for (int k = 0; k < v->r->n_criticals; k++)
        if (v->r->criticals[k].combination == combination) return k;
    return -1;
}

/* The safe side of the factor of sway. */
static double sway(const sct_critical_result *c)
{
    return c->sway / (1.0 + c->error);
}

static bool decides(const sct_critical_result *c)
{
    return sway(c) * (1.0 + SCT_KEPT_TO) >= AMPLIFYING && c->factor > 1.0;
}

double sct_verify_amplification(const sct_verifier *v, int combination)
{
    const int k = factor_of(v, combination);
    if (k < 0 || !v->m->amplifies) return 1.0;
    const double alpha = sway(&v->r->criticals[k]);
    return decides(&v->r->criticals[k]) && alpha * (1.0 + SCT_KEPT_TO) < FIRST_ORDER ? alpha / (alpha - 1.0) : 1.0;
}

double sct_verify_whole(sct_verifier *v, bool *has_verdict)
{
    const sct_result *r = v->r;
    double most = 0.0;
    *has_verdict = true;
    for (int k = 0; k < r->n_criticals; k++) {
        const sct_critical_result *c = &r->criticals[k];
        const char *name = r->combinations[c->combination];
        sct_compare(v, "amplification of moments", NULL, name, c->amplification,
                    sct_verify_amplification(v, c->combination), 0.0);
        if (c->has_verdict != decides(c)) sct_differ(v, "verdict on sway", NULL, name, c->has_verdict, decides(c));
        *has_verdict = *has_verdict && decides(c);
        if (v->m->least_factor > 0.0) most = fmax(most, v->m->least_factor * (1.0 + c->error) / c->factor);
    }
    if (v->m->least_frequency > 0.0) most = fmax(most, v->m->least_frequency / r->frequency);
    return most;
}
