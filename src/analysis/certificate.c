/* Error bounds from a residual, the softness of the structure, and the rounding in both.
 *
 * Let v = u + step, and e = exact - v. Spring by spring in long double, the force of v comes out as k (elongation +
 * delta_e) with a known bound of delta_e, and the residual of these forces as r with a known bound eta of its rounding.
 * So K e = (r + eta) + B' D delta with K = B' D B, and in the energy norm |e|_K^2 = e'K e
 *
 *     |e|_K <= |S (|r| + eta)|_2 / sqrt(lambda) + sqrt(sum k delta^2) = E      lambda <= smallest eigenvalue of S K S
 *     |e_i| <= s_i E / sqrt(lambda),      |force error of a spring| <= sqrt(k) E
 *
 * The second term of E is not amplified by the softness: B' D delta is a load that springs carry by themselves. That is
 * why residuals are summed from springs, and elongations from differences. */
#include "analysis/certificate.h"

#include <math.h>
#include <stdlib.h>

#include "analysis/eigenvalue.h"
#include "analysis/elongation.h"

static const long double ROUNDINGS = 23.0L;
static const long double ABOVE =
    1.0L + 0x1p-30L; /* for the rounding of the bounds: sums of up to 2^20 positive terms */

typedef struct proof {
    const sct_structure *st;
    const double *A;
    const sct_properties *sizes;
    size_t n, n_springs;
    double *s, lambda; /* n */
    /* n: the residual of one case and the own weight with unit factor; beside them the sums of the absolute values of
     * everything that was rounded on the way: 2^-64 of it bounds the rounding (running error analysis, Higham 3.3) */
    long double *r, *rounded, *weight, *weight_rounded;
} proof;

static void proof_free(proof *p)
{
    free(p->s);
    free(p->r);
    free(p->rounded);
    free(p->weight);
    free(p->weight_rounded);
}

static bool proof_allocate(proof *p)
{
    p->s = malloc((p->n + 1) * sizeof *p->s);
    p->r = malloc((p->n + 1) * sizeof *p->r);
    p->rounded = malloc((p->n + 1) * sizeof *p->rounded);
    p->weight = calloc(p->n + 1, sizeof *p->weight);
    p->weight_rounded = calloc(p->n + 1, sizeof *p->weight_rounded);
    return p->s && p->r && p->rounded && p->weight && p->weight_rounded;
}

static void weigh(proof *p)
{
    for (int e = 0; e < p->st->n_bars; e++) {
        const sct_bar *bar = &p->st->bars[e];
        for (int i = 0; i < bar->n_dof; i++) {
            const long double w = (long double)p->A[bar->group] * bar->w[i];
            p->weight[bar->dof[i]] += w;
            p->weight_rounded[bar->dof[i]] += fabsl(w) + fabsl(p->weight[bar->dof[i]]);
        }
    }
}

static void start_with_load(proof *p, size_t k)
{
    const long double factor = p->st->self_weight[k];
    for (size_t i = 0; i < p->n; i++) {
        const long double own = factor * p->weight[i];
        p->r[i] = p->st->f[k * p->n + i] + own;
        p->rounded[i] = fabsl(factor) * p->weight_rounded[i] + fabsl(own) + fabsl(p->r[i]);
    }
}

/* Takes the spring forces off the residual, puts what is known of each force into N_error, and returns
 * sum k delta^2. The force of a spring has at most 23 roundings: elongations 14, the prescribed part 1, k 2, products
 * 2, sums 2, two to spare. */
static long double subtract_forces(proof *p, size_t k, const long double u[], const long double step[],
                                   const double N[], double N_error[])
{
    const double *stretch = p->st->stretch + k * p->n_springs;
    long double energy = 0.0L;
    for (size_t e = 0; e < p->n_springs; e++) {
        const sct_spring *spring = &p->st->springs[e];
        const long double stiffness = sct_stiffness_long(spring, p->sizes);
        long double size, step_size;
        const long double elongation = stretch[e] + sct_elongation(spring, u, &size);
        const long double more = sct_elongation(spring, step, &step_size);
        const long double force = stiffness * elongation + stiffness * more;
        const long double delta = sct_gamma_long(ROUNDINGS) * (fabsl((long double)stretch[e]) + size + step_size);
        for (int i = 0; i < spring->n_dof; i++) {
            const long double part = force * spring->b[i];
            p->r[spring->dof[i]] -= part;
            p->rounded[spring->dof[i]] += fabsl(part) + fabsl(p->r[spring->dof[i]]);
        }
        energy += stiffness * delta * delta;
        N_error[e] = (double)((fabsl(force - N[e]) + stiffness * delta) * ABOVE);
    }
    return energy;
}

/* E of the head of this file. */
static long double energy_error(const proof *p, long double energy)
{
    long double sum = 0.0L;
    for (size_t i = 0; i < p->n; i++) {
        const long double scaled = p->s[i] * (fabsl(p->r[i]) + 0x1p-64L * p->rounded[i]);
        sum += scaled * scaled;
    }
    const long double of_residual = sum > 0.0L ? sqrtl(sum / p->lambda) : 0.0L;
    return (of_residual + sqrtl(energy)) * ABOVE;
}

static void certify_case(proof *p, size_t k, const long double u[], const long double step[], sct_response *response)
{
    const double *reported = response->u + k * p->n, *N = response->N + k * p->n_springs;
    double *u_error = response->u_error + k * p->n, *N_error = response->N_error + k * p->n_springs;
    start_with_load(p, k);
    const long double E = energy_error(p, subtract_forces(p, k, u, step, N, N_error));
    for (size_t i = 0; i < p->n; i++) {
        const long double off = fabsl((u[i] - reported[i]) + step[i]) + LDBL_EPSILON * fabsl(step[i]);
        u_error[i] = (double)((off + p->s[i] * E / sqrtl(p->lambda)) * ABOVE);
    }
    for (size_t e = 0; e < p->n_springs; e++) {
        const long double stiffness = sct_stiffness_long(&p->st->springs[e], p->sizes);
        N_error[e] = (double)((N_error[e] + sqrtl(stiffness) * E) * ABOVE);
    }
}

static void say_nothing(const proof *p, sct_response *response)
{
    const size_t n_cases = (size_t)p->st->n_cases;
    for (size_t i = 0; i < n_cases * p->n; i++) response->u_error[i] = NAN;
    for (size_t i = 0; i < n_cases * p->n_springs; i++) response->N_error[i] = NAN;
}

static sct_status prove(proof *p, sct_solver *solver, const long double u[], const long double step[],
                        sct_response *response)
{
    if (!proof_allocate(p)) return SCT_NO_MEMORY;
    const sct_status status = sct_eigenvalue_bound(solver, p->s, &p->lambda);
    if (status != SCT_OK) return status;
    if (p->n > 0 && !(p->lambda > 0.0)) {
        say_nothing(p, response);
        return SCT_OK;
    }
    weigh(p);
    for (size_t k = 0; k < (size_t)p->st->n_cases; k++) certify_case(p, k, u + k * p->n, step + k * p->n, response);
    return SCT_OK;
}

sct_status sct_certify(sct_solver *solver, const long double u[], const long double step[], sct_response *response)
{
    const sct_structure *st = sct_solver_structure(solver);
    proof p = {.st = st,
               .A = sct_solver_areas(solver),
               .sizes = sct_solver_sizes(solver),
               .n = (size_t)st->n_dof,
               .n_springs = (size_t)st->n_springs};
    const sct_status status = prove(&p, solver, u, step, response);
    proof_free(&p);
    return status;
}
