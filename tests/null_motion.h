/* What is said about mechanisms, beside an independent view: singular vectors of the springs' elongations, by LAPACK.
 */
#ifndef TESTS_NULL_MOTION_H
#define TESTS_NULL_MOTION_H

#include "support.h"

#include <string.h>

#include "analysis/mechanism.h"
#include "model_build.h"

/* LAPACK: singular values and vectors (column-major). */
void dgesvd_(const char *jobu, const char *jobvt, const int *m, const int *n, double *a, const int *lda, double *s,
             double *u, const int *ldu, double *vt, const int *ldvt, double *work, const int *lwork, int *info);

/* What was found in a model, and the structure it was found in. */
typedef struct finding {
    sct_model *m;
    sct_structure *st;
    sct_status status;
    sct_issues *issues;
} finding;

static inline finding find(sct_model *m)
{
    finding f = {.m = m, .issues = sct_issues_new()};
    double A[64];
    if (m->n_cases == 0) mb_case(m, 1.0);
    for (int g = 0; g < m->n_groups; g++) A[g] = m->groups[g].A_held;
    sct_issues *of_building = sct_issues_new(); /* members side by side and the like: not asked about here */
    ck_assert_msg(sct_structure_build(m, &f.st, of_building) == SCT_OK, "%s", sct_issues_get(of_building, 0)->message);
    sct_issues_free(of_building);
    sct_solver *solver = sct_solver_new(f.st, SCT_ENGINE_AUTO, &f.status);
    ck_assert_int_eq(f.status, SCT_OK);
    f.status = sct_mechanism_find(solver, A, f.issues);
    ck_assert_int_eq(f.status == SCT_OK, sct_issues_errors(f.issues) == 0);
    ck_assert_int_le(sct_issues_errors(f.issues), 6);
    sct_solver_free(solver);
    return f;
}

static inline void drop(finding *f)
{
    sct_structure_free(f->st);
    sct_issues_free(f->issues);
    mb_free(f->m);
}

static inline const char *message(const finding *f, int i)
{
    const sct_issue *issue = sct_issues_get(f->issues, i);
    return issue != NULL ? issue->message : "(no such message)";
}

static inline bool says(const finding *f, const char *words)
{
    for (int i = 0; i < sct_issues_count(f->issues); i++) {
        if (strstr(message(f, i), words) != NULL) return true;
    }
    return false;
}

static inline void ck_stable(sct_model *m)
{
    finding f = find(m);
    if (f.status != SCT_OK) ck_abort_msg("false alarm: %s", message(&f, 0));
    ck_assert_int_eq(sct_issues_count(f.issues), 0);
    drop(&f);
}

/* The model has exactly this one mechanism and is told in exactly these words, at the place of joint `at`. */
static inline void ck_only(sct_model *m, int at, const char *words)
{
    finding f = find(m);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    ck_assert_str_eq(message(&f, 0), words);
    ck_assert_int_eq(sct_issues_get(f.issues, 0)->line, 1000 + at);
    ck_assert_str_eq(sct_issues_get(f.issues, 0)->file, "test.json");
    drop(&f);
}

/* ---- an independent view: singular vectors of the springs' elongations
 * -------------------------------------------------
 */

/* What makes unknown i comparable: displacements count as they are, rotations times the lever. */
static inline double beside(const sct_structure *st, int i)
{
    for (int j = 0; j < st->n_joints; j++) {
        if (i >= st->first_dof[j] && i < st->first_dof[j] + st->n_free[j]) return 1.0;
    }
    return st->lever;
}

/* v (n_dof): the one motion without elongation of the springs of which k (n_springs) is at least `least`; k NULL: of
 * all. Returns how many there are. */
static inline int null_motion_without(const sct_structure *st, const double k[], double least, double v[])
{
    if (st->n_dof == 0) return 0; /* which LAPACK does not take */
    const int m = st->n_springs, n = st->n_dof, lwork = 10 * (m + n) + 100, fewer = m < n ? m : n;
    double *B = calloc((size_t)(m * n), sizeof *B), *s = calloc((size_t)(m + n), sizeof *s);
    double *vt = calloc((size_t)(n * n), sizeof *vt), *work = calloc((size_t)lwork, sizeof *work), none;
    int info, nullity = n - fewer;
    for (int e = 0; e < m; e++) {
        const sct_spring *spring = &st->springs[e];
        if (k != NULL && !(k[e] >= least)) continue;
        for (int i = 0; i < spring->n_dof; i++)
            B[spring->dof[i] * m + e] = spring->b[i] * spring->span / beside(st, spring->dof[i]);
    }
    dgesvd_("N", "A", &m, &n, B, &m, s, &none, &m, vt, &n, work, &lwork, &info);
    ck_assert_int_eq(info, 0);
    for (int i = 0; i < fewer; i++) nullity += s[i] < 1e-10;
    for (int i = 0; i < n; i++) v[i] = vt[i * n + n - 1] / beside(st, i);
    free(B);
    free(s);
    free(vt);
    free(work);
    return nullity;
}

static inline int null_motion(const sct_structure *st, double v[])
{
    return null_motion_without(st, NULL, 0.0, v);
}

/* How a joint turns in v: by itself or, if that is more, as a sprung end there. */
static inline void turn_at(const sct_structure *st, const double v[], int joint, double theta[3])
{
    sct_joint_rotation(st, v, NULL, joint, theta);
    for (int e = 0; e < st->n_bars; e++) {
        for (int end = 0; end < 2; end++) {
            const sct_bar *bar = &st->bars[e];
            if ((end == 0 ? bar->from : bar->to) != joint) continue;
            for (int r = 0; r < SCT_TURNS; r++) {
                const int dof = bar->end_dof[end][r];
                const double *axis = bar->axes[r == SCT_TWIST ? 0 : r == SCT_IN_PLANE ? 2 : 1];
                if (dof < 0 || fabs(v[dof]) <= hypot(hypot(theta[0], theta[1]), theta[2])) continue;
                for (int i = 0; i < 3; i++) theta[i] = v[dof] * axis[i];
            }
        }
    }
}

/* What is told of a joint: its displacement, or its rotation. */
static inline void seen_at(const sct_structure *st, const double v[], int joint, bool as_turn, double d[3])
{
    if (as_turn)
        turn_at(st, v, joint, d);
    else
        sct_joint_displacement(st, v, NULL, joint, d);
}

static inline double size_at(const sct_structure *st, const double v[], int joint, bool as_turn)
{
    double d[3];
    seen_at(st, v, joint, as_turn, d);
    return hypot(hypot(d[0], d[1]), d[2]);
}

/* Are there rotations only, to speak of? */
static inline bool is_turning(const sct_structure *st, const double v[])
{
    double most[2] = {0.0, 0.0};
    for (int i = 0; i < 2 * st->n_joints; i++) most[i % 2] = fmax(most[i % 2], size_at(st, v, i / 2, i % 2 == 1));
    return most[0] < 0.05 * st->lever * most[1];
}

static inline int names_in(const char *text)
{
    int quotes = 0;
    const char *end = strstr(text, " can ");
    for (const char *c = text; c < end; c++) quotes += *c == '"';
    return quotes / 2;
}

/* The joints of one message are those that move in v: all when at most 10, else the count is right too. */
static inline void ck_joints(const sct_structure *st, const double v[], const char *text)
{
    const bool as_turn = is_turning(st, v);
    double largest = 0.0;
    ck_assert_msg((strstr(text, " can turn") != NULL) == as_turn, "%s", text);
    int n_least = 0, n_most = 0; /* joints right at the limit of 5 % may be named or not */
    for (int j = 0; j < st->n_joints; j++) largest = fmax(largest, size_at(st, v, j, as_turn));
    for (int j = 0; j < st->n_joints; j++) {
        const double size = size_at(st, v, j, as_turn) / largest;
        char name[32];
        snprintf(name, sizeof name, "\"%s\"", st->model->joints[j].name);
        const char *found = strstr(text, name);
        const bool is_named = found != NULL && found < strstr(text, " can ");
        n_least += size > 0.0500001;
        n_most += size > 0.0499999;
        if (is_named) ck_assert_double_gt(size, 0.0499999);
    }
    const int n_named = names_in(text);
    const char *more = strstr(text, " more can ");
    int n = n_named;
    if (more != NULL) {
        while (more[-1] != ' ') more--;
        n += atoi(more);
        ck_assert_int_eq(n_named, 10);
    }
    ck_assert_int_ge(n, n_least);
    ck_assert_int_le(n, n_most);
}

/* Does the motion keep all distances between moving joints (a whole part that turns or shifts)? */
static inline bool is_rigid(const sct_structure *st, const double v[])
{
    double most = 0.0;
    for (int a = 0; a < st->n_joints; a++) {
        for (int b = 0; b < a; b++) {
            double u[3], w[3], sum = 0.0;
            if (st->n_free[a] == 0 || st->n_free[b] == 0) continue;
            sct_joint_displacement(st, v, NULL, a, u);
            sct_joint_displacement(st, v, NULL, b, w);
            for (int i = 0; i < 3; i++)
                sum += (u[i] - w[i]) * (st->model->joints[a].at[i] - st->model->joints[b].at[i]);
            most = fmax(most, fabs(sum));
        }
    }
    return most < 1e-9;
}

/* Finds the one mechanism of a model and compares it with the singular vector; returns whether it was told as joints
 * (true) or as a part that moves as a whole. */
static inline bool ck_one_mechanism(sct_model *m)
{
    finding f = find(m);
    double *v = calloc((size_t)f.st->n_dof, sizeof *v);
    ck_assert_int_eq(null_motion(f.st, v), 1);
    ck_assert_int_eq(f.status, SCT_MECHANISM);
    ck_assert_int_eq(sct_issues_count(f.issues), 1);
    const bool as_joints = strncmp(message(&f, 0), "joint", 5) == 0;
    if (as_joints)
        ck_joints(f.st, v, message(&f, 0));
    else
        ck_assert(is_rigid(f.st, v));
    free(v);
    drop(&f);
    return as_joints;
}

static inline void remove_member(sct_model *m, int e)
{
    for (int i = e; i + 1 < m->n_members; i++) m->members[i] = m->members[i + 1];
    m->n_members--;
}
#endif
