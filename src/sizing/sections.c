/* The choice of sections from ladders. */
#include "sections.h"

#include <math.h>
#include <stdlib.h>
#include <string.h>

#include "analysis/sensitivity.h"

typedef struct search {
    sct_duty *duty;
    const sct_structure *st;
    const sct_model *model;
    sct_arena *arena;
    int budget; /* analyses left */
    bool (*more)(double mass, void *user);
    void *user;
    sct_design trial, at, best; /* at: where the descent stands; best: kept design of least mass, or of least
                                 * utilisation while none is kept */
    bool have_best;
    sct_pick pick;              /* of `best` */
    double *du, *d, *part;      /* sensitivities at the design at hand */
    double *slope;              /* n_rows x n_groups of u per ln A */
    double whole, *whole_slope; /* ln(limit / value) of the whole at the design at hand, its derivative by ln size */
    bool *bends;                /* n_groups: some member is a beam */
    double slack;               /* utilisation that frozen forces may overestimate: forces of redundant bars move */
} search;

/* A change of up to two groups. */
typedef struct move {
    double saving; /* [kg] */
    int group[2], section[2];
} move;

static bool is_ladder(const search *S, int g)
{
    return S->model->groups[g].kind == SCT_LADDER;
}

static const sct_section *section_at(const search *S, int g, int k)
{
    return &S->model->families[S->model->groups[g].family].sections[S->model->groups[g].ladder[k]];
}

/* Place of a design's section in its ladder. */
static int rung_of(const search *S, int g, const sct_design *d)
{
    int k = 0;
    while (S->model->groups[g].ladder[k] != d->section[g]) k++;
    return k;
}

static double group_utilisation(const search *S, int g, int k)
{
    const sct_section *x = section_at(S, g, k);
    const sct_shape shape = {.A = x->A, .i = {sqrt(x->I[0] / x->A), sqrt(x->I[1] / x->A)}, .W = {x->W[0], x->W[1]}};
    double most = 0.0;
    for (int bar = 0; bar < S->st->n_bars; bar++)
        if (S->st->bars[bar].group == g) most = sct_worse(most, sct_duty_bar_utilisation(S->duty, bar, &shape));
    for (int r = 0; r < S->duty->n_bows; r++)
        if (S->st->bars[S->duty->bows[r].bar].group == g)
            most = sct_worse(most, sct_duty_bow_utilisation(S->duty, r, &shape));
    return most;
}

static void put(const search *S, int g, int k, sct_design *d)
{
    sct_design_section(S->model, g, S->model->groups[g].ladder[k], d);
}

/* The lightest rung that keeps every bar check at the forces of the latest analysis; the least worked one when none
 * does. Rungs below `from` are passed over. */
static int lightest_passing(const search *S, int g, int from)
{
    double least = INFINITY;
    int best = S->model->groups[g].n_ladder - 1;
    for (int k = from; k < S->model->groups[g].n_ladder; k++) {
        const double u = group_utilisation(S, g, k);
        if (sct_keeps(u)) return k;
        if (u < least) {
            least = u;
            best = k;
        }
    }
    return best;
}

/* Analyses the trial and keeps it when it is the best so far. */
static sct_status judge(search *S, double *utilisation)
{
    S->budget--;
    const sct_status status = sct_duty_analyse(S->duty, &S->trial);
    *utilisation = INFINITY;
    if (status == SCT_MECHANISM || status == SCT_NOT_ACCURATE) return SCT_OK; /* no design to accept */
    if (status != SCT_OK) return status;
    *utilisation = sct_duty_utilisation(S->duty, &S->trial);
    const sct_pick pick = {sct_keeps(*utilisation), *utilisation, sct_duty_mass(S->duty, &S->trial)};
    const bool better =
        !S->have_best || (pick.kept && !S->pick.kept) ||
        (pick.kept == S->pick.kept && (pick.kept ? pick.mass < S->pick.mass : pick.utilisation < S->pick.utilisation));
    if (better) {
        S->have_best = true;
        S->pick = pick;
        sct_design_copy(S->st->n_groups, &S->trial, &S->best);
    }
    return SCT_OK;
}

static bool may_go_on(const search *S)
{
    return S->budget > 0 && (S->more == NULL || S->more(S->have_best && S->pick.kept ? S->pick.mass : NAN, S->user));
}

/* Lightest passing section of each group at the forces of the present sizes, until nothing changes. */
static sct_status frozen_rounds(search *S)
{
    enum { MOST_ROUNDS = 10 };
    sct_status status = sct_duty_analyse(S->duty, &S->trial);
    S->budget--;
    for (int round = 0; status == SCT_OK && round < MOST_ROUNDS && (round == 0 || may_go_on(S)); round++) {
        bool changed = false;
        for (int g = 0; g < S->st->n_groups; g++) {
            if (!is_ladder(S, g)) continue;
            const int before = S->trial.section[g];
            put(S, g, lightest_passing(S, g, 0), &S->trial);
            changed |= S->trial.section[g] != before;
        }
        if (!changed) break;
        double u;
        status = judge(S, &u);
    }
    return status;
}

/* Each group's continuous area rounded up, and up further while a bar check fails at the forces at hand. */
static sct_status round_up(search *S, const sct_design *continuous)
{
    sct_design_copy(S->st->n_groups, continuous, &S->trial);
    sct_status status = sct_duty_analyse(S->duty, &S->trial);
    S->budget--;
    if (status != SCT_OK) return status;
    for (int g = 0; g < S->st->n_groups; g++) {
        if (!is_ladder(S, g)) continue;
        int k = 0;
        while (k + 1 < S->model->groups[g].n_ladder && section_at(S, g, k)->A < continuous->A[g] * (1.0 - 1e-9)) k++;
        put(S, g, lightest_passing(S, g, k), &S->trial);
    }
    double u;
    return judge(S, &u);
}

/* Derivatives of the deflections that matter with respect to ln A of every group, at the trial analysed last. */
static sct_status find_slopes(search *S)
{
    const sct_structure *st = S->st;
    sct_status status = sct_sensitivity_direct(S->duty->solver, &S->duty->response, S->du);
    S->whole = -INFINITY;
    if (status == SCT_OK && sct_whole_is_limited(S->model))
        status = sct_whole_worst_limit(S->duty->whole, S->duty->solver, &S->duty->response, &S->whole, S->whole_slope);
    if (status != SCT_OK) return status;
    sct_slack_derive(S->duty->slack, S->duty->solver, &S->duty->response, S->du);
    const sct_form_source source = {S->duty->solver, &S->duty->response, S->du, S->duty->slack, S->part};
    for (int r = 0; r < S->duty->n_rows; r++) {
        double *slope = S->slope + (size_t)r * (size_t)st->n_groups;
        memset(slope, 0, (size_t)st->n_groups * sizeof *slope);
        if (sct_duty_row_utilisation(S->duty, r) < 0.7) continue; /* no single or paired change undoes 0.7 */
        sct_form form = sct_duty_deflection_form(S->duty, r);
        form.n_joints = 1; /* of a relative limit the base is taken to stay: this only screens */
        sct_form_gradient(&form, &source, S->d);
        for (int v = 0; v < st->n_vars; v++) slope[st->group_of_var[v]] = S->d[v];
    }
    return SCT_OK;
}

/* What the stiffness of a group goes with: E I where its members bend, else E A. */
static double stiffness_before(const search *S, int g)
{
    const double A = S->trial.A[g], i = S->trial.i[g][SCT_IN_PLANE];
    return S->bends[g] ? i * i * A : A;
}

static double stiffness_after(const search *S, int g, int k)
{
    return S->bends[g] ? section_at(S, g, k)->I[SCT_IN_PLANE] : section_at(S, g, k)->A;
}

/* Largest utilisation of deflections and of limits on the whole after a move, the former linear in 1/stiffness: exact
 * for a determinate truss but for self-weight.
 */
static double deflection_after(const search *S, const move *m)
{
    double most = 0.0;
    for (int r = 0; r < S->duty->n_rows; r++) {
        double u = S->duty->u[r];
        for (int k = 0; k < 2; k++) {
            const int g = m->group[k];
            if (g < 0) continue;
            u += S->slope[(size_t)r * (size_t)S->st->n_groups + (size_t)g] *
                 (1.0 - stiffness_before(S, g) / stiffness_after(S, g, m->section[k]));
        }
        most = sct_worse(most, fabs(u) / S->model->deflections[S->duty->rows[r].limit].at_most);
    }
    double whole = S->whole;
    for (int k = 0; k < 2 && whole > -INFINITY; k++) {
        const int g = m->group[k];
        if (g < 0) continue;
        whole +=
            S->whole_slope[S->st->var_of_group[g]] * log(stiffness_after(S, g, m->section[k]) / stiffness_before(S, g));
    }
    return sct_worse(most, exp(whole));
}

/* Raises sections until every limit is kept: each time the single step that does most for the worst limit per kg. */
static sct_status repair(search *S, double *utilisation)
{
    enum { LOOK_UP = 4 };
    while (!sct_keeps(*utilisation) && may_go_on(S)) {
        sct_status status = find_slopes(S);
        if (status != SCT_OK) return status;
        int best_g = -1, best_k = -1;
        double best_gain = 0.0;
        const move none = {0.0, {-1, -1}, {0, 0}};
        const double before = deflection_after(S, &none);
        for (int g = 0; g < S->st->n_groups; g++) {
            if (!is_ladder(S, g)) continue;
            const int now = rung_of(S, g, &S->trial);
            const double strained = fmax(group_utilisation(S, g, now) - 1.0, 0.0);
            for (int k = now + 1; k < S->model->groups[g].n_ladder && k <= now + LOOK_UP; k++) {
                const double more = S->duty->unit_mass[g] * (section_at(S, g, k)->A - S->trial.A[g]);
                const move m = {0.0, {g, -1}, {k, 0}};
                const double eased = fmax(before - 1.0, 0.0) - fmax(deflection_after(S, &m) - 1.0, 0.0) + strained -
                                     fmax(group_utilisation(S, g, k) - 1.0, 0.0);
                const double gain = eased / fmax(more, 1e-9 * S->duty->unit_mass[g] * S->trial.A[g]);
                if (eased > 0.0 && gain > best_gain) {
                    best_gain = gain;
                    best_g = g;
                    best_k = k;
                }
            }
        }
        if (best_g < 0) break; /* nothing heavier helps */
        put(S, best_g, best_k, &S->trial);
        status = judge(S, utilisation);
        if (status != SCT_OK) return status;
    }
    return SCT_OK;
}

static int by_saving(const void *a, const void *b)
{
    const move *p = a, *q = b;
    if (p->saving != q->saving) return p->saving > q->saving ? -1 : 1;
    for (int k = 0; k < 2; k++) {
        if (p->group[k] != q->group[k]) return p->group[k] - q->group[k];
        if (p->section[k] != q->section[k]) return p->section[k] - q->section[k];
    }
    return 0;
}

enum { REACH = 8, MOST_RUNGS = 2 * REACH };

/* Rungs near the present one whose bar checks pass at the forces at hand: lighter ones, and stiffer heavier ones. */
static int rungs_near(const search *S, int g, int rungs[MOST_RUNGS])
{
    const int now = rung_of(S, g, &S->trial);
    int n = 0;
    for (int k = now - 1, found = 0; k >= 0 && found < REACH; k--)
        if (group_utilisation(S, g, k) <= 1.0 + S->slack) {
            rungs[n++] = k;
            found++;
        }
    for (int k = now + 1, found = 0; k < S->model->groups[g].n_ladder && found < REACH; k++)
        if (group_utilisation(S, g, k) <= 1.0 + S->slack) {
            rungs[n++] = k;
            found++;
        }
    return n;
}

/* All single and paired changes that save mass and are likely to keep every limit, most saving first. */
static int list_moves(search *S, move *moves, int room, int (*rungs)[MOST_RUNGS], int *n_rungs)
{
    int n = 0;
    for (int g = 0; g < S->st->n_groups; g++) n_rungs[g] = is_ladder(S, g) ? rungs_near(S, g, rungs[g]) : 0;
    for (int g = 0; g < S->st->n_groups; g++)
        for (int a = 0; a < n_rungs[g]; a++) {
            const double one = S->duty->unit_mass[g] * (S->trial.A[g] - section_at(S, g, rungs[g][a])->A);
            const move single = {one, {g, -1}, {rungs[g][a], 0}};
            if (one > 0.0 && n < room && deflection_after(S, &single) <= 1.0 + S->slack) moves[n++] = single;
            for (int h = g + 1; h < S->st->n_groups; h++)
                for (int b = 0; b < n_rungs[h]; b++) {
                    const double two = S->duty->unit_mass[h] * (S->trial.A[h] - section_at(S, h, rungs[h][b])->A);
                    const move pair = {one + two, {g, h}, {rungs[g][a], rungs[h][b]}};
                    if (pair.saving > 0.0 && n < room && deflection_after(S, &pair) <= 1.0 + S->slack)
                        moves[n++] = pair;
                }
        }
    qsort(moves, (size_t)n, sizeof *moves, by_saving);
    return n;
}

/* From the trial, which keeps every limit: tries the likely changes, most saving first; goes on from each that holds.
 */
static sct_status descend(search *S)
{
    enum { MOST_TRIES = 30, ROOM = 200000 };
    const int n_groups = S->st->n_groups;
    move *moves = malloc(ROOM * sizeof *moves);
    int(*rungs)[MOST_RUNGS] = calloc((size_t)n_groups, sizeof *rungs),
    *n_rungs = calloc((size_t)n_groups, sizeof *n_rungs);
    sct_status status = moves == NULL || rungs == NULL || n_rungs == NULL ? SCT_NO_MEMORY : SCT_OK;
    bool improved = true;
    sct_design_copy(n_groups, &S->trial, &S->at);
    while (status == SCT_OK && improved && may_go_on(S)) {
        improved = false;
        sct_design_copy(n_groups, &S->at, &S->trial);
        status = sct_duty_analyse(S->duty, &S->trial);
        S->budget--;
        if (status != SCT_OK) break;
        status = find_slopes(S);
        if (status != SCT_OK) break;
        const int n = list_moves(S, moves, ROOM, rungs, n_rungs);
        for (int t = 0; t < n && t < MOST_TRIES && !improved && may_go_on(S); t++) {
            sct_design_copy(n_groups, &S->at, &S->trial);
            for (int k = 0; k < 2; k++)
                if (moves[t].group[k] >= 0) put(S, moves[t].group[k], moves[t].section[k], &S->trial);
            double u;
            status = judge(S, &u);
            if (status != SCT_OK) break;
            improved = sct_keeps(u);
        }
        if (improved) sct_design_copy(n_groups, &S->trial, &S->at);
    }
    free(moves);
    free(rungs);
    free(n_rungs);
    return status;
}

/* One way to a kept design: the trial is mended, then lightened. */
static sct_status mend(search *S)
{
    sct_status status;
    double u = sct_duty_utilisation(S->duty, &S->trial);
    status = repair(S, &u);
    if (status != SCT_OK || !sct_keeps(u)) return status;
    return descend(S);
}

static sct_status run(search *S, const sct_design *continuous)
{
    const size_t n_groups = (size_t)S->st->n_groups, n_vars = (size_t)S->st->n_vars, n_cases = (size_t)S->st->n_cases;
    S->du = sct_arena_array(S->arena, n_cases * n_vars * (size_t)S->st->n_dof, sizeof(double));
    S->d = sct_arena_array(S->arena, n_vars, sizeof(double));
    S->part = sct_arena_array(S->arena, n_vars, sizeof(double));
    S->slope = sct_arena_array(S->arena, (size_t)S->duty->n_rows * n_groups, sizeof(double));
    S->whole_slope = sct_arena_array(S->arena, n_vars, sizeof(double));
    S->bends = sct_arena_array(S->arena, n_groups, sizeof *S->bends);
    sct_design start;
    if (S->du == NULL || S->d == NULL || S->part == NULL || S->slope == NULL || S->whole_slope == NULL ||
        S->bends == NULL || sct_design_new(S->arena, S->st->n_groups, &S->trial) != SCT_OK ||
        sct_design_new(S->arena, S->st->n_groups, &S->best) != SCT_OK ||
        sct_design_new(S->arena, S->st->n_groups, &S->at) != SCT_OK ||
        sct_design_new(S->arena, S->st->n_groups, &start) != SCT_OK)
        return SCT_NO_MEMORY;
    for (int bar = 0; bar < S->st->n_bars; bar++)
        if (S->st->bars[bar].n > 0) S->bends[S->st->bars[bar].group] = true;
    sct_design_copy(S->st->n_groups, continuous, &start);
    int ladders = 0;
    for (int g = 0; g < S->st->n_groups; g++)
        if (is_ladder(S, g)) {
            start.section[g] = -1;
            ladders++;
        }
    if (ladders == 0) return SCT_OK;

    sct_design_copy(S->st->n_groups, &start, &S->trial);
    sct_status status = frozen_rounds(S);
    if (status == SCT_OK) status = mend(S);
    if (status == SCT_OK && may_go_on(S)) status = round_up(S, &start);
    if (status == SCT_OK) status = mend(S);
    return status;
}

sct_status sct_sections_pick(sct_duty *duty, sct_design *design, int most_analyses,
                             bool (*more)(double mass, void *user), void *user, sct_pick *pick)
{
    search S = {
        .duty = duty, .st = duty->st, .model = duty->st->model, .budget = most_analyses, .more = more, .user = user};
    /* members = unknowns: forces follow from statics alone, frozen forces are off by self-weight only; moments move
     * more than forces */
    S.slack = duty->st->n_springs > duty->st->n_bars ? 0.2 : duty->st->n_bars <= duty->st->n_dof ? 0.01 : 0.1;
    S.arena = sct_arena_new();
    if (S.arena == NULL) return SCT_NO_MEMORY;
    sct_status status = run(&S, design);
    if (status == SCT_OK && S.have_best) {
        sct_design_copy(duty->st->n_groups, &S.best, design);
        status = sct_duty_analyse(duty, design);
        *pick = S.pick;
    }
    sct_arena_free(S.arena);
    return status;
}
