/* What must stay the same, or change in a known way, when a model is told otherwise: forces, displacements, reactions.
 */
#define _DEFAULT_SOURCE
#include "relations.h"

#include <pthread.h>

#include "comma_locale.h"
#include "model/model.h"

enum { FEW_MODELS = 15 };

#define EXACT 0.0
#define CLOSE 1e-11 /* relative; 1e-9 is promised, 1e-14 is seen */

static const double SAME[9] = {1, 0, 0, 0, 1, 0, 0, 0, 1};

/* ---- comparing -------------------------------------------------------------------------------------------------- */

/* How the second result follows from the first: vectors turn by R, displacements and forces grow by ku and kN, things
 * move to joint[], bar[], sum[] (NULL: stay). */
typedef struct change {
    const double *R;
    double ku, kN;
    const int *joint, *bar, *sum;
} change;

static double length_of(const double v[3])
{
    return hypot(hypot(v[0], v[1]), v[2]);
}

/* Largest displacement, and largest force (members, reactions) of a result. */
static double u_scale(const sct_result *r)
{
    double most = 0.0;
    for (int i = 0; i < r->n_combinations * r->n_joints; i++) most = fmax(most, length_of(r->u + 3 * i));
    return most;
}

static double N_scale(const sct_result *r)
{
    const size_t sums = (size_t)r->n_combinations;
    return fmax(rm_largest(sums * (size_t)r->n_members, r->N), rm_largest(sums * (size_t)r->n_joints * 3, r->reaction));
}

/* Compares what both results have: the second may have more joints, bars and combinations behind. */
static double missed(const sct_result *a, const sct_result *b, change c)
{
    const double *R = c.R != NULL ? c.R : SAME;
    const double ku = c.ku != 0.0 ? c.ku : 1.0, kN = c.kN != 0.0 ? c.kN : 1.0;
    const double of_u = u_scale(a) * fabs(ku), of_N = N_scale(a) * fabs(kN);
    double most = 0.0;
    for (int k = 0; k < a->n_combinations; k++) {
        const int l = c.sum != NULL ? c.sum[k] : k;
        for (int j = 0; j < a->n_joints; j++) {
            const int i = c.joint != NULL ? c.joint[j] : j;
            double u[3], reaction[3];
            for (int x = 0; x < 3; x++) {
                u[x] = ku * a->u[(k * a->n_joints + j) * 3 + x];
                reaction[x] = kN * a->reaction[(k * a->n_joints + j) * 3 + x];
            }
            rm_map(R, u);
            rm_map(R, reaction);
            most = fmax(most, rm_apart(3, u, b->u + (l * b->n_joints + i) * 3, of_u));
            most = fmax(most, rm_apart(3, reaction, b->reaction + (l * b->n_joints + i) * 3, of_N));
        }
        for (int e = 0; e < a->n_members; e++) {
            const double N = kN * a->N[k * a->n_members + e];
            const int f = c.bar != NULL ? c.bar[e] : e;
            most = fmax(most, rm_apart(1, &N, b->N + l * b->n_members + f, of_N));
        }
    }
    return most;
}

/* Checks both models and compares. */
static double missed_by(const rm_model *a, const rm_model *b, change c)
{
    rm_run first = rm_check(a), second = rm_check(b);
    const double off = missed(first.r, second.r, c);
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* Checks the model told plainly and told in this style: bits of all numbers. */
static double missed_in_style(const rm_model *m, const rm_style *style)
{
    rm_run first = rm_check(m), second = rm_check_as(m, style);
    double off = missed(first.r, second.r, (change){0});
    for (int e = 0; e < m->n_bars; e++) {
        const sct_member_result *p = &first.r->members[e], *q = &second.r->members[e];
        off = fmax(off, rm_apart(1, &p->utilisation, &q->utilisation, 1.0));
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* All actions of combination `sum` as the only case and the only combination. */
static rm_model one_sum(const rm_model *m, int sum)
{
    rm_model one = *m;
    memset(&one.load_case[0], 0, sizeof one.load_case[0]);
    for (int k = 0; k < m->n_cases; k++) rm_add_case(&one.load_case[0], &m->load_case[k], m->sum[sum].factor[k]);
    one.n_cases = one.n_sums = 1;
    one.sum[0] = (rm_sum){{1.0}};
    return one;
}

static double EA_over_L(const rm_model *m, int e)
{
    double d[3];
    const rm_group *g = &m->group[m->bar[e].group];
    return m->material[g->material].E * g->A / rm_direction(m, m->bar[e].from, m->bar[e].to, d);
}

static double stiffest(const rm_model *m)
{
    double most = 0.0;
    for (int e = 0; e < m->n_bars; e++) most = fmax(most, EA_over_L(m, e));
    return most;
}

/* ---- how the file is written ------------------------------------------------------------------------------------- */

RELATION(the_order_of_keys_says_nothing, RM_DEFLECTS, EXACT)
{
    return missed_in_style(m, &(rm_style){.order = r});
}

RELATION(blanks_say_nothing, RM_DEFLECTS, EXACT)
{
    return missed_in_style(m, &(rm_style){.blanks = r});
}

RELATION(line_ends_say_nothing, RM_DEFLECTS, EXACT)
{
    (void)r;
    return missed_in_style(m, &(rm_style){.crlf = true});
}

RELATION(the_spelling_of_numbers_says_nothing, RM_DEFLECTS, EXACT)
{
    (void)r;
    return missed_in_style(m, &(rm_style){.exponents = true});
}

RELATION(names_say_nothing, RM_DEFLECTS, EXACT)
{
    (void)r;
    return missed_in_style(m, &(rm_style){.joint = "Knoten \xc3\xbc ", .bar = "~", .thing = "a/b "});
}

RELATION(units_change_no_result, RM_DEFLECTS, CLOSE)
{
    double most = 0.0;
    (void)r;
    for (int u = 1; u < RM_UNIT_SETS; u++) most = fmax(most, missed_in_style(m, &(rm_style){.units = u}));
    return most;
}

static char *result_text(const rm_model *m)
{
    rm_run run = rm_check(m);
    char *text = rm_write(&run, SCT_RESULT_JSON);
    rm_drop(&run);
    return text;
}

RELATION(a_second_run_gives_the_same_bytes, RM_DEFLECTS, EXACT)
{
    const rm_model other = rm_random(0, sct_random_bits(r));
    char *first = result_text(m), *between = result_text(&other), *second = result_text(m);
    const double off = strcmp(first, second) != 0;
    free(first);
    free(between);
    free(second);
    return off;
}

static void *result_in_thread(void *model)
{
    return result_text(model);
}

RELATION(two_threads_give_the_same_bytes, RM_DEFLECTS, EXACT)
{
    rm_model both[2] = {*m, rm_random(0, sct_random_bits(r))};
    char *alone[2] = {result_text(&both[0]), result_text(&both[1])};
    pthread_t thread[2];
    double off = 0.0;
    for (int i = 0; i < 2; i++) ck_assert_int_eq(pthread_create(&thread[i], NULL, result_in_thread, &both[i]), 0);
    for (int i = 0; i < 2; i++) {
        void *text;
        pthread_join(thread[i], &text);
        off = fmax(off, strcmp(alone[i], text) != 0);
        free(text);
        free(alone[i]);
    }
    return off;
}

RELATION(a_locale_with_decimal_commas_gives_the_same_bytes, RM_DEFLECTS, EXACT)
{
    (void)r;
    char *text = rm_text(m, &(rm_style){0}), *first = result_text(m);
    if (!comma_locale_set()) {
        if (rm_seed == 1) printf("measured: no locale with a decimal comma can be made here: not tried\n");
        free(text);
        free(first);
        return 0.0;
    }
    rm_run run = rm_run_text(text, NULL, false);
    char *second = rm_write(&run, SCT_RESULT_JSON);
    setlocale(LC_ALL, "C");
    const double off = strcmp(first, second) != 0;
    rm_drop(&run);
    free(text);
    free(first);
    free(second);
    return off;
}

RELATION(a_model_written_back_gives_the_same_bits, RM_DEFLECTS, EXACT)
{
    (void)r;
    rm_run first = rm_check(m);
    char *text = rm_write(&first, SCT_MODEL_JSON);
    rm_run second = rm_run_text(text, NULL, false);
    const double off = fmax(missed(first.r, second.r, (change){0}), first.r->mass != second.r->mass);
    rm_drop(&first);
    rm_drop(&second);
    free(text);
    return off;
}

/* ---- powers of two, signs, mirrors: no rounding changes -----------------------------------------------------------
 */

RELATION(actions_times_a_power_of_two, 0, EXACT)
{
    const double k = ldexp(1.0, rm_below(r, 11) - 5);
    rm_model b = *m;
    for (int c = 0; c < m->n_cases; c++) rm_scale_case(&b.load_case[c], k);
    return missed_by(m, &b, (change){.ku = k, .kN = k});
}

RELATION(actions_reversed, RM_NO_WEIGHT, EXACT)
{
    (void)r;
    rm_model b = *m;
    for (int c = 0; c < m->n_cases; c++) rm_scale_case(&b.load_case[c], -1.0);
    return missed_by(m, &b, (change){.ku = -1.0, .kN = -1.0});
}

RELATION(E_times_and_areas_by_a_power_of_two, 0, EXACT)
{
    const double k = ldexp(1.0, rm_below(r, 4) - 2);
    rm_model b = *m;
    for (int p = 0; p < 2; p++) {
        b.material[p].E *= k;
        b.material[p].density *= k;
    }
    for (int g = 0; g < m->n_groups; g++) b.group[g].A /= k;
    return missed_by(m, &b, (change){0});
}

RELATION(E_times_a_power_of_two_divides_displacements, RM_LOADS_ONLY, EXACT)
{
    const double k = ldexp(1.0, rm_below(r, 5) - 2);
    rm_model b = *m;
    for (int p = 0; p < 2; p++) b.material[p].E *= k;
    return missed_by(m, &b, (change){.ku = 1.0 / k});
}

RELATION(lengths_times_a_power_of_two, RM_NO_WEIGHT, EXACT)
{
    const double k = ldexp(1.0, rm_below(r, 7) - 3);
    rm_model b = *m;
    rm_scale_lengths(&b, k);
    return missed_by(m, &b, (change){.ku = k});
}

RELATION(a_mirrored_model_gives_mirrored_results, 0, EXACT)
{
    static const double X[9] = {-1, 0, 0, 0, 1, 0, 0, 0, 1};
    (void)r;
    rm_model b = *m;
    rm_turn(&b, X);
    return missed_by(m, &b, (change){.R = X});
}

RELATION(a_model_upside_down_gives_results_upside_down, RM_NO_WEIGHT, EXACT)
{
    const double S[9] = {1, 0, 0, 0, m->dim == 2 ? -1 : 1, 0, 0, 0, m->dim == 3 ? -1 : 1};
    (void)r;
    rm_model b = *m;
    rm_turn(&b, S);
    return missed_by(m, &b, (change){.R = S});
}

RELATION(half_a_turn_turns_the_results, RM_NO_WEIGHT, EXACT)
{
    static const double Z[9] = {-1, 0, 0, 0, -1, 0, 0, 0, 1};
    (void)r;
    rm_model b = *m;
    rm_turn(&b, Z);
    return missed_by(m, &b, (change){.R = Z});
}

RELATION(a_shift_by_whole_metres_changes_no_bit, 0, EXACT)
{
    rm_model b = *m;
    for (int i = 0; i < m->dim; i++) {
        const double by = rm_below(r, 90000) - 45000;
        for (int j = 0; j < m->n_joints; j++) b.joint[j].at[i] += by;
    }
    return missed_by(m, &b, (change){0});
}

RELATION(a_case_without_load_changes_no_bit, 0, EXACT)
{
    rm_model b = *m;
    b.n_cases = 4;
    memset(&b.load_case[3], 0, sizeof b.load_case[3]);
    for (int k = 0; k < m->n_sums; k++) b.sum[k].factor[3] = rm_between(r, -1.0, 1.0);
    return missed_by(m, &b, (change){0});
}

RELATION(one_more_combination_changes_no_bit_of_the_others, 0, EXACT)
{
    rm_model b = *m;
    b.sum[b.n_sums++] = (rm_sum){{rm_between(r, 0, 1), rm_between(r, 0, 1), rm_between(r, 0, 1)}};
    return missed_by(m, &b, (change){0});
}

RELATION(the_order_of_combinations_only_orders_the_results, 0, EXACT)
{
    int perm[RM_SUMS];
    rm_model b = *m;
    rm_permutation(r, m->n_sums, perm);
    for (int k = 0; k < m->n_sums; k++) b.sum[perm[k]] = m->sum[k];
    return missed_by(m, &b, (change){.sum = perm});
}

RELATION(a_group_split_in_two_of_the_same_area_changes_no_bit, 0, EXACT)
{
    rm_model b = *m;
    const int g = rm_below(r, m->n_groups);
    int n = 0, moved = 0;
    for (int e = 0; e < m->n_bars; e++) n += m->bar[e].group == g;
    if (n < 2) return DOES_NOT_APPLY;
    b.group[b.n_groups++] = m->group[g];
    for (int e = 0; e < m->n_bars && moved < n / 2; e++) {
        if (m->bar[e].group != g) continue;
        b.bar[e].group = m->n_groups;
        moved++;
    }
    return missed_by(m, &b, (change){0});
}

/* ---- numbering ----------------------------------------------------------------------------------------------------
 */

RELATION(renumbered_joints, 0, CLOSE)
{
    int perm[RM_JOINTS];
    rm_model b = *m;
    rm_permutation(r, m->n_joints, perm);
    rm_move_joints(&b, perm);
    return missed_by(m, &b, (change){.joint = perm});
}

RELATION(permuted_members, 0, CLOSE)
{
    int perm[RM_BARS];
    rm_model b = *m;
    rm_permutation(r, m->n_bars, perm);
    rm_move_bars(&b, perm);
    return missed_by(m, &b, (change){.bar = perm});
}

RELATION(swapped_member_ends, 0, CLOSE)
{
    rm_model b = *m;
    for (int e = 0; e < m->n_bars; e++) {
        if (rm_below(r, 2) == 0) b.bar[e] = (rm_bar){m->bar[e].to, m->bar[e].from, m->bar[e].group};
    }
    return missed_by(m, &b, (change){0});
}

RELATION(permuted_cases, 0, CLOSE)
{
    int perm[RM_CASES];
    rm_model b = *m;
    rm_permutation(r, m->n_cases, perm);
    for (int c = 0; c < m->n_cases; c++) {
        b.load_case[perm[c]] = m->load_case[c];
        for (int k = 0; k < m->n_sums; k++) b.sum[k].factor[perm[c]] = m->sum[k].factor[c];
    }
    return missed_by(m, &b, (change){0});
}

RELATION(both_engines_agree, 0, CLOSE)
{
    char *text = rm_text(m, &(rm_style){0});
    sct_settings settings = sct_settings_defaults();
    (void)r;
    settings.engine = SCT_ENGINE_SMALL;
    rm_run small = rm_run_text(text, &settings, false);
    settings.engine = SCT_ENGINE_SPARSE;
    rm_run sparse = rm_run_text(text, &settings, false);
    const double off = missed(small.r, sparse.r, (change){0});
    rm_drop(&small);
    rm_drop(&sparse);
    free(text);
    return off;
}

/* ---- place and direction ------------------------------------------------------------------------------------------
 */

RELATION(a_shifted_model, 0, CLOSE)
{
    rm_model b = *m;
    for (int i = 0; i < m->dim; i++) {
        const double by = rm_between(r, -200.0, 200.0);
        for (int j = 0; j < m->n_joints; j++) b.joint[j].at[i] += by;
    }
    return missed_by(m, &b, (change){0});
}

/* 1 000 000 m is more than a file may say: put into the model that was read. */
RELATION(a_shift_by_a_million_metres_changes_no_bit, 0, EXACT)
{
    (void)r;
    char *text = rm_text(m, &(rm_style){0});
    rm_run first = rm_run_text(text, NULL, false), second = rm_run_text(text, NULL, false);
    sct_result_free(second.r);
    sct_issues *issues = sct_issues_new();
    for (int j = 0; j < m->n_joints; j++) {
        for (int i = 0; i < m->dim; i++) second.model->joints[j].at[i] += 1e6;
    }
    ck_assert_int_eq(sct_check(second.model, NULL, &second.r, issues), SCT_OK);
    const double off = missed(first.r, second.r, (change){0});
    rm_drop(&first);
    rm_drop(&second);
    sct_issues_free(issues);
    free(text);
    return off;
}

RELATION(a_quarter_turn_turns_the_results, RM_NO_WEIGHT, CLOSE)
{
    static const double Z[9] = {0, -1, 0, 1, 0, 0, 0, 0, 1};
    (void)r;
    rm_model b = *m;
    rm_turn(&b, Z);
    return missed_by(m, &b, (change){.R = Z});
}

RELATION(any_rotation_turns_the_results, RM_NO_WEIGHT, CLOSE)
{
    double R[9];
    rm_model b = *m;
    rm_rotation(r, m->dim, R);
    rm_turn(&b, R);
    return missed_by(m, &b, (change){.R = R});
}

/* x, y of the plane become x, z of space: up stays up. */
RELATION(a_plane_model_in_space_held_sideways, RM_PLANE, CLOSE)
{
    static const double UP[9] = {1, 0, 0, 0, 0, 1, 0, 1, 0};
    (void)r;
    rm_model b = *m;
    rm_turn(&b, UP);
    b.dim = 3;
    for (int j = 0; j < m->n_joints; j++) {
        double *held = b.joint[j].held[b.joint[j].n_held++];
        memcpy(held, (double[3]){0, 1, 0}, 3 * sizeof *held);
    }
    return missed_by(m, &b, (change){.R = UP});
}

RELATION(a_pin_may_be_told_by_any_directions, 0, CLOSE)
{
    rm_model b = *m;
    for (int j = 0; j < m->n_joints; j++) {
        rm_joint *joint = &b.joint[j];
        if (joint->n_held == 1) {
            for (int i = 0; i < 3; i++) joint->held[0][i] *= -1.0;
        }
        if (joint->n_held < m->dim) continue;
        do {
            for (int h = 0; h < m->dim; h++) rm_unit(r, m->dim, joint->held[h]);
        } while (rm_spread(m->dim, joint->held) < 0.2);
    }
    return missed_by(m, &b, (change){0});
}

/* ---- loads and stiffness -------------------------------------------------------------------------------------------
 */

RELATION(actions_times_k, 0, CLOSE)
{
    const double k = rm_between(r, 0.1, 9.0);
    rm_model b = *m;
    for (int c = 0; c < m->n_cases; c++) rm_scale_case(&b.load_case[c], k);
    return missed_by(m, &b, (change){.ku = k, .kN = k});
}

RELATION(factors_times_k, 0, CLOSE)
{
    const double k = rm_between(r, -3.0, 3.0);
    rm_model b = *m;
    for (int s = 0; s < m->n_sums; s++) {
        for (int c = 0; c < m->n_cases; c++) b.sum[s].factor[c] *= k;
    }
    return missed_by(m, &b, (change){.ku = k, .kN = k});
}

RELATION(a_combination_is_the_case_of_all_its_actions, 0, CLOSE)
{
    double most = 0.0;
    rm_run all = rm_check(m);
    (void)r;
    for (int k = 0; k < m->n_sums; k++) {
        const rm_model one = one_sum(m, k);
        rm_run single = rm_check(&one);
        const size_t joints = (size_t)m->n_joints * 3, bars = (size_t)m->n_bars, at = (size_t)k;
        most = fmax(most, rm_apart(joints, single.r->u, all.r->u + at * joints, u_scale(all.r)));
        most = fmax(most, rm_apart(bars, single.r->N, all.r->N + at * bars, N_scale(all.r)));
        rm_drop(&single);
    }
    rm_drop(&all);
    return most;
}

RELATION(a_case_may_be_split_in_two, 0, CLOSE)
{
    const double part = rm_between(r, 0.1, 0.9);
    rm_model b = *m;
    b.load_case[3] = m->load_case[2];
    b.n_cases = 4;
    rm_scale_case(&b.load_case[2], part);
    rm_scale_case(&b.load_case[3], 1.0 - part);
    for (int k = 0; k < m->n_sums; k++) b.sum[k].factor[3] = b.sum[k].factor[2];
    return missed_by(m, &b, (change){0});
}

RELATION(E_times_k_divides_displacements, RM_LOADS_ONLY, CLOSE)
{
    const double k = rm_between(r, 0.3, 3.0);
    rm_model b = *m;
    for (int p = 0; p < 2; p++) b.material[p].E *= k;
    return missed_by(m, &b, (change){.ku = 1.0 / k});
}

RELATION(E_times_k_multiplies_forces_of_constraint, RM_NO_WEIGHT, CLOSE)
{
    const double k = rm_between(r, 0.3, 3.0);
    rm_model a = *m, b;
    memset(a.load_case[2].F, 0, sizeof a.load_case[2].F); /* heat, misfits and settlements stay */
    a.load_case[0] = a.load_case[2];
    a.n_cases = a.n_sums = 1;
    b = a;
    for (int p = 0; p < 2; p++) b.material[p].E *= k;
    rm_run first = rm_check(&a), second = rm_check(&b);
    double off = rm_apart((size_t)m->n_joints * 3, first.r->u, second.r->u, u_scale(first.r));
    const double scale = fmax(N_scale(first.r), 1e-3 * stiffest(m) * u_scale(first.r)); /* no force: determinate */
    for (int e = 0; e < m->n_bars; e++) {
        const double N = k * first.r->N[e];
        off = fmax(off, rm_apart(1, &N, second.r->N + e, k * scale));
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(similar_models_have_similar_results, RM_BUCKLES, CLOSE)
{
    const double k = rm_between(r, 0.4, 2.5);
    rm_model b = *m;
    rm_scale_lengths(&b, k);
    for (int g = 0; g < m->n_groups; g++) b.group[g].A *= k * k;
    for (int p = 0; p < 2; p++) b.material[p].density /= k;
    for (int c = 0; c < m->n_cases; c++) {
        for (int j = 0; j < m->n_joints; j++) {
            for (int i = 0; i < 3; i++) b.load_case[c].F[j][i] *= k * k;
        }
    }
    rm_run first = rm_check(m), second = rm_check(&b);
    double off = missed(first.r, second.r, (change){.ku = k, .kN = k * k});
    for (int e = 0; e < m->n_bars; e++) { /* stresses and column checks too */
        off = fmax(off, rm_apart(1, &first.r->members[e].utilisation, &second.r->members[e].utilisation,
                                 first.r->utilisation));
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(own_weight_is_half_at_each_end, 0, CLOSE)
{
    rm_model b = *m;
    (void)r;
    b.load_case[0].self_weight = 0.0;
    for (int e = 0; e < m->n_bars; e++) {
        double d[3];
        const rm_group *g = &m->group[m->bar[e].group];
        const double L = rm_direction(m, m->bar[e].from, m->bar[e].to, d);
        const double half = m->material[g->material].density * 9.80665 * g->A * L / 2.0; /* standard gravity */
        b.load_case[0].F[m->bar[e].from][m->dim - 1] -= half;
        b.load_case[0].F[m->bar[e].to][m->dim - 1] -= half;
    }
    return missed_by(m, &b, (change){0});
}

RELATION(heat_is_a_lack_of_fit_of_alpha_dT_L, 0, CLOSE)
{
    rm_model b = *m;
    (void)r;
    for (int e = 0; e < m->n_bars; e++) {
        double d[3];
        const double L = rm_direction(m, m->bar[e].from, m->bar[e].to, d);
        b.load_case[2].lack[e] += 12e-6 * L * b.load_case[2].dT[e];
        b.load_case[2].dT[e] = 0.0;
    }
    return missed_by(m, &b, (change){0});
}

/* ---- members and supports put in or taken out ----------------------------------------------------------------------
 */

RELATION(two_members_of_half_the_area_are_one, 0, CLOSE)
{
    rm_model b = *m;
    const int e = rm_below(r, m->n_bars), g = b.n_groups++, f = b.n_bars++;
    b.group[g] = b.group[b.bar[e].group];
    b.group[g].A /= 2.0;
    b.bar[f] = b.bar[e];
    for (int c = 0; c < m->n_cases; c++) {
        b.load_case[c].dT[f] = b.load_case[c].dT[e];
        b.load_case[c].lack[f] = b.load_case[c].lack[e];
    }
    const int old = b.bar[e].group;
    b.bar[e].group = b.bar[f].group = g;
    for (int k = 0, others = 0; k < b.n_bars; k++) {
        others += b.bar[k].group == old;
        if (k == b.n_bars - 1 && others == 0) return DOES_NOT_APPLY; /* its group would be empty */
    }
    rm_run first = rm_check(m), second = rm_check(&b);
    double off = 0.0;
    for (int k = 0; k < m->n_sums; k++) {
        double N[RM_BARS];
        memcpy(N, second.r->N + k * b.n_bars, sizeof *N * (size_t)m->n_bars);
        off = fmax(off, rm_apart(1, &N[e], second.r->N + k * b.n_bars + f, N_scale(first.r)));
        N[e] *= 2.0;
        off = fmax(off, rm_apart((size_t)m->n_bars, N, first.r->N + k * m->n_bars, N_scale(first.r)));
    }
    off = fmax(off, rm_apart((size_t)(m->n_sums * m->n_joints * 3), first.r->u, second.r->u, u_scale(first.r)));
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(a_member_that_fits_the_deformed_shape_changes_nothing, RM_NO_WEIGHT, CLOSE)
{
    const rm_model a = one_sum(m, 2);
    rm_model b = a;
    const int p = rm_below(r, m->n_joints), q = (p + 1 + rm_below(r, m->n_joints - 1)) % m->n_joints, e = b.n_bars++;
    double d[3], elongation = 0.0;
    rm_run first = rm_check(&a);
    rm_direction(m, p, q, d);
    for (int i = 0; i < 3; i++) elongation += d[i] * (first.r->u[3 * q + i] - first.r->u[3 * p + i]);
    b.bar[e] = (rm_bar){p, q, rm_below(r, m->n_groups)};
    b.load_case[0].lack[e] = elongation;
    rm_run second = rm_check(&b);
    double off = missed(first.r, second.r, (change){0});
    off = fmax(off, fabs(second.r->N[e]) / fmax(N_scale(first.r), EA_over_L(&b, e) * fabs(elongation)));
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(a_redundant_member_may_be_replaced_by_its_force, RM_NO_WEIGHT, CLOSE)
{
    if (m->n_bars == m->needed) return DOES_NOT_APPLY;
    const rm_model a = one_sum(m, rm_below(r, m->n_sums));
    rm_model b = a;
    const int e = --b.n_bars, from = m->bar[e].from, to = m->bar[e].to;
    double d[3], N[RM_BARS];
    for (int k = 0, others = 0; k < b.n_bars; k++) {
        others += b.bar[k].group == m->bar[e].group;
        if (k == b.n_bars - 1 && others == 0) return DOES_NOT_APPLY;
    }
    rm_direction(m, from, to, d);
    rm_run first = rm_check(&a);
    for (int i = 0; i < 3; i++) {
        b.load_case[0].F[from][i] += first.r->N[e] * d[i];
        b.load_case[0].F[to][i] -= first.r->N[e] * d[i];
    }
    rm_run second = rm_check(&b);
    memcpy(N, first.r->N, sizeof *N * (size_t)m->n_bars);
    double off = rm_apart((size_t)b.n_bars, second.r->N, N, N_scale(first.r));
    off = fmax(off, rm_apart((size_t)(3 * m->n_joints), second.r->u, first.r->u, u_scale(first.r)));
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(a_support_where_the_joint_has_gone_changes_nothing, RM_NO_WEIGHT, CLOSE)
{
    const rm_model a = one_sum(m, rm_below(r, m->n_sums));
    rm_model b = a;
    const int j = m->base + rm_below(r, m->n_joints - m->base);
    if (m->joint[j].n_held > 0) return DOES_NOT_APPLY;
    rm_run first = rm_check(&a);
    rm_unit(r, m->dim, b.joint[j].held[0]);
    b.joint[j].n_held = 1;
    double along = 0.0;
    for (int i = 0; i < 3; i++) along += b.joint[j].held[0][i] * first.r->u[3 * j + i];
    for (int i = 0; i < 3; i++) b.load_case[0].d[j][i] = along * b.joint[j].held[0][i];
    rm_run second = rm_check(&b);
    const double off = missed(first.r, second.r, (change){0});
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(a_joint_without_load_on_new_members_changes_nothing, RM_NO_WEIGHT, CLOSE)
{
    rm_model b = *m;
    rm_add_joint(&b, r, m->n_joints, false);
    rm_run first = rm_check(m), second = rm_check(&b);
    double off = missed(first.r, second.r, (change){0});
    for (int k = 0; k < m->n_sums; k++) {
        off = fmax(off, rm_largest((size_t)(b.n_bars - m->n_bars), second.r->N + k * b.n_bars + m->n_bars) /
                            N_scale(first.r));
    }
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

/* Work of the loads of the only combination. */
static double work(const rm_model *m)
{
    rm_run run = rm_check(m);
    double sum = 0.0;
    for (int i = 0; i < 3 * m->n_joints; i++) sum += run.r->load[i] * run.r->u[i];
    rm_drop(&run);
    return sum;
}

/* Rayleigh: what is stiffer gives way less. */
RELATION(more_area_never_gives_way_more, RM_LOADS_ONLY, CLOSE)
{
    const rm_model a = one_sum(m, 0);
    rm_model b = a;
    b.group[rm_below(r, m->n_groups)].A *= rm_between(r, 1.0, 3.0);
    return fmax(0.0, work(&b) / work(&a) - 1.0);
}

RELATION(one_more_member_never_gives_way_more, RM_LOADS_ONLY, CLOSE)
{
    const rm_model a = one_sum(m, 0);
    rm_model b = a;
    const int p = rm_below(r, m->n_joints), q = (p + 1 + rm_below(r, m->n_joints - 1)) % m->n_joints;
    b.bar[b.n_bars++] = (rm_bar){p, q, rm_below(r, m->n_groups)};
    return fmax(0.0, work(&b) / work(&a) - 1.0);
}

RELATION(one_more_support_never_gives_way_more, RM_LOADS_ONLY, CLOSE)
{
    const rm_model a = one_sum(m, 0);
    rm_model b = a;
    rm_joint *joint = &b.joint[m->base + rm_below(r, m->n_joints - m->base)];
    if (joint->n_held > 0) return DOES_NOT_APPLY;
    rm_unit(r, m->dim, joint->held[joint->n_held++]);
    return fmax(0.0, work(&b) / work(&a) - 1.0);
}

/* ---- laws ----------------------------------------------------------------------------------------------------------
 */

RELATION(displacements_are_reciprocal, RM_LOADS_ONLY, CLOSE)
{
    rm_model b = *m;
    double most = 0.0;
    b.n_cases = b.n_sums = 2;
    b.sum[0] = (rm_sum){{1.0, 0.0}};
    b.sum[1] = (rm_sum){{0.0, 1.0}};
    for (int pair = 0; pair < 20; pair++) {
        const int p = m->base + rm_below(r, m->n_joints - m->base), q = m->base + rm_below(r, m->n_joints - m->base);
        double P[3], Q[3], one = 0.0, other = 0.0;
        rm_unit(r, m->dim, P);
        rm_unit(r, m->dim, Q);
        memset(b.load_case, 0, sizeof b.load_case);
        memcpy(b.load_case[0].F[p], P, sizeof P);
        memcpy(b.load_case[1].F[q], Q, sizeof Q);
        rm_run run = rm_check(&b);
        for (int i = 0; i < 3; i++) {
            one += P[i] * run.r->u[3 * (m->n_joints + p) + i];
            other += Q[i] * run.r->u[3 * q + i];
        }
        most = fmax(most, rm_apart(1, &one, &other, u_scale(run.r)));
        rm_drop(&run);
    }
    return most;
}

RELATION(loads_and_reactions_balance_in_force_and_moment, 0, CLOSE)
{
    rm_run run = rm_check(m);
    double most = 0.0;
    (void)r;
    for (int k = 0; k < m->n_sums; k++) {
        double force[3] = {0}, moment[3] = {0}, sum = 0.0;
        for (int j = 0; j < m->n_joints; j++) {
            double F[3];
            const double *x = m->joint[j].at;
            for (int i = 0; i < 3; i++) {
                const int at = (k * m->n_joints + j) * 3 + i;
                F[i] = run.r->load[at] + run.r->reaction[at];
                force[i] += F[i];
                sum += fabs(run.r->load[at]) + fabs(run.r->reaction[at]);
            }
            for (int i = 0; i < 3; i++) moment[i] += x[(i + 1) % 3] * F[(i + 2) % 3] - x[(i + 2) % 3] * F[(i + 1) % 3];
        }
        most = fmax(most, fmax(length_of(force), length_of(moment) / 10.0) / sum);
    }
    rm_drop(&run);
    return most;
}

RELATION(every_joint_is_in_balance, 0, CLOSE)
{
    rm_run run = rm_check(m);
    double most = 0.0;
    (void)r;
    for (int k = 0; k < m->n_sums; k++) {
        double out[RM_JOINTS][3];
        for (int i = 0; i < 3 * m->n_joints; i++) {
            out[i / 3][i % 3] = run.r->load[3 * k * m->n_joints + i] + run.r->reaction[3 * k * m->n_joints + i];
        }
        for (int e = 0; e < m->n_bars; e++) {
            double d[3];
            const double N = run.r->N[k * m->n_bars + e];
            rm_direction(m, m->bar[e].from, m->bar[e].to, d);
            for (int i = 0; i < 3; i++) {
                out[m->bar[e].from][i] += N * d[i];
                out[m->bar[e].to][i] -= N * d[i];
            }
        }
        for (int j = 0; j < m->n_joints; j++) most = fmax(most, length_of(out[j]) / N_scale(run.r));
    }
    rm_drop(&run);
    return most;
}

/* Clapeyron. */
RELATION(the_work_of_loads_is_the_energy_of_bars, RM_LOADS_ONLY, CLOSE)
{
    rm_run run = rm_check(m);
    double most = 0.0;
    (void)r;
    for (int k = 0; k < m->n_sums; k++) {
        double of_loads = 0.0, of_bars = 0.0;
        for (int i = 3 * k * m->n_joints; i < 3 * (k + 1) * m->n_joints; i++) of_loads += run.r->load[i] * run.r->u[i];
        for (int e = 0; e < m->n_bars; e++) {
            of_bars += run.r->N[k * m->n_bars + e] * run.r->N[k * m->n_bars + e] / EA_over_L(m, e);
        }
        most = fmax(most, fabs(of_loads / of_bars - 1.0));
    }
    rm_drop(&run);
    return most;
}

RELATION(forces_of_a_determinate_truss_do_not_know_the_areas, RM_DETERMINATE | RM_LOADS_ONLY, CLOSE)
{
    rm_model b = *m;
    for (int g = 0; g < m->n_groups; g++) b.group[g].A *= rm_between(r, 0.2, 5.0);
    rm_run first = rm_check(m), second = rm_check(&b);
    const double off = rm_apart((size_t)(m->n_sums * m->n_bars), first.r->N, second.r->N, N_scale(first.r));
    rm_drop(&first);
    rm_drop(&second);
    return off;
}

RELATION(heat_misfit_and_settlement_strain_no_determinate_truss, RM_DETERMINATE | RM_NO_WEIGHT, CLOSE)
{
    rm_model b = *m;
    (void)r;
    memset(b.load_case[2].F, 0, sizeof b.load_case[2].F);
    b.load_case[0] = b.load_case[2];
    b.n_cases = b.n_sums = 1;
    rm_run run = rm_check(&b);
    ck_assert_double_gt(u_scale(run.r), 1e-5);
    const double off = rm_largest((size_t)m->n_bars, run.r->N) / (stiffest(m) * u_scale(run.r));
    rm_drop(&run);
    return off;
}

/* ---- known fields --------------------------------------------------------------------------------------------------
 */

/* The field x -> t + G x as the only case: settlements of the supports; `fits`: bars are made to fit it. */
static rm_model field_model(const rm_model *m, const double t[3], const double G[9], bool fits)
{
    rm_model b = *m;
    rm_case *c = &b.load_case[0];
    memset(c, 0, sizeof *c);
    b.n_cases = b.n_sums = 1;
    for (int j = 0; j < m->n_joints; j++) {
        const rm_joint *joint = &m->joint[j];
        double v[3] = {joint->at[0], joint->at[1], joint->at[2]}, along = 0.0;
        rm_map(G, v);
        for (int i = 0; i < m->dim; i++) v[i] += t[i];
        for (int i = 0; i < 3 && joint->n_held == 1; i++) along += v[i] * joint->held[0][i];
        for (int i = 0; i < 3; i++) {
            if (joint->n_held == m->dim) c->d[j][i] = v[i];
            if (joint->n_held == 1) c->d[j][i] = along * joint->held[0][i];
        }
    }
    for (int e = 0; e < m->n_bars && fits; e++) {
        double d[3], v[3];
        const double L = rm_direction(m, m->bar[e].from, m->bar[e].to, d);
        memcpy(v, d, sizeof v);
        rm_map(G, v);
        c->lack[e] = L * (d[0] * v[0] + d[1] * v[1] + d[2] * v[2]);
    }
    return b;
}

/* How far the result is from that field, and, if there is to be none, from having no force. */
static double field_missed(const rm_model *m, const double t[3], const double G[9], bool is_free)
{
    rm_run run = rm_check(m);
    double most = 0.0;
    for (int j = 0; j < m->n_joints; j++) {
        double v[3] = {m->joint[j].at[0], m->joint[j].at[1], m->joint[j].at[2]};
        rm_map(G, v);
        for (int i = 0; i < m->dim; i++) v[i] += t[i];
        most = fmax(most, rm_apart(3, v, run.r->u + 3 * j, u_scale(run.r)));
    }
    if (is_free) most = fmax(most, rm_largest((size_t)m->n_bars, run.r->N) / (stiffest(m) * u_scale(run.r)));
    rm_drop(&run);
    return most;
}

static void random_field(sct_random *r, int dim, double t[3], double G[9])
{
    for (int i = 0; i < 3; i++) {
        t[i] = i < dim ? rm_between(r, -5e-3, 5e-3) : 0.0;
        for (int k = 0; k < 3; k++) G[3 * i + k] = i < dim && k < dim ? rm_between(r, -1e-3, 1e-3) : 0.0;
    }
}

RELATION(supports_that_move_as_a_body_strain_nothing, RM_NO_WEIGHT, CLOSE)
{
    double t[3], G[9];
    random_field(r, m->dim, t, G);
    for (int i = 0; i < 3; i++) {
        for (int k = 0; k <= i; k++) G[3 * i + k] = i == k ? 0.0 : -G[3 * k + i]; /* a small turn */
    }
    const rm_model b = field_model(m, t, G, false);
    return field_missed(&b, t, G, true);
}

RELATION(even_heat_with_supports_that_follow_strains_nothing, RM_NO_WEIGHT, CLOSE)
{
    double t[3], G[9], dT = rm_between(r, 5.0, 60.0);
    random_field(r, m->dim, t, G);
    for (int i = 0; i < 9; i++) G[i] = i % 4 == 0 && i / 4 < m->dim ? 12e-6 * dT : 0.0;
    rm_model b = field_model(m, t, G, false);
    for (int e = 0; e < m->n_bars; e++) b.load_case[0].dT[e] = dT;
    return field_missed(&b, t, G, true);
}

RELATION(bars_made_for_an_even_strain_take_its_shape_without_force, RM_NO_WEIGHT, CLOSE)
{
    double t[3], G[9];
    random_field(r, m->dim, t, G);
    const rm_model b = field_model(m, t, G, true);
    return field_missed(&b, t, G, true);
}

/* A lattice whose outer joints are held: inside, equal bars lie opposite each other, so a linear field is balanced. */
RELATION(a_lattice_carries_an_even_strain_inside, RM_NO_WEIGHT, CLOSE)
{
    rm_model b = *m;
    const int n = m->dim == 2 ? 5 : 3;
    double a[3][3], t[3], G[9];
    do {
        for (int i = 0; i < 3; i++) rm_unit(r, m->dim, a[i]);
    } while (rm_spread(m->dim, a) < 0.5);
    random_field(r, m->dim, t, G);
    b.n_joints = b.n_bars = b.n_groups = 0;
    for (int i = 0; i < n * n * (m->dim == 3 ? n : 1); i++) {
        const int at[3] = {i % n, i / n % n, i / (n * n)};
        rm_joint *joint = &b.joint[b.n_joints++];
        bool is_inside = true;
        *joint = (rm_joint){0};
        for (int k = 0; k < m->dim; k++) {
            is_inside = is_inside && at[k] > 0 && at[k] < n - 1;
            for (int x = 0; x < 3; x++) joint->at[x] += 2.0 * at[k] * a[k][x];
        }
        for (int k = 0; k < m->dim && !is_inside; k++) joint->held[joint->n_held++][k] = 1.0;
    }
    for (int step = 1; step < (m->dim == 2 ? 4 : 8); step++) { /* 1, 2, 4: along a; their sums: diagonals */
        b.group[b.n_groups] = m->group[0];
        b.group[b.n_groups].A = rm_between(r, 1e-4, 1e-3);
        for (int i = 0; i < b.n_joints; i++) {
            const int at[3] = {i % n, i / n % n, i / (n * n)};
            bool ends = true;
            for (int k = 0; k < 3; k++) ends = ends && (!(step >> k & 1) || at[k] < n - 1);
            const int to = i + (step & 1) + (step >> 1 & 1) * n + (step >> 2 & 1) * n * n;
            if (ends) b.bar[b.n_bars++] = (rm_bar){i, to, b.n_groups};
        }
        b.n_groups++;
    }
    b = field_model(&b, t, G, false);
    return field_missed(&b, t, G, false);
}

/* Displacements are chosen; the loads that they need are summed bar by bar in long double. */
RELATION(chosen_displacements_come_back_from_their_loads, RM_LOADS_ONLY, CLOSE)
{
    rm_model b = *m;
    double u[RM_JOINTS][3] = {{0}};
    long double F[RM_JOINTS][3] = {{0}};
    b.n_cases = b.n_sums = 1;
    memset(&b.load_case[0], 0, sizeof b.load_case[0]);
    for (int j = 0; j < m->n_joints; j++) {
        const rm_joint *joint = &m->joint[j];
        double along = 0.0;
        if (joint->n_held == m->dim) continue;
        for (int i = 0; i < m->dim; i++) u[j][i] = rm_between(r, -0.01, 0.01);
        for (int i = 0; i < 3 && joint->n_held == 1; i++) along += u[j][i] * joint->held[0][i];
        for (int i = 0; i < 3; i++) u[j][i] -= along * joint->held[0][i];
    }
    for (int e = 0; e < m->n_bars; e++) {
        const int p = m->bar[e].from, q = m->bar[e].to;
        const rm_group *g = &m->group[m->bar[e].group];
        long double d[3], L = 0.0L, stretch = 0.0L;
        for (int i = 0; i < 3; i++) {
            d[i] = (long double)m->joint[q].at[i] - m->joint[p].at[i];
            L += d[i] * d[i];
        }
        L = sqrtl(L);
        for (int i = 0; i < 3; i++) stretch += d[i] / L * ((long double)u[q][i] - u[p][i]);
        for (int i = 0; i < 3; i++) {
            const long double pull = m->material[g->material].E * (long double)g->A / L * stretch * d[i] / L;
            F[p][i] -= pull;
            F[q][i] += pull;
        }
    }
    for (int j = 0; j < m->n_joints; j++) {
        for (int i = 0; i < 3; i++) b.load_case[0].F[j][i] = (double)F[j][i];
    }
    rm_run run = rm_check(&b);
    const double off = rm_apart((size_t)(3 * m->n_joints), u[0], run.r->u, u_scale(run.r));
    rm_drop(&run);
    return off;
}

/* The model and its image in x = -1 beyond it, tied together by members across. */
RELATION(a_symmetric_model_has_symmetric_results, 0, CLOSE)
{
    rm_model b = *m;
    const int n = m->n_joints, bars = m->n_bars;
    double most = 0.0;
    if (2 * n > RM_JOINTS || 2 * bars + n > RM_BARS) return DOES_NOT_APPLY;
    for (int j = 0; j < n; j++) {
        b.joint[n + j] = m->joint[j];
        b.joint[n + j].at[0] = -2.0 - m->joint[j].at[0];
        for (int h = 0; h < m->joint[j].n_held; h++) b.joint[n + j].held[h][0] *= -1.0;
        for (int c = 0; c < m->n_cases; c++) {
            for (int i = 0; i < 3; i++) {
                b.load_case[c].F[n + j][i] = (i == 0 ? -1.0 : 1.0) * m->load_case[c].F[j][i];
                b.load_case[c].d[n + j][i] = (i == 0 ? -1.0 : 1.0) * m->load_case[c].d[j][i];
            }
        }
    }
    b.n_joints = 2 * n;
    for (int e = 0; e < bars; e++) {
        b.bar[bars + e] = (rm_bar){n + m->bar[e].from, n + m->bar[e].to, m->bar[e].group};
        for (int c = 0; c < m->n_cases; c++) {
            b.load_case[c].dT[bars + e] = m->load_case[c].dT[e];
            b.load_case[c].lack[bars + e] = m->load_case[c].lack[e];
        }
    }
    b.n_bars = 2 * bars;
    for (int j = m->base; j < n; j++) {
        if (rm_below(r, 2) == 0) b.bar[b.n_bars++] = (rm_bar){j, n + j, rm_below(r, m->n_groups)};
    }
    rm_run run = rm_check(&b);
    for (int k = 0; k < m->n_sums; k++) {
        const double *u = run.r->u + 3 * k * b.n_joints, *N = run.r->N + k * b.n_bars;
        for (int j = 0; j < n; j++) {
            const double image[3] = {-u[3 * j], u[3 * j + 1], u[3 * j + 2]};
            most = fmax(most, rm_apart(3, image, u + 3 * (n + j), u_scale(run.r)));
        }
        most = fmax(most, rm_apart((size_t)bars, N, N + bars, N_scale(run.r)));
    }
    rm_drop(&run);
    return most;
}

/* ---- the suite ------------------------------------------------------------------------------------------------------
 */

int main(void)
{
    Suite *suite = suite_create("metamorphic analysis");
    TCase *tests = tcase_create("relations");
    tcase_set_timeout(tests, 300);
    open_relations();
    comma_locale_make();
    tcase_add_test(tests, the_order_of_keys_says_nothing);
    tcase_add_test(tests, blanks_say_nothing);
    tcase_add_test(tests, line_ends_say_nothing);
    tcase_add_test(tests, the_spelling_of_numbers_says_nothing);
    tcase_add_test(tests, names_say_nothing);
    tcase_add_test(tests, units_change_no_result);
    tcase_add_test(tests, a_second_run_gives_the_same_bytes);
    tcase_add_test(tests, two_threads_give_the_same_bytes);
    tcase_add_test(tests, a_locale_with_decimal_commas_gives_the_same_bytes);
    tcase_add_test(tests, a_model_written_back_gives_the_same_bits);
    tcase_add_test(tests, actions_times_a_power_of_two);
    tcase_add_test(tests, actions_reversed);
    tcase_add_test(tests, E_times_and_areas_by_a_power_of_two);
    tcase_add_test(tests, E_times_a_power_of_two_divides_displacements);
    tcase_add_test(tests, lengths_times_a_power_of_two);
    tcase_add_test(tests, a_mirrored_model_gives_mirrored_results);
    tcase_add_test(tests, a_model_upside_down_gives_results_upside_down);
    tcase_add_test(tests, half_a_turn_turns_the_results);
    tcase_add_test(tests, a_shift_by_whole_metres_changes_no_bit);
    tcase_add_test(tests, a_shift_by_a_million_metres_changes_no_bit);
    tcase_add_test(tests, a_case_without_load_changes_no_bit);
    tcase_add_test(tests, one_more_combination_changes_no_bit_of_the_others);
    tcase_add_test(tests, the_order_of_combinations_only_orders_the_results);
    tcase_add_test(tests, a_group_split_in_two_of_the_same_area_changes_no_bit);
    tcase_add_test(tests, renumbered_joints);
    tcase_add_test(tests, permuted_members);
    tcase_add_test(tests, swapped_member_ends);
    tcase_add_test(tests, permuted_cases);
    tcase_add_test(tests, both_engines_agree);
    tcase_add_test(tests, a_shifted_model);
    tcase_add_test(tests, a_quarter_turn_turns_the_results);
    tcase_add_test(tests, any_rotation_turns_the_results);
    tcase_add_test(tests, a_plane_model_in_space_held_sideways);
    tcase_add_test(tests, a_pin_may_be_told_by_any_directions);
    tcase_add_test(tests, actions_times_k);
    tcase_add_test(tests, factors_times_k);
    tcase_add_test(tests, a_combination_is_the_case_of_all_its_actions);
    tcase_add_test(tests, a_case_may_be_split_in_two);
    tcase_add_test(tests, E_times_k_divides_displacements);
    tcase_add_test(tests, E_times_k_multiplies_forces_of_constraint);
    tcase_add_test(tests, similar_models_have_similar_results);
    tcase_add_test(tests, own_weight_is_half_at_each_end);
    tcase_add_test(tests, heat_is_a_lack_of_fit_of_alpha_dT_L);
    tcase_add_test(tests, two_members_of_half_the_area_are_one);
    tcase_add_test(tests, a_member_that_fits_the_deformed_shape_changes_nothing);
    tcase_add_test(tests, a_redundant_member_may_be_replaced_by_its_force);
    tcase_add_test(tests, a_support_where_the_joint_has_gone_changes_nothing);
    tcase_add_test(tests, a_joint_without_load_on_new_members_changes_nothing);
    tcase_add_test(tests, more_area_never_gives_way_more);
    tcase_add_test(tests, one_more_member_never_gives_way_more);
    tcase_add_test(tests, one_more_support_never_gives_way_more);
    tcase_add_test(tests, displacements_are_reciprocal);
    tcase_add_test(tests, loads_and_reactions_balance_in_force_and_moment);
    tcase_add_test(tests, every_joint_is_in_balance);
    tcase_add_test(tests, the_work_of_loads_is_the_energy_of_bars);
    tcase_add_test(tests, forces_of_a_determinate_truss_do_not_know_the_areas);
    tcase_add_test(tests, heat_misfit_and_settlement_strain_no_determinate_truss);
    tcase_add_test(tests, supports_that_move_as_a_body_strain_nothing);
    tcase_add_test(tests, even_heat_with_supports_that_follow_strains_nothing);
    tcase_add_test(tests, bars_made_for_an_even_strain_take_its_shape_without_force);
    tcase_add_test(tests, a_lattice_carries_an_even_strain_inside);
    tcase_add_test(tests, chosen_displacements_come_back_from_their_loads);
    tcase_add_test(tests, a_symmetric_model_has_symmetric_results);
    suite_add_tcase(suite, tests);
    const int code = run_suite(suite);
    comma_locale_drop();
    tell_relations("analysis");
    return code;
}
