/* Every request for memory and every call to the system of whole runs of the program made to fail, once and from then
 * on: the exit code is that of README.md, outputs are there whole or not at all, old ones stay as they were, nothing
 * leaks and nothing crashes. The program's main is linked in under another name and runs in a child process for every
 * fault. */
#define _GNU_SOURCE
#include "support.h"

#include <SuiteSparse_config.h>
#include <cJSON.h>
#include <dirent.h>
#include <errno.h>
#include <fcntl.h>
#include <ftw.h>
#include <signal.h>
#include <stdarg.h>
#include <string.h>
#include <sys/mman.h>
#include <sys/stat.h>
#include <sys/wait.h>
#include <unistd.h>

#include "base/random.h"
#include "model/gate.h"
#include "scantling.h"

/* ---- the calls that can be made to fail -------------------------------------------------------------------------- */

#define CALL_LIST(X)                                                                                                   \
    X(MEMORY, 0)                                                                                                       \
    X(OPEN, EMFILE)                                                                                                    \
    X(READ, EIO)                                                                                                       \
    X(WRITE, ENOSPC)                                                                                                   \
    X(FSYNC, EIO)                                                                                                      \
    X(CLOSE, ENOSPC)                                                                                                   \
    X(RENAME, EACCES)                                                                                                  \
    X(LINK, EPERM)                                                                                                     \
    X(UNLINK, EIO)                                                                                                     \
    X(MKDIR, ENOSPC)                                                                                                   \
    X(STAT, EIO)                                                                                                       \
    X(ACCESS, EROFS)                                                                                                   \
    X(FLUSH, ENOSPC)
#define CALL_NAME(name, error) name,
#define CALL_WORD(name, error) #name,
#define CALL_ERROR(name, error) error,
typedef enum call { CALL_LIST(CALL_NAME) N_CALLS } call;
static const char *const CALL_WORDS[] = {CALL_LIST(CALL_WORD)};
static const int CALL_ERRORS[] = {CALL_LIST(CALL_ERROR)};

/* What parent and child share: the fault to come and what was counted. */
static struct shared {
    bool sticky;
    call kind;
    long fail_at; /* number of the call of this kind, from 0; -1: none */
    long calls[N_CALLS];
    long live; /* blocks of memory not given back */
    bool returned;
} * shared;
static bool counts; /* in the child, while the job runs */

static bool fails(call kind)
{
    if (!counts) return false;
    const long number = shared->calls[kind]++;
    if (kind != shared->kind || shared->fail_at < 0) return false;
    if (number != shared->fail_at && !(shared->sticky && number > shared->fail_at)) return false;
    errno = kind == MEMORY ? ENOMEM : CALL_ERRORS[kind];
    return true;
}

/* Memory. The plain build puts its own malloc before the C library's, so that every library's requests are seen; a
 * sanitizer has its own malloc, and there the requests of our objects, of CHOLMOD, AMD and cJSON are. */
#ifdef __has_feature /* clang's way */
#if __has_feature(address_sanitizer)
#define __SANITIZE_ADDRESS__ 1
#endif
#endif
#ifdef __SANITIZE_ADDRESS__
#define MINE(f) __wrap_##f
#define ITS(f) __real_##f
#else
#define MINE(f) f
#define ITS(f) __libc_##f
#endif
#define SEEN __attribute__((visibility("default"))) /* by the shared libraries too */
void *ITS(malloc)(size_t size);
void *ITS(calloc)(size_t n, size_t size);
void *ITS(realloc)(void *p, size_t size);
void ITS(free)(void *p);
SEEN void *MINE(malloc)(size_t size);
SEEN void *MINE(calloc)(size_t n, size_t size);
SEEN void *MINE(realloc)(void *p, size_t size);
SEEN void MINE(free)(void *p);

static void *counted(void *p)
{
    if (counts) shared->live += p != NULL;
    return p;
}

void *MINE(malloc)(size_t size)
{
    return fails(MEMORY) ? NULL : counted(ITS(malloc)(size));
}

void *MINE(calloc)(size_t n, size_t size)
{
    return fails(MEMORY) ? NULL : counted(ITS(calloc)(n, size));
}

void *MINE(realloc)(void *p, size_t size)
{
    if (fails(MEMORY)) return NULL;
    if (counts) shared->live -= p != NULL;
    return counted(ITS(realloc)(p, size));
}

void MINE(free)(void *p)
{
    if (counts) shared->live -= p != NULL;
    ITS(free)(p);
}

/* Calls to the system: the linker leads those of our objects here (see the Makefile). */
#define PASS(kind, type, name, parameters, arguments)                                                                  \
    type __real_##name parameters;                                                                                     \
    type __wrap_##name parameters;                                                                                     \
    type __wrap_##name parameters                                                                                      \
    {                                                                                                                  \
        return fails(kind) ? -1 : __real_##name arguments;                                                             \
    }
PASS(READ, ssize_t, read, (int fd, void *bytes, size_t size), (fd, bytes, size))
PASS(FSYNC, int, fsync, (int fd), (fd))
PASS(RENAME, int, rename, (const char *from, const char *to), (from, to))
PASS(LINK, int, link, (const char *from, const char *to), (from, to))
PASS(UNLINK, int, unlink, (const char *path), (path))
PASS(MKDIR, int, mkdir, (const char *path, mode_t mode), (path, mode))
PASS(STAT, int, stat, (const char *path, struct stat *about), (path, about))
PASS(STAT, int, lstat, (const char *path, struct stat *about), (path, about))
PASS(STAT, int, fstat, (int fd, struct stat *about), (fd, about))
PASS(ACCESS, int, access, (const char *path, int mode), (path, mode))
PASS(FLUSH, int, fflush, (FILE * stream), (stream))

int __real_open(const char *path, int flags, ...);
int __wrap_open(const char *path, int flags, ...);
int __wrap_open(const char *path, int flags, ...)
{
    va_list rest;
    va_start(rest, flags);
    const mode_t mode = (flags & O_CREAT) != 0 ? va_arg(rest, mode_t) : 0;
    va_end(rest);
    return fails(OPEN) ? -1 : __real_open(path, flags, mode);
}

/* A failing close has closed nevertheless; a failing write has written half. */
int __real_close(int fd);
int __wrap_close(int fd);
int __wrap_close(int fd)
{
    const bool fault = fails(CLOSE);
    const int error = errno, done = __real_close(fd);
    if (fault) errno = error;
    return fault ? -1 : done;
}

ssize_t __real_write(int fd, const void *bytes, size_t size);
ssize_t __wrap_write(int fd, const void *bytes, size_t size);
ssize_t __wrap_write(int fd, const void *bytes, size_t size)
{
    if (!fails(WRITE)) return __real_write(fd, bytes, size);
    const int error = errno;
    (void)!__real_write(fd, bytes, size / 2);
    errno = error;
    return -1;
}

/* ---- jobs ----------------------------------------------------------------------------------------------------------
 */

int __real_main(int argc, char **argv);
int __wrap_main(void);

enum { N_OUTPUTS = 4, MOST_ARGUMENTS = 12 };
static const char *const OUTPUTS[N_OUTPUTS] = {"drawing.svg", "model.json", "result.json", "schedule.csv"};
static const char OLD[] = "old\n";

typedef struct job {
    const char *name;
    const char *arguments[MOST_ARGUMENTS];
    int n_outputs;     /* into OUT */
    bool replaces;     /* the folder holds old outputs */
    int code;          /* of a run without fault */
    int (*call)(void); /* instead of the program */
} job;

/* The folder of this test and, in it: OUT, where outputs go; the sized model; the streams of the last run. */
static char folder[] = "/tmp/scantling-faults-XXXXXX";
static char OUT[64], SIZED[64], WRONG[64], STREAM[2][64];

/* CHOLMOD is the program's choice for large models only: a small one by the library. Once-failing requests are the
 * harder ones for it; what the library calls of it survives both kinds, so that nobody's hooks need to be set. */
static int size_with_cholmod(void)
{
    sct_settings settings = sct_settings_defaults();
    settings.engine = SCT_ENGINE_SPARSE;
    settings.starts = 1;
    settings.iterations = 3;
    sct_issues *issues = sct_issues_new();
    sct_model *model = NULL;
    sct_result *result = NULL;
    char *text = NULL;
    sct_status status = issues == NULL ? SCT_NO_MEMORY : SCT_OK;
    if (status == SCT_OK) status = sct_model_read("models/benchmarks/72bar_case1.json", &model, issues);
    if (status == SCT_OK) status = sct_size(model, &settings, &result, issues);
    if (status == SCT_OK) status = sct_write(result, SCT_RESULT_JSON, NULL, &text, NULL);
    if (status == SCT_OK) fputs(text, stdout);
    free(text);
    sct_result_free(result);
    sct_model_free(model);
    sct_issues_free(issues);
    fflush(stdout);
    return status == SCT_OK ? 0 : status == SCT_NO_MEMORY ? 7 : status == SCT_CANNOT_READ ? 3 : 70;
}

/* Tables of the gate grow at keys and at values: a text of many of both. */
static int look_at_many_values(void)
{
    static char text[1 << 16];
    size_t size = (size_t)snprintf(text, sizeof text, "{");
    for (int i = 0; i < 300; i++) size += (size_t)snprintf(text + size, sizeof text - size, "\"k%d\": %d, ", i, i);
    size += (size_t)snprintf(text + size, sizeof text - size, "\"list\": [0");
    for (int i = 0; i < 3000; i++) size += (size_t)snprintf(text + size, sizeof text - size, ", %d", i);
    size += (size_t)snprintf(text + size, sizeof text - size, "]}");
    sct_gate_value *values;
    size_t n;
    const sct_status status = sct_gate_check("many", text, size, &values, &n, NULL);
    free(values);
    return status == SCT_OK ? 0 : status == SCT_NO_MEMORY ? 7 : 70;
}

static const job JOBS[] = {
    {"size with outputs", {"size", "models/demo_roof.json", "-o", OUT}, 4, false, 0, NULL},
    {"size over old outputs",
     {"size", "models/demo_roof.json", "-o", OUT, "--force", "--json", "--starts=2"},
     4,
     true,
     0,
     NULL},
    {"size 200 bars",
     {"size", "models/benchmarks/200bar.json", "--starts", "1", "--iterations", "4"},
     0,
     false,
     1,
     NULL},
    {"check a sized model", {"check", SIZED, "-o", OUT}, 3, false, 0, NULL},
    {"explain", {"explain", SIZED, "--member", "T4"}, 0, false, 0, NULL},
    {"explain as JSON", {"explain", SIZED, "--member", "T4", "--json"}, 0, false, 0, NULL},
    {"a doubled key", {"check", "tests/bad_inputs/J06-same-joint-twice/model.json"}, 0, false, 3, NULL},
    {"a model with many faults", {"check", WRONG}, 0, false, 3, NULL},
    {"a mechanism", {"size", "tests/bad_inputs/C03-panel-without-diagonal/model.json"}, 0, false, 4, NULL},
    {"many values", {""}, 0, false, 0, look_at_many_values},
    {"size by CHOLMOD", {""}, 0, false, 0, size_with_cholmod},
};
enum { N_JOBS = sizeof JOBS / sizeof JOBS[0] };

static char *read_whole(const char *path, size_t *size)
{
    FILE *file = fopen(path, "rb");
    if (file == NULL) return NULL;
    char *text = malloc(1 << 22);
    *size = fread(text, 1, (1 << 22) - 1, file);
    text[*size] = '\0';
    fclose(file);
    return text;
}

static void write_whole(const char *path, const char *text)
{
    FILE *file = fopen(path, "wb");
    ck_assert(file != NULL && fputs(text, file) >= 0 && fclose(file) == 0);
}

static int remove_one(const char *path, const struct stat *about, int kind, struct FTW *place)
{
    (void)about, (void)kind, (void)place;
    return remove(path);
}

static void remove_all(const char *path)
{
    nftw(path, remove_one, 8, FTW_DEPTH | FTW_PHYS);
}

static void lay_out(const job *j)
{
    char path[128];
    remove_all(OUT);
    if (!j->replaces) return;
    ck_assert_int_eq(mkdir(OUT, 0777), 0);
    for (int k = 0; k < N_OUTPUTS; k++) {
        snprintf(path, sizeof path, "%s/%s", OUT, OUTPUTS[k]);
        write_whole(path, OLD);
    }
}

/* Runs a job with a fault in a child; its wait status. */
static int run(const job *j, call kind, long fail_at, bool sticky)
{
    char *arguments[MOST_ARGUMENTS + 2] = {(char *)(size_t) "scantling"};
    int n = 1;
    for (; n <= MOST_ARGUMENTS && j->arguments[n - 1] != NULL; n++) arguments[n] = (char *)(size_t)j->arguments[n - 1];
    lay_out(j);
    fflush(NULL);
    memset(shared, 0, sizeof *shared);
    shared->kind = kind;
    shared->fail_at = fail_at;
    shared->sticky = sticky;
    const pid_t child = fork();
    ck_assert_int_ge(child, 0);
    if (child == 0) {
        if (freopen(STREAM[0], "wb", stdout) == NULL || freopen(STREAM[1], "wb", stderr) == NULL) _exit(99);
        static char buffer[BUFSIZ]; /* so that the C library asks for none, which it would keep */
        setvbuf(stdout, buffer, _IOFBF, sizeof buffer);
        setvbuf(stderr, NULL, _IONBF, 0);
        alarm(60);
        counts = true;
        const int code = j->call != NULL ? j->call() : __real_main(n, arguments);
        counts = false;
        shared->returned = true;
        exit(code);
    }
    int status = -1;
    ck_assert_int_eq(waitpid(child, &status, 0), child);
    return status;
}

/* ---- what must hold after a fault -----------------------------------------------------------------------------------
 */

typedef struct seen {
    char *out; /* standard output */
    char *output[N_OUTPUTS];
} seen;

static seen reference[N_JOBS];
static long n_calls[N_JOBS][N_CALLS], spare_blocks[N_JOBS];

typedef struct tally {
    int whole, none, old, mixed, strange;
} tally;

static tally look(int j)
{
    tally t = {0};
    char path[128];
    size_t size;
    for (int k = 0; k < N_OUTPUTS; k++) {
        snprintf(path, sizeof path, "%s/%s", OUT, OUTPUTS[k]);
        char *text = read_whole(path, &size);
        const char *wanted = reference[j].output[k];
        if (text == NULL)
            t.none++;
        else if (wanted != NULL && strcmp(text, wanted) == 0)
            t.whole++;
        else if (strcmp(text, OLD) == 0)
            t.old++;
        else
            t.mixed++;
        free(text);
    }
    DIR *dir = opendir(OUT);
    for (const struct dirent *e; dir != NULL && (e = readdir(dir)) != NULL;) {
        bool known = e->d_name[0] == '.';
        for (int k = 0; k < N_OUTPUTS; k++) known |= strcmp(e->d_name, OUTPUTS[k]) == 0;
        t.strange += !known;
    }
    if (dir != NULL) closedir(dir);
    return t;
}

static bool same_output(int j)
{
    size_t size;
    char *out = read_whole(STREAM[0], &size);
    const bool same = out != NULL && strcmp(out, reference[j].out) == 0;
    free(out);
    return same;
}

/* Is a code one that README.md gives for the failure of such a call? Of a stat it depends on what was looked at. */
static bool code_fits(call kind, int code)
{
    switch (kind) {
    case MEMORY: return code == 7;
    case READ: return code == 3;
    case OPEN:
    case STAT: return code == 3 || code == 6;
    default: return code == 6;
    }
}

/* One fault; NULL when all holds. */
static const char *fault_of(int j, call kind, long at, bool sticky)
{
    const job *done = &JOBS[j];
    const int status = run(done, kind, at, sticky);
    if (!WIFEXITED(status)) return "ended by a signal";
    const int code = WEXITSTATUS(status);
    if (!shared->returned) return "ended elsewhere";
    if (shared->live != spare_blocks[j] && kind != FLUSH) return "memory not given back";
    const tally t = look(j);
    const bool all_new = t.whole == done->n_outputs && (t.none == N_OUTPUTS - done->n_outputs);
    const bool untouched = done->replaces ? t.old == N_OUTPUTS : t.none == N_OUTPUTS;
    /* what could not be taken away stays; what could not be put back is kept under its second name */
    const bool may_stay = kind == UNLINK || (kind == RENAME && sticky && done->replaces);
    if (t.strange > 0 && !may_stay) return "a strange file stayed";
    if (code == done->code && code != 3) {
        if (!all_new) return "good exit code without every output";
        return same_output(j) ? NULL : "good exit code with another standard output";
    }
    if (code == 3 && done->code == 3) return NULL;
    if (!code_fits(kind, code)) return "wrong exit code";
    if (kind == FLUSH) return all_new ? NULL : "outputs depend on standard output";
    if (may_stay) return t.mixed == 0 ? NULL : "a half file";
    return untouched ? NULL : "a half set of outputs";
}

/* ---- tests
 * ------------------------------------------------------------------------------------------------------------ */

static bool is_full(void)
{
    return getenv("SCT_TEST_FULL") != NULL;
}

static void path_of(char out[64], const char *name)
{
    snprintf(out, 64, "%s/%s", folder, name);
}

static void set_up(void)
{
    shared = mmap(NULL, sizeof *shared, PROT_READ | PROT_WRITE, MAP_SHARED | MAP_ANONYMOUS, -1, 0);
    ck_assert(shared != MAP_FAILED && mkdtemp(folder) != NULL);
#ifdef __SANITIZE_ADDRESS__
    SuiteSparse_config.malloc_func = MINE(malloc);
    SuiteSparse_config.calloc_func = MINE(calloc);
    SuiteSparse_config.realloc_func = MINE(realloc);
    SuiteSparse_config.free_func = MINE(free);
    cJSON_InitHooks(&(cJSON_Hooks){MINE(malloc), MINE(free)});
#endif
    path_of(OUT, "out");
    path_of(SIZED, "sized.json");
    path_of(WRONG, "wrong.json");
    path_of(STREAM[0], "stdout");
    path_of(STREAM[1], "stderr");
    size_t size;
    char path[128], *model = read_whole("models/demo_roof.json", &size);
    for (char *p = model; (p = strstr(p, "\"from\"")) != NULL; p += 6)
        p[2] = 'x'; /* "fxom": as many faults as members */
    write_whole(WRONG, model);
    free(model);
    for (int j = 0; j < N_JOBS; j++) {
        const int status = run(&JOBS[j], MEMORY, -1, false);
        ck_assert_msg(WIFEXITED(status) && WEXITSTATUS(status) == JOBS[j].code, "%s: exit code %d", JOBS[j].name,
                      WEXITSTATUS(status));
        memcpy(n_calls[j], shared->calls, sizeof n_calls[j]);
        spare_blocks[j] = shared->live; /* of the C library, such as buffers of streams */
        reference[j].out = read_whole(STREAM[0], &size);
        for (int k = 0; k < N_OUTPUTS; k++) {
            snprintf(path, sizeof path, "%s/%s", OUT, OUTPUTS[k]);
            reference[j].output[k] = read_whole(path, &size);
        }
        ck_assert_int_eq(look(j).whole, JOBS[j].n_outputs);
        if (j == 0) write_whole(SIZED, reference[0].output[1]);
    }
}

static void tear_down(void)
{
    remove_all(folder);
}

static int broken;

static void expect(int j, call kind, long at, bool sticky)
{
    const char *fault = fault_of(j, kind, at, sticky);
    if (fault == NULL) return;
    size_t size;
    char *err = read_whole(STREAM[1], &size);
    const tally t = look(j);
    printf("%s, %s %ld%s: %s; outputs: %d whole, %d none, %d old, %d other; standard error: %.400s\n", JOBS[j].name,
           CALL_WORDS[kind], at, sticky ? " and later" : "", fault, t.whole, t.none, t.old, t.mixed,
           err != NULL ? err : "");
    free(err);
    broken++;
}

START_TEST(every_failing_request_for_memory_ends_with_exit_code_7_and_no_output)
{
    sct_random random = {.state = 7};
    long total = 0, done = 0;
    for (int j = 0; j < N_JOBS; j++) total += 2 * n_calls[j][MEMORY];
#ifdef __SANITIZE_ADDRESS__
    const double share = is_full() ? 1.0 : 50.0 / (double)total;
    const long few = 0;
#else
    const long few = 100; /* jobs of so many requests are tried wholly: those that end at the gate */
    const double share = is_full() ? 1.0 : 200.0 / (double)total;
#endif
    for (int j = 0; j < N_JOBS; j++) {
        for (long k = 0; k < 2 * n_calls[j][MEMORY]; k++) {
            if (n_calls[j][MEMORY] > few && sct_random_unit(&random) >= share) continue;
            expect(j, MEMORY, k / 2, k % 2 == 1);
            done++;
        }
    }
    printf("measured: %ld of %ld failing requests for memory tried in %d jobs\n", done, total, N_JOBS);
    ck_assert_int_eq(broken, 0);
}
END_TEST

START_TEST(every_failing_call_to_the_system_leaves_all_outputs_or_none)
{
    long done = 0;
    for (int j = 0; j < N_JOBS; j++) {
        for (call kind = OPEN; kind < N_CALLS; kind++) {
            for (long k = 0; k < 2 * n_calls[j][kind]; k++, done++) expect(j, kind, k / 2, k % 2 == 1);
        }
    }
    printf("measured: %ld failing calls to the system tried\n", done);
    ck_assert_int_eq(broken, 0);
}
END_TEST

int __wrap_main(void)
{
    Suite *suite = suite_create("faults");
    TCase *tcase = tcase_create("faults");
    tcase_add_checked_fixture(tcase, set_up, tear_down);
    tcase_set_timeout(tcase, 3600);
    tcase_add_test(tcase, every_failing_request_for_memory_ends_with_exit_code_7_and_no_output);
    tcase_add_test(tcase, every_failing_call_to_the_system_leaves_all_outputs_or_none);
    suite_add_tcase(suite, tcase);
    return run_suite(suite);
}
