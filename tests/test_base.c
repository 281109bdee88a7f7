/* What everything stands on: text, numbers, names, memory, issues, and files read and saved. */
#define _GNU_SOURCE
#include "support.h"

#include <errno.h>
#include <fcntl.h>
#include <stdint.h>
#include <string.h>
#include <sys/resource.h>
#include <sys/stat.h>
#include <unistd.h>
#include <wchar.h>

#include "base/arena.h"
#include "base/issues.h"
#include "base/memory.h"
#include "base/names.h"
#include "base/number.h"
#include "base/save.h"
#include "base/text.h"

/* ---- text -------------------------------------------------------------------------------------------------------- */

static void is_now(sct_text *text, const char *expected)
{
    char *taken = sct_text_take(text, NULL);
    ck_assert_str_eq(taken, expected);
    free(taken);
}

START_TEST(a_text_too_long_for_any_memory_fails_and_stays_as_it_was)
{
    sct_text text = {0};
    sct_text_add(&text, "kept");
    sct_text_bytes(&text, "x", SIZE_MAX / 2 + 2);
    ck_assert(text.failed);
    ck_assert_str_eq(text.data, "kept");
    sct_text_add(&text, "more");
    sct_text_format(&text, "%0300d", 1);
    sct_text_pad(&text, 0, 40, true);
    ck_assert_str_eq(text.data, "kept");
    ck_assert_ptr_null(sct_text_take(&text, NULL));
    ck_assert_ptr_null(text.data);
}
END_TEST

START_TEST(long_formats_and_empty_texts_are_whole)
{
    sct_text text = {0};
    size_t size = 7;
    char *taken = sct_text_take(&text, &size);
    ck_assert_str_eq(taken, "");
    ck_assert_uint_eq(size, 0);
    free(taken);
    sct_text_format(&text, "%0300d", 1);
    ck_assert_uint_eq(text.size, 300);
    ck_assert(text.data[299] == '1' && text.data[300] == '\0');
    sct_text_free(&text);
    sct_text_add(&text, "a");
    sct_text_format(&text, "%lc", (wint_t)0x20AC); /* not a character of the C locale */
    is_now(&text, "a");
}
END_TEST

START_TEST(control_characters_never_reach_a_reader)
{
    sct_text text = {0};
    sct_text_json(&text, "\"\\\n\t\x01\x7f");
    is_now(&text, "\"\\\"\\\\\\n\\t\\u0001\\u007f\"");
    sct_text_xml(&text, "<&>\"'\t\n\x01");
    is_now(&text, "&lt;&amp;&gt;&quot;&#39;\t\n\xEF\xBF\xBD");
    sct_text_plain(&text, "\x1b\x7f\xC2\x9B\xC2\xA0\xC3\x84", 0); /* C1 controls only after C2 */
    is_now(&text, "\\x1b\\x7f\\x9b\xC2\xA0\xC3\x84");
    sct_text_plain(&text, "\xC3\x84\xC3\x96\xC3\x9C", 2);
    is_now(&text, "\xC3\x84\xC3\x96...");
}
END_TEST

START_TEST(shown_names_are_cut_at_64_characters_and_at_their_room)
{
    char name[400];
    memset(name, 'a', 64);
    name[64] = '\0';
    ck_assert_str_eq(sct_show(name).text, name);
    strcpy(name + 64, "b");
    ck_assert_uint_eq(strlen(sct_show(name).text), 67);
    ck_assert_str_eq(sct_show(name).text + 64, "...");
    memset(name, '\x80', 399); /* never a beginning of a character: no count stops it */
    name[399] = '\0';
    ck_assert_uint_lt(strlen(sct_show(name).text), sizeof(sct_shown));
    ck_assert_str_eq(strrchr(sct_show(name).text, '\x80') + 1, "...");
}
END_TEST

START_TEST(padding_counts_characters)
{
    sct_text text = {0};
    sct_text_add(&text, "|\xC3\x84");
    sct_text_pad(&text, 1, 3, true);
    sct_text_pad(&text, 1, 2, true); /* wide enough */
    sct_text_pad(&text, 3, 2, false);
    is_now(&text, "|  \xC3\x84 ");
}
END_TEST

/* ---- numbers ----------------------------------------------------------------------------------------------------- */

static bool reads(const char *text, double expected)
{
    double value = 0.0;
    return sct_number_read(text, strlen(text), &value) && value == expected;
}

START_TEST(numbers_are_read_by_the_grammar_of_JSON)
{
    ck_assert(reads("0", 0) && reads("-0.5", -0.5) && reads("10", 10) && reads("1e2", 100) && reads("1E+2", 100));
    ck_assert(reads("1.25e-2", 0.0125) && reads("12e0", 12));
    static const char *const WRONG[] = {"",    "-",   "+1",  ".5",  "1.",  "1.e2", "01",    "-01",
                                        "1e",  "1e",  "1e+", "1e-", "1 ",  "0x1",  "1e400", "nan",
                                        "inf", "1/2", ":",   "1:",  "1.:", "1e2:", "1.5.5", "--1"};
    double value = 7.0;
    for (size_t i = 0; i < sizeof WRONG / sizeof *WRONG; i++) {
        ck_assert_msg(!sct_number_read(WRONG[i], strlen(WRONG[i]), &value), "%s", WRONG[i]);
    }
    char digits[80];
    memset(digits, '1', sizeof digits);
    ck_assert(!sct_number_read(digits, 72, &value));
    ck_assert_double_eq(value, 7.0);
    ck_assert(sct_number_read(digits, 71, &value));
    ck_assert(sct_number_read("12", 1, &value) && value == 1.0); /* as long as it is said to be */
    ck_assert(!sct_number_read("1.5", 2, &value) && !sct_number_read("1e5", 2, &value));
    ck_assert(!sct_number_read("-5", 1, &value) && !sct_number_read("1e-5", 3, &value));
}
END_TEST

START_TEST(numbers_are_written_as_short_as_they_read_back)
{
    char out[SCT_NUMBER_ROOM];
    static const struct {
        double value;
        const char *text;
    } CASES[] = {{0.1, "0.1"},
                 {1.0 / 3.0, "0.3333333333333333"},
                 {0.1 + 0.2, "0.30000000000000004"},
                 {-1e300, "-1e+300"},
                 {(double)NAN, "null"},
                 {-(double)INFINITY, "null"}};
    for (size_t i = 0; i < sizeof CASES / sizeof *CASES; i++) {
        sct_number_write(CASES[i].value, out);
        ck_assert_str_eq(out, CASES[i].text);
    }
}
END_TEST

START_TEST(a_bound_is_rounded_up_to_one_digit)
{
    ck_assert(sct_number_rounded_up(1.01e-9) == 2e-9 && sct_number_rounded_up(2e-9) == 2e-9);
    ck_assert(sct_number_rounded_up(9.9e-9) == 1e-8 && sct_number_rounded_up(9.1e-9) == 1e-8);
    ck_assert(sct_number_rounded_up(0.0) == 0.0 && sct_number_rounded_up(-1.0) == -1.0);
    ck_assert(sct_number_rounded_up(2.5e300) == 2.5e300 && isinf(sct_number_rounded_up((double)INFINITY)));
    ck_assert(isnan(sct_number_rounded_up((double)NAN)));
}
END_TEST

/* ---- names ------------------------------------------------------------------------------------------------------- */

START_TEST(a_table_of_names_finds_the_first_of_each_and_no_other)
{
    enum { N = 400 };
    static char name[N][8];
    sct_names *t = sct_names_new(0);
    ck_assert_int_eq(sct_names_find(t, "n1"), -1);
    for (int i = 0; i < N; i++) {
        snprintf(name[i], sizeof name[i], "n%d", i);
        ck_assert(sct_names_put(t, name[i], 2 * i));
    }
    ck_assert(sct_names_put(t, "n7", 99));
    ck_assert_int_eq(sct_names_count(t), N);
    for (int i = 0; i < N; i++) ck_assert_int_eq(sct_names_find(t, name[i]), 2 * i);
    ck_assert_int_eq(sct_names_find(t, "n400"), -1);
    ck_assert_str_eq(sct_names_at(t, 3), "n3");
    sct_names_free(t);
    sct_names_free(NULL);
}
END_TEST

START_TEST(the_nearest_word_is_a_slip_away_and_begins_alike)
{
    static const char *const WORDS[] = {"tension", NULL, "tensile", "compression", "x", "y", "rafter", "rafters"};
    enum { N = sizeof WORDS / sizeof *WORDS };
    ck_assert_str_eq(sct_nearest(WORDS, N, "tnesion"), "tension"); /* neighbours swapped: one edit */
    ck_assert_str_eq(sct_nearest(WORDS, N, "tensil"), "tensile");
    ck_assert_str_eq(sct_nearest(WORDS, N, "compresion"), "compression");
    ck_assert_str_eq(sct_nearest(WORDS, N, "rafter"), "rafter");
    ck_assert_str_eq(sct_nearest(WORDS, N, "X"), "x");
    ck_assert_ptr_null(sct_nearest(WORDS, N, "z")); /* every letter is one edit away from every other */
    ck_assert_ptr_null(sct_nearest(WORDS, N, "purlin"));
    ck_assert_ptr_null(sct_nearest(WORDS, 0, "x"));
    static const char *const ALIKE[] = {"bat", "cat", "car"};
    ck_assert_str_eq(sct_nearest(ALIKE, 3, "cab"), "cat"); /* before "car", which is as near */
    ck_assert_str_eq(sct_nearest(ALIKE, 3, "ca"), "cat");
    char longest[70];
    memset(longest, 'a', sizeof longest - 1);
    longest[69] = '\0';
    ck_assert_ptr_null(sct_nearest((const char *[]){longest}, 1, longest)); /* as long are names of no list */
    ck_assert_ptr_null(sct_nearest((const char *[]){"aaa", longest}, 2, longest + 6));
}
END_TEST

/* ---- memory ------------------------------------------------------------------------------------------------------ */

START_TEST(an_arena_refuses_sizes_that_overflow_and_gives_nothing_a_place)
{
    sct_arena *arena = sct_arena_new();
    ck_assert_ptr_null(sct_arena_array(arena, SIZE_MAX, 2));
    ck_assert_ptr_null(sct_arena_array(arena, SIZE_MAX / 16, 16));
    const char *none = sct_arena_array(arena, 0, 8), *nothing = sct_arena_array(arena, 8, 0);
    ck_assert(none != NULL && nothing != NULL && none != nothing);
    const unsigned char *large = sct_arena_array(arena, 1 << 20, 1);
    int n_set = 0;
    for (int i = 0; i < 1 << 20; i++) n_set += large[i] != 0;
    ck_assert_int_eq(n_set, 0);
    ck_assert_uint_eq((uintptr_t)sct_arena_array(arena, 1, 1) % _Alignof(max_align_t), 0);
    ck_assert_str_eq(sct_arena_string(arena, "abcdef", 3), "abc");
    sct_arena_free(arena);
    sct_arena_free(NULL);
}
END_TEST

START_TEST(the_most_memory_follows_the_limit_of_the_process)
{
    const double free_of_limits = sct_memory_most();
    struct rlimit before, less;
    ck_assert_int_eq(getrlimit(RLIMIT_AS, &before), 0);
    less = before;
    less.rlim_cur = (rlim_t)1 << 29;
    if (setrlimit(RLIMIT_AS, &less) != 0) return; /* a sanitizer's shadow is larger */
    const double limited = sct_memory_most();
    ck_assert_int_eq(setrlimit(RLIMIT_AS, &before), 0);
    ck_close(limited, 0.9 * (double)(1 << 29), 1e-15);
    ck_assert(free_of_limits > 0.0 && limited <= free_of_limits);
}
END_TEST

/* ---- issues ------------------------------------------------------------------------------------------------------ */

START_TEST(values_out_of_a_list_have_words_too)
{
    ck_assert_str_eq(sct_status_text((sct_status)-1), "unknown status");
    ck_assert_str_eq(sct_status_text(SCT_STATUS_COUNT), "unknown status");
    ck_assert_str_eq(sct_outcome_text((sct_outcome)-1), "unknown outcome");
    ck_assert_str_eq(sct_outcome_text(SCT_OUTCOME_COUNT), "unknown outcome");
    ck_assert_str_eq(sct_check_text((sct_check_kind)-1), "unknown check");
    ck_assert_str_eq(sct_check_text(SCT_CHECK_COUNT), "unknown check");
    ck_assert_str_eq(sct_status_text(SCT_NO_MEMORY), "out of memory");
}
END_TEST

START_TEST(issues_stop_at_20_errors_and_50_warnings_and_say_each_remark_once)
{
    sct_issues *issues = sct_issues_new();
    ck_assert(sct_issues_get(issues, -1) == NULL && sct_issues_get(issues, 0) == NULL);
    for (int i = 0; i < 30; i++) sct_issue_add(issues, SCT_ERROR, (sct_where){.file = "f"}, "wrong");
    ck_assert_int_eq(sct_issues_count(issues), 20);
    ck_assert_int_eq(sct_issues_errors(issues), 30);
    for (int i = 0; i < 120; i++) sct_issue_add(issues, SCT_WARNING, (sct_where){"f", 1 + i / 2, 1, ""}, "odd");
    ck_assert_int_eq(sct_issues_count(issues), 20 + 50 + 1);
    char *last = sct_issue_line(sct_issues_get(issues, 70)), *first = sct_issue_line(sct_issues_get(issues, 20));
    ck_assert_str_eq(last, "f: note: more warnings and notes are not shown");
    ck_assert_str_eq(first, "f:1:1: warning: odd");
    free(last);
    free(first);
    ck_assert(!sct_issues_lost(issues) && !sct_issues_lost(NULL));
    sct_issue_add(NULL, SCT_ERROR, (sct_where){0}, "nobody hears");
    sct_issues_free(issues);
    sct_issues_free(NULL);
}
END_TEST

START_TEST(an_issue_without_a_place_is_only_its_words)
{
    sct_issues *issues = sct_issues_new();
    sct_issue_add(issues, SCT_NOTE, (sct_where){0}, "odd");
    sct_issue_add(issues, SCT_ERROR, (sct_where){"f", 2, 3, "/a"}, "wrong");
    char *note = sct_issue_line(sct_issues_get(issues, 0)), *error = sct_issue_line(sct_issues_get(issues, 1));
    ck_assert_str_eq(note, "note: odd");
    ck_assert_str_eq(error, "f:2:3: error: /a: wrong");
    free(note);
    free(error);
    sct_issues_free(issues);
}
END_TEST

/* ---- files ------------------------------------------------------------------------------------------------------- */

static char folder[32];
static sct_issues *heard;

static void enter_folder(void)
{
    strcpy(folder, "/tmp/scantling-base-XXXXXX"); /* again for every test, where they share a process */
    ck_assert(mkdtemp(folder) != NULL && chdir(folder) == 0);
    heard = sct_issues_new();
}

static void leave_folder(void)
{
    sct_issues_free(heard);
    ck_assert(chdir("/") == 0 && rmdir(folder) == 0); /* nothing was left in it */
}

static bool holds(const char *path, const char *text)
{
    char *bytes;
    size_t size;
    if (sct_read_file(path, 1 << 20, &bytes, &size, heard) != SCT_OK) return false;
    const bool same = size == strlen(text) && strcmp(bytes, text) == 0;
    free(bytes);
    return same;
}

START_TEST(a_file_is_saved_whole_and_replaces_only_by_force)
{
    ck_assert_int_eq(sct_save("a", "one", 3, false, heard), SCT_OK);
    ck_assert_int_eq(sct_save("a", "two", 3, false, heard), SCT_CANNOT_WRITE);
    ck_assert(strstr(sct_issues_get(heard, 0)->message, "exists already") != NULL && holds("a", "one"));
    ck_assert_int_eq(sct_save("a", "three", 5, true, heard), SCT_OK);
    ck_assert(holds("a", "three"));
    ck_assert_int_eq(unlink("a"), 0);
}
END_TEST

START_TEST(when_one_file_of_a_set_cannot_be_placed_the_others_are_as_before)
{
    ck_assert_int_eq(mkdir("wall", 0777), 0);
    ck_assert_int_eq(sct_save("old", "before", 6, false, heard), SCT_OK);
    const sct_file files[] = {{"new", "n", 1}, {"old", "after", 5}, {"wall", "w", 1}};
    ck_assert_int_eq(sct_save_set(files, 3, true, heard), SCT_CANNOT_WRITE);
    ck_assert(holds("old", "before") && access("new", F_OK) != 0);
    ck_assert_int_eq(sct_save_set(files, 3, false, heard), SCT_CANNOT_WRITE);
    ck_assert_int_eq(sct_save_set(files, 0, false, heard), SCT_OK);
    ck_assert(unlink("old") == 0 && rmdir("wall") == 0);
}
END_TEST

START_TEST(names_left_behind_by_a_killed_run_are_passed_over)
{
    char part[64], old[64];
    snprintf(part, sizeof part, "scantling.%ld.0.part", (long)getpid());
    snprintf(old, sizeof old, "scantling.%ld.0.old", (long)getpid());
    const int fd = open(part, O_CREAT | O_WRONLY, 0666), other = open(old, O_CREAT | O_WRONLY, 0666);
    ck_assert(fd >= 0 && other >= 0 && close(fd) == 0 && close(other) == 0);
    ck_assert_int_eq(sct_save("a", "one", 3, false, heard), SCT_OK);
    ck_assert_int_eq(sct_save("a", "two", 3, true, heard), SCT_OK);
    ck_assert(holds("a", "two") && holds(part, "") && holds(old, ""));
    ck_assert(unlink("a") == 0 && unlink(part) == 0 && unlink(old) == 0);
}
END_TEST

START_TEST(files_that_cannot_be_read_or_are_too_large_are_told)
{
    char *bytes;
    size_t size;
    static char large[200000];
    memset(large, 'x', sizeof large);
    ck_assert_int_eq(sct_read_file("none", 10, &bytes, &size, heard), SCT_CANNOT_READ);
    ck_assert_int_eq(sct_read_file(".", 10, &bytes, &size, heard), SCT_CANNOT_READ);
    ck_assert_int_eq(sct_save("large", large, sizeof large, false, heard), SCT_OK);
    ck_assert_int_eq(sct_read_file("large", sizeof large - 1, &bytes, &size, heard), SCT_TOO_LARGE);
    ck_assert_ptr_null(bytes);
    ck_assert_int_eq(sct_read_file("large", sizeof large, &bytes, &size, heard), SCT_OK);
    ck_assert(size == sizeof large && memcmp(bytes, large, size) == 0 && bytes[size] == '\0');
    free(bytes);
    ck_assert_int_eq(unlink("large"), 0);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("base");
    TCase *words = tcase_create("words"), *files = tcase_create("files");
    tcase_add_test(words, a_text_too_long_for_any_memory_fails_and_stays_as_it_was);
    tcase_add_test(words, long_formats_and_empty_texts_are_whole);
    tcase_add_test(words, control_characters_never_reach_a_reader);
    tcase_add_test(words, shown_names_are_cut_at_64_characters_and_at_their_room);
    tcase_add_test(words, padding_counts_characters);
    tcase_add_test(words, numbers_are_read_by_the_grammar_of_JSON);
    tcase_add_test(words, numbers_are_written_as_short_as_they_read_back);
    tcase_add_test(words, a_bound_is_rounded_up_to_one_digit);
    tcase_add_test(words, a_table_of_names_finds_the_first_of_each_and_no_other);
    tcase_add_test(words, the_nearest_word_is_a_slip_away_and_begins_alike);
    tcase_add_test(words, an_arena_refuses_sizes_that_overflow_and_gives_nothing_a_place);
    tcase_add_test(words, the_most_memory_follows_the_limit_of_the_process);
    tcase_add_test(words, values_out_of_a_list_have_words_too);
    tcase_add_test(words, issues_stop_at_20_errors_and_50_warnings_and_say_each_remark_once);
    tcase_add_test(words, an_issue_without_a_place_is_only_its_words);
    tcase_add_checked_fixture(files, enter_folder, leave_folder);
    tcase_add_test(files, a_file_is_saved_whole_and_replaces_only_by_force);
    tcase_add_test(files, when_one_file_of_a_set_cannot_be_placed_the_others_are_as_before);
    tcase_add_test(files, names_left_behind_by_a_killed_run_are_passed_over);
    tcase_add_test(files, files_that_cannot_be_read_or_are_too_large_are_told);
    suite_add_tcase(suite, words);
    suite_add_tcase(suite, files);
    return run_suite(suite);
}
