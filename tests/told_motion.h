/* What is said about the motions of a model, held to its null space: joints, directions, axes. */
#ifndef TESTS_TOLD_MOTION_H
#define TESTS_TOLD_MOTION_H

#include "null_motion.h"

static inline int count(int few, int many)
{
    return getenv("SCT_TEST_FULL") != NULL ? many : few;
}

/* ---- what the words say -------------------------------------------------------------------------------------------
 */

/* Reads "x", "-y" or "(0.71, -0.71)"; returns whether there is a direction. */
static inline bool read_direction(const char *text, double d[3])
{
    memset(d, 0, 3 * sizeof *d);
    const double sign = *text == '-' ? -1.0 : 1.0;
    if (*text == '-') text++;
    if (*text >= 'x' && *text <= 'z') {
        d[*text - 'x'] = sign;
        return true;
    }
    return sscanf(text, "(%lf, %lf, %lf)", &d[0], &d[1], &d[2]) >= 2;
}

static inline double length(const double a[3])
{
    return hypot(hypot(a[0], a[1]), a[2]);
}

static inline void cross(const double a[3], const double b[3], double c[3])
{
    for (int i = 0; i < 3; i++) c[i] = a[(i + 1) % 3] * b[(i + 2) % 3] - a[(i + 2) % 3] * b[(i + 1) % 3];
}

/* Sine of the angle between two vectors. */
static inline double apart(const double a[3], const double b[3])
{
    double c[3];
    cross(a, b, c);
    return length(c) / (length(a) * length(b));
}

/* Two decimals are shown: each component within 0.005, two or three of them. */
static const double SHOWN_APART = 0.01;

/* Every direction in the message of joints is that of the joint in v. */
static inline int ck_directions(const sct_structure *st, const double v[], const char *text)
{
    const bool as_turn = is_turning(st, v);
    const char *verb = strstr(text, as_turn ? " can turn" : " can move"), *all = verb + strlen(" can move");
    const char *word = as_turn ? " about " : " in ";
    const size_t length_of_word = strlen(word);
    double common[3], d[3], u[3];
    if (strncmp(all, " together", 9) == 0) all += 9;
    const bool has_common = strncmp(all, word, length_of_word) == 0 && read_direction(all + length_of_word, common);
    int n = 0;
    for (int j = 0; j < st->n_joints; j++) {
        char name[40];
        snprintf(name, sizeof name, "\"%s\"", st->model->joints[j].name);
        const char *at = strstr(text, name);
        if (at == NULL || at > verb) continue;
        at += strlen(name);
        const bool own = strncmp(at, word, length_of_word) == 0 && read_direction(at + length_of_word, d);
        ck_assert_msg(own || has_common, "%s", text);
        seen_at(st, v, j, as_turn, u);
        ck_assert_msg(apart(u, own ? d : common) < SHOWN_APART, "%s: %s", name, text);
        n++;
    }
    return n;
}

/* "shift in D", "turn about P", "turn about an axis through P along D": v is that motion at every joint. */
static inline void ck_motion_of_part(const sct_structure *st, const double v[], const char *text)
{
    const char *shift = strstr(text, " can shift in "), *turn = strstr(text, " can turn about ");
    const char *at = strchr(text, '('), *along = strstr(text, " along ");
    double d[3], P[3] = {0}, size = 0.0;
    ck_assert_msg((shift == NULL) != (turn == NULL), "%s", text);
    if (shift != NULL) ck_assert(read_direction(shift + strlen(" can shift in "), d));
    if (turn != NULL) ck_assert_msg(sscanf(at, "(%lf, %lf, %lf)", &P[0], &P[1], &P[2]) == st->dim, "%s", text);
    if (turn != NULL && st->dim == 3) ck_assert(read_direction(along + strlen(" along "), d));
    if (turn != NULL && st->dim == 2) memcpy(d, (double[3]){0, 0, 1}, sizeof d);
    for (int j = 0; j < st->n_joints; j++) size = fmax(size, size_at(st, v, j, false));
    for (int j = 0; j < st->n_joints; j++) {
        double u[3], arm[3], around[3];
        sct_joint_displacement(st, v, NULL, j, u);
        if (length(u) < 0.05 * size) continue;
        for (int i = 0; i < 3; i++) arm[i] = st->model->joints[j].at[i] - P[i];
        cross(d, arm, around);
        if (shift != NULL) ck_assert_msg(apart(u, d) < SHOWN_APART, "%s", text);
        if (turn == NULL || strstr(text, "sliding") != NULL) continue;
        /* an axis of two decimals is off by up to 0.01 of the arm */
        const double off = SHOWN_APART * length(arm) / length(around);
        if (off < 0.3) ck_assert_msg(apart(u, around) < 2.0 * off, "%s", text);
    }
}

typedef struct tally {
    int structures, as_joints, as_part, stable, several;
} tally;

/* The first message: of an error if there is one. */
static inline const sct_issue *first_said(const finding *f)
{
    int i = 0;
    while (sct_issues_errors(f->issues) > 0 && sct_issues_get(f->issues, i)->severity != SCT_ERROR) i++;
    return sct_issues_get(f->issues, i);
}

/* It stands at the first joint that it names. */
static inline void ck_place(const sct_issue *said)
{
    const char *name = strchr(said->message, '"');
    if (name != NULL && name < strstr(said->message, " can ")) ck_assert_int_eq(said->line, 1000 + atoi(name + 2));
}

/* What is said of a model is what its null space says: nothing where it is empty; one motion: its joints, directions or
 * the motion of the part; more: refused, and who is named moves. Takes the model over. */
static inline void ck_as_null_space(sct_model *m, int expected, tally *t)
{
    finding f = find(m);
    double *v = calloc((size_t)f.st->n_dof + 1, sizeof *v);
    const int nullity = null_motion(f.st, v);
    const sct_issue *said = first_said(&f);
    const char *text = said != NULL ? said->message : "";
    if (expected >= 0) ck_assert_int_eq(nullity, expected);
    t->structures++;
    ck_assert_msg(f.status == (nullity > 0 ? SCT_MECHANISM : SCT_OK), "%d motions, but: %s", nullity, text);
    if (nullity == 0) {
        const bool is_parted = strncmp(text, "the structure falls into ", 25) == 0; /* parts that stand alone */
        ck_assert_msg(sct_issues_count(f.issues) == is_parted, "%s", text);
        t->stable++;
    } else if (nullity > 1) {
        t->several++;
    } else if (strncmp(text, "joint", 5) == 0) {
        ck_assert_int_eq(sct_issues_errors(f.issues), 1);
        ck_joints(f.st, v, text);
        ck_assert_int_ge(ck_directions(f.st, v, text), 1);
        ck_place(said);
        t->as_joints++;
    } else {
        ck_assert_int_eq(sct_issues_errors(f.issues), 1);
        ck_assert_msg(is_rigid(f.st, v), "%s", text);
        ck_motion_of_part(f.st, v, text);
        t->as_part++;
    }
    free(v);
    drop(&f);
}

static inline void tell(const char *what, const tally *t)
{
    printf("measured: %s: %d structures, each as its null space says (%d by joints, %d as a part, %d with several "
           "motions, "
           "%d stable)\n",
           what, t->structures, t->as_joints, t->as_part, t->several, t->stable);
    fflush(stdout);
}
#endif
