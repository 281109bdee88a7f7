/* Sizing as a nonlinear program: values, gradients and curvature from one analysis. */
#include "problem.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "base/number.h"
#include "base/text.h"
#include "numerics/dense.h"
#include "sizing/shapes.h"

static const double INACTIVE = -9.0; /* ln: a limit this far away is left alone, with zero gradient */

struct sct_problem {
    sct_duty *duty;
    const sct_structure *st;
    sct_arena *arena;
    bool plain;
    /* variables; constraints: bars, deflections, members that carry moments (three places each), bows, critical load
     * factors (some modes of each combination for strength), frequency; where each begins */
    int n, n_bar_rows, first_bent, first_bow, first_factor, first_frequency;
    bool *is_fixed; /* n_groups: true properties below, no envelope */
    sct_design fixed;
    sct_group_curves *curves; /* n_groups */
    double *lower, *upper;    /* ln A */
    sct_bound_source *source;
    double *x_lower, *x_upper; /* the same in the form of x */
    double *ref, mass_unit;    /* plain form: areas and mass are relative to the middle of the ranges; else 1 kg */
    int *cluster;
    sct_nlp nlp;
    double margin; /* that is added to every constraint */
    /* at the latest value call */
    bool have_value;
    double *x, f;
    double *A;             /* n_groups */
    sct_need *need;        /* n_bar_rows */
    sct_bent_place *place; /* of every row of a member that carries moments */
    sct_shape *shape;      /* n_groups */
    sct_properties *sizes; /* n_groups */
    bool needs_shapes;     /* some member is a beam or carries moments */
    double *g;             /* all constraints, log form */
    bool have_du;
    bool have_whole_slopes;
    /* curvature of the rows from first_factor on, learned from their slopes at one point after another */
    double *learned, *slopes_before, *x_before; /* x n x n; as whole_slopes; n */
    bool have_before;
    double *whole_slopes,
        *sway_slopes; /* of the rows from first_factor on, x n; of the amplifications, n_allowable x n */
    double *du, *part, *row, *cross, *moving; /* n_cases x n_dof x n; n; n; n; n */
    double *lambda;                           /* 2 n_ties */
    double *wN, *wu, *work;                   /* weights for the curvature */
};

typedef enum row_kind { BAR_ROW, DEFLECTION_ROW, BENT_ROW, BOW_ROW, FACTOR_ROW, FREQUENCY_ROW } row_kind;

static row_kind kind_of(const sct_problem *P, int j)
{
    return j < P->n_bar_rows        ? BAR_ROW
           : j < P->first_bent      ? DEFLECTION_ROW
           : j < P->first_bow       ? BENT_ROW
           : j < P->first_factor    ? BOW_ROW
           : j < P->first_frequency ? FACTOR_ROW
                                    : FREQUENCY_ROW;
}

static const sct_deflection_row *deflection_of(const sct_problem *P, int j)
{
    return &P->duty->rows[j - P->n_bar_rows];
}

static const sct_bow_row *bow_of(const sct_problem *P, int j)
{
    return &P->duty->bows[j - P->first_bow];
}

/* Rows of bent members come by combination, member, place. */
static int bent_index(const sct_problem *P, int j)
{
    return (j - P->first_bent) / SCT_BENT_PLACES;
}

static int bar_of(const sct_problem *P, int j)
{
    const row_kind kind = kind_of(P, j);
    if (kind == BENT_ROW) return P->duty->bent[bent_index(P, j) % P->duty->n_bent];
    return kind == BAR_ROW ? j % P->st->n_bars : kind == BOW_ROW ? bow_of(P, j)->bar : -1; /* -1: none */
}

static int combination_of(const sct_problem *P, int j)
{
    switch (kind_of(P, j)) {
    case BAR_ROW: return P->duty->allowable[j / P->st->n_bars];
    case DEFLECTION_ROW: return deflection_of(P, j)->combination;
    case BENT_ROW: return P->duty->allowable[bent_index(P, j) / P->duty->n_bent];
    case BOW_ROW: return bow_of(P, j)->combination;
    case FACTOR_ROW: return P->duty->allowable[(j - P->first_factor) / SCT_WHOLE_MODES];
    default: return -1;
    }
}

static double force(const sct_problem *P, int j)
{
    return P->duty->N[(size_t)combination_of(P, j) * (size_t)P->st->n_bars + (size_t)bar_of(P, j)];
}

static double EI_of(const sct_problem *P, int j)
{
    const int group = P->st->bars[bar_of(P, j)].group;
    const double i = P->shape[group].i[P->st->model->bows[bow_of(P, j)->limit].axis];
    return P->st->bars[bar_of(P, j)].E * i * i * P->shape[group].A;
}

/* d ln sigma_cr / d ln lambda */
static double column_slope(const sct_bar_rule *rule, double lambda)
{
    return sct_column_strength(rule->buckling, rule->E, rule->yield, lambda).s1;
}

/* A group of given size: utilisation with true properties, in which the force enters as it is. */
static sct_need fixed_need(const sct_problem *P, int bar, double N)
{
    const int g = P->st->bars[bar].group;
    sct_bar_check checks[SCT_MOST_BAR_CHECKS];
    const int n = sct_bar_checks(&P->duty->rules[bar], N, P->fixed.A[g], P->fixed.i[g], checks);
    sct_need need = {.s = INACTIVE, .s1 = 1.0};
    double most = 0.0;
    for (int k = 0; k < n; k++)
        if (checks[k].utilisation > most) {
            most = checks[k].utilisation;
            need.kind = checks[k].kind;
            need.sL = checks[k].lambda > 0.0 ? -column_slope(&P->duty->rules[bar], checks[k].lambda) : 0.0;
        }
    if (most > 0.0) need.s = log(most) + log(P->fixed.A[g]);
    return need;
}

static double bar_constraint(sct_problem *P, int j)
{
    const int bar = bar_of(P, j), group = P->st->bars[bar].group;
    const double N = force(P, j);
    sct_need *need = &P->need[j];
    if (!(fabs(N) > 0.0) || P->st->bars[bar].is_bent) return INACTIVE; /* bent members have rows of their own */
    if (P->is_fixed[group])
        *need = fixed_need(P, bar, N);
    else
        *need = sct_area_needed(&P->duty->rules[bar], P->curves[group].i, N > 0.0, log(fabs(N)), log(P->A[group]));
    return need->s - log(P->A[group]);
}

static double bent_constraint(sct_problem *P, int j)
{
    const int k = j - P->first_bent, bar = bar_of(P, j);
    if (k % SCT_BENT_PLACES == 0) { /* all places of a member in a combination at once */
        const sct_bent_member member = sct_duty_bent_member(P->duty, bar, combination_of(P, j));
        sct_bent_places(&member, &P->duty->rules[bar], &P->shape[P->st->bars[bar].group], P->place + k);
    }
    return log(P->place[k].utilisation);
}

static double whole_constraint(sct_problem *P, int j)
{
    double g[SCT_WHOLE_MODES];
    const int k = (j - P->first_factor) / SCT_WHOLE_MODES, mode = (j - P->first_factor) % SCT_WHOLE_MODES;
    const bool is_factor = j < P->first_frequency;
    const sct_status status =
        is_factor ? sct_whole_factor_limits(P->duty->whole, P->duty->solver, &P->duty->response, k, g, NULL)
                  : sct_whole_frequency_limits(P->duty->whole, g, NULL);
    return status == SCT_OK ? g[mode] : (double)NAN;
}

static double constraint(sct_problem *P, int j)
{
    switch (kind_of(P, j)) {
    case BAR_ROW: return bar_constraint(P, j);
    case DEFLECTION_ROW: return log(sct_duty_row_utilisation(P->duty, j - P->n_bar_rows));
    case BENT_ROW: return bent_constraint(P, j);
    case FACTOR_ROW:
    case FREQUENCY_ROW: return whole_constraint(P, j);
    default:
        return log(sct_duty_bow_utilisation(P->duty, j - P->first_bow, &P->shape[P->st->bars[bar_of(P, j)].group]));
    }
}

/* Areas, and where they are needed all properties, of every group at x. */
static void find_sizes(sct_problem *P, const double x[])
{
    sct_problem_areas(P, x, P->A);
    for (int g = 0; g < P->st->n_groups && P->needs_shapes; g++) {
        if (P->is_fixed[g]) continue; /* set once */
        P->shape[g] = sct_curves_shape(&P->curves[g], P->A[g]);
        P->sizes[g] = sct_curves_properties(&P->curves[g], P->A[g]);
    }
}

sct_status sct_problem_analyse(sct_problem *P, const double x[])
{
    find_sizes(P, x);
    return P->needs_shapes ? sct_duty_analyse_sizes(P->duty, P->sizes) : sct_duty_analyse_areas(P->duty, P->A);
}

/* One analysis and all constraints in log form; a point judged twice in a row is analysed once. */
static sct_status judge(sct_problem *P, const double x[])
{
    const sct_structure *st = P->st;
    P->have_value = P->have_du = P->have_whole_slopes = false;
    const sct_status status = sct_problem_analyse(P, x);
    if (status != SCT_OK) return status;
    P->f = 0.0;
    for (int v = 0; v < P->n; v++) P->f += P->duty->unit_mass[st->group_of_var[v]] * P->A[st->group_of_var[v]];
    for (int j = 0; j < P->nlp.m; j++) {
        const double g = constraint(P, j);
        if (isnan(g)) return SCT_NOT_ACCURATE;
        P->g[j] = fmax(g + P->margin, INACTIVE);
    }
    memcpy(P->x, x, (size_t)P->n * sizeof *x);
    P->have_value = true;
    return SCT_OK;
}

static sct_status value(void *user, const double x[], double *f, double g[])
{
    sct_problem *P = user;
    sct_status status = SCT_OK;
    if (!P->have_value || memcmp(x, P->x, (size_t)P->n * sizeof *x) != 0) status = judge(P, x);
    if (status != SCT_OK) return status;
    *f = P->f / P->mass_unit;
    for (int j = 0; j < P->nlp.m; j++) g[j] = P->plain ? expm1(P->g[j]) : P->g[j];
    return SCT_OK;
}

static sct_form force_form(const sct_problem *P, int j)
{
    return (sct_form){.combination = combination_of(P, j),
                      .value = force(P, j),
                      .n_springs = 1,
                      .spring = {bar_of(P, j)},
                      .w = {1.0},
                      .own = -1};
}

/* The quantity behind constraint j: force, displacement, utilisation, bow. */
static sct_form form_of(sct_problem *P, int j)
{
    const row_kind kind = kind_of(P, j);
    if (kind == BAR_ROW) return force_form(P, j);
    if (kind == DEFLECTION_ROW) return sct_duty_deflection_form(P->duty, j - P->n_bar_rows);
    const int bar = bar_of(P, j), group = P->st->bars[bar].group,
              own = P->is_fixed[group] ? -1 : P->st->var_of_group[group];
    const sct_bent_member member = sct_duty_bent_member(P->duty, bar, combination_of(P, j));
    sct_shape_slopes slopes = {0};
    if (own >= 0) slopes = sct_curves_slopes(&P->curves[group], P->A[group]);
    if (kind == BENT_ROW) return sct_bent_form(&member, &P->place[j - P->first_bent], own, &slopes);
    const sct_bow_row *row = bow_of(P, j);
    const double EI = EI_of(P, j);
    const sct_curve I = sct_curve_of_I(slopes.i[P->st->model->bows[row->limit].axis], P->A[group]);
    const sct_bow_place place = sct_bow_farthest(&member, &P->duty->response, row, EI);
    return sct_bow_form(&member, row, &place, EI, own, &I);
}

static sct_form_source source_of(sct_problem *P)
{
    return (sct_form_source){P->duty->solver, &P->duty->response, P->du, P->duty->slack, P->part};
}

static sct_status need_du(sct_problem *P)
{
    if (P->have_du) return SCT_OK;
    const sct_status status = sct_sensitivity_direct(P->duty->solver, &P->duty->response, P->du);
    if (status != SCT_OK) return status;
    sct_slack_derive(P->duty->slack, P->duty->solver, &P->duty->response, P->du);
    P->have_du = true;
    return SCT_OK;
}

/* B += r r'/(r's), r = y - B s: the symmetric rank-one update (Nocedal and Wright, Numerical Optimization,
 * section 6.2), left out where it would be large for a small step. r: scratch. */
static void update(int n, const double s[], const double y[], double r[], double *B)
{
    double along = 0.0, size_r = 0.0, size_s = 0.0;
    for (int i = 0; i < n; i++) {
        r[i] = y[i] - sct_dot(n, B + (size_t)i * (size_t)n, s);
        along += r[i] * s[i];
        size_r += r[i] * r[i];
        size_s += s[i] * s[i];
    }
    if (!(fabs(along) > 1e-8 * sqrt(size_r * size_s))) return;
    for (int i = 0; i < n; i++) sct_axpy(n, r[i] / along, r, B + (size_t)i * (size_t)n);
}

/* The second derivatives of eigenvalues would need those of their vectors; their change is learned instead. */
static void learn(sct_problem *P)
{
    const size_t n = (size_t)P->n, rows = (size_t)(P->nlp.m - P->first_factor);
    for (size_t j = 0; j < rows && P->have_before; j++) {
        for (size_t v = 0; v < n; v++) {
            P->cross[v] = P->x[v] - P->x_before[v];
            P->row[v] = P->whole_slopes[j * n + v] - P->slopes_before[j * n + v];
        }
        update((int)n, P->cross, P->row, P->moving, P->learned + j * n * n);
    }
    memcpy(P->x_before, P->x, n * sizeof *P->x);
    memcpy(P->slopes_before, P->whole_slopes, rows * n * sizeof *P->slopes_before);
    P->have_before = true;
}

/* Derivatives of the limits on the whole, and of what moments are amplified by. */
static sct_status need_whole_slopes(sct_problem *P)
{
    sct_duty *duty = P->duty;
    double g[SCT_WHOLE_MODES], *slopes = P->whole_slopes;
    const size_t n = (size_t)P->n;
    sct_status status = SCT_OK;
    if (P->have_whole_slopes) return SCT_OK;
    for (int j = P->first_factor; j < P->first_frequency && status == SCT_OK; j += SCT_WHOLE_MODES) {
        const int k = (j - P->first_factor) / SCT_WHOLE_MODES;
        status = sct_whole_factor_limits(duty->whole, duty->solver, &duty->response, k, g, slopes);
        slopes += SCT_WHOLE_MODES * n;
    }
    if (status == SCT_OK && P->first_frequency < P->nlp.m) status = sct_whole_frequency_limits(duty->whole, g, slopes);
    for (int k = 0; k < duty->n_allowable && status == SCT_OK && sct_whole_amplifies(P->st->model); k++)
        status = sct_whole_amplification_slope(duty->whole, duty->solver, &duty->response, k,
                                               P->sway_slopes + (size_t)k * n);
    P->have_whole_slopes = status == SCT_OK;
    if (status == SCT_OK && P->first_factor < P->nlp.m) learn(P);
    return status;
}

/* The part of a bent member's utilisation that moments make goes with their amplification. */
static void add_amplification(const sct_problem *P, int j, double row[])
{
    const sct_bent_place *place = &P->place[j - P->first_bent];
    const double part = (place->c[1] * place->q[1] + place->c[2] * place->q[2]) / place->utilisation;
    sct_axpy(P->n, part, P->sway_slopes + (size_t)(bent_index(P, j) / P->duty->n_bent) * (size_t)P->n, row);
}

static sct_status gradient(void *user, const double x[], int n_rows, const int rows[], double df[], double *dg)
{
    sct_problem *P = user;
    const sct_structure *st = P->st;
    for (int v = 0; v < P->n; v++) {
        const double w = P->duty->unit_mass[st->group_of_var[v]];
        df[v] = P->plain ? w * P->ref[v] / P->mass_unit : w * P->A[st->group_of_var[v]];
    }
    sct_status status = n_rows > 0 ? need_du(P) : SCT_OK;
    if (status == SCT_OK && n_rows > 0) status = need_whole_slopes(P);
    if (status != SCT_OK) return status;
    const sct_form_source source = source_of(P);
    for (int r = 0; r < n_rows; r++) {
        const int j = rows[r];
        double *row = dg + (size_t)r * (size_t)P->n;
        if (P->g[j] <= INACTIVE) {
            memset(row, 0, (size_t)P->n * sizeof *row);
            continue;
        }
        if (j >= P->first_factor) {
            memcpy(row, P->whole_slopes + (size_t)(j - P->first_factor) * (size_t)P->n, (size_t)P->n * sizeof *row);
        } else {
            const sct_form form = form_of(P, j);
            const double slope = (j < P->n_bar_rows ? P->need[j].s1 : 1.0) / form.value;
            sct_form_gradient(&form, &source, row);
            for (int v = 0; v < P->n; v++) row[v] *= slope;
        }
        if (kind_of(P, j) == BENT_ROW && sct_whole_amplifies(st->model)) add_amplification(P, j, row);
        if (j < P->n_bar_rows) {
            const int own = st->var_of_group[st->bars[bar_of(P, j)].group];
            if (own >= 0) row[own] -= 1.0;
        }
        for (int v = 0; P->plain && v < P->n; v++) row[v] *= exp(P->g[j]) / x[v];
    }
    return SCT_OK;
}

/* sum mu_j Hess g_j. With q the force or displacement: g = s(ln|q|), so
 * Hess g = (s'' - s') dq dq'/q^2 + s'/q Hess q; the last part of all constraints together is one weighted sum. */
static sct_status curvature(void *user, const double x[], int n_rows, const int rows[], const double mu[], double *H)
{
    (void)x;
    sct_problem *P = user;
    const sct_structure *st = P->st;
    const size_t n = (size_t)P->n, n_springs = (size_t)st->n_springs, n_dof = (size_t)st->n_dof,
                 n_cases = (size_t)st->n_cases;
    memset(H, 0, n * n * sizeof *H);
    memset(P->wN, 0, n_cases * n_springs * sizeof *P->wN);
    memset(P->wu, 0, n_cases * n_dof * sizeof *P->wu);
    const sct_status status = need_du(P);
    if (status != SCT_OK) return status;
    const sct_form_source source = source_of(P);
    for (int r = 0; r < n_rows; r++) {
        const int j = rows[r];
        if (mu[r] == 0.0 || P->g[j] <= INACTIVE) continue;
        if (j >= P->first_factor) {
            const double *B = P->learned + (size_t)(j - P->first_factor) * n * n;
            for (size_t a = 0; a < n; a++) sct_axpy((int)a + 1, mu[r], B + a * n, H + a * n);
            continue;
        }
        const sct_form form = form_of(P, j);
        const double q = form.value;
        const bool is_bar = j < P->n_bar_rows;
        const double s1 = is_bar ? P->need[j].s1 : 1.0, s2 = is_bar ? P->need[j].s2 : 0.0;
        const double outer = mu[r] * (s2 - s1) / (q * q), inner = mu[r] * s1 / q;
        sct_form_gradient(&form, &source, P->row);
        for (size_t a = 0; a < n; a++) sct_axpy((int)a + 1, outer * P->row[a], P->row, H + a * n); /* lower triangle */
        sct_form_curvature(&form, &source, inner, P->cross, P->moving, P->lambda, P->wN, P->wu, H);
    }
    for (size_t a = 0; a < n; a++)
        for (size_t b = 0; b < a; b++) H[b * n + a] = H[a * n + b];
    sct_sensitivity_curvature(P->duty->solver, &P->duty->response, P->du, (sct_weights){P->wN, P->wu}, P->work, H);
    return SCT_OK;
}

static void objective(void *user, const double x[], const double d[], double df[], double ddf[])
{
    const sct_problem *P = user;
    for (int v = 0; v < P->n; v++) df[v] = ddf[v] = P->duty->unit_mass[P->st->group_of_var[v]] * exp(x[v] + d[v]);
}

/* ---- set-up --------------------------------------------------------------------------------------------------- */

/* The member of a group that asks for the largest radius of gyration about one axis. */
typedef struct asker {
    double i, limit; /* radius asked for, slenderness limit behind it; i = 0: no limit applies */
    int bar;
} asker;

static asker radius_asked(const sct_problem *P, int group, int axis, const bool compressed[])
{
    asker most = {0.0, INFINITY, -1};
    for (int b = 0; b < P->st->n_bars; b++) {
        const sct_bar_rule *rule = &P->duty->rules[b];
        if (P->st->bars[b].group != group) continue;
        const double limit =
            compressed[b] ? fmin(rule->slenderness_any, rule->slenderness_compression) : rule->slenderness_any;
        if (rule->Lcr[axis] / limit > most.i) most = (asker){rule->Lcr[axis] / limit, limit, b};
    }
    return most;
}

static sct_status refuse_slenderness(const sct_problem *P, int group, asker who, double best, sct_fault why)
{
    sct_number_format(
        why, SCT_FAULT_ROOM,
        "No size of group \"%s\" keeps the slenderness limit %.0f of member \"%s\": the best reaches %.1f; "
        "a stiffer section or a shorter effective length would help.",
        sct_show(P->st->model->groups[group].name).text, who.limit, sct_show(P->st->model->members[who.bar].name).text,
        best);
    return SCT_INFEASIBLE;
}

static sct_status free_bounds(sct_problem *P, int v, const bool compressed[], sct_fault why)
{
    const int group = P->st->group_of_var[v];
    const sct_group *g = &P->st->model->groups[group];
    P->lower[v] = log(g->A_min);
    P->upper[v] = log(g->A_max);
    for (int axis = 0; axis < 2; axis++) {
        const asker who = radius_asked(P, group, axis, compressed);
        if (!(who.i > 0.0)) continue;
        const sct_power *I = &g->I[axis];
        const double s = log(who.i * who.i / I->c) / (I->p - 1.0); /* i^2 = c A^(p - 1) */
        if (s > P->upper[v])
            return refuse_slenderness(P, group, who, who.limit * who.i / sqrt(I->c * pow(g->A_max, I->p - 1.0)), why);
        if (s <= P->lower[v]) continue;
        P->lower[v] = s;
        P->source[v] = (sct_bound_source){SCT_CHECK_SLENDERNESS, who.bar};
    }
    return sct_curves_of_area(P->arena, g, &P->curves[group]);
}

/* Sections that are too slender are dropped before the envelope is drawn: slenderness never becomes a constraint. */
static sct_status ladder_bounds(sct_problem *P, int v, const bool compressed[], sct_fault why)
{
    const int group = P->st->group_of_var[v];
    const sct_group *g = &P->st->model->groups[group];
    const sct_family *family = &P->st->model->families[g->family];
    int *kept = sct_arena_array(P->arena, (size_t)g->n_ladder, sizeof *kept), n = 0, lightest = 0;
    if (kept == NULL) return SCT_NO_MEMORY;
    const asker who[2] = {radius_asked(P, group, 0, compressed), radius_asked(P, group, 1, compressed)};
    double best = INFINITY; /* needed / present radius of the stiffest section, about its worse axis */
    asker best_who = who[0];
    for (int k = 0; k < g->n_ladder; k++) {
        const sct_section *x = &family->sections[g->ladder[k]];
        const double over[2] = {who[0].i / sqrt(x->I[0] / x->A), who[1].i / sqrt(x->I[1] / x->A)};
        const int axis = over[1] > over[0];
        if (over[axis] <= 1.0)
            kept[n++] = g->ladder[k];
        else if (n == 0)
            lightest = axis; /* the axis that dropped the section below the lightest kept one */
        if (over[axis] < best) {
            best = over[axis];
            best_who = who[axis];
        }
    }
    if (n == 0) return refuse_slenderness(P, group, best_who, best * best_who.limit, why);
    P->lower[v] = log(family->sections[kept[0]].A);
    P->upper[v] = log(family->sections[kept[n - 1]].A);
    if (kept[0] != g->ladder[0]) P->source[v] = (sct_bound_source){SCT_CHECK_SLENDERNESS, who[lightest].bar};
    return sct_curves_of_ladder(P->arena, family, n, kept, &P->curves[group]);
}

static sct_status set_bounds(sct_problem *P, const bool compressed[], sct_fault why)
{
    for (int v = 0; v < P->n; v++) {
        const int group = P->st->group_of_var[v];
        P->source[v] = (sct_bound_source){SCT_CHECK_SMALLEST, -1};
        sct_status status = SCT_OK;
        if (P->is_fixed[group])
            P->lower[v] = P->upper[v] = log(P->fixed.A[group]);
        else if (P->st->model->groups[group].kind == SCT_LADDER)
            status = ladder_bounds(P, v, compressed, why);
        else
            status = free_bounds(P, v, compressed, why);
        if (status != SCT_OK) return status;
        P->ref[v] = exp(0.5 * (P->lower[v] + P->upper[v]));
        P->x_lower[v] = P->plain ? exp(P->lower[v]) / P->ref[v] : P->lower[v];
        P->x_upper[v] = P->plain ? exp(P->upper[v]) / P->ref[v] : P->upper[v];
        if (P->plain) P->mass_unit += P->duty->unit_mass[group] * P->ref[v];
    }
    if (!P->plain) P->mass_unit = 1.0;
    return SCT_OK;
}

static void set_fixed(sct_problem *P, const bool is_fixed[], const sct_design *fixed)
{
    const sct_model *model = P->st->model;
    for (int g = 0; g < P->st->n_groups; g++) {
        const sct_group *group = &model->groups[g];
        if (group->kind == SCT_HELD_SECTION)
            sct_design_section(model, g, group->held, &P->fixed);
        else if (group->kind == SCT_HELD_AREA)
            sct_design_area(model, g, group->A_held, &P->fixed);
        else if (is_fixed != NULL && is_fixed[g]) {
            P->fixed.A[g] = fixed->A[g];
            P->fixed.J[g] = fixed->J[g];
            memcpy(P->fixed.i[g], fixed->i[g], sizeof P->fixed.i[g]);
            memcpy(P->fixed.W[g], fixed->W[g], sizeof P->fixed.W[g]);
        } else
            continue;
        P->is_fixed[g] = true;
        P->A[g] = P->fixed.A[g];
        P->shape[g] = sct_design_shape(&P->fixed, g);
        P->sizes[g] = sct_design_properties(&P->fixed, g);
    }
}

static sct_status allocate(sct_problem *P)
{
    const sct_structure *st = P->st;
    const size_t n = (size_t)P->n, n_groups = (size_t)st->n_groups, n_cases = (size_t)st->n_cases;
    const size_t n_dof = (size_t)st->n_dof, n_springs = (size_t)st->n_springs, m = (size_t)P->nlp.m;
    const size_t n_places = (size_t)(P->first_bow - P->first_bent), n_whole = (size_t)(P->nlp.m - P->first_factor);
    const size_t n_sway = sct_whole_amplifies(st->model) ? (size_t)P->duty->n_allowable : 0;
    sct_arena *a = P->arena;
#define ARRAY(what, count) ((P->what = sct_arena_array(a, (count), sizeof *P->what)) != NULL)
    const bool ok = ARRAY(is_fixed, n_groups) && ARRAY(curves, n_groups) && ARRAY(lower, n) && ARRAY(upper, n) &&
                    ARRAY(source, n) && ARRAY(x_lower, n) && ARRAY(x_upper, n) && ARRAY(ref, n) && ARRAY(cluster, m) &&
                    ARRAY(x, n) && ARRAY(A, n_groups) && ARRAY(need, (size_t)P->n_bar_rows) && ARRAY(g, m) &&
                    ARRAY(lambda, 2 * (size_t)st->n_ties) && ARRAY(du, n_cases * n_dof * n) && ARRAY(part, n) &&
                    ARRAY(row, n) && ARRAY(cross, n) && ARRAY(whole_slopes, n_whole * n) &&
                    ARRAY(slopes_before, n_whole * n) && ARRAY(learned, n_whole * n * n) && ARRAY(x_before, n) &&
                    ARRAY(sway_slopes, n_sway * n) && ARRAY(moving, n) && ARRAY(place, n_places) &&
                    ARRAY(shape, n_groups) && ARRAY(sizes, n_groups) && ARRAY(wN, n_cases * n_springs) &&
                    ARRAY(wu, n_cases * n_dof) && ARRAY(work, n_cases * n_dof);
#undef ARRAY
    if (!ok) return SCT_NO_MEMORY;
    return sct_design_new(a, st->n_groups, &P->fixed);
}

static sct_status build(sct_problem *P, const bool compressed[], const bool is_fixed[], const sct_design *fixed,
                        sct_fault why)
{
    const sct_structure *st = P->st;
    P->arena = sct_arena_new();
    if (P->arena == NULL) return SCT_NO_MEMORY;
    P->n = st->n_vars;
    P->n_bar_rows = P->duty->n_allowable * st->n_bars;
    P->first_bent = P->n_bar_rows + P->duty->n_rows;
    P->first_bow = P->first_bent + P->duty->n_allowable * P->duty->n_bent * SCT_BENT_PLACES;
    P->first_factor = P->first_bow + P->duty->n_bows;
    P->first_frequency = P->first_factor + (st->model->least_factor > 0.0 ? P->duty->n_allowable * SCT_WHOLE_MODES : 0);
    const int n_frequencies = st->model->least_frequency > 0.0 ? SCT_WHOLE_MODES : 0;
    P->needs_shapes = P->duty->n_bent > 0 || P->duty->whole != NULL || st->n_springs > st->n_bars;
    P->nlp =
        (sct_nlp){.n = P->n, .m = P->first_frequency + n_frequencies, .user = P, .value = value, .gradient = gradient};
    sct_status status = allocate(P);
    if (status != SCT_OK) return status;
    set_fixed(P, is_fixed, fixed);
    status = set_bounds(P, compressed, why);
    if (status != SCT_OK) return status;
    for (int j = 0; j < P->nlp.m; j++) P->cluster[j] = bar_of(P, j) >= 0 ? st->bars[bar_of(P, j)].group : -1;
    P->nlp.lower = P->x_lower;
    P->nlp.upper = P->x_upper;
    P->nlp.cluster = P->cluster;
    P->nlp.n_clusters = st->n_groups;
    if (!P->plain) {
        P->nlp.curvature = curvature;
        P->nlp.objective = objective;
    }
    return SCT_OK;
}

sct_status sct_problem_new(sct_duty *duty, const bool compressed[], const bool is_fixed[], const sct_design *fixed,
                           bool plain, sct_problem **problem, sct_fault why)
{
    *problem = NULL;
    sct_problem *P = calloc(1, sizeof *P);
    if (P == NULL) return SCT_NO_MEMORY;
    P->duty = duty;
    P->st = duty->st;
    P->plain = plain;
    const sct_status status = build(P, compressed, is_fixed, fixed, why);
    if (status == SCT_OK)
        *problem = P;
    else
        sct_problem_free(P);
    return status;
}

void sct_problem_free(sct_problem *P)
{
    if (P == NULL) return;
    sct_arena_free(P->arena);
    free(P);
}

double sct_problem_bytes(const sct_duty *duty)
{
    const sct_structure *st = duty->st;
    const double bar_rows = (double)duty->n_allowable * (st->n_bars + SCT_BENT_PLACES * duty->n_bent);
    const double factors = st->model->least_factor > 0.0 ? duty->n_allowable : 0.0;
    const double whole = SCT_WHOLE_MODES * (factors + (st->model->least_frequency > 0.0));
    const double m = bar_rows + duty->n_rows + duty->n_bows + whole, n = st->n_vars;
    const double at_once = fmin(bar_rows, 2.0 * sct_descent_defaults().per_cluster * st->n_groups) + duty->n_rows;
    const double du = (double)st->n_cases * n * st->n_dof + (double)st->n_combinations * st->n_ties * n;
    return (2.0 * du + whole * n * n) * sizeof(double) + /* twice: the choice of sections has its own */
           bar_rows * sizeof(sct_need) + sct_descent_bytes(n, m, at_once);
}

const sct_nlp *sct_problem_nlp(const sct_problem *P)
{
    return &P->nlp;
}

double sct_problem_mass_unit(const sct_problem *P)
{
    return P->mass_unit;
}

void sct_problem_tighten(sct_problem *P, double margin)
{
    P->margin = margin;
    P->have_value = false;
}

void sct_problem_areas(const sct_problem *P, const double x[], double A[])
{
    for (int g = 0; g < P->st->n_groups; g++) {
        const int v = P->st->var_of_group[g];
        A[g] = P->is_fixed[g] ? P->fixed.A[g] : P->plain ? x[v] * P->ref[v] : exp(x[v]);
    }
}

void sct_problem_point(const sct_problem *P, const double A[], double x[])
{
    for (int v = 0; v < P->n; v++) {
        const double s = fmin(fmax(log(A[P->st->group_of_var[v]]), P->lower[v]), P->upper[v]);
        x[v] = P->plain ? exp(s) / P->ref[v] : s;
    }
}

void sct_problem_put(const sct_problem *P, int group, double A, sct_design *design)
{
    const sct_shape shape = sct_curves_shape(&P->curves[group], A);
    design->section[group] = -1;
    design->A[group] = A;
    design->J[group] = sct_curves_properties(&P->curves[group], A).P[SCT_OF_TORSION];
    memcpy(design->i[group], shape.i, sizeof shape.i);
    memcpy(design->W[group], shape.W, sizeof shape.W);
}

double sct_problem_radius(const sct_problem *P, int group, int axis, double A)
{
    const sct_envelope *e = &P->curves[group].i[axis];
    return P->is_fixed[group] ? P->fixed.i[group][axis] : e->n > 0 ? exp(sct_envelope_at(e, log(A)).h) : (double)NAN;
}

void sct_problem_bounds(const sct_problem *P, double lower[], double upper[], sct_bound_source source[])
{
    memcpy(lower, P->lower, (size_t)P->n * sizeof *lower);
    memcpy(upper, P->upper, (size_t)P->n * sizeof *upper);
    memcpy(source, P->source, (size_t)P->n * sizeof *source);
}

/* What one start has learned is not the next one's. */
static void forget(sct_problem *P)
{
    const size_t n = (size_t)P->n, rows = (size_t)(P->nlp.m - P->first_factor);
    memset(P->learned, 0, rows * n * n * sizeof *P->learned);
    P->have_before = false;
}

int sct_problem_scale(sct_problem *P, double x[])
{
    forget(P);
    if (judge(P, x) != SCT_OK) return 1;
    double most = -INFINITY;
    for (int j = 0; j < P->nlp.m; j++) most = fmax(most, P->g[j]);
    for (int v = 0; v < P->n; v++) x[v] = fmin(fmax(x[v] + most, P->lower[v]), P->upper[v]);
    return 1;
}

sct_constraint sct_problem_constraint(const sct_problem *P, int j)
{
    sct_constraint c = {.bar = bar_of(P, j), .row = -1, .bow = -1, .combination = combination_of(P, j)};
    switch (kind_of(P, j)) {
    case BAR_ROW: c.need = P->need[j]; break;
    case DEFLECTION_ROW:
        c.row = j - P->n_bar_rows;
        c.need.kind = SCT_CHECK_DEFLECTION;
        break;
    case BENT_ROW: c.need.kind = sct_bent_check_kind(P->place[j - P->first_bent].kind); break;
    case BOW_ROW:
        c.bow = j - P->first_bow;
        c.bar = -1;
        c.need.kind = SCT_CHECK_BOW;
        break;
    case FACTOR_ROW: c.need.kind = SCT_CHECK_CRITICAL; break;
    case FREQUENCY_ROW: c.need.kind = SCT_CHECK_FREQUENCY; break;
    }
    return c;
}
