/* What must stay the same, or change in a known way, when a model to be sized is told otherwise.
 *
 * Which facts are true. Of a determinate truss without self-weight, heat and settlement the forces do not know the
 * areas and displacements are linear in 1/A. There mass is convex in 1/A and every limit is linear: one optimum,
 * whatever the start, so that loosening, tightening and adding limits have the sign one expects. Of a redundant truss
 * there may be several local optima: there a fact is about the design at hand - that it stays kept, keeps its mass, and
 * stays an optimum when the search starts from it. */
#define _DEFAULT_SOURCE
#include "relations.h"

#include "comma_locale.h"

enum { FEW_MODELS = 12, ONE_OPTIMUM = RM_DETERMINATE | RM_LOADS_ONLY | RM_SIZED, ANY_TRUSS = RM_SIZED };

#define EXACT 0.0
#define OPTIMUM 2e-6 /* of the mass: twice the tolerance that is set */
#define SIZES 1e-4   /* of each area: mass is flat around the optimum, areas follow less closely */

static sct_settings few_starts(void)
{
    sct_settings settings = sct_settings_defaults();
    settings.starts = 2;
    settings.tolerance = 1e-6;
    return settings;
}

static rm_run size_as(const rm_model *m, const rm_style *style, const sct_settings *settings)
{
    const sct_settings few = few_starts();
    char *text = rm_text(m, style);
    const rm_run run = rm_run_text(text, settings != NULL ? settings : &few, true);
    free(text);
    return run;
}

static rm_run size_model(const rm_model *m)
{
    return size_as(m, &(rm_style){0}, NULL);
}

/* Is it an answer, or one of the models that have none? */
static bool has_optimum(const rm_run *run)
{
    return run->r->kept && (run->r->outcome == SCT_OPTIMUM || run->r->outcome == SCT_SECTIONS_FOUND);
}

static double mass_apart(const rm_run *a, const rm_run *b, double factor)
{
    return fabs(b->r->mass / (factor * a->r->mass) - 1.0);
}

/* Largest relative difference of an area; other sections count as far apart. */
static double sizes_apart(const rm_run *a, const rm_run *b, double factor, const int group[])
{
    double most = 0.0;
    for (int g = 0; g < a->r->n_groups; g++) {
        const sct_group_result *p = &a->r->groups[g], *q = &b->r->groups[group != NULL ? group[g] : g];
        most = fmax(most, fabs(q->A / (factor * p->A) - 1.0));
    }
    return most;
}

/* Both models sized: mass by factor_mass, areas by factor_A. What counts is the mass within OPTIMUM and the areas
 * within SIZES: the larger of both parts of what is allowed, in units of OPTIMUM. */
static double optimum_apart(const rm_model *a, const rm_model *b, double factor_mass, double factor_A)
{
    rm_run first = size_model(a), second = size_model(b);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        ck_assert_msg(has_optimum(&second), "seed %d: %s", rm_seed, second.r->verdict);
        off = fmax(mass_apart(&first, &second, factor_mass),
                   sizes_apart(&first, &second, factor_A, NULL) * OPTIMUM / SIZES);
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* By how much the second mass is below the first, which it must not be (0 when it is not). A second model without any
 * design counts as heavier than every mass. */
static double mass_falls(const rm_model *a, const rm_model *b)
{
    rm_run first = size_model(a), second = size_model(b);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) off = second.r->kept ? fmax(0.0, 1.0 - second.r->mass / first.r->mass) : 0.0;
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* The model with the sizes of a result put in and held. */
static rm_model with_sizes(const rm_model *m, const sct_result *r)
{
    rm_model b = *m;
    for (int g = 0; g < m->n_groups; g++) {
        if (r->groups[g].section != NULL) {
            b.group[g].size = RM_SECTION;
            b.group[g].section = atoi(r->groups[g].section + 1);
        } else {
            b.group[g].size = RM_HELD;
            b.group[g].A = r->groups[g].A;
        }
    }
    return b;
}

/* ---- how it is told ------------------------------------------------------------------------------------------------
 */

static char *size_text(const rm_model *m, const rm_style *style, sct_format format)
{
    rm_run run = size_as(m, style, NULL);
    char *text = rm_write(&run, format);
    rm_drop(&run);
    return text;
}

static double bytes_differ(const rm_model *m, const rm_style *a, const rm_style *b, sct_format format)
{
    char *first = size_text(m, a, format), *second = size_text(m, b, format);
    const double off = strcmp(first, second) != 0;
    free(first);
    free(second);
    return off;
}

RELATION(the_order_of_keys_says_nothing, ANY_TRUSS | RM_DEFLECTS, EXACT)
{
    return bytes_differ(m, &(rm_style){0}, &(rm_style){.order = r}, SCT_SCHEDULE_CSV);
}

RELATION(blanks_line_ends_and_the_spelling_of_numbers_say_nothing, ANY_TRUSS | RM_BUCKLES, EXACT)
{
    return bytes_differ(m, &(rm_style){0}, &(rm_style){.blanks = r, .crlf = true, .exponents = true}, SCT_SCHEDULE_CSV);
}

RELATION(a_second_run_gives_the_same_bytes, ANY_TRUSS | RM_LADDERS | RM_DEFLECTS, EXACT)
{
    (void)r;
    return bytes_differ(m, &(rm_style){0}, &(rm_style){0}, SCT_RESULT_JSON);
}

RELATION(a_locale_with_decimal_commas_gives_the_same_bytes, ANY_TRUSS | RM_DEFLECTS, EXACT)
{
    (void)r;
    char *text = rm_text(m, &(rm_style){0}), *first = size_text(m, &(rm_style){0}, SCT_RESULT_JSON);
    double off = 0.0;
    if (comma_locale_set()) {
        const sct_settings settings = few_starts();
        rm_run run = rm_run_text(text, &settings, true);
        char *second = rm_write(&run, SCT_RESULT_JSON);
        off = strcmp(first, second) != 0;
        setlocale(LC_ALL, "C");
        rm_drop(&run);
        free(second);
    } else if (rm_seed == 1) {
        printf("measured: no locale with a decimal comma can be made here: not tried\n");
    }
    free(text);
    free(first);
    return off;
}

static bool watch(const sct_progress *progress, void *user)
{
    *(int *)user += progress->analyses > 0;
    return true;
}

RELATION(an_observer_changes_no_bit, ANY_TRUSS | RM_DEFLECTS, EXACT)
{
    sct_settings settings = few_starts();
    int calls = 0;
    (void)r;
    rm_run alone = size_as(m, &(rm_style){0}, &settings);
    settings.observer = watch;
    settings.user = &calls;
    rm_run watched = size_as(m, &(rm_style){0}, &settings);
    const double off = fmax(mass_apart(&alone, &watched, 1.0), sizes_apart(&alone, &watched, 1.0, NULL));
    ck_assert_int_gt(calls, 0);
    rm_drop(&alone);
    rm_drop(&watched);
    return off;
}

RELATION(the_order_of_a_catalogue_says_nothing, ANY_TRUSS | RM_LADDERS | RM_DEFLECTS, EXACT)
{
    (void)r;
    return bytes_differ(m, &(rm_style){0}, &(rm_style){.reversed = true}, SCT_SCHEDULE_CSV);
}

RELATION(units_keep_the_optimum, ONE_OPTIMUM | RM_DEFLECTS | RM_BUCKLES, OPTIMUM)
{
    const rm_style style = {.units = 1 + rm_below(r, RM_UNIT_SETS - 1)};
    rm_run first = size_model(m), second = size_as(m, &style, NULL);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        ck_assert(has_optimum(&second));
        off = fmax(mass_apart(&first, &second, 1.0), sizes_apart(&first, &second, 1.0, NULL) * OPTIMUM / SIZES);
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(units_keep_the_sections, ONE_OPTIMUM | RM_LADDERS, EXACT)
{
    const rm_style style = {.units = 1 + rm_below(r, RM_UNIT_SETS - 1)};
    rm_run first = size_model(m), second = size_as(m, &style, NULL);
    double off = has_optimum(&first) ? 0.0 : DOES_NOT_APPLY;
    for (int g = 0; g < m->n_groups && off >= 0.0; g++) {
        off = fmax(off, strcmp(first.r->groups[g].section, second.r->groups[g].section) != 0);
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* ---- the design reads back -----------------------------------------------------------------------------------------
 */

/* An area is written as the shortest number that reads back as the same or the next larger one: the last bit may
 * differ. */
static double reads_back(const rm_model *m)
{
    rm_run sized = size_model(m);
    char *text = rm_write(&sized, SCT_MODEL_JSON);
    rm_run checked = rm_run_text(text, NULL, false);
    double off = fmax(mass_apart(&sized, &checked, 1.0), fabs(checked.r->utilisation / sized.r->utilisation - 1.0));
    ck_assert_msg(sized.r->kept == checked.r->kept, "seed %d: %s", rm_seed, checked.r->verdict);
    for (int g = 0; g < m->n_groups; g++) {
        const double A = sized.r->groups[g].A, read = checked.r->groups[g].A;
        ck_assert(read == A || read == nextafter(A, 1e9));
    }
    rm_drop(&sized);
    rm_drop(&checked);
    free(text);
    return off;
}

RELATION(the_sized_model_checks_as_it_was_shown, ANY_TRUSS | RM_DEFLECTS, 1e-14)
{
    (void)r;
    return reads_back(m);
}

RELATION(the_sized_model_with_columns_checks_as_it_was_shown, ANY_TRUSS | RM_BUCKLES, 1e-14)
{
    (void)r;
    return reads_back(m);
}

RELATION(the_sections_picked_check_as_they_were_shown, ANY_TRUSS | RM_LADDERS | RM_DEFLECTS, EXACT)
{
    (void)r;
    return reads_back(m);
}

/* ---- closed forms --------------------------------------------------------------------------------------------------
 */

RELATION(a_determinate_truss_takes_force_over_allowable_stress, ONE_OPTIMUM, OPTIMUM)
{
    double most = 0.0;
    (void)r;
    rm_run run = size_model(m);
    for (int g = 0; g < m->n_groups; g++) {
        double A = m->group[g].A_min;
        for (int e = 0; e < m->n_bars; e++) {
            if (m->bar[e].group != g) continue;
            A = fmax(A, fmax(run.r->members[e].N_max / m->group[g].f_t, -run.r->members[e].N_min / m->group[g].f_c));
        }
        most = fmax(most, fabs(run.r->groups[g].A / A - 1.0));
    }
    ck_assert(has_optimum(&run));
    rm_drop(&run);
    return most;
}

/* Euler with I = c A^2 and safety 2: A = L sqrt(2 |N| / (pi^2 E c)). */
RELATION(a_determinate_truss_takes_Eulers_area, ONE_OPTIMUM | RM_BUCKLES, OPTIMUM)
{
    double most = 0.0;
    (void)r;
    rm_run run = size_model(m);
    for (int g = 0; g < m->n_groups; g++) {
        const rm_group *group = &m->group[g];
        double A = group->A_min;
        for (int e = 0; e < m->n_bars; e++) {
            const sct_member_result *bar = &run.r->members[e];
            const double C = fmax(0.0, -bar->N_min);
            if (m->bar[e].group != g) continue;
            A = fmax(A, fmax(bar->N_max / group->f_t, C / group->f_c));
            A = fmax(A, bar->L / acos(-1.0) * sqrt(2.0 * C / (m->material[group->material].E * group->c)));
        }
        most = fmax(most, fabs(run.r->groups[g].A / A - 1.0));
    }
    ck_assert(has_optimum(&run));
    rm_drop(&run);
    return most;
}

/* One size for all: forces do not know it, displacements are inverse to it, so one analysis tells the optimum. */
RELATION(a_truss_of_one_group_is_scaled_to_its_worst_limit, RM_LOADS_ONLY | RM_SIZED | RM_DEFLECTS, OPTIMUM)
{
    rm_model b = *m, held;
    (void)r;
    for (int e = 0; e < m->n_bars; e++) b.bar[e].group = 0;
    b.n_groups = 1;
    held = b;
    held.group[0].size = RM_HELD;
    held.group[0].A = 1e-3;
    rm_run checked = rm_check(&held), sized = size_model(&b);
    const double A = fmax(b.group[0].A_min, 1e-3 * checked.r->utilisation);
    const double off = fabs(sized.r->groups[0].A / A - 1.0);
    rm_drop(&checked);
    rm_drop(&sized);
    return off;
}

/* Sections of a determinate truss under stress limits are picked group by group: the lightest that keeps them. */
RELATION(each_group_takes_its_lightest_section, ONE_OPTIMUM | RM_LADDERS, EXACT)
{
    double off = 0.0;
    (void)r;
    rm_run run = size_model(m);
    if (!has_optimum(&run)) off = DOES_NOT_APPLY;
    for (int g = 0; g < m->n_groups && off >= 0.0; g++) {
        double need = 0.0, least = INFINITY;
        for (int e = 0; e < m->n_bars; e++) {
            if (m->bar[e].group != g) continue;
            need =
                fmax(need, fmax(run.r->members[e].N_max / m->group[g].f_t, -run.r->members[e].N_min / m->group[g].f_c));
        }
        for (int k = 0; k < m->n_sections; k++) {
            if (m->section[k].A >= need) least = fmin(least, m->section[k].A);
        }
        off = fmax(off, run.r->groups[g].A != least);
    }
    rm_drop(&run);
    return off;
}

RELATION(with_hardly_any_load_the_smallest_sizes_govern, ANY_TRUSS | RM_LOADS_ONLY | RM_DEFLECTS, 1e-8)
{
    rm_model b = *m;
    double most = 0.0;
    (void)r;
    for (int c = 0; c < m->n_cases; c++) rm_scale_case(&b.load_case[c], 1e-4);
    rm_run run = size_model(&b);
    for (int g = 0; g < m->n_groups; g++) most = fmax(most, fabs(run.r->groups[g].A / m->group[g].A_min - 1.0));
    rm_drop(&run);
    return most;
}

RELATION(what_no_size_can_carry_is_said_to_be_infeasible, ONE_OPTIMUM, EXACT)
{
    rm_model b = *m;
    (void)r;
    rm_run run = size_model(m);
    const int g = rm_below(r, m->n_groups);
    const double A = run.r->groups[g].A;
    rm_drop(&run);
    if (!(A > 1.05 * m->group[g].A_min)) return DOES_NOT_APPLY;
    b.group[g].A_max = 0.99 * A;
    run = size_model(&b);
    const double off = run.r->kept || run.r->outcome != SCT_NO_FEASIBLE_DESIGN;
    rm_drop(&run);
    return off;
}

/* ---- one optimum: changes that keep it ------------------------------------------------------------------------------
 */

enum { CONVEX = ONE_OPTIMUM | RM_DEFLECTS };

RELATION(loads_and_strengths_times_k_keep_the_sizes, CONVEX | RM_BUCKLES, OPTIMUM)
{
    const double k = rm_between(r, 0.5, 2.0);
    rm_model b = *m;
    for (int c = 0; c < m->n_cases; c++) rm_scale_case(&b.load_case[c], k);
    for (int p = 0; p < 2; p++) {
        b.material[p].E *= k; /* deflections and columns follow too */
        b.material[p].yield *= k;
    }
    for (int g = 0; g < m->n_groups; g++) {
        b.group[g].f_t *= k;
        b.group[g].f_c *= k;
    }
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(loads_and_sizes_times_k, ONE_OPTIMUM, OPTIMUM)
{
    const double k = rm_between(r, 0.5, 2.0);
    rm_model b = *m;
    for (int c = 0; c < m->n_cases; c++) rm_scale_case(&b.load_case[c], k);
    for (int g = 0; g < m->n_groups; g++) b.group[g].A_min *= k;
    return optimum_apart(m, &b, k, k);
}

RELATION(similar_models_have_similar_designs, CONVEX | RM_BUCKLES, OPTIMUM)
{
    const double k = rm_between(r, 0.5, 2.0);
    rm_model b = *m;
    rm_scale_lengths(&b, k);
    for (int g = 0; g < m->n_groups; g++) {
        b.group[g].A_min *= k * k;
        b.group[g].A_max *= k * k;
    }
    for (int c = 0; c < m->n_cases; c++) {
        for (int j = 0; j < m->n_joints; j++) {
            for (int i = 0; i < 3; i++) b.load_case[c].F[j][i] *= k * k;
        }
    }
    return optimum_apart(m, &b, k * k * k, k * k);
}

RELATION(density_times_k_multiplies_the_mass_only, CONVEX, OPTIMUM)
{
    const double k = rm_between(r, 0.5, 2.0);
    rm_model b = *m;
    for (int p = 0; p < 2; p++) b.material[p].density *= k;
    return optimum_apart(m, &b, k, 1.0);
}

RELATION(a_rotated_model_keeps_its_sizes, CONVEX, OPTIMUM)
{
    double R[9];
    rm_model b = *m;
    rm_rotation(r, m->dim, R);
    rm_turn(&b, R);
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(a_mirrored_model_keeps_its_sizes, CONVEX | RM_BUCKLES, OPTIMUM)
{
    static const double X[9] = {-1, 0, 0, 0, 1, 0, 0, 0, 1};
    rm_model b = *m;
    (void)r;
    rm_turn(&b, X);
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(a_shifted_model_keeps_its_sizes, CONVEX, OPTIMUM)
{
    rm_model b = *m;
    for (int i = 0; i < m->dim; i++) {
        const double by = rm_between(r, -300.0, 300.0);
        for (int j = 0; j < m->n_joints; j++) b.joint[j].at[i] += by;
    }
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(renumbering_keeps_the_sizes, CONVEX, OPTIMUM)
{
    int joint[RM_JOINTS], bar[RM_BARS];
    rm_model b = *m;
    rm_permutation(r, m->n_joints, joint);
    rm_permutation(r, m->n_bars, bar);
    rm_move_joints(&b, joint);
    rm_move_bars(&b, bar);
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(permuted_groups_keep_their_sizes, CONVEX, OPTIMUM)
{
    int group[RM_GROUPS];
    rm_model b = *m;
    rm_permutation(r, m->n_groups, group);
    for (int g = 0; g < m->n_groups; g++) b.group[group[g]] = m->group[g];
    for (int e = 0; e < m->n_bars; e++) b.bar[e].group = group[m->bar[e].group];
    rm_run first = size_model(m), second = size_model(&b);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        ck_assert(has_optimum(&second));
        off = fmax(mass_apart(&first, &second, 1.0), sizes_apart(&first, &second, 1.0, group) * OPTIMUM / SIZES);
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(the_order_of_combinations_keeps_the_sizes, CONVEX | RM_BUCKLES, OPTIMUM)
{
    int perm[RM_SUMS];
    rm_model b = *m;
    rm_permutation(r, m->n_sums, perm);
    for (int k = 0; k < m->n_sums; k++) b.sum[perm[k]] = m->sum[k];
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(a_case_split_in_two_keeps_the_sizes, CONVEX, OPTIMUM)
{
    const double part = rm_between(r, 0.1, 0.9);
    rm_model b = *m;
    b.load_case[3] = m->load_case[2];
    b.n_cases = 4;
    rm_scale_case(&b.load_case[2], part);
    rm_scale_case(&b.load_case[3], 1.0 - part);
    for (int k = 0; k < m->n_sums; k++) b.sum[k].factor[3] = b.sum[k].factor[2];
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(a_combination_of_less_of_everything_changes_nothing, CONVEX, OPTIMUM)
{
    rm_model b = *m;
    const int k = rm_below(r, m->n_sums), l = b.n_sums++;
    b.sum[l] = m->sum[k];
    for (int c = 0; c < m->n_cases; c++) b.sum[l].factor[c] *= rm_seed % 2 == 0 ? 0.6 : 1.0;
    return optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(a_limit_that_is_far_off_may_be_left_out, CONVEX, OPTIMUM)
{
    rm_model b = *m;
    (void)r;
    b.n_limits = 0;
    rm_run run = size_model(m);
    for (int i = 0; i < run.r->n_deflections; i++) {
        if (run.r->deflections[i].utilisation > 0.99) b.limit[b.n_limits++] = m->limit[i];
    }
    rm_drop(&run);
    return b.n_limits == m->n_limits ? DOES_NOT_APPLY : optimum_apart(m, &b, 1.0, 1.0);
}

RELATION(any_start_leads_to_the_optimum, CONVEX | RM_BUCKLES, OPTIMUM)
{
    rm_model b = *m;
    sct_settings settings = few_starts();
    settings.starts = 1;
    for (int g = 0; g < m->n_groups; g++) {
        b.group[g].start = m->group[g].A_min * pow(b.group[g].A_max / b.group[g].A_min, rm_between(r, 0.0, 0.99));
    }
    rm_run first = size_model(m), second = size_as(&b, &(rm_style){0}, &settings);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        ck_assert_msg(has_optimum(&second), "seed %d: %s", rm_seed, second.r->verdict);
        off = fmax(mass_apart(&first, &second, 1.0), sizes_apart(&first, &second, 1.0, NULL) * OPTIMUM / SIZES);
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(every_start_ends_at_the_same_mass, CONVEX, OPTIMUM)
{
    sct_settings settings = few_starts();
    settings.starts = 6;
    settings.seed = (unsigned)rm_below(r, 1000);
    rm_run run = size_as(m, &(rm_style){0}, &settings);
    double off = has_optimum(&run) ? 0.0 : DOES_NOT_APPLY;
    for (int k = 0; k < run.r->n_starts && off >= 0.0; k++) {
        ck_assert_int_eq(run.r->starts[k].outcome, SCT_OPTIMUM);
        off = fmax(off, fabs(run.r->starts[k].mass / run.r->starts[0].mass - 1.0));
    }
    rm_drop(&run);
    return off;
}

RELATION(a_group_held_at_its_optimum_keeps_the_rest, CONVEX, OPTIMUM)
{
    rm_run first = size_model(m);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        rm_model b = *m;
        const int g = rm_below(r, m->n_groups);
        b.group[g].size = RM_HELD;
        b.group[g].A = first.r->groups[g].A;
        rm_run second = size_model(&b);
        ck_assert_msg(has_optimum(&second), "seed %d: %s", rm_seed, second.r->verdict);
        off = fmax(mass_apart(&first, &second, 1.0), sizes_apart(&first, &second, 1.0, NULL) * OPTIMUM / SIZES);
        rm_drop(&second);
    }
    rm_drop(&first);
    return off;
}

RELATION(sizes_within_the_optimum_of_their_bounds_keep_it, CONVEX, OPTIMUM)
{
    rm_run first = size_model(m);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        rm_model b = *m;
        for (int g = 0; g < m->n_groups; g++) {
            const double A = first.r->groups[g].A;
            b.group[g].A_min = fmax(m->group[g].A_min, A * rm_between(r, 0.2, 0.999));
            b.group[g].A_max = A * rm_between(r, 1.001, 5.0);
        }
        off = optimum_apart(m, &b, 1.0, 1.0);
    }
    rm_drop(&first);
    return off;
}

/* ---- one optimum: changes of known sign -----------------------------------------------------------------------------
 */

RELATION(stricter_stresses_never_save_mass, CONVEX, OPTIMUM)
{
    rm_model b = *m;
    const int g = rm_below(r, m->n_groups);
    b.group[g].f_t *= rm_between(r, 0.6, 1.0);
    b.group[g].f_c *= rm_between(r, 0.6, 1.0);
    return mass_falls(m, &b);
}

RELATION(a_stricter_deflection_never_saves_mass, CONVEX, OPTIMUM)
{
    rm_model b = *m;
    if (m->n_limits == 0) return DOES_NOT_APPLY;
    b.limit[0].at_most *= rm_between(r, 0.5, 1.0);
    return mass_falls(m, &b);
}

RELATION(one_more_limit_never_saves_mass, CONVEX, OPTIMUM)
{
    rm_model a = *m;
    (void)r;
    if (m->n_limits == 0) return DOES_NOT_APPLY;
    a.n_limits--;
    return mass_falls(&a, m);
}

RELATION(one_more_combination_never_saves_mass, CONVEX | RM_BUCKLES, OPTIMUM)
{
    rm_model b = *m;
    b.sum[b.n_sums++] = (rm_sum){{rm_between(r, -1, 1), rm_between(r, -1, 1), rm_between(r, -1, 1)}};
    return mass_falls(m, &b);
}

RELATION(larger_smallest_sizes_never_save_mass, CONVEX, OPTIMUM)
{
    rm_model b = *m;
    b.group[rm_below(r, m->n_groups)].A_min *= rm_between(r, 1.0, 20.0);
    return mass_falls(m, &b);
}

RELATION(linked_groups_never_save_mass, CONVEX, OPTIMUM)
{
    rm_model a = *m, b;
    const int last = m->n_groups - 1;
    (void)r;
    a.group[0] = a.group[last]; /* same material and limits: linking is all that differs */
    b = a;
    for (int e = 0; e < m->n_bars; e++) {
        if (b.bar[e].group == last) b.bar[e].group = 0;
    }
    b.n_groups = last;
    return mass_falls(&a, &b);
}

RELATION(worse_columns_never_save_mass, CONVEX | RM_BUCKLES, OPTIMUM)
{
    rm_model b = *m;
    b.group[rm_below(r, m->n_groups)].c *= rm_between(r, 0.2, 1.0);
    return mass_falls(m, &b);
}

RELATION(one_more_section_never_adds_mass, ONE_OPTIMUM | RM_LADDERS, EXACT)
{
    rm_model b = *m;
    const double A = 1e-4 * pow(10.0, rm_between(r, 0.0, 2.0));
    b.section[b.n_sections++] = (rm_section){A, A * A};
    rm_run first = size_model(m), second = size_model(&b);
    const double off = has_optimum(&first) ? !second.r->kept || second.r->mass > first.r->mass : DOES_NOT_APPLY;
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* The least mass is a convex function of a deflection limit: no relief saves more than its price says. */
RELATION(no_relief_saves_more_than_its_price, CONVEX, OPTIMUM)
{
    double off = DOES_NOT_APPLY;
    rm_run first = size_model(m);
    for (int i = 0; i < first.r->n_prices && has_optimum(&first); i++) {
        const sct_price *price = &first.r->prices[i];
        if (price->limit < 0) continue;
        rm_model b = *m;
        const double by = rm_between(r, -0.1, 0.2) * m->limit[price->limit].at_most;
        b.limit[price->limit].at_most += by;
        rm_run second = size_model(&b);
        const double least = first.r->mass - price->per_unit * by;
        if (second.r->kept) off = fmax(off, fmax(0.0, (least - second.r->mass) / first.r->mass));
        rm_drop(&second);
    }
    rm_drop(&first);
    return off;
}

RELATION(no_size_of_an_optimum_can_be_taken_down, CONVEX | RM_BUCKLES, EXACT)
{
    rm_run first = size_model(m);
    double off = DOES_NOT_APPLY;
    (void)r;
    for (int g = 0; g < m->n_groups && has_optimum(&first); g++) {
        rm_model b = with_sizes(m, first.r);
        if (!(b.group[g].A > 1.002 * m->group[g].A_min)) continue;
        b.group[g].A *= 0.999;
        rm_run second = rm_check(&b);
        off = fmax(off, second.r->kept);
        rm_drop(&second);
    }
    rm_drop(&first);
    return off;
}

/* ---- any truss: the design at hand ----------------------------------------------------------------------------------
 */

enum { REDUNDANT = RM_SIZED | RM_DEFLECTS | RM_NO_WEIGHT };

/* The design of `m` checked as the design of the transformed model `b`: kept, same mass, same utilisation. */
static double design_apart(const rm_model *m, const rm_model *b, double factor_mass, double factor_A)
{
    rm_run sized = size_model(m);
    double off = DOES_NOT_APPLY;
    if (sized.r->kept) {
        rm_model held = with_sizes(b, sized.r);
        for (int g = 0; g < m->n_groups; g++) held.group[g].A *= factor_A;
        rm_run checked = rm_check(&held);
        off =
            fmax(mass_apart(&sized, &checked, factor_mass), fabs(checked.r->utilisation / sized.r->utilisation - 1.0));
        if (sized.r->utilisation < 1.0 - 1e-10) ck_assert(checked.r->kept);
        rm_drop(&checked);
    }
    rm_drop(&sized);
    return off;
}

RELATION(a_design_stays_kept_when_the_model_turns, REDUNDANT, 1e-9)
{
    double R[9];
    rm_model b = *m;
    rm_rotation(r, m->dim, R);
    rm_turn(&b, R);
    return design_apart(m, &b, 1.0, 1.0);
}

RELATION(a_design_stays_kept_when_the_model_is_renumbered, RM_SIZED | RM_DEFLECTS | RM_BUCKLES, 1e-9)
{
    int joint[RM_JOINTS], bar[RM_BARS];
    rm_model b = *m;
    rm_permutation(r, m->n_joints, joint);
    rm_permutation(r, m->n_bars, bar);
    rm_move_joints(&b, joint);
    rm_move_bars(&b, bar);
    return design_apart(m, &b, 1.0, 1.0);
}

RELATION(sections_stay_kept_when_the_model_is_mirrored, RM_SIZED | RM_LADDERS | RM_DEFLECTS, EXACT)
{
    static const double X[9] = {-1, 0, 0, 0, 1, 0, 0, 0, 1};
    rm_model b = *m;
    (void)r;
    rm_turn(&b, X);
    return design_apart(m, &b, 1.0, 1.0);
}

RELATION(a_design_scales_with_a_similar_model, REDUNDANT | RM_LOADS_ONLY | RM_BUCKLES, 1e-9)
{
    const double k = rm_between(r, 0.5, 2.0);
    rm_model b = *m;
    rm_scale_lengths(&b, k);
    for (int c = 0; c < m->n_cases; c++) {
        for (int j = 0; j < m->n_joints; j++) {
            for (int i = 0; i < 3; i++) b.load_case[c].F[j][i] *= k * k;
        }
    }
    return design_apart(m, &b, k * k * k, k * k);
}

/* Under loads alone all stresses and displacements are inverse to a common factor on the areas. */
RELATION(a_design_cannot_be_scaled_down, RM_SIZED | RM_LOADS_ONLY | RM_DEFLECTS, EXACT)
{
    rm_run first = size_model(m);
    double off = DOES_NOT_APPLY;
    (void)r;
    if (has_optimum(&first)) {
        rm_model b = with_sizes(m, first.r);
        bool at_bounds = true;
        for (int g = 0; g < m->n_groups; g++) {
            at_bounds = at_bounds && b.group[g].A <= m->group[g].A_min * 1.001;
            b.group[g].A *= 1.0 - 1e-5;
        }
        rm_run second = rm_check(&b);
        /* each area at its lower bound, or a limit that is missed at once */
        off = at_bounds ? 0.0 : second.r->kept && first.r->utilisation > 1.0 - 1e-6;
        rm_drop(&second);
    }
    rm_drop(&first);
    return off;
}

/* Starting there, the search of the transformed model must stay: an optimum is one in any frame. */
static double optimum_moves(const rm_model *m, const rm_model *b, double factor_mass)
{
    rm_run first = size_model(m);
    double off = DOES_NOT_APPLY;
    if (has_optimum(&first)) {
        sct_settings settings = few_starts();
        settings.starts = 1;
        rm_model from = *b;
        for (int g = 0; g < m->n_groups; g++) {
            from.group[g].start = fmin(fmax(first.r->groups[g].A, b->group[g].A_min), b->group[g].A_max);
        }
        rm_run second = size_as(&from, &(rm_style){0}, &settings);
        ck_assert_msg(has_optimum(&second), "seed %d: %s", rm_seed, second.r->verdict);
        off = mass_apart(&first, &second, factor_mass);
        rm_drop(&second);
    }
    rm_drop(&first);
    return off;
}

RELATION(an_optimum_is_one_from_itself, REDUNDANT, OPTIMUM)
{
    (void)r;
    return optimum_moves(m, m, 1.0);
}

RELATION(an_optimum_is_one_when_the_model_turns, REDUNDANT, OPTIMUM)
{
    double R[9];
    rm_model b = *m;
    rm_rotation(r, m->dim, R);
    rm_turn(&b, R);
    return optimum_moves(m, &b, 1.0);
}

RELATION(an_optimum_is_one_with_other_numbers, RM_SIZED | RM_DEFLECTS | RM_BUCKLES, OPTIMUM)
{
    int joint[RM_JOINTS], bar[RM_BARS];
    rm_model b = *m;
    rm_permutation(r, m->n_joints, joint);
    rm_permutation(r, m->n_bars, bar);
    rm_move_joints(&b, joint);
    rm_move_bars(&b, bar);
    return optimum_moves(m, &b, 1.0);
}

RELATION(more_starts_never_add_mass, RM_SIZED | RM_DEFLECTS, OPTIMUM)
{
    sct_settings settings = few_starts();
    (void)r;
    rm_run few = size_as(m, &(rm_style){0}, &settings);
    settings.starts = 5;
    rm_run many = size_as(m, &(rm_style){0}, &settings);
    const double off = has_optimum(&few) ? fmax(0.0, many.r->mass / few.r->mass - 1.0) : DOES_NOT_APPLY;
    rm_drop(&few);
    rm_drop(&many);
    return off;
}

/* ---- found by the relations
 * ------------------------------------------------------------------------------------------ */

/* A deflection depends on a held group and on two that are sized, of which one relieves and one strains it: growing
 * both did not lead back below the limit, and the optimum was called infeasible. */
START_TEST(an_optimum_beside_a_held_group_ends_below_its_limits)
{
    rm_model m = rm_random(CONVEX, 25);
    rm_run first = size_model(&m);
    m.group[0].size = RM_HELD;
    m.group[0].A = first.r->groups[0].A;
    rm_run second = size_model(&m);
    ck_assert(second.r->kept);
    ck_assert_int_eq(second.r->outcome, SCT_OPTIMUM);
    ck_assert_double_le(second.r->utilisation, 1.0);
    rm_drop(&first);
    rm_drop(&second);
}
END_TEST

/* ---- the suite ------------------------------------------------------------------------------------------------------
 */

int main(void)
{
    Suite *suite = suite_create("metamorphic sizing");
    TCase *tests = tcase_create("relations");
    tcase_set_timeout(tests, 600);
    open_relations();
    comma_locale_make();
    tcase_add_test(tests, the_order_of_keys_says_nothing);
    tcase_add_test(tests, blanks_line_ends_and_the_spelling_of_numbers_say_nothing);
    tcase_add_test(tests, a_second_run_gives_the_same_bytes);
    tcase_add_test(tests, a_locale_with_decimal_commas_gives_the_same_bytes);
    tcase_add_test(tests, an_observer_changes_no_bit);
    tcase_add_test(tests, the_order_of_a_catalogue_says_nothing);
    tcase_add_test(tests, units_keep_the_optimum);
    tcase_add_test(tests, units_keep_the_sections);
    tcase_add_test(tests, the_sized_model_checks_as_it_was_shown);
    tcase_add_test(tests, the_sized_model_with_columns_checks_as_it_was_shown);
    tcase_add_test(tests, the_sections_picked_check_as_they_were_shown);
    tcase_add_test(tests, a_determinate_truss_takes_force_over_allowable_stress);
    tcase_add_test(tests, a_determinate_truss_takes_Eulers_area);
    tcase_add_test(tests, a_truss_of_one_group_is_scaled_to_its_worst_limit);
    tcase_add_test(tests, each_group_takes_its_lightest_section);
    tcase_add_test(tests, with_hardly_any_load_the_smallest_sizes_govern);
    tcase_add_test(tests, what_no_size_can_carry_is_said_to_be_infeasible);
    tcase_add_test(tests, loads_and_strengths_times_k_keep_the_sizes);
    tcase_add_test(tests, loads_and_sizes_times_k);
    tcase_add_test(tests, similar_models_have_similar_designs);
    tcase_add_test(tests, density_times_k_multiplies_the_mass_only);
    tcase_add_test(tests, a_rotated_model_keeps_its_sizes);
    tcase_add_test(tests, a_mirrored_model_keeps_its_sizes);
    tcase_add_test(tests, a_shifted_model_keeps_its_sizes);
    tcase_add_test(tests, renumbering_keeps_the_sizes);
    tcase_add_test(tests, permuted_groups_keep_their_sizes);
    tcase_add_test(tests, the_order_of_combinations_keeps_the_sizes);
    tcase_add_test(tests, a_case_split_in_two_keeps_the_sizes);
    tcase_add_test(tests, a_combination_of_less_of_everything_changes_nothing);
    tcase_add_test(tests, a_limit_that_is_far_off_may_be_left_out);
    tcase_add_test(tests, any_start_leads_to_the_optimum);
    tcase_add_test(tests, every_start_ends_at_the_same_mass);
    tcase_add_test(tests, a_group_held_at_its_optimum_keeps_the_rest);
    tcase_add_test(tests, sizes_within_the_optimum_of_their_bounds_keep_it);
    tcase_add_test(tests, stricter_stresses_never_save_mass);
    tcase_add_test(tests, a_stricter_deflection_never_saves_mass);
    tcase_add_test(tests, one_more_limit_never_saves_mass);
    tcase_add_test(tests, one_more_combination_never_saves_mass);
    tcase_add_test(tests, larger_smallest_sizes_never_save_mass);
    tcase_add_test(tests, linked_groups_never_save_mass);
    tcase_add_test(tests, worse_columns_never_save_mass);
    tcase_add_test(tests, one_more_section_never_adds_mass);
    tcase_add_test(tests, no_relief_saves_more_than_its_price);
    tcase_add_test(tests, no_size_of_an_optimum_can_be_taken_down);
    tcase_add_test(tests, a_design_stays_kept_when_the_model_turns);
    tcase_add_test(tests, a_design_stays_kept_when_the_model_is_renumbered);
    tcase_add_test(tests, sections_stay_kept_when_the_model_is_mirrored);
    tcase_add_test(tests, a_design_scales_with_a_similar_model);
    tcase_add_test(tests, a_design_cannot_be_scaled_down);
    tcase_add_test(tests, an_optimum_is_one_from_itself);
    tcase_add_test(tests, an_optimum_is_one_when_the_model_turns);
    tcase_add_test(tests, an_optimum_is_one_with_other_numbers);
    tcase_add_test(tests, more_starts_never_add_mass);
    tcase_add_test(tests, an_optimum_beside_a_held_group_ends_below_its_limits);
    suite_add_tcase(suite, tests);
    const int code = run_suite(suite);
    comma_locale_drop();
    tell_relations("sizing");
    return code;
}
