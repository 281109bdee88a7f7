/* Every place of the library that asks for memory is refused once, and from there on, in this process: what is called
 * says so or does without, and nothing leaks. A place is a chain of calls that ends in a request, and its first request
 * is the one refused. The linker leads requests to arenas through this test, too: their blocks would hide most of them.
 */
#define _GNU_SOURCE
#include "support.h"

#include <dirent.h>
#include <execinfo.h>
#include <stdint.h>
#include <string.h>

#include "base/arena.h"
#include "count_memory.h"
#include "frame_texts.h"
#include "scantling.h"

void *__real_sct_arena_array(sct_arena *arena, size_t n, size_t size);
void *__wrap_sct_arena_array(sct_arena *arena, size_t n, size_t size);
void *__wrap_sct_arena_array(sct_arena *arena, size_t n, size_t size)
{
    return memory_fails() ? NULL : __real_sct_arena_array(arena, n, size);
}

char *__real_sct_arena_string(sct_arena *arena, const char *text, size_t length);
char *__wrap_sct_arena_string(sct_arena *arena, const char *text, size_t length);
char *__wrap_sct_arena_string(sct_arena *arena, const char *text, size_t length)
{
    return memory_fails() ? NULL : __real_sct_arena_string(arena, text, length);
}

/* ---- places ------------------------------------------------------------------------------------------------------ */

enum { MOST_PLACES = 1 << 14, DEPTH = 24 };

/* All places refused so far, in every job, as a table of hashes; the requests of the present job to be refused. */
static struct {
    uint64_t hash[2 * MOST_PLACES];
    long request[MOST_PLACES], begin; /* counted from the beginning of the job */
    int n, n_new;
    bool is_asking; /* the C library looks at the stack with memory of its own */
} places;

static uint64_t mixed(uint64_t hash, uint64_t bits)
{
    return (hash ^ bits) * 0x100000001b3u; /* FNV-1a */
}

static void note_place(long request)
{
    void *chain[DEPTH];
    if (places.is_asking || places.n == MOST_PLACES) return;
    places.is_asking = true;
    const int depth = backtrace(chain, DEPTH);
    places.is_asking = false;
    uint64_t hash = 0xcbf29ce484222325u;
    for (int i = 0; i < depth; i++) hash = mixed(hash, (uint64_t)(uintptr_t)chain[i]);
    size_t at = hash % (2 * MOST_PLACES);
    for (; places.hash[at] != 0; at = (at + 1) % (2 * MOST_PLACES)) {
        if (places.hash[at] == hash) return;
    }
    places.hash[at] = hash;
    places.n++;
    places.request[places.n_new++] = request - places.begin;
}

/* ---- jobs -------------------------------------------------------------------------------------------------------- */

typedef struct job {
    const char *name;
    const char *text;
    size_t size;
    sct_settings settings;
} job;

/* Adds a text that was written, and gives it back. */
static void add_text(char *text, uint64_t *told)
{
    for (const char *p = text; p != NULL && *p != '\0'; p++) *told = mixed(*told, (unsigned char)*p);
    free(text);
}

/* Writes a result in every form and reads the sized model back for the second analysis. */
static sct_status show(const sct_result *r, sct_issues *issues, uint64_t *told)
{
    sct_status status = SCT_OK;
    const sct_write_options options = {
        .combination = -1, .colour = true, .draw_loads = true, .draw_deflected = r->n_combinations > 0};
    for (int f = SCT_SUMMARY; f <= SCT_DRAWING_SVG && status == SCT_OK; f++) {
        char *text = NULL;
        status = sct_write(r, (sct_format)f, &options, &text, NULL);
        add_text(text, told);
    }
    char *text = NULL, *json = NULL;
    if (status == SCT_OK) status = sct_explain(r, r->members[0].name, &text, issues);
    if (status == SCT_OK) status = sct_explain_json(r, r->members[0].name, &json, issues);
    add_text(text, told);
    add_text(json, told);
    if (status == SCT_OK && sct_explain(r, "nobody", &text, issues) != SCT_BAD_INPUT) status = SCT_SELF_CHECK;
    char *sized = NULL;
    size_t size = 0;
    sct_model *model = NULL;
    if (status == SCT_OK) status = sct_write(r, SCT_MODEL_JSON, NULL, &sized, &size);
    if (status == SCT_OK) status = sct_model_parse("sized", sized, size, &model, issues);
    if (status == SCT_OK) status = sct_verify(model, r, issues);
    sct_model_free(model);
    free(sized);
    return status;
}

/* All that the library does with a model; *told: a hash of what was written. Asserts nothing: Check asks for memory. */
static sct_status whole_job(const job *j, uint64_t *told)
{
    *told = 0;
    sct_issues *issues = sct_issues_new();
    if (issues == NULL) return SCT_NO_MEMORY;
    sct_model *model = NULL;
    sct_result *result = NULL;
    sct_status status = sct_model_parse(j->name, j->text, j->size, &model, issues);
    if (status == SCT_OK) status = sct_size(model, &j->settings, &result, issues);
    if (status == SCT_OK) status = show(result, issues, told);
    sct_result_free(result);
    sct_model_free(model);
    for (int i = 0; i < sct_issues_count(issues) && status != SCT_NO_MEMORY; i++) {
        char *line = sct_issue_line(sct_issues_get(issues, i));
        if (line == NULL) status = SCT_NO_MEMORY;
        free(line);
    }
    sct_issues_free(issues);
    return status;
}

/* Refuses what this job asks for at places that no job before it had. Returns what broke, NULL when nothing. */
static const char *refuse(const job *j, long *refused)
{
    uint64_t usual_text, text;
    whole_job(j, &usual_text); /* the libraries' own lasting memory is there now */
    places.n_new = 0;
    places.begin = memory.requests;
    memory.seen = note_place;
    const sct_status usual = whole_job(j, &usual_text);
    memory.seen = NULL;
    for (int k = 0; k < 2 * places.n_new; k++, ++*refused) {
        const long before = memory.live;
        memory.for_good = k % 2 == 1;
        memory.fail_at = memory.requests + places.request[k / 2];
        const sct_status status = whole_job(j, &text);
        memory.fail_at = -1;
        if (memory.live != before) return "memory is not given back";
        if (status == usual ? usual == SCT_OK && text != usual_text : status != SCT_NO_MEMORY)
            return status == usual ? "another text" : sct_status_text(status);
    }
    return NULL;
}

static char *read_whole(const char *path, size_t *size)
{
    FILE *file = fopen(path, "rb");
    if (file == NULL) return NULL;
    char *text = malloc(1 << 18);
    *size = fread(text, 1, 1 << 18, file); /* 0 of a folder */
    fclose(file);
    return text;
}

/* Runs the job of a text; adds to *refused. */
static void try_text(const char *name, const char *text, size_t size, sct_engine engine, long *refused)
{
    job j = {.name = name, .text = text, .size = size, .settings = sct_settings_defaults()};
    j.settings.engine = engine;
    j.settings.starts = 2;
    j.settings.iterations = 8;
    const char *fault = refuse(&j, refused);
    ck_assert_msg(fault == NULL, "%s: %s", name, fault);
}

/* The same of a file, which may be missing. */
static void try_file(const char *path, sct_engine engine, long *refused)
{
    size_t size;
    char *text = read_whole(path, &size);
    if (text != NULL) try_text(path, text, size, engine, refused);
    free(text);
}

/* All files, or some of them: the whole takes a minute. */
static bool is_full(void)
{
    return getenv("SCT_TEST_FULL") != NULL || getenv("SCT_TEST_MEMORY") != NULL;
}

/* Every model of a folder, or the model of every folder in it; but for the full test one in forty by its name. */
static void try_folder(const char *folder, const char *format, sct_engine engine, long *refused)
{
    DIR *dir = opendir(folder);
    ck_assert(dir != NULL);
    for (const struct dirent *e; (e = readdir(dir)) != NULL;) {
        char path[512];
        snprintf(path, sizeof path, format, folder, e->d_name);
        unsigned sum = 0;
        for (const char *c = e->d_name; *c != '\0'; c++) sum += (unsigned char)*c;
        if (e->d_name[0] != '.' && (is_full() || sum % 40 == 0)) try_file(path, engine, refused);
    }
    closedir(dir);
}

START_TEST(every_place_that_asks_for_memory_may_be_refused)
{
    static const char *const MORE[] = {"25bar_discrete", "18bar_euler", "3bar_symmetric"};
    long refused = 0;
    if (is_full()) try_folder("models", "%s/%s", SCT_ENGINE_SMALL, &refused);
    if (!is_full()) try_file("models/benchmarks/3bar_symmetric.json", SCT_ENGINE_SMALL, &refused);
    for (size_t i = 0; is_full() && i < sizeof MORE / sizeof *MORE; i++) {
        char path[512];
        snprintf(path, sizeof path, "models/benchmarks/%s.json", MORE[i]);
        try_file(path, i % 2 == 0 ? SCT_ENGINE_SPARSE : SCT_ENGINE_SMALL, &refused);
    }
    printf("measured: %ld refusals of memory, in this process, at %d places\n", refused, places.n);
    ck_assert_int_gt(refused, is_full() ? 500 : 100);
}
END_TEST

START_TEST(every_place_that_knows_of_frames_may_be_refused_memory)
{
    const char *const texts[] = {PLANE, SPACE};
    long refused = 0;
    if (!is_full()) return; /* a minute */
    for (int i = 0; i < 2; i++) {
        const size_t size = strlen(texts[i]);
        char *text = malloc(size);
        for (size_t k = 0; k < size; k++) text[k] = (char)(texts[i][k] == '\'' ? '"' : texts[i][k]);
        try_text(i == 0 ? "plane" : "space", text, size, SCT_ENGINE_AUTO, &refused);
        free(text);
    }
    printf("measured: %ld refusals of memory for frames, at %d places\n", refused, places.n);
    ck_assert_int_gt(refused, 500);
}
END_TEST

START_TEST(every_place_that_tells_of_a_fault_may_be_refused_memory)
{
    long refused = 0;
    try_folder("tests/bad_inputs", "%s/%s/model.json", SCT_ENGINE_AUTO, &refused);
    if (is_full()) try_file("tests/bad_inputs/frame.json", SCT_ENGINE_AUTO, &refused);
    if (is_full()) try_file("tests/bad_inputs/space.json", SCT_ENGINE_AUTO, &refused);
    printf("measured: %ld refusals of memory for models with faults, at %d places\n", refused, places.n);
    ck_assert_int_gt(refused, is_full() ? 500 : 100);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("memory");
    TCase *tcase = tcase_create("memory");
    tcase_set_timeout(tcase, 600);
    tcase_add_test(tcase, every_place_that_asks_for_memory_may_be_refused);
    tcase_add_test(tcase, every_place_that_knows_of_frames_may_be_refused_memory);
    tcase_add_test(tcase, every_place_that_tells_of_a_fault_may_be_refused_memory);
    suite_add_tcase(suite, tcase);
    return run_suite(suite);
}
