/* The sheet of a drawing: what words take, and what is left out of them. */
#include "support.h"

#include <string.h>

#include "report/sheet.h"

static double width(const char *words)
{
    return sct_words_width(words, 1.0, false);
}

START_TEST(characters_of_one_shape_take_the_same_and_wide_ones_more)
{
    ck_assert(width("\xE2\x80\xAF") == width("\xE2\x80\x89") && width("\xE2\x80\xAF") < width(" ")); /* narrow blanks */
    static const char *const LIKE_PLUS[] = {"=", "~", "\xE2\x88\x92", "\xC3\x97", "\xE2\x89\xA4", "\xE2\x89\xA5"};
    for (size_t i = 0; i < sizeof LIKE_PLUS / sizeof *LIKE_PLUS; i++) ck_assert(width(LIKE_PLUS[i]) == width("+"));
    ck_assert(width("\xC3\x84") == width("A") && width("\xC3\x9F") == width("a") && width("i") < width("a"));
    ck_assert(width("a") < width("A") && width("A") < width("W"));
    ck_assert(width("\xCE\xA9") > width("A") && width("\xD0\x96") == width("\xCE\xA9")); /* Greek, Cyrillic */
    ck_assert(width("\xE6\xA2\x81") > width("W") && width("\xE1\x84\x80") == width("\xE6\xA2\x81")); /* Han, Hangul */
    ck_assert(width("\xE2\x80\x90") == width("a") && width("\xE2\x80\xA6") > width("W")); /* hyphen, ellipsis */
    ck_assert(width("\xE2\x86\x92") > width("W") && width("\xE2\xBA\x80") > width("\xE2\x86\x92")); /* arrow, radical */
    ck_assert(width("\xF0\xA0\x80\x80") == width("\xE6\xA2\x81"));                                  /* four bytes */
    ck_close(sct_words_width("abc", 2.0, true), 2.2 * width("abc"), 1e-12);
}
END_TEST

START_TEST(bytes_that_are_no_UTF_8_end_and_take_room)
{
    static const char *const BROKEN[] = {"\x80", "\xC3", "\xE2\x80", "\xF0\x90\x80", "\xC3x", "\xF0x"};
    for (size_t i = 0; i < sizeof BROKEN / sizeof *BROKEN; i++) {
        ck_assert(width(BROKEN[i]) > 0.0 && width(BROKEN[i]) < 3.0);
    }
}
END_TEST

static const char *drawn(const char *words)
{
    static sct_sheet sheet;
    sct_text_free(&sheet.body);
    sct_sheet_words(&sheet, (sct_point){1, 2}, LABEL, ANCHOR_START, ROLE_INK, words);
    return sheet.body.data;
}

START_TEST(marks_that_turn_the_writing_are_left_out)
{
    static const char *const TURNING[] = {"\xE2\x80\xAA", "\xE2\x80\xAE", "\xE2\x81\xA6", "\xE2\x81\xA9"};
    static const char *const OTHERS[] = {"\xE2\x80\xA9", "\xE2\x80\xAF", "\xE2\x81\xA5", "\xE2\x81\xAA"};
    for (int i = 0; i < 4; i++) {
        char words[16];
        snprintf(words, sizeof words, "a%sb", TURNING[i]);
        ck_assert_ptr_nonnull(strstr(drawn(words), ">ab</tspan>"));
        snprintf(words, sizeof words, "a%sb", OTHERS[i]);
        ck_assert_ptr_nonnull(strstr(drawn(words), words));
    }
}
END_TEST

START_TEST(words_are_turned_only_by_an_angle_that_shows)
{
    sct_sheet sheet = {0};
    const sct_word_run run = {"a", ROLE_INK, true};
    sct_sheet_runs(&sheet, (sct_point){1, 2}, LABEL, ANCHOR_END, 0.004, &run, 1);
    ck_assert_ptr_null(strstr(sheet.body.data, "rotate"));
    sct_sheet_runs(&sheet, (sct_point){1, 2}, LABEL, ANCHOR_MIDDLE, -90, &run, 1);
    ck_assert_ptr_nonnull(strstr(sheet.body.data, "rotate(-90 1 2)"));
    sct_text_free(&sheet.body);
}
END_TEST

START_TEST(an_empty_sheet_is_a_whole_file_and_a_lost_part_is_a_lost_sheet)
{
    sct_sheet sheet = {0}, part = {0}, lost = {.body = {.failed = true}};
    sct_text out = {0};
    sct_sheet_write(&sheet, 10, 20, "t", "a < b", "c & d", &out);
    ck_assert_ptr_nonnull(strstr(out.data, "<title id=\"t-t\">a &lt; b</title>"));
    ck_assert_str_eq(out.data + out.size - 7, "</svg>\n");
    sct_text_free(&out);
    sct_sheet_put(&sheet, &part, (sct_point){1, 2});
    ck_assert_ptr_nonnull(strstr(sheet.body.data, "translate(1 2)"));
    sct_sheet_put(&sheet, &lost, (sct_point){1, 2});
    ck_assert(sheet.body.failed);
    sct_sheet_write(&sheet, 10, 20, "t", "a", "b", &out);
    ck_assert(out.failed);
    sct_text_free(&out);
    sct_text_free(&sheet.body);
}
END_TEST

START_TEST(words_that_do_not_fit_end_in_an_ellipsis)
{
    char out[64];
    sct_words_fit("abcdef", 3.7, 1.0, false, out, sizeof out);
    ck_assert_str_eq(out, "abcd\xE2\x80\xA6");
    sct_words_fit("abcdef", 0.1, 1.0, true, out, sizeof out);
    ck_assert_str_eq(out, "\xE2\x80\xA6");
    sct_words_fit("abcdef", 100.0, 1.0, true, out, sizeof out);
    ck_assert_str_eq(out, "abcdef");
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("sheet");
    TCase *c = tcase_create("sheet");
    tcase_add_test(c, characters_of_one_shape_take_the_same_and_wide_ones_more);
    tcase_add_test(c, bytes_that_are_no_UTF_8_end_and_take_room);
    tcase_add_test(c, marks_that_turn_the_writing_are_left_out);
    tcase_add_test(c, words_are_turned_only_by_an_angle_that_shows);
    tcase_add_test(c, an_empty_sheet_is_a_whole_file_and_a_lost_part_is_a_lost_sheet);
    tcase_add_test(c, words_that_do_not_fit_end_in_an_ellipsis);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}
