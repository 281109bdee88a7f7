/* Ways in which a structure can move without resistance: what geometry shows, then what the stiffness hides.
 *
 * The stiffness is scaled to a unit diagonal by powers of two (exact), shifted a little so that a factor exists,
 * and its smallest eigenvectors are found by block inverse iteration. How stiff a vector is, is measured on the
 * springs themselves: the sum of k (b'v)^2 has no cancellation, so a mechanism shows 1e-30 where the matrix shows
 * rounding. The stretch of the springs tells a mechanism from a soft structure. Where the numbers are good, the search
 * is done once more without the springs that are hardly stiff beside the others: what they alone hold is warned about,
 * for the answer hangs on them. */
#include "analysis/mechanism.h"

#include <float.h>
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/accuracy.h"
#include "analysis/connectivity.h"
#include "analysis/joint_motion.h"
#include "analysis/motion.h"
#include "base/random.h"
#include "numerics/local_basis.h"
#include "numerics/span.h"

/* Twice as many vectors as motions are told: a model has no more mechanisms than that, as a rule, and only a whole null
 * space can be told apart into local motions. */
enum { BLOCK = 2 * SCT_MOTIONS_TOLD, ITERATIONS = 6 };

/* On the scaled matrix, the smallest first: with 1e-14 slender trusses keep their modes apart, with 1e-10 a factor
 * always exists. */
static const double SHIFTS[] = {1e-14, 1e-12, 1e-10};
static const double NO_STRETCH = 1e-8; /* largest stretch of a spring / largest displacement: below, a mechanism */
/* Scaled stiffness of a mode below which it is lost in the rounding of the matrix. Above, accuracy.c judges by results.
 */
static const double TOO_SOFT = DBL_EPSILON / 2.0;
/* [1] of the stiffness of half of all members: what is softer hardly holds anything. */
static const double HARDLY_STIFF = 1e-10;
/* [1] of E A / L: what bending is compared with at least, E I / L^3 at a slenderness of 30. */
static const double USUAL_BENDING = 1e-3;

/* What stiffnesses are comparable: against displacements; against rotations, by their span. */
typedef enum kind { FORCE, MOMENT, KINDS } kind;

typedef struct search {
    const sct_structure *st;
    const double *A;
    sct_properties *sizes; /* n_groups */
    const sct_pattern *pattern;
    sct_factor *factor; /* the solver's, borrowed for other values */
    sct_issues *issues;
    int n, q;            /* unknowns, vectors */
    bool *ground;        /* n: unknowns held because geometry has told their motion */
    double held;         /* [N/m] stiffness that holds them */
    bool *is_rotation;   /* n */
    double usual[KINDS]; /* [N/m] half of the members are at least this stiff */
    bool *is_absent;     /* n_springs: hardly stiff ones, in the second search */
    bool some_absent;
    double *values; /* of the pattern */
    double *s;      /* n: scale, powers of two */
    double *X;      /* n x q, column-major: orthonormal, in scaled unknowns */
    sct_joint_motion motion;
    int n_told;
} search;

static void search_free(search *f)
{
    free(f->sizes);
    free(f->ground);
    free(f->values);
    free(f->s);
    free(f->X);
    free(f->is_rotation);
    free(f->is_absent);
    sct_joint_motion_free(&f->motion);
}

static bool search_allocate(search *f)
{
    const size_t n = (size_t)f->n;
    f->ground = calloc(n + 1, sizeof *f->ground);
    f->values = calloc((size_t)f->pattern->column[f->n] + 1, sizeof *f->values);
    f->s = malloc((n + 1) * sizeof *f->s);
    f->X = malloc((n * BLOCK + 1) * sizeof *f->X);
    f->is_rotation = malloc((n + 1) * sizeof *f->is_rotation);
    f->is_absent = calloc((size_t)f->st->n_springs + 1, sizeof *f->is_absent);
    f->sizes = malloc(((size_t)f->st->n_groups + 1) * sizeof *f->sizes);
    for (int g = 0; g < f->st->n_groups && f->sizes != NULL; g++) {
        f->sizes[g] = sct_properties_at_area(f->st->model, g, f->A[g]);
        if (f->st->n_springs == f->st->n_bars) f->sizes[g].P[SCT_OF_AREA] = f->A[g];
    }
    return f->sizes != NULL && f->ground != NULL && f->values != NULL && f->s != NULL && f->X != NULL &&
           f->is_rotation != NULL && f->is_absent != NULL && sct_joint_motion_allocate(&f->motion, f->st);
}

static void mark_rotations(search *f)
{
    for (int i = 0; i < f->n; i++) f->is_rotation[i] = true; /* of joints and of sprung ends */
    for (int j = 0; j < f->st->n_joints; j++) {
        for (int k = 0; k < f->st->n_free[j]; k++) f->is_rotation[f->st->first_dof[j] + k] = false;
    }
}

/* [N/m] beside the others: moments against rotations by their span. */
static double compared_stiffness(const search *f, const sct_spring *spring)
{
    return sct_spring_stiffness(spring, f->sizes) / (spring->span * spring->span);
}

static kind kind_of(const search *f, const sct_spring *spring)
{
    if (spring->mode == SCT_MODE_SUPPORT) return spring->n_dof > 0 && f->is_rotation[spring->dof[0]] ? MOMENT : FORCE;
    return spring->mode == SCT_MODE_AXIAL ? FORCE : MOMENT;
}

/* ---- the scaled matrix ------------------------------------------------------------------------------------------ */

/* Place of entry (i, j) in the pattern. */
static int entry(const sct_pattern *pattern, int i, int j)
{
    const int row = i < j ? i : j, column = i < j ? j : i;
    int low = pattern->column[column], high = pattern->column[column + 1] - 1;
    while (low < high) {
        const int middle = low + (high - low) / 2;
        if (pattern->row[middle] < row) {
            low = middle + 1;
        } else {
            high = middle;
        }
    }
    return low;
}

static int diagonal(const sct_pattern *pattern, int i)
{
    return pattern->column[i + 1] - 1; /* rows ascend and end at the diagonal */
}

static void assemble(search *f)
{
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *spring = &f->st->springs[e];
        const double k = sct_spring_stiffness(spring, f->sizes);
        if (f->is_absent[e]) continue;
        for (int a = 0; a < spring->n_dof; a++) {
            for (int b = 0; b <= a; b++) {
                const double product = k * spring->b[a] * spring->b[b];
                if (product != 0.0) f->values[entry(f->pattern, spring->dof[a], spring->dof[b])] += product;
            }
        }
    }
    for (int i = 0; i < f->n; i++) f->held = fmax(f->held, f->values[diagonal(f->pattern, i)]);
    if (!(f->held > 0.0)) f->held = 1.0;
    for (int i = 0; i < f->n; i++) {
        if (f->ground[i]) f->values[diagonal(f->pattern, i)] += f->held;
    }
}

enum { SCALED = -1, NOT_FINITE = -2 };

/* Scales to a diagonal within [0.5, 2]: SCALED, NOT_FINITE, or the first unknown without stiffness. With springs absent
 * such unknowns are nothing new: they keep their scale. */
static int scale(search *f)
{
    for (int i = 0; i < f->n; i++) {
        const double K_ii = f->values[diagonal(f->pattern, i)];
        if (!(K_ii <= DBL_MAX)) return NOT_FINITE;
        if (!(K_ii > 0.0) && !f->some_absent) return i;
        f->s[i] = K_ii > 0.0 ? ldexp(1.0, -(int)lround(0.5 * log2(K_ii))) : 1.0;
    }
    for (int j = 0; j < f->n; j++) {
        for (int p = f->pattern->column[j]; p < f->pattern->column[j + 1]; p++) {
            f->values[p] *= f->s[f->pattern->row[p]];
            f->values[p] *= f->s[j];
        }
    }
    return SCALED;
}

/* ---- the smallest eigenvectors ---------------------------------------------------------------------------------- */

/* Modified Gram-Schmidt, twice. */
static void orthonormalise(int n, int q, double X[])
{
    for (int c = 0; c < q; c++) {
        double *x = X + (size_t)c * (size_t)n;
        for (int k = 0; k < 2 * c; k++) {
            const double *other = X + (size_t)(k % c) * (size_t)n;
            const double part = sct_dot(n, other, x);
            for (int i = 0; i < n; i++) x[i] -= part * other[i];
        }
        const double length = sqrt(sct_dot(n, x, x));
        for (int i = 0; i < n; i++) x[i] = length > 0.0 ? x[i] / length : 0.0;
    }
}

static double stretch(const search *f, const sct_spring *spring, const double x[])
{
    double sum = 0.0;
    for (int i = 0; i < spring->n_dof; i++) sum += spring->b[i] * f->s[spring->dof[i]] * x[spring->dof[i]];
    return sum;
}

/* G (q x q) = X' S (K + held) S X, summed spring by spring. */
static void energies(const search *f, const double X[], int q, double G[BLOCK][BLOCK])
{
    memset(G, 0, sizeof(double[BLOCK][BLOCK]));
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *spring = &f->st->springs[e];
        const double k = sct_spring_stiffness(spring, f->sizes);
        double elongation[BLOCK];
        if (f->is_absent[e]) continue;
        for (int a = 0; a < q; a++) elongation[a] = stretch(f, spring, X + (size_t)a * (size_t)f->n);
        for (int a = 0; a < q; a++) {
            for (int b = 0; b < q; b++) G[a][b] += k * elongation[a] * elongation[b];
        }
    }
    for (int i = 0; i < f->n; i++) {
        if (!f->ground[i]) continue;
        for (int a = 0; a < q; a++) {
            for (int b = 0; b < q; b++) {
                G[a][b] += f->held * f->s[i] * f->s[i] * X[(size_t)a * (size_t)f->n + (size_t)i] *
                           X[(size_t)b * (size_t)f->n + (size_t)i];
            }
        }
    }
}

/* Cyclic Jacobi: makes G diagonal by rotations, which are applied to the columns of X as well. */
static void rotate_to_ritz(int n, int q, double G[BLOCK][BLOCK], double X[])
{
    for (int sweep = 0; sweep < 12; sweep++) {
        for (int a = 0; a < q; a++) {
            for (int b = a + 1; b < q; b++) {
                if (!(fabs(G[a][b]) > DBL_EPSILON * sqrt(fabs(G[a][a] * G[b][b])))) continue;
                const double theta = (G[b][b] - G[a][a]) / (2.0 * G[a][b]);
                const double t = (theta < 0.0 ? -1.0 : 1.0) / (fabs(theta) + hypot(1.0, theta));
                const double c = 1.0 / hypot(1.0, t), s = c * t;
                for (int i = 0; i < q; i++) {
                    const double ia = G[i][a], ib = G[i][b];
                    G[i][a] = c * ia - s * ib;
                    G[i][b] = s * ia + c * ib;
                }
                for (int i = 0; i < q; i++) {
                    const double ai = G[a][i], bi = G[b][i];
                    G[a][i] = c * ai - s * bi;
                    G[b][i] = s * ai + c * bi;
                }
                double *xa = X + (size_t)a * (size_t)n, *xb = X + (size_t)b * (size_t)n;
                for (int i = 0; i < n; i++) {
                    const double va = xa[i], vb = xb[i];
                    xa[i] = c * va - s * vb;
                    xb[i] = s * va + c * vb;
                }
            }
        }
    }
}

static void iterate(search *f)
{
    sct_random random = {1};
    for (int i = 0; i < f->n * f->q; i++) f->X[i] = sct_random_unit(&random) - 0.5;
    for (int k = 0; k < ITERATIONS; k++) {
        sct_factor_solve(f->factor, f->q, f->X);
        orthonormalise(f->n, f->q, f->X);
    }
}

/* The q smallest eigenvectors of the scaled matrix, into X. *definite: it has a factor without shift too.
 * SCT_NOT_CONVEX: no factor even with the largest shift: a value is not finite. */
static sct_status inverse_iteration(search *f, bool *definite)
{
    sct_status status = sct_factor_update(f->factor, f->values, NULL);
    *definite = status == SCT_OK;
    if (status == SCT_OK) status = SCT_NOT_CONVEX;
    double before = 0.0;
    for (size_t k = 0; k < sizeof SHIFTS / sizeof SHIFTS[0] && status == SCT_NOT_CONVEX; k++) {
        for (int i = 0; i < f->n; i++) f->values[diagonal(f->pattern, i)] += SHIFTS[k] - before;
        before = SHIFTS[k];
        status = sct_factor_update(f->factor, f->values, NULL);
    }
    if (status == SCT_OK) iterate(f);
    return status;
}

/* ---- what is told -------------------------------------------------------------------------------------------------
 */

static const char *remedy(const search *f)
{
    const bool is_one = f->motion.n == 1, is_frame = sct_motion_is_frame(f->st->model);
    if (f->motion.is_turn)
        return ": nothing holds this rotation; hold it by a support, fix another member there, or release the twist of "
               "the members that turn";
    if (is_one && is_frame) return ": nothing holds it there; fix a pinned end, add a member or a support";
    if (is_one) return ": nothing holds it there; add a member or a support";
    return is_frame ? ": no member resists this; fix a pinned end, add a member (a diagonal) or a support"
                    : ": no member resists this; add a member (a diagonal) or a support";
}

/* Begins a message on the motion v: which joints move and how. Returns the place of the first. */
static sct_where begin(search *f, const double v[], sct_text *text)
{
    sct_joint_motion_set(&f->motion, v);
    return f->st->model->joints[sct_joint_motion_words(&f->motion, text)].where;
}

static sct_status tell_mechanism(search *f, const double v[])
{
    sct_text text = {0};
    const sct_where where = begin(f, v, &text);
    sct_text_add(&text, remedy(f));
    f->n_told++;
    return sct_motion_tell(&text, SCT_ERROR, where, f->issues) ? SCT_MECHANISM : SCT_NO_MEMORY;
}

/* An unknown that no spring gives any stiffness (a bar area so small that it vanishes, say). */
static sct_status tell_no_stiffness(search *f, int dof)
{
    memset(f->X, 0, (size_t)f->n * sizeof *f->X);
    f->X[dof] = 1.0;
    return tell_mechanism(f, f->X);
}

static sct_status tell_too_soft(search *f, const double v[], double stiffness)
{
    sct_text text = {0};
    const sct_where where = begin(f, v, &text);
    sct_text_format(&text, " almost without resistance (%.1g of the stiffness of a joint): no answer can be trusted; ",
                    stiffness);
    sct_stiffness_words(f->st, f->A, &text);
    return sct_motion_tell(&text, SCT_ERROR, where, f->issues) ? SCT_NOT_ACCURATE : SCT_NO_MEMORY;
}

static int joint_of(const sct_structure *st, int dof)
{
    int j = 0;
    while (j < st->n_joints - 1 && st->first_dof[j] + st->n_free[j] + st->n_turns[j] <= dof) j++;
    return j;
}

/* `member "A" in bending`, `the spring support of joint "B"`, ... */
static void add_spring(const search *f, const sct_spring *spring, sct_text *text)
{
    const sct_model *model = f->st->model;
    if (spring->mode == SCT_MODE_SUPPORT) {
        sct_text_add(text, "the spring support of joint ");
        sct_motion_name(text, model->joints[joint_of(f->st, spring->dof[0])].name);
        return;
    }
    const sct_bar *bar = &f->st->bars[spring->bar];
    sct_text_add(text, spring->mode == SCT_MODE_END ? "the sprung end of member " : "member ");
    sct_motion_name(text, model->members[spring->bar].name);
    if (spring->mode == SCT_MODE_END) {
        sct_text_add(text, " at joint ");
        sct_motion_name(text, model->joints[spring->end == 0 ? bar->from : bar->to].name);
    } else if (spring->mode != SCT_MODE_AXIAL) {
        sct_text_add(text, spring->mode == SCT_MODE_TWIST ? " in twist" : " in bending");
    }
}

/* A motion v (in unknowns) that only absent springs resist: the one that stretches most is named. */
static sct_status tell_hardly_held(search *f, const double v[])
{
    double most = 0.0;
    const sct_spring *hardly = NULL;
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *spring = &f->st->springs[e];
        double elongation = 0.0;
        if (!f->is_absent[e]) continue;
        for (int i = 0; i < spring->n_dof; i++) elongation += spring->b[i] * v[spring->dof[i]];
        elongation *= spring->span;
        if (!(fabs(elongation) > most)) continue;
        most = fabs(elongation);
        hardly = spring;
    }
    if (hardly == NULL) return SCT_OK;
    sct_text text = {0};
    const kind k = kind_of(f, hardly);
    const sct_where where = begin(f, v, &text);
    sct_text_add(&text, " almost without resistance: what resists is as soft as ");
    add_spring(f, hardly, &text);
    sct_text_format(&text, ", with %.1g of the stiffness (%s) of most members; make them more alike",
                    compared_stiffness(f, hardly) / f->usual[k], k == FORCE ? "E A / L" : "E I / L^3");
    f->n_told++;
    return sct_motion_tell(&text, SCT_WARNING, where, f->issues) ? SCT_OK : SCT_NO_MEMORY;
}

/* ---- the verdict ------------------------------------------------------------------------------------------------- */

/* Largest stretch of a spring over largest displacement of a joint, of a vector in scaled unknowns. */
static double relative_stretch(search *f, const double x[], double v[])
{
    double most = 0.0;
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *spring = &f->st->springs[e];
        if (!f->is_absent[e]) most = fmax(most, fabs(stretch(f, spring, x)) * spring->span);
    }
    for (int i = 0; i < f->n; i++) v[i] = f->s[i] * x[i];
    sct_joint_motion_set(&f->motion, v);
    return f->motion.largest > 0.0 ? most / f->motion.largest : 1.0;
}

/* What makes an unknown comparable: a rotation is beside displacements by the lever. */
static double beside(const search *f, int i)
{
    return f->is_rotation[i] ? f->st->lever : 1.0;
}

/* Moves the vectors of X that are mechanisms to its front, in unknowns, each as local as it can be, in the order of the
 * joints; returns how many. */
static int gather_mechanisms(search *f, const bool is_mechanism[])
{
    int n_free = 0;
    for (int k = 0; k < f->q; k++) {
        double *to = f->X + (size_t)n_free * (size_t)f->n;
        if (!is_mechanism[k]) continue;
        for (int i = 0; i < f->n; i++) to[i] = beside(f, i) * (f->s[i] * f->X[(size_t)k * (size_t)f->n + (size_t)i]);
        n_free++;
    }
    sct_local_basis(f->n, n_free, f->X, SCT_MOTION_SHOWN);
    for (int k = 0; k < n_free; k++) {
        for (int i = 0; i < f->n; i++) f->X[(size_t)k * (size_t)f->n + (size_t)i] /= beside(f, i);
    }
    return n_free;
}

/* Judges the q vectors of X: tells the mechanisms; else the softest mode, when it is too soft or the matrix has no
 * factor. With springs absent only mechanisms count, as warnings. */
static sct_status judge(search *f, bool definite, double v[])
{
    double G[BLOCK][BLOCK];
    energies(f, f->X, f->q, G);
    rotate_to_ritz(f->n, f->q, G, f->X);
    const double null_limit = fmax((double)f->n * DBL_EPSILON, TOO_SOFT);
    double softest = definite ? TOO_SOFT : INFINITY;
    int soft = -1;
    bool is_mechanism[BLOCK] = {false};
    for (int k = 0; k < f->q; k++) {
        double quotient[BLOCK][BLOCK];
        const double *x = f->X + (size_t)k * (size_t)f->n;
        energies(f, x, 1, quotient);
        is_mechanism[k] = quotient[0][0] <= null_limit && relative_stretch(f, x, v) <= NO_STRETCH;
        if (is_mechanism[k] || !(quotient[0][0] <= softest)) continue;
        softest = quotient[0][0];
        soft = k;
    }
    if (soft >= 0) relative_stretch(f, f->X + (size_t)soft * (size_t)f->n, v); /* kept in v: X is overwritten now */
    const int n_free = gather_mechanisms(f, is_mechanism);
    const bool hardly = f->some_absent;
    sct_status status = SCT_OK;
    for (int k = 0; k < n_free && f->n_told < SCT_MOTIONS_TOLD && status != SCT_NO_MEMORY; k++) {
        const double *motion = f->X + (size_t)k * (size_t)f->n;
        status = hardly ? tell_hardly_held(f, motion) : tell_mechanism(f, motion);
    }
    if (hardly) return status;
    if (n_free == 0 && soft >= 0) return tell_too_soft(f, v, softest);
    if (n_free == 0 && !definite) return SCT_NOT_CONVEX;
    return n_free > 0 && status == SCT_OK ? SCT_MECHANISM : status;
}

static sct_status tell_no_numbers(const search *f)
{
    sct_text text = {0};
    sct_text_add(&text, "the stiffness of the structure cannot be formed in numbers; ");
    const int stiffest = sct_stiffness_words(f->st, f->A, &text);
    const bool told = sct_motion_tell(&text, SCT_ERROR, f->st->model->members[stiffest].where, f->issues);
    return told ? SCT_NOT_ACCURATE : SCT_NO_MEMORY;
}

static sct_status search_stiffness(search *f)
{
    memset(f->values, 0, (size_t)f->pattern->column[f->n] * sizeof *f->values);
    assemble(f);
    const int scaled = scale(f);
    if (scaled == NOT_FINITE) return tell_no_numbers(f);
    if (scaled != SCALED) return tell_no_stiffness(f, scaled);
    double *v = malloc((size_t)f->n * sizeof *v);
    if (v == NULL) return SCT_NO_MEMORY;
    bool definite = false;
    sct_status status = inverse_iteration(f, &definite);
    if (status == SCT_OK) status = judge(f, definite, v);
    free(v);
    return status == SCT_NOT_CONVEX ? tell_no_numbers(f) : status;
}

static int by_size(const void *left, const void *right)
{
    const double *a = left, *b = right;
    return (*a > *b) - (*a < *b);
}

/* What half of the springs of a kind that members have is at least; k: scratch, n_springs. */
static double median(const search *f, kind which, double k[])
{
    size_t n = 0;
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *spring = &f->st->springs[e];
        if (spring->group >= 0 && kind_of(f, spring) == which) k[n++] = compared_stiffness(f, spring);
    }
    qsort(k, n, sizeof *k, by_size);
    return n > 0 ? k[n / 2] : 0.0;
}

/* Warns of what only springs hold that are hardly stiff beside the usual one. */
static sct_status search_hardly_held(search *f)
{
    double *k = malloc(((size_t)f->st->n_springs + 1) * sizeof *k);
    if (k == NULL) return SCT_NO_MEMORY;
    f->usual[FORCE] = median(f, FORCE, k);
    f->usual[MOMENT] = fmax(median(f, MOMENT, k), USUAL_BENDING * f->usual[FORCE]);
    free(k);
    for (int e = 0; e < f->st->n_springs; e++) {
        const sct_spring *spring = &f->st->springs[e];
        f->is_absent[e] = compared_stiffness(f, spring) < HARDLY_STIFF * f->usual[kind_of(f, spring)];
        f->some_absent = f->some_absent || f->is_absent[e];
    }
    return f->some_absent ? search_stiffness(f) : SCT_OK;
}

sct_status sct_mechanism_find(sct_solver *solver, const double A[], sct_issues *issues)
{
    search f = {.st = sct_solver_structure(solver), .A = A, .factor = sct_solver_factor(solver), .issues = issues};
    int n_found = 0;
    f.n = f.st->n_dof;
    f.q = f.n < BLOCK ? f.n : BLOCK;
    sct_solver_stiffness(solver, &f.pattern);
    sct_status status = search_allocate(&f) ? SCT_OK : SCT_NO_MEMORY;
    if (status == SCT_OK) {
        mark_rotations(&f);
        status = sct_connectivity_check(f.st, f.ground, &n_found, &f.n_told, issues);
    }
    if (status == SCT_OK && f.n > 0) status = search_stiffness(&f);
    if (status == SCT_OK && f.n > 0 && n_found == 0) status = search_hardly_held(&f);
    search_free(&f);
    if (n_found > 0 && (status == SCT_OK || status == SCT_NOT_ACCURATE)) return SCT_MECHANISM;
    return status;
}
