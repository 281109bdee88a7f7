/* The two jobs of the library: check given sizes, and find the lightest. */
#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/accuracy.h"
#include "analysis/mechanism.h"
#include "analysis/motion.h"
#include "base/arithmetic.h"
#include "base/memory.h"
#include "base/random.h"
#include "sizing/doubts.h"
#include "sizing/price.h"
#include "sizing/problem.h"
#include "sizing/result.h"
#include "sizing/sections.h"

/* Everything one job holds. */
typedef struct job {
    const sct_model *model;
    sct_settings settings;
    sct_issues *issues;
    sct_structure *st;
    sct_duty *duty;
    sct_arena *arena;
    sct_design design; /* the one that will be shown */
    bool *compressed;  /* members that must keep the slenderness limit of compression */
    bool interrupted;
    /* the descent */
    sct_problem *problem;
    sct_descent *descent;
    double *x, *x_best, *mu, *mu_best, *mu_bound, *mu_bound_best, *A;
    double *lower, *upper; /* ln A */
    sct_bound_source *source;
    sct_start_result *starts;
    int n_starts, best;
    int analyses_before; /* of the start that runs */
} job;

sct_settings sct_settings_defaults(void)
{
    return (sct_settings){.seed = 1, .iterations = 100, .tolerance = 1e-6};
}

const char *sct_settings_fault(const sct_settings *s)
{
    if (s->starts < 0 || s->starts > 1000) return "starts must be between 0 and 1000";
    if (s->iterations < 0 || s->iterations > 100000) return "iterations must be between 0 and 100000";
    if (!(s->tolerance > 0.0 && s->tolerance <= 1e-2)) return "tolerance must be above 0 and at most 0.01";
    if (s->engine < SCT_ENGINE_AUTO || s->engine > SCT_ENGINE_SPARSE) return "no such engine";
    return NULL;
}

static void close_job(job *J)
{
    sct_descent_free(J->descent);
    sct_problem_free(J->problem);
    sct_duty_free(J->duty);
    sct_structure_free(J->st);
    sct_arena_free(J->arena);
}

static void hold_given_sizes(job *J)
{
    for (int g = 0; g < J->model->n_groups; g++) {
        const sct_group *group = &J->model->groups[g];
        if (group->kind == SCT_HELD_SECTION) sct_design_section(J->model, g, group->held, &J->design);
        if (group->kind == SCT_HELD_AREA) sct_design_area(J->model, g, group->A_held, &J->design);
    }
}

/* Before the memory is taken: what the numbers of the factor and of the search need. */
static sct_status check_memory(const job *J, bool is_sizing)
{
    const double MB = 1e6, factor = sct_factor_bytes(sct_solver_factor(J->duty->solver)), most = sct_memory_most();
    const double search = is_sizing ? sct_problem_bytes(J->duty) : 0.0;
    if (factor + search <= most) return SCT_OK;
    if (!isfinite(factor))
        sct_issue_add(
            J->issues, SCT_ERROR, (sct_where){.file = J->model->file},
            "the model is too large: the factor of its stiffness matrix has more entries than can be numbered");
    else
        sct_issue_add(
            J->issues, SCT_ERROR, (sct_where){.file = J->model->file},
            "the model is too large: %d unknowns and %d sized groups need about %.0f MB of memory (%.0f MB for the "
            "factor of the stiffness matrix, %.0f MB for the search); at most %.0f MB may be taken here",
            J->st->n_dof, J->st->n_vars, (factor + search) / MB, factor / MB, search / MB, most / MB);
    return SCT_TOO_LARGE;
}

/* Structure, duty and an empty design; settings checked. */
static sct_status open_job(job *J, const sct_model *model, const sct_settings *settings, bool is_sizing,
                           sct_issues *issues)
{
    *J = (job){.model = model, .issues = issues, .best = -1};
    J->settings = settings != NULL ? *settings : sct_settings_defaults();
    const char *fault = sct_settings_fault(&J->settings);
    if (fault != NULL) {
        sct_issue_add(issues, SCT_ERROR, (sct_where){0}, "settings: %s", fault);
        return SCT_BAD_INPUT;
    }
    fault = sct_arithmetic_fault();
    if (fault != NULL) {
        sct_issue_add(issues, SCT_ERROR, (sct_where){0}, "internal check failed: the arithmetic of this process: %s",
                      fault);
        return SCT_SELF_CHECK;
    }
    sct_status status = sct_structure_build(model, &J->st, issues);
    if (status != SCT_OK) return status;
    J->duty = sct_duty_new(J->st, J->settings.engine, &status);
    if (J->duty == NULL) return status;
    status = check_memory(J, is_sizing && J->st->n_vars > 0);
    if (status != SCT_OK) return status;
    J->arena = sct_arena_new();
    if (J->arena == NULL) return SCT_NO_MEMORY;
    J->compressed = sct_arena_array(J->arena, (size_t)J->st->n_bars, sizeof *J->compressed);
    if (J->compressed == NULL) return SCT_NO_MEMORY;
    status = sct_design_new(J->arena, model->n_groups, &J->design);
    if (status != SCT_OK) return status;
    hold_given_sizes(J);
    sct_doubt_settlements(model, issues);
    sct_doubt_held_slenderness(J->duty, &J->design, issues);
    return SCT_OK;
}

/* Are members so unlike that rounding alone may take the factor away? */
static bool is_badly_mixed(const job *J)
{
    static const double BADLY = 1e-11; /* softest over stiffest: half of the digits of the rest are gone */
    const double *k = sct_solver_stiffnesses(J->duty->solver);
    double most = 0.0, least = INFINITY;
    for (int e = 0; e < J->st->n_springs; e++) {
        const double span = J->st->springs[e].span, compared = k[e] / (span * span);
        most = fmax(most, compared);
        least = fmin(least, compared);
    }
    return most > 0.0 && !(least > BADLY * most);
}

static sct_status refuse_mixture(const job *J)
{
    sct_text words = {0};
    sct_text_add(&words, "the answer cannot be trusted: the stiffness matrix has no factor in numbers; ");
    const int stiffest = sct_stiffness_words(J->st, sct_solver_areas(J->duty->solver), &words);
    const bool told = sct_motion_tell(&words, SCT_ERROR, J->model->members[stiffest].where, J->issues);
    return told ? SCT_NOT_ACCURATE : SCT_NO_MEMORY;
}

/* Looks for mechanisms, then analyses the design, or areas alone: where none is found the solver must succeed. */
static sct_status analyse_sound(job *J, const double A[], const sct_design *design)
{
    sct_status status = sct_mechanism_find(J->duty->solver, A, J->issues);
    if (status != SCT_OK) return status;
    status = design != NULL ? sct_duty_analyse(J->duty, design) : sct_duty_analyse_areas(J->duty, A);
    if (sct_slack_failed(J->duty->slack)) return status;
    if (status != SCT_MECHANISM && status != SCT_NOT_ACCURATE) return status;
    if (is_badly_mixed(J)) return refuse_mixture(J);
    sct_issue_add(J->issues, SCT_ERROR, (sct_where){.file = J->model->file},
                  "internal check failed: the stiffness matrix of a sound structure has no factor (%s)",
                  sct_status_text(status));
    return SCT_SELF_CHECK;
}

/* Why the latest analysis found no slack bars that fit, where that ended the job. */
static void tell_slack(const job *J, sct_status status)
{
    if (J->duty != NULL && (status == SCT_MECHANISM || status == SCT_NOT_ACCURATE))
        sct_slack_tell(J->duty->slack, J->issues);
}

/* Analyses the design afresh, vouches for the numbers, and makes the result. */
static sct_status show(job *J, sct_result **result)
{
    sct_accuracy accuracy;
    sct_status status = analyse_sound(J, J->design.A, &J->design);
    if (status == SCT_OK) status = sct_accuracy_refine(J->duty->solver, &J->duty->response, &accuracy, J->issues);
    if (status == SCT_OK) status = sct_duty_gather(J->duty);
    if (status != SCT_OK) return status;
    status = sct_duty_find_whole(J->duty, SCT_MODES_PROVEN);
    if (status == SCT_MECHANISM || status == SCT_NOT_ACCURATE) {
        sct_issue_add(J->issues, SCT_ERROR, (sct_where){.file = J->model->file},
                      "the critical load factors cannot be found (%s)", sct_status_text(status));
        return SCT_NOT_ACCURATE;
    }
    if (status == SCT_OK) status = sct_result_new(J->duty, &J->design, accuracy, result);
    if (status != SCT_OK) return status;
    (*result)->settings = J->settings;
    sct_doubt_movement(*result, J->issues);
    sct_doubt_sway(*result, J->issues);
    sct_doubt_slack(*result, J->issues);
    return sct_doubts_keep(*result, J->issues);
}

static sct_status refuse_unsized(const job *J)
{
    for (int g = 0; g < J->model->n_groups; g++) {
        const sct_group *group = &J->model->groups[g];
        if (group->kind == SCT_LADDER || group->kind == SCT_FREE_AREA)
            sct_issue_add(
                J->issues, SCT_ERROR, group->where, "the group has no size to check; expected %s (size finds one)",
                group->kind == SCT_LADDER ? "\"section\" with a name of its family" : "\"area\" as one number");
    }
    return J->st->n_vars > 0 ? SCT_BAD_INPUT : SCT_OK;
}

sct_status sct_check(const sct_model *model, const sct_settings *settings, sct_result **result, sct_issues *issues)
{
    job J;
    *result = NULL;
    sct_status status = open_job(&J, model, settings, false, issues);
    if (status == SCT_OK) status = refuse_unsized(&J);
    if (status == SCT_OK) status = show(&J, result);
    tell_slack(&J, status);
    close_job(&J);
    return status;
}

/* ---- the descent from several starts ---------------------------------------------------------------------------- */

static double best_kept_mass(const job *J)
{
    return J->best >= 0 && J->starts[J->best].violation <= J->settings.tolerance ? J->starts[J->best].mass : NAN;
}

static bool tell(job *J, const char *stage, double mass, double violation, double best)
{
    if (J->settings.observer == NULL || J->interrupted) return !J->interrupted;
    const sct_progress progress = {stage,
                                   J->n_starts + (stage[0] == 'd'),
                                   J->settings.starts,
                                   sct_solver_analyses(J->duty->solver),
                                   mass,
                                   violation,
                                   best};
    if (!J->settings.observer(&progress, J->settings.user)) J->interrupted = true;
    return !J->interrupted;
}

static bool tell_descent(const sct_descent_step *step, void *user)
{
    job *J = user;
    return tell(J, "descent", step->f * sct_problem_mass_unit(J->problem), step->violation, best_kept_mass(J));
}

static bool tell_sections(double mass, void *user)
{
    job *J = user;
    return tell(J, "sections", mass, 0.0, mass);
}

/* As many starts as take about a second, by the operations that a descent of a dozen points needs: sensitivities of
 * every case and variable, and dense work on the square of the variables. */
static int default_starts(const job *J)
{
    enum { MOST = 8, POINTS = 12, SOLVE = 4, DENSE = 12 };
    const double AFFORDED = 1.5e9, n = J->st->n_vars;
    const double entries = sct_factor_entries(sct_solver_factor(J->duty->solver));
    const double work = POINTS * (SOLVE * entries * J->st->n_cases * (n + 1.0) + DENSE * n * n * n);
    return (int)fmax(1.0, fmin(MOST, AFFORDED / work));
}

/* Start k: the middle of every range (or the model's own start), everything largest, then seeded random points within a
 * factor of 10 of the middle. */
static void place_start(const job *J, int k, sct_random *random, double x[])
{
    const sct_structure *st = J->st;
    for (int v = 0; v < st->n_vars; v++) {
        const int g = st->group_of_var[v];
        const double given = J->model->groups[g].A_start;
        double s = given > 0.0 ? log(given) : 0.5 * (J->lower[v] + J->upper[v]);
        if (k == 1) s = J->upper[v];
        if (k >= 2) s += log(10.0) * (2.0 * sct_random_unit(random) - 1.0);
        J->A[g] = exp(fmin(fmax(s, J->lower[v]), J->upper[v]));
    }
    sct_problem_point(J->problem, J->A, x);
}

static bool is_better(const job *J, const sct_start_result *a, const sct_start_result *b)
{
    const bool kept_a = a->violation <= J->settings.tolerance, kept_b = b->violation <= J->settings.tolerance;
    if (kept_a != kept_b) return kept_a;
    /* of two within the tolerance the one that is lighter when made strictly feasible */
    return kept_a ? a->mass * (1.0 + a->violation) < b->mass * (1.0 + b->violation) : a->violation < b->violation;
}

/* Constants measured best on 575 runs of 25 problems: see DEVELOPERS.md. */
static sct_descent_settings descent_settings(job *J)
{
    sct_descent_settings settings = sct_descent_defaults();
    settings.max_iterations = J->settings.iterations;
    settings.tol_kkt = settings.tol_violation = J->settings.tolerance;
    settings.eps = J->settings.plain ? 0.6 : log(1.0 / 0.4); /* potential set: from 40 % of a limit */
    settings.move = J->settings.plain ? INFINITY : log(4.0);
    settings.plain = J->settings.plain;
    settings.observer = tell_descent;
    settings.user = J;
    return settings;
}

static sct_status run_start(job *J, int k, sct_random *random)
{
    const sct_nlp *nlp = sct_problem_nlp(J->problem);
    const sct_descent_settings settings = descent_settings(J);
    J->analyses_before = sct_solver_analyses(J->duty->solver);
    place_start(J, k, random, J->x);
    if (!J->settings.plain && J->settings.iterations > 0) sct_problem_scale(J->problem, J->x);
    const sct_descent_info info = sct_descent_run(J->descent, nlp, &settings, J->x, J->mu, J->mu_bound);
    if (info.status != SCT_OK && info.status != SCT_INFEASIBLE && info.status != SCT_NOT_CONVERGED &&
        info.status != SCT_INTERRUPTED)
        return info.status;
    sct_start_result *start = &J->starts[J->n_starts];
    *start = (sct_start_result){
        .mass = info.f * sct_problem_mass_unit(J->problem),
        .violation = info.violation,
        .kkt = info.kkt,
        .iterations = info.iterations,
        .analyses = sct_solver_analyses(J->duty->solver) - J->analyses_before,
        .outcome = info.status == SCT_OK            ? SCT_OPTIMUM
                   : info.status == SCT_INFEASIBLE  ? SCT_NO_FEASIBLE_DESIGN
                   : info.status == SCT_INTERRUPTED ? SCT_STOPPED
                   : J->settings.iterations == 0    ? SCT_NOT_OPTIMISED
                                                    : SCT_STALLED,
    };
    if (J->best < 0 || is_better(J, start, &J->starts[J->best])) {
        J->best = J->n_starts;
        memcpy(J->x_best, J->x, (size_t)nlp->n * sizeof *J->x);
        memcpy(J->mu_best, J->mu, (size_t)nlp->m * sizeof *J->mu);
        memcpy(J->mu_bound_best, J->mu_bound, (size_t)nlp->n * sizeof *J->mu_bound);
    }
    J->n_starts++;
    return SCT_OK;
}

static sct_status run_starts(job *J)
{
    sct_random random = {J->settings.seed};
    sct_status status = SCT_OK;
    J->n_starts = 0;
    J->best = -1;
    for (int k = 0; status == SCT_OK && k < J->settings.starts && !J->interrupted; k++)
        status = run_start(J, k, &random);
    return status;
}

static sct_status open_descent(job *J, const bool is_fixed[], sct_fault why)
{
    sct_descent_free(J->descent);
    sct_problem_free(J->problem);
    J->descent = NULL;
    const sct_status status =
        sct_problem_new(J->duty, J->compressed, is_fixed, &J->design, J->settings.plain, &J->problem, why);
    if (status != SCT_OK) return status;
    const sct_nlp *nlp = sct_problem_nlp(J->problem);
    const size_t n = (size_t)nlp->n, m = (size_t)nlp->m;
    J->descent = sct_descent_new(nlp);
    if (J->descent == NULL) return SCT_NO_MEMORY;
#define ARRAY(what, count) (J->what != NULL || (J->what = sct_arena_array(J->arena, (count), sizeof *J->what)) != NULL)
    const bool ok = ARRAY(x, n) && ARRAY(x_best, n) && ARRAY(mu, m) && ARRAY(mu_best, m) && ARRAY(mu_bound, n) &&
                    ARRAY(mu_bound_best, n) && ARRAY(A, (size_t)J->st->n_groups) && ARRAY(lower, n) &&
                    ARRAY(upper, n) && ARRAY(source, n) && ARRAY(starts, (size_t)J->settings.starts);
#undef ARRAY
    if (!ok) return SCT_NO_MEMORY;
    sct_problem_bounds(J->problem, J->lower, J->upper, J->source);
    return SCT_OK;
}

/* Middle sizes, for judging the topology and the signs of the forces before any size is known. */
static void middle_areas(const job *J, double A[])
{
    for (int g = 0; g < J->model->n_groups; g++) {
        const sct_group *group = &J->model->groups[g];
        if (group->kind == SCT_FREE_AREA)
            A[g] = sqrt(group->A_min * group->A_max);
        else if (group->kind == SCT_LADDER) {
            const sct_section *s = J->model->families[group->family].sections;
            A[g] = sqrt(s[group->ladder[0]].A * s[group->ladder[group->n_ladder - 1]].A);
        } else
            A[g] = J->design.A[g];
    }
}

/* Where statics alone give the forces, the members in compression are known before any size is. */
static void mark_compressed(job *J)
{
    for (int bar = 0; J->st->n_bars == J->st->n_dof && bar < J->st->n_bars; bar++)
        J->compressed[bar] = sct_duty_is_compressed(J->duty, bar);
}

/* Members that are compressed at the latest analysis and too slender for it must keep that limit from now on; true when
 * one joined. Others are left alone: what is compressed here may be a tie at the optimum. */
static bool mark_too_slender(job *J, const double A[])
{
    bool joined = false;
    for (int bar = 0; bar < J->st->n_bars; bar++) {
        const sct_bar_rule *rule = &J->duty->rules[bar];
        const int g = J->st->bars[bar].group;
        if (J->compressed[bar] || !sct_duty_is_compressed(J->duty, bar)) continue;
        for (int axis = 0; axis < 2; axis++) {
            const double lambda = rule->Lcr[axis] / sct_problem_radius(J->problem, g, axis, A[g]);
            if (lambda > rule->slenderness_compression * (1.0 + SCT_KEPT_TO)) joined = J->compressed[bar] = true;
        }
    }
    return joined;
}

/* Descent from every start; again while the optimum compresses members that are too slender for it. */
static sct_status find_optimum(job *J, sct_fault why)
{
    enum { MOST_ROUNDS = 6 };
    for (int round = 0; round < MOST_ROUNDS; round++) {
        sct_status status = open_descent(J, NULL, why);
        if (status == SCT_OK) status = run_starts(J);
        if (status != SCT_OK) return status;
        sct_problem_areas(J->problem, J->x_best, J->A);
        status = sct_problem_analyse(J->problem, J->x_best);
        if (status != SCT_OK || J->interrupted || !mark_too_slender(J, J->A)) return status;
    }
    return SCT_OK;
}

/* ---- from the optimum to the design that is shown -----------------------------------------------------------------
 */

static bool has_kind(const job *J, sct_sizing_kind kind)
{
    for (int g = 0; g < J->model->n_groups; g++)
        if (J->model->groups[g].kind == kind) return true;
    return false;
}

static void take_areas(job *J, const double A[])
{
    for (int v = 0; v < J->st->n_vars; v++) {
        const int g = J->st->group_of_var[v];
        if (J->model->groups[g].kind == SCT_LADDER && J->design.section[g] < 0)
            sct_problem_put(J->problem, g, A[g], &J->design);
        if (J->model->groups[g].kind == SCT_FREE_AREA) sct_design_area(J->model, g, A[g], &J->design);
    }
}

/* Without a search: each ladder group takes the first section that is not lighter than its start. */
static void round_ladders_up(job *J)
{
    for (int g = 0; g < J->model->n_groups; g++) {
        const sct_group *group = &J->model->groups[g];
        if (group->kind != SCT_LADDER) continue;
        const sct_section *s = J->model->families[group->family].sections;
        int k = 0;
        while (k + 1 < group->n_ladder && s[group->ladder[k]].A < J->A[g] * (1.0 - 1e-9)) k++;
        sct_design_section(J->model, g, group->ladder[k], &J->design);
    }
}

/* Free areas are tuned again around the sections that were picked. */
static sct_status tune_free_areas(job *J, sct_fault why)
{
    bool *is_fixed = sct_arena_array(J->arena, (size_t)J->model->n_groups, sizeof *is_fixed);
    if (is_fixed == NULL) return SCT_NO_MEMORY;
    for (int g = 0; g < J->model->n_groups; g++) is_fixed[g] = J->model->groups[g].kind == SCT_LADDER;
    const sct_status status = open_descent(J, is_fixed, why);
    if (status == SCT_INFEASIBLE) return SCT_OK; /* the areas at hand stay */
    if (status != SCT_OK) return status;
    sct_problem_point(J->problem, J->design.A, J->x);
    sct_descent_settings settings = descent_settings(J);
    settings.observer = NULL;
    const sct_descent_info info = sct_descent_run(J->descent, sct_problem_nlp(J->problem), &settings, J->x, NULL, NULL);
    if (info.status == SCT_NO_MEMORY) return SCT_NO_MEMORY;
    if (info.status != SCT_OK) return SCT_OK;
    sct_problem_areas(J->problem, J->x, J->A);
    take_areas(J, J->A);
    return SCT_OK;
}

/* The descent ends within its tolerance of the limits; what is printed keeps them by a margin above the error of its
 * analysis. */
static bool is_strict(double utilisation, double margin)
{
    return utilisation <= 1.0 - 0.1 * margin;
}

/* All free areas grow a little. *over: the utilisation that this ends with. */
static sct_status grow_together(job *J, double margin, double *over)
{
    enum { MOST_ROUNDS = 8 };
    for (int round = 0;; round++) {
        const sct_status status = sct_duty_analyse(J->duty, &J->design);
        if (status != SCT_OK) return status;
        *over = sct_duty_utilisation(J->duty, &J->design);
        if (is_strict(*over, margin) || *over > 1.01 || round == MOST_ROUNDS) return SCT_OK;
        for (int v = 0; v < J->st->n_vars; v++) {
            const int g = J->st->group_of_var[v];
            const sct_group *group = &J->model->groups[g];
            if (group->kind == SCT_FREE_AREA)
                sct_design_area(J->model, g, fmin(J->design.A[g] * (*over + margin), group->A_max), &J->design);
        }
    }
}

/* The descent goes on from the design at hand, below limits that are lower by the margin. */
static sct_status descend_below(job *J, double margin)
{
    sct_descent_settings settings = descent_settings(J);
    settings.tol_violation = 0.1 * margin;
    settings.observer = NULL;
    sct_problem_tighten(J->problem, margin);
    sct_problem_point(J->problem, J->design.A, J->x);
    const sct_descent_info info = sct_descent_run(J->descent, sct_problem_nlp(J->problem), &settings, J->x, NULL, NULL);
    sct_problem_tighten(J->problem, 0.0);
    if (info.status == SCT_NO_MEMORY) return info.status;
    if (info.status != SCT_OK) return SCT_OK; /* the areas at hand stay */
    sct_problem_areas(J->problem, J->x, J->A);
    take_areas(J, J->A);
    return SCT_OK;
}

/* Growing helps unless a limit is about held sizes too, or some sizes relieve it and others strain it. */
static sct_status make_strict(job *J, double margin)
{
    double over;
    sct_status status = grow_together(J, margin, &over);
    if (status == SCT_OK && !is_strict(over, margin) && over <= 1.01) status = descend_below(J, margin);
    return status;
}

static sct_status choose(job *J, sct_pick *pick, sct_fault why)
{
    enum { MOST_ANALYSES = 4000 };
    sct_problem_areas(J->problem, J->x_best, J->A);
    const bool ladders = has_kind(J, SCT_LADDER);
    take_areas(J, J->A);
    sct_status status = SCT_OK;
    if (J->settings.iterations == 0) {
        round_ladders_up(J);
        return SCT_OK;
    }
    if (ladders) {
        status = sct_sections_pick(J->duty, &J->design, MOST_ANALYSES, tell_sections, J, pick);
        if (status == SCT_OK && has_kind(J, SCT_FREE_AREA) && !J->interrupted) status = tune_free_areas(J, why);
    }
    if (status == SCT_OK && has_kind(J, SCT_FREE_AREA)) status = make_strict(J, SCT_KEPT_TO);
    return status;
}

static sct_outcome outcome_of(const job *J, const sct_result *result)
{
    if (J->interrupted) return SCT_STOPPED;
    if (J->settings.iterations == 0) return SCT_NOT_OPTIMISED;
    if (!result->kept) return J->starts[J->best].outcome == SCT_STALLED ? SCT_STALLED : SCT_NO_FEASIBLE_DESIGN;
    if (J->starts[J->best].outcome != SCT_OPTIMUM) return SCT_STALLED;
    return has_kind(J, SCT_LADDER) ? SCT_SECTIONS_FOUND : SCT_OPTIMUM;
}

static bool has_smallest_sizes(const job *J)
{
    for (int g = 0; g < J->model->n_groups; g++) {
        const sct_group *group = &J->model->groups[g];
        if (group->kind == SCT_LADDER && J->design.section[g] != group->ladder[0]) return false;
        if (group->kind == SCT_FREE_AREA && J->design.A[g] > group->A_min * (1.0 + 1e-9)) return false;
    }
    return true;
}

/* What the search adds to the result: how it went, and the prices at the continuous optimum. */
static sct_status tell_search(job *J, const double A_continuous[], const sct_price *prices, int n_prices, sct_result *r)
{
    r->starts = sct_result_array(r, (size_t)J->n_starts, sizeof *r->starts);
    r->prices = sct_result_array(r, (size_t)n_prices, sizeof *r->prices);
    if (r->starts == NULL || r->prices == NULL) return SCT_NO_MEMORY;
    if (n_prices > 0) memcpy(r->prices, prices, (size_t)n_prices * sizeof *prices);
    r->n_prices = n_prices;
    double held = 0.0; /* the descent counts only what it sizes */
    for (int g = 0; g < r->n_groups; g++)
        if (J->st->var_of_group[g] < 0)
            held += r->groups[g].mass;
        else
            r->groups[g].A_continuous = A_continuous[g];
    for (int k = 0; k < J->n_starts; k++) {
        r->starts[k] = J->starts[k];
        r->starts[k].mass += held;
    }
    r->n_starts = J->n_starts;
    r->best_start = J->best;
    r->mass_continuous = r->starts[J->best].mass;
    r->kkt = r->starts[J->best].kkt;
    r->violation = r->starts[J->best].violation;
    r->analyses = sct_solver_analyses(J->duty->solver);
    r->outcome = outcome_of(J, r);
    sct_result_judge(r, has_smallest_sizes(J));
    return SCT_OK;
}

/* The prices need a result to be written into: one of the continuous optimum, made for this and thrown away. */
static sct_status price_optimum(job *J, sct_result **priced)
{
    *priced = NULL;
    if (J->settings.plain || J->starts[J->best].outcome != SCT_OPTIMUM) return SCT_OK; /* multipliers mean nothing */
    double f, *g = sct_arena_array(J->arena, (size_t)sct_problem_nlp(J->problem)->m, sizeof *g);
    if (g == NULL) return SCT_NO_MEMORY;
    sct_status status = sct_problem_nlp(J->problem)->value(J->problem, J->x_best, &f, g);
    if (status != SCT_OK) return status;
    sct_design optimum;
    status = sct_design_new(J->arena, J->model->n_groups, &optimum);
    if (status != SCT_OK) return status;
    sct_design_copy(J->model->n_groups, &J->design, &optimum);
    sct_problem_areas(J->problem, J->x_best, J->A);
    for (int v = 0; v < J->st->n_vars; v++)
        sct_problem_put(J->problem, J->st->group_of_var[v], J->A[J->st->group_of_var[v]], &optimum);
    status = sct_result_new(J->duty, &optimum, (sct_accuracy){0}, priced);
    if (status != SCT_OK) return status;
    (*priced)->mass_continuous = (*priced)->mass;
    return sct_prices(J->problem, J->duty, J->mu_best, J->mu_bound_best, *priced);
}

/* No size of some group keeps its slenderness limit: the largest sizes are shown with the reason. Where the forces
 * depend on the sizes they may keep every limit all the same: then they are shown as a design that was not searched
 * for. */
static sct_status show_infeasible(job *J, const sct_fault why, sct_result **result)
{
    for (int g = 0; g < J->model->n_groups; g++) {
        const sct_group *group = &J->model->groups[g];
        if (group->kind == SCT_LADDER) sct_design_section(J->model, g, group->ladder[group->n_ladder - 1], &J->design);
        if (group->kind == SCT_FREE_AREA) sct_design_area(J->model, g, group->A_max, &J->design);
    }
    const sct_status status = show(J, result);
    if (status != SCT_OK) return status;
    (*result)->outcome = (*result)->kept ? SCT_STALLED : SCT_NO_FEASIBLE_DESIGN;
    if (!(*result)->kept) memcpy((*result)->verdict, why, sizeof(sct_fault));
    return SCT_OK;
}

static sct_status search(job *J, sct_result **result)
{
    sct_fault why = "";
    sct_pick pick = {0};
    sct_result *priced = NULL;
    double *A = sct_arena_array(J->arena, (size_t)J->model->n_groups, sizeof *A);
    if (A == NULL) return SCT_NO_MEMORY;
    middle_areas(J, A);
    sct_status status = analyse_sound(J, A, NULL);
    if (status != SCT_OK) return status;
    mark_compressed(J);
    status = find_optimum(J, why);
    if (status == SCT_INFEASIBLE) return show_infeasible(J, why, result);
    if (status == SCT_OK) status = price_optimum(J, &priced);
    if (status == SCT_OK) sct_problem_areas(J->problem, J->x_best, A);
    if (status == SCT_OK) status = choose(J, &pick, why);
    if (status == SCT_OK) status = show(J, result);
    if (status == SCT_OK && !(*result)->kept && sct_keeps((*result)->utilisation) && has_kind(J, SCT_FREE_AREA)) {
        /* the error alone stands in the way */
        const double margin = 40.0 * ((*result)->utilisation_at_most - (*result)->utilisation) + SCT_KEPT_TO;
        sct_result_free(*result);
        *result = NULL;
        status = make_strict(J, margin);
        if (status == SCT_OK) status = show(J, result);
    }
    if (status == SCT_OK)
        status =
            tell_search(J, A, priced != NULL ? priced->prices : NULL, priced != NULL ? priced->n_prices : 0, *result);
    sct_result_free(priced);
    return status;
}

sct_status sct_size(const sct_model *model, const sct_settings *settings, sct_result **result, sct_issues *issues)
{
    job J;
    *result = NULL;
    sct_status status = open_job(&J, model, settings, true, issues);
    if (status == SCT_OK && J.st->n_vars == 0) {
        sct_issue_add(issues, SCT_NOTE, (sct_where){.file = model->file},
                      "every group is held: nothing to size, checked only");
        status = show(&J, result);
    } else if (status == SCT_OK) {
        if (J.settings.starts == 0) J.settings.starts = default_starts(&J);
        if (J.settings.iterations == 0) J.settings.starts = 1;
        status = search(&J, result);
    }
    if (status != SCT_OK) {
        sct_result_free(*result);
        *result = NULL;
    }
    tell_slack(&J, status);
    close_job(&J);
    return status;
}
