/* A lower bound of the smallest eigenvalue: if A - alpha I has a factor, then A cannot have an eigenvalue below alpha,
 * up to the rounding of the factor, which is known afterwards. */
#include "analysis/eigenvalue.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/random.h"

enum { ITERATIONS = 3, MOST_TRIALS = 5 };
static const double PART = 0.7; /* of the estimate, tried first: an estimate is too high as a rule, by a few per cent */
/* Entries that fall below the smallest double, in the scaled matrix and in its factor: DEVELOPERS.md, "Accuracy". */
static const double UNDERFLOW_PER_ENTRY = 0x1p-500;

typedef struct scaled {
    const sct_structure *st;
    const sct_pattern *pattern;
    sct_solver *solver;
    const double *s;
    size_t n, n_values;
    double *values;   /* n_values: A; its diagonal less alpha while a shift is tried */
    double *diagonal; /* n: of A */
    double *row_sum;  /* n: of the absolute values of all terms */
    double *count;    /* n: springs at each unknown */
    double *y, *z;    /* n */
} scaled;

static void scaled_free(scaled *a)
{
    free(a->values);
    free(a->diagonal);
    free(a->row_sum);
    free(a->count);
    free(a->y);
    free(a->z);
}

static bool scaled_allocate(scaled *a)
{
    a->values = calloc(a->n_values + 1, sizeof *a->values);
    a->diagonal = malloc((a->n + 1) * sizeof *a->diagonal);
    a->row_sum = calloc(a->n + 1, sizeof *a->row_sum);
    a->count = calloc(a->n + 1, sizeof *a->count);
    a->y = malloc((a->n + 1) * sizeof *a->y);
    a->z = malloc((a->n + 1) * sizeof *a->z);
    return a->values && a->diagonal && a->row_sum && a->count && a->y && a->z;
}

static int diagonal(const sct_pattern *pattern, size_t i)
{
    return pattern->column[i + 1] - 1; /* rows ascend and end at the diagonal */
}

/* False when a diagonal entry is not positive, or so far from 1 that underflow would count. */
static bool find_scale(size_t n, const double K[], const sct_pattern *pattern, double s[])
{
    for (size_t i = 0; i < n; i++) {
        const double K_ii = K[diagonal(pattern, i)];
        if (!(K_ii >= 0x1p-500 && K_ii <= 0x1p500)) return false;
        s[i] = ldexp(1.0, -(int)lround(0.5 * log2(K_ii)));
    }
    return true;
}

/* A = sum over springs of t t', t = sqrt(k) S b. A scaled t is below 1.5 (its square is part of a diagonal entry),
 * so that nothing that underflows is multiplied by anything large. */
static void assemble(scaled *a, const sct_properties sizes[])
{
    for (int e = 0; e < a->st->n_springs; e++) {
        const sct_spring *spring = &a->st->springs[e];
        const int *place = sct_solver_places(a->solver, e);
        const double root = sqrt(sct_spring_stiffness(spring, sizes));
        double t[SCT_MOST_SPRING_DOF], sum = 0.0;
        for (int i = 0; i < spring->n_dof; i++) {
            t[i] = root * a->s[spring->dof[i]] * spring->b[i];
            sum += fabs(t[i]);
        }
        for (int j = 0, p = 0; j < spring->n_dof; j++) {
            for (int i = 0; i <= j; i++, p++) a->values[place[p]] += t[i] * t[j];
            a->row_sum[spring->dof[j]] += fabs(t[j]) * sum;
            a->count[spring->dof[j]] += 1.0;
        }
    }
    for (size_t i = 0; i < a->n; i++) a->diagonal[i] = a->values[diagonal(a->pattern, i)];
}

/* || values - S K S ||_2 at most: each entry is a sum of as many terms as springs meet; a term has 9 roundings: 4 in each
 * t (E P / L 2, root, product), one where they meet. */
static double assembly_rounding(const scaled *a)
{
    double most = 0.0;
    for (size_t i = 0; i < a->n; i++) {
        most = fmax(most, sct_gamma(a->count[i] + 8.0) * a->row_sum[i] * (1.0 + sct_gamma(a->count[i] + 16.0)));
    }
    return most;
}

/* Rayleigh quotient after some inverse iterations: no bound, but close above the smallest eigenvalue. */
static double estimate(scaled *a)
{
    sct_random random = {1};
    double quotient = 0.0;
    for (size_t i = 0; i < a->n; i++) a->z[i] = sct_random_unit(&random) - 0.5;
    for (int k = 0; k < ITERATIONS; k++) {
        double length = 0.0, product = 0.0;
        for (size_t i = 0; i < a->n; i++) length += a->z[i] * a->z[i];
        const double by_length = 1.0 / sqrt(length);
        for (size_t i = 0; i < a->n; i++) {
            a->y[i] = a->z[i] * by_length;
            a->z[i] = a->y[i] / a->s[i];
        }
        sct_solver_solve(a->solver, 1, a->z);
        length = 0.0;
        for (size_t i = 0; i < a->n; i++) {
            a->z[i] /= a->s[i];
            product += a->y[i] * a->z[i];
            length += a->z[i] * a->z[i];
        }
        quotient = product / length;
    }
    return quotient;
}

/* Factors A - alpha I; *lambda: the bound that it proves, 0 when it has no factor. */
static sct_status try_shift(scaled *a, double alpha, double *lambda)
{
    for (size_t i = 0; i < a->n; i++) a->values[diagonal(a->pattern, i)] = a->diagonal[i] - alpha;
    sct_factor *factor = sct_solver_factor(a->solver);
    const sct_status status = sct_factor_update(factor, a->values, NULL);
    *lambda = 0.0;
    if (status != SCT_OK) return status;
    const double n = (double)a->n, shift_rounding = 4.0 * 0x1p-53; /* of a diagonal of at most 2 + alpha */
    const double lost =
        sct_factor_rounding(factor) + assembly_rounding(a) + shift_rounding + n * n * UNDERFLOW_PER_ENTRY;
    *lambda = fmax((alpha - lost * (1.0 + 0x1p-50)) * (1.0 - 0x1p-50), 0.0); /* rounded downwards */
    return SCT_OK;
}

static sct_status search(scaled *a, const sct_properties sizes[], double *lambda)
{
    assemble(a, sizes);
    double alpha = PART * estimate(a);
    sct_status status = SCT_NOT_CONVEX;
    for (int trial = 0; trial < MOST_TRIALS && status == SCT_NOT_CONVEX && alpha > 0.0 && alpha < 2.0; trial++) {
        status = try_shift(a, alpha, lambda);
        alpha *= 0.5;
    }
    return status == SCT_NOT_CONVEX ? SCT_OK : status;
}

sct_status sct_eigenvalue_bound(sct_solver *solver, double s[], double *lambda)
{
    scaled a = {.st = sct_solver_structure(solver), .solver = solver, .s = s};
    const double *K = sct_solver_stiffness(solver, &a.pattern);
    *lambda = 0.0;
    a.n = (size_t)a.st->n_dof;
    a.n_values = (size_t)a.pattern->column[a.n];
    if (a.n == 0 || !find_scale(a.n, K, a.pattern, s)) return SCT_OK;
    const sct_status status = scaled_allocate(&a) ? search(&a, sct_solver_sizes(solver), lambda) : SCT_NO_MEMORY;
    scaled_free(&a);
    return status;
}
