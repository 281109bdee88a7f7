/* Mistakes that the program should never make, made here: each ends with exit code 70, words, and no output. The linker
 * leads calls of the program and the library through this test (see the Makefile). */
#define _GNU_SOURCE
#include "support.h"

#include <fcntl.h>
#include <string.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

#include "analysis/accuracy.h"
#include "cli/exits.h"
#include "numerics/skyline.h"
#include "numerics/sparse.h"
#include "sizing/duty.h"
#include "truss_shapes.h"

typedef enum mistake {
    NONE,
    NO_FACTOR,          /* of a sound stiffness */
    WRONG_DISPLACEMENT, /* one, by a millionth, behind all that the first path vouches for */
    WRONG_FORCE,        /* likewise */
    NOT_READ_BACK,      /* the sized model is not taken by the reader */
    ANOTHER_READ_BACK,  /* some other model comes back */
    NO_SECOND_FACTOR,   /* of the second path's envelope */
    NO_SPARSE_FACTOR    /* of the second path's matrix where the envelope is too large */
} mistake;
static mistake made;

/* ---- where calls are led ------------------------------------------------------------------------------------------
 */

sct_status __real_sct_duty_analyse_areas(sct_duty *duty, const double A[]);
sct_status __wrap_sct_duty_analyse_areas(sct_duty *duty, const double A[]);
sct_status __wrap_sct_duty_analyse_areas(sct_duty *duty, const double A[])
{
    return made == NO_FACTOR ? SCT_MECHANISM : __real_sct_duty_analyse_areas(duty, A);
}

/* Changes the largest of n numbers by a millionth. */
static void change_largest(size_t n, double x[])
{
    size_t most = 0;
    for (size_t i = 0; i < n; i++) {
        if (fabs(x[i]) > fabs(x[most])) most = i;
    }
    x[most] *= 1.0 + 1e-6;
}

sct_status __real_sct_accuracy_refine(sct_solver *solver, sct_response *response, sct_accuracy *accuracy,
                                      sct_issues *issues);
sct_status __wrap_sct_accuracy_refine(sct_solver *solver, sct_response *response, sct_accuracy *accuracy,
                                      sct_issues *issues);
sct_status __wrap_sct_accuracy_refine(sct_solver *solver, sct_response *response, sct_accuracy *accuracy,
                                      sct_issues *issues)
{
    const sct_structure *st = sct_solver_structure(solver);
    const sct_status status = __real_sct_accuracy_refine(solver, response, accuracy, issues);
    if (made == WRONG_DISPLACEMENT) change_largest((size_t)st->n_dof, response->u);
    if (made == WRONG_FORCE) change_largest((size_t)st->n_bars, response->N);
    return status;
}

sct_status __real_sct_model_parse(const char *name, const char *bytes, size_t size, sct_model **model,
                                  sct_issues *issues);
sct_status __wrap_sct_model_parse(const char *name, const char *bytes, size_t size, sct_model **model,
                                  sct_issues *issues);
sct_status __wrap_sct_model_parse(const char *name, const char *bytes, size_t size, sct_model **model,
                                  sct_issues *issues)
{
    const bool is_back = strcmp(name, "model.json") == 0;
    if (is_back && made == NOT_READ_BACK) return __real_sct_model_parse(name, bytes, size / 2, model, issues);
    if (is_back && made == ANOTHER_READ_BACK) return sct_model_read("models/demo_roof.json", model, issues);
    return __real_sct_model_parse(name, bytes, size, model, issues);
}

bool __real_sct_skyline_factor(sct_skyline *s);
bool __wrap_sct_skyline_factor(sct_skyline *s);
bool __wrap_sct_skyline_factor(sct_skyline *s)
{
    return made != NO_SECOND_FACTOR && __real_sct_skyline_factor(s);
}

sct_status __real_sct_sparse_update(sct_sparse *factor, const double values[], int *stopped_at);
sct_status __wrap_sct_sparse_update(sct_sparse *factor, const double values[], int *stopped_at);
sct_status __wrap_sct_sparse_update(sct_sparse *factor, const double values[], int *stopped_at)
{
    return made == NO_SPARSE_FACTOR ? SCT_NOT_CONVEX : __real_sct_sparse_update(factor, values, stopped_at);
}

int __real_main(int argc, char **argv);
int __wrap_main(void);

/* ---- the program ---------------------------------------------------------------------------------------------------
 */

static char folder[] = "/tmp/scantling-self-check-XXXXXX";
static char said[4096]; /* standard error of the last run */

static char *path_to(const char *name)
{
    static char path[sizeof folder + 32];
    snprintf(path, sizeof path, "%s/%s", folder, name);
    return path;
}

static _Noreturn void be_the_program(mistake m)
{
    char out[sizeof folder + 32], file[] = "models/benchmarks/10bar_case1.json";
    char *arguments[] = {"scantling", "size", "-o", out, file, NULL};
    snprintf(out, sizeof out, "%s/out", folder);
    made = m;
    if (freopen(path_to("stdout"), "w", stdout) == NULL || freopen(path_to("stderr"), "w", stderr) == NULL) _exit(99);
    exit(__real_main(5, arguments));
}

/* Sizes a model with a mistake; the exit code. */
static int run(mistake m)
{
    int how;
    const pid_t child = fork();
    ck_assert_int_ge(child, 0);
    if (child == 0) be_the_program(m);
    ck_assert_int_eq(waitpid(child, &how, 0), child);
    ck_assert(WIFEXITED(how));
    FILE *f = fopen(path_to("stderr"), "r");
    ck_assert_ptr_nonnull(f);
    said[fread(said, 1, sizeof said - 1, f)] = '\0';
    fclose(f);
    return WEXITSTATUS(how);
}

static bool exists(const char *name)
{
    struct stat about;
    return stat(path_to(name), &about) == 0;
}

static bool has_printed(void)
{
    struct stat about;
    return stat(path_to("stdout"), &about) != 0 || about.st_size > 0;
}

static void set_up(void)
{
    ck_assert_ptr_nonnull(mkdtemp(folder));
}

static void tear_down(void)
{
    remove(path_to("stdout"));
    remove(path_to("stderr"));
    ck_assert_int_eq(rmdir(folder), 0);
}

START_TEST(a_mistake_ends_with_exit_code_70_its_words_and_no_output)
{
    static const struct {
        mistake made;
        const char *words;
    } cases[] = {
        {NO_FACTOR, "the stiffness matrix of a sound structure has no factor"},
        {WRONG_DISPLACEMENT, "internal check failed: displacement in "},
        {WRONG_FORCE, "internal check failed: force of "},
        {NOT_READ_BACK, "internal check failed: the sized model cannot be read back"},
        {ANOTHER_READ_BACK, "internal check failed: the written model is not the one of the result"},
        {NO_SECOND_FACTOR, "a second analysis of the written model finds no factor of its stiffness"},
    };
    for (size_t k = 0; k < sizeof cases / sizeof cases[0]; k++) {
        const int code = run(cases[k].made);
        if (strstr(said, cases[k].words) == NULL) ck_abort_msg("expected \"%s\", found: %s", cases[k].words, said);
        ck_assert_int_eq(code, EXIT_SELF_CHECK);
        ck_assert(!exists("out") && !has_printed());
    }
}
END_TEST

START_TEST(no_sparse_factor_of_the_second_path_is_a_failed_check)
{
    sct_model *m = ts_beam(2000, 1.0, 1.0, -1);
    ts_shuffle_joints(m, 3); /* the envelope is full */
    m->groups[0].allowable[0] = m->groups[0].allowable[1] = 200e6;
    mb_each_case(m);
    sct_result *result = NULL;
    sct_issues *issues = sct_issues_new();
    ck_assert_int_eq(sct_check(m, NULL, &result, issues), SCT_OK);
    made = NO_SPARSE_FACTOR;
    ck_assert_int_eq(sct_verify(m, result, issues), SCT_SELF_CHECK);
    made = NONE;
    const sct_issue *last = sct_issues_get(issues, sct_issues_count(issues) - 1);
    ck_assert_ptr_nonnull(strstr(last->message, "finds no factor of its stiffness"));
    sct_result_free(result);
    sct_issues_free(issues);
    mb_free(m);
}
END_TEST

int __wrap_main(void)
{
    Suite *suite = suite_create("self check");
    TCase *program = tcase_create("program"), *library = tcase_create("library");
    tcase_add_checked_fixture(program, set_up, tear_down);
    tcase_set_timeout(program, 120);
    tcase_set_timeout(library, 120);
    tcase_add_test(program, a_mistake_ends_with_exit_code_70_its_words_and_no_output);
    tcase_add_test(library, no_sparse_factor_of_the_second_path_is_a_failed_check);
    suite_add_tcase(suite, program);
    suite_add_tcase(suite, library);
    return run_suite(suite);
}
