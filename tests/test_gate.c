/* The gate: what is JSON and what is not, and where every value stands. Grammar: RFC 8259; UTF-8: RFC 3629. */
#include "model/gate.h"

#include <string.h>

#include "model/document.h"
#include "support.h"

/* A text and the line that it must give, "" for a good one. Texts may hold zero bytes. */
typedef struct gate_case {
    const char *text;
    size_t size;
    const char *expected;
} gate_case;
#define CASE(text, expected)                                                                                           \
    {                                                                                                                  \
        text, sizeof text - 1, expected                                                                                \
    }

static const gate_case CASES[] = {
    /* whole documents */
    CASE("", "1:1: error: the file is empty; expected a model, which is a JSON object { ... }"),
    CASE(" \n ", "1:1: error: the file is empty; expected a model, which is a JSON object { ... }"),
    CASE("{}", ""),
    CASE(" [1, -0, 2.5e-3, true, false, null, \"\"] ", ""),
    CASE("{\"a\":1", "1:7: error: the file ends inside the object that begins at 1:1"),
    CASE("{\"a\"", "1:5: error: the file ends inside the object that begins at 1:1"),
    CASE("{\"a\":", "1:6: error: the file ends inside the object that begins at 1:1"),
    CASE("[1,[2", "1:6: error: the file ends inside the array that begins at 1:4"),
    CASE("[1,", "1:4: error: the file ends inside the array that begins at 1:1"),
    CASE("[\"ab", "1:5: error: the file ends inside the string that begins at 1:2"),
    CASE("[\"\\", "1:4: error: the file ends inside the string that begins at 1:2"),
    CASE("[\"\\u12", "1:7: error: the file ends inside the string that begins at 1:2"),
    CASE("[-", "1:3: error: the file ends inside the number that begins at 1:2"),
    CASE("[1e", "1:4: error: the file ends inside the number that begins at 1:2"),
    CASE("[tru", "1:5: error: the file ends inside the word that begins at 1:2"),
    CASE("{} xyz", "1:4: error: found xyz; expected nothing more behind the end of the document"),
    CASE("{}{}", "1:3: error: found \"{\"; expected nothing more behind the end of the document"),
    /* commas, colons, quotes, comments */
    CASE("[1,]", "1:4: error: found \"]\"; expected a value (no comma may stand behind the last one)"),
    CASE("[}", "1:2: error: found \"}\"; expected a value"),
    CASE("[,1]", "1:2: error: found \",\"; expected a value before the comma"),
    CASE("[1,,2]", "1:4: error: found \",\"; expected a value before the comma"),
    CASE("[1 2]", "1:4: error: found 2; expected \",\" or \"]\""),
    CASE("{\"a\":1,}", "1:8: error: found \"}\"; expected a key (no comma may stand behind the last entry)"),
    CASE("{\"a\":1,,}", "1:8: error: found \",\"; expected a key in double quotes"),
    CASE("{\"a\" 1}", "1:6: error: found 1; expected \":\" behind the key"),
    CASE("{\"a\":1 \"b\":2}", "1:8: error: found a string; expected \",\" or \"}\""),
    CASE("{\"a\":}", "1:6: error: found \"}\"; expected a value"),
    CASE("{'a':1}", "1:2: error: found a single quote; JSON wants double quotes"),
    CASE("{a:1}", "1:2: error: found a; expected a key in double quotes"),
    CASE("[//x", "1:2: error: found \"/\"; JSON has no comments (use a key \"notes\")"),
    CASE("[1 /*x*/]", "1:4: error: found \"/\"; JSON has no comments (use a key \"notes\")"),
    CASE("[True]", "1:2: error: found True; did you mean true?"),
    CASE("[None]", "1:2: error: found None; did you mean null?"),
    CASE("[nul]", "1:2: error: found nul; did you mean null?"),
    CASE("[truely]",
         "1:2: error: found truely; expected a value: a number, true, false, null, or a string in double quotes"),
    CASE("{\"a\":1,5}",
         "1:8: error: found 5; expected a key in double quotes (the decimal mark is a point, not a comma)"),
    CASE("[3 m]", "1:4: error: found m; expected \",\" or \"]\""),
    /* strings */
    CASE("[\"a\\u0000b\"]", "1:4: error: \\u0000 is not allowed in a string"),
    CASE("{\"a\\u0000b\":1}", "1:4: error: \\u0000 is not allowed in a string"),
    CASE("[\"a\0b\"]", "1:4: error: a zero byte in a string; no text holds one"),
    CASE("[\"a\tb\"]", "1:4: error: a raw byte 0x09 in a string; write \\u0009"),
    CASE("[\"a\001b\"]", "1:4: error: a raw byte 0x01 in a string; write \\u0001"),
    CASE("[\"a\nb\"]", "1:4: error: the line ends inside the string that begins at 1:2; close it with \", or write \\n "
                       "for a line feed"),
    CASE("[\"\\x41\"]", "1:3: error: a backslash in a string must be followed by one of \" \\ / b f n r t u"),
    CASE("[\"\\u12\"]", "1:3: error: \\u must be followed by four hexadecimal digits"),
    CASE("[\"\\uZZZZ\"]", "1:3: error: \\u must be followed by four hexadecimal digits"),
    CASE("[\"\\ud800\"]", "1:3: error: \\ud800 is the first half of a pair; the second half does not follow"),
    CASE("[\"\\udc00\"]", "1:3: error: \\udc00 is the second half of a pair; the first half is missing"),
    CASE("[\"\\udc00\\ud800\"]", "1:3: error: \\udc00 is the second half of a pair; the first half is missing"),
    CASE("[\"\\ud83d\\ude00 \\\" \\\\ \\/ \\b\\f\\n\\r\\t \\u00e9\"]", ""),
    /* bytes between tokens */
    CASE("[\0001]", "1:2: error: found a zero byte; expected a value"),
    CASE("[\0051]", "1:2: error: found the control byte 0x05; expected a value"),
    CASE("[\f1]", "1:2: error: found the control byte 0x0C; expected a value"),
    CASE("[\xC2\xA0"
         "1]",
         "1:2: error: found a no-break space (U+00A0); only plain blanks may stand between values"),
    CASE("[\xE2\x80\x9C"
         "a]",
         "1:2: error: found a typographic quote; JSON wants the plain double quote"),
    /* encodings */
    CASE("\xEF\xBB\xBF[x]",
         "1:2: error: found x; expected a value: a number, true, false, null, or a string in double quotes"),
    CASE("\xEF\xBB\xBF{}", ""),
    CASE("\xFF\xFE{\0}\0", "1:1: error: the file looks like UTF-16 (little endian); save it as UTF-8"),
    CASE("\xFE\xFF\0{\0}", "1:1: error: the file looks like UTF-16 (big endian); save it as UTF-8"),
    CASE("{\0}\0", "1:1: error: the file looks like UTF-16 (little endian); save it as UTF-8"),
    CASE("\0{\0}", "1:1: error: the file looks like UTF-16 (big endian); save it as UTF-8"),
    CASE("\xFF\xFE\0\0{\0\0\0", "1:1: error: the file looks like UTF-32 (little endian); save it as UTF-8"),
    CASE("\0\0\xFE\xFF\0\0\0{", "1:1: error: the file looks like UTF-32 (big endian); save it as UTF-8"),
    CASE("{\0\0\0}\0\0\0", "1:1: error: the file looks like UTF-32 (little endian); save it as UTF-8"),
    CASE("\0\0\0{\0\0\0}", "1:1: error: the file looks like UTF-32 (big endian); save it as UTF-8"),
    CASE("[\"\xC0\xAF\"]", "1:3: error: byte 0xC0 (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\xFF\"]", "1:3: error: byte 0xFF (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\xED\xA0\x80\"]", "1:3: error: byte 0xED (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\xF4\x90\x80\x80\"]", "1:3: error: byte 0xF4 (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\xE2\x82\"]", "1:3: error: byte 0xE2 (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\xE2\x82", "1:3: error: byte 0xE2 (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"mm\xB2\"]", "1:5: error: byte 0xB2 (number 5 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\xF0\x9F\x98\x80 \xCE\xB1\xCC\x81 \xE4\xB8\xAD\"]", ""),
    /* numbers */
    CASE("[1e999]", "1:2: error: 1e999 is too large for a number (the largest is about 1.8e308)"),
    CASE("[-1e999]", "1:2: error: -1e999 is too large for a number (the largest is about 1.8e308)"),
    CASE("[1e1000000000000]", "1:2: error: 1e1000000000000 is too large for a number (the largest is about 1.8e308)"),
    CASE("[1e-400]", "1:2: error: 1e-400 is too small for a number: it underflows to zero"),
    CASE("[0e-400, 0.000e5, 5e-324, -0.0]", ""),
    CASE("[NaN]", "1:2: error: JSON has no infinity and no not-a-number; expected a number"),
    CASE("[Infinity]", "1:2: error: JSON has no infinity and no not-a-number; expected a number"),
    CASE("[-inf]", "1:2: error: JSON has no infinity and no not-a-number; expected a number"),
    CASE("[0x10]", "1:3: error: the number that begins at 1:2 is hexadecimal; write it in decimals"),
    CASE("[010]", "1:3: error: the number that begins at 1:2 has a leading zero; leave it out"),
    CASE("[00]", "1:3: error: the number that begins at 1:2 has a leading zero; leave it out"),
    CASE("[-01]", "1:4: error: the number that begins at 1:2 has a leading zero; leave it out"),
    CASE("[+1]", "1:2: error: a number has no plus sign in JSON; leave it out"),
    CASE("[.5]", "1:2: error: a number needs a digit before its decimal point"),
    CASE("[5.]", "1:4: error: the number that begins at 1:2 has no digit behind its decimal point"),
    CASE("[1e]", "1:4: error: the number that begins at 1:2 has no digit in its exponent"),
    CASE("[1e+]", "1:5: error: the number that begins at 1:2 has no digit in its exponent"),
    CASE("[--1]", "1:3: error: the number that begins at 1:2 has no digit behind its minus sign"),
    CASE("[-]", "1:3: error: the number that begins at 1:2 has no digit behind its minus sign"),
    CASE("[1_000]",
         "1:3: error: the number that begins at 1:2 ends here with a character that no number has; a quantity "
         "with a unit is a string such as \"3 m\""),
    CASE("[1.2.3]",
         "1:5: error: the number that begins at 1:2 ends here with a character that no number has; a quantity "
         "with a unit is a string such as \"3 m\""),
    CASE("[3m]", "1:3: error: the number that begins at 1:2 ends here with a character that no number has; a quantity "
                 "with a unit is a string such as \"3 m\""),
    CASE("[1,5]", ""),
    CASE("[0.1234567890123456789012345678901234567890123456789012345678901]", ""),
    /* line ends */
    CASE("[1,\r\n2,\r3,\n\n4,\r\r\n?]", "7:1: error: found \"?\"; expected a value"),
    CASE("[\"\xC3\xA9\xC3\xA9\", ?]", "1:8: error: found \"?\"; expected a value"),
    CASE("[\t?]", "1:3: error: found \"?\"; expected a value"),
    /* and the rest of what may stand in the wrong place */
    CASE("?", "1:1: error: found \"?\"; expected a value"),
    CASE("]", "1:1: error: found \"]\"; expected a value"),
    CASE("[$x]", "1:2: error: found $x; expected a value: a number, true, false, null, or a string in double quotes"),
    CASE("[a_word_of_more_than_forty_characters_is_shown_in_part]",
         "1:2: error: found a_word_of_more_than_forty_characters_is_; expected a value: a number, true, false, null, "
         "or a string in double quotes"),
    CASE("[\xC3\xA9]", "1:2: error: found \"\xC3\xA9"
                       "\"; expected a value"),
    CASE("[\xE2\x82\xAC]", "1:2: error: found \"\xE2\x82\xAC"
                           "\"; expected a value"),
    CASE("[\xF0\x9F\x98\x80]", "1:2: error: found \"\xF0\x9F\x98\x80"
                               "\"; expected a value"),
    CASE("[\xE2\x80\x9D"
         "a]",
         "1:2: error: found a typographic quote; JSON wants the plain double quote"),
    CASE("[\xE2\x80\x99"
         "a]",
         "1:2: error: found \"\xE2\x80\x99"
         "\"; expected a value"),
    CASE("[\xE0\x80\x80]", "1:2: error: byte 0xE0 (number 2 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\x80]", "1:2: error: byte 0x80 (number 2 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\x7F]", "1:2: error: found the control byte 0x7F; expected a value"),
    CASE("[#]", "1:2: error: found \"#\"; JSON has no comments (use a key \"notes\")"),
    CASE("[/]", "1:2: error: found \"/\"; expected a value"),
    CASE("[\"\xE0\xA0\x80\"]", ""),
    CASE("[\"\xE0\x80\x80\"]", "1:3: error: byte 0xE0 (number 3 of the file) is not UTF-8; save the file as UTF-8"),
    CASE("[\"\x7F\"]", ""),
    CASE("[\"\\u00g0\"]", "1:3: error: \\u must be followed by four hexadecimal digits"),
    CASE("[\"\\u00G0\"]", "1:3: error: \\u must be followed by four hexadecimal digits"),
    CASE("[\"\\u00!0\"]", "1:3: error: \\u must be followed by four hexadecimal digits"),
    CASE("[\"\\uE000\\uFFFD\\uABCD\"]", ""),
    CASE("[\"\\\0\"]", "1:3: error: a backslash in a string must be followed by one of \" \\ / b f n r t u"),
    CASE("[\"\\ud800\\n\"]", "1:3: error: \\ud800 is the first half of a pair; the second half does not follow"),
    CASE("[\"\\ud800x\"]", "1:3: error: \\ud800 is the first half of a pair; the second half does not follow"),
    CASE("[\"\\ud800\\u0041\"]", "1:3: error: \\ud800 is the first half of a pair; the second half does not follow"),
    CASE("[\"\\ud800\\uE000\"]", "1:3: error: \\ud800 is the first half of a pair; the second half does not follow"),
    CASE("[\"a\rb\"]", "1:4: error: the line ends inside the string that begins at 1:2; close it with \", or write \\n "
                       "for a line feed"),
    CASE("[1E5, 0E5, 0E-999]", ""),
    CASE("[1E-999]", "1:2: error: 1E-999 is too small for a number: it underflows to zero"),
    CASE("[0.01E-999]", "1:2: error: 0.01E-999 is too small for a number: it underflows to zero"),
    CASE("[1+2]", "1:3: error: the number that begins at 1:2 ends here with a character that no number has; a quantity "
                  "with a unit is a string such as \"3 m\""),
    CASE("[1-2]", "1:3: error: the number that begins at 1:2 ends here with a character that no number has; a quantity "
                  "with a unit is a string such as \"3 m\""),
    CASE("[-Infinity]", "1:2: error: JSON has no infinity and no not-a-number; expected a number"),
    CASE("[-NaN]", "1:2: error: JSON has no infinity and no not-a-number; expected a number"),
    CASE("[-x]", "1:3: error: the number that begins at 1:2 has no digit behind its minus sign"),
    CASE("{\0\0x", "1:2: error: found a zero byte; expected a key in double quotes"),
    CASE("\0\0\0\0", "1:1: error: found a zero byte; expected a value"),
    CASE("\0\0x?", "1:1: error: found a zero byte; expected a value"),
    CASE("\0{xx", "1:1: error: found a zero byte; expected a value"),
    /* doubled keys, however they are written */
    CASE("{\"\":1,\"\":2}", "1:7: error: /: the key \"\" stands twice in one object; the first is at 1:2"),
    CASE("{\"a\\nb\":1,\"a\\nb\":2}",
         "1:11: error: /a\\x0ab: the key \"a\\x0ab\" stands twice in one object; the first is at 1:2"),
    CASE("{\"\\\"\\\\/\":1,\"\\\"\\\\\\/\":2}",
         "1:12: error: /\"\\~1: the key \"\"\\/\" stands twice in one object; the first is at 1:2"),
    CASE("{\"~/\":{\"\xC3\xA9\":1,\"\\u00e9\":2}}", "1:14: error: /~0~1/\xC3\xA9"
                                                    ": the key \"\xC3\xA9"
                                                    "\" stands twice in one object; the first is at 1:8"),
    CASE("{\"\\u20ac\":1,\"\xE2\x82\xAC\":2}", "1:13: error: /\xE2\x82\xAC"
                                               ": the key \"\xE2\x82\xAC"
                                               "\" stands twice in one object; the first is at 1:2"),
    CASE("{\"\xF0\x9F\x98\x80\":1,\"\\ud83d\\ude00\":2}", "1:8: error: /\xF0\x9F\x98\x80"
                                                          ": the key \"\xF0\x9F\x98\x80"
                                                          "\" stands twice in one object; the first is at 1:2"),
    /* two keys of one 64-bit FNV-1a hash (a known pair) are two keys; each of them twice is told */
    CASE("{\"8yn0iYCKYHlIj4-BwPqk\":1,\"GReLUrM4wMqfg9yzV3KQ\":2}", ""),
    CASE("{\"GReLUrM4wMqfg9yzV3KQ\":1,\"8yn0iYCKYHlIj4-BwPqk\":2,\"GReLUrM4wMqfg9yzV3KQ\":3}",
         "1:52: error: /GReLUrM4wMqfg9yzV3KQ: the key \"GReLUrM4wMqfg9yzV3KQ\" stands twice in one object; the first "
         "is at 1:2"),
};

/* The first message without the file's name, "" when there is none. */
static const char *first_line(const sct_issues *issues, char room[512])
{
    room[0] = '\0';
    if (sct_issues_count(issues) == 0) return room;
    char *line = sct_issue_line(sct_issues_get(issues, 0));
    snprintf(room, 512, "%s", strncmp(line, "f:", 2) == 0 ? line + 2 : line);
    free(line);
    return room;
}

static sct_status check(const char *text, size_t size, sct_issues *issues)
{
    sct_gate_value *values;
    size_t n;
    char *copy = malloc(size + 1); /* of its exact size, so that the sanitizers see a step too far */
    memcpy(copy, text, size);
    copy[size] = '\0';
    const sct_status status = sct_gate_check("f", copy, size, &values, &n, issues);
    ck_assert((status == SCT_OK) == (values != NULL));
    free(values);
    free(copy);
    return status;
}

START_TEST(every_fault_is_told_at_its_place)
{
    const gate_case *c = &CASES[_i];
    char line[512];
    sct_issues *issues = sct_issues_new();
    const sct_status status = check(c->text, c->size, issues);
    ck_assert_str_eq(first_line(issues, line), c->expected);
    ck_assert_int_eq(status, c->expected[0] == '\0' ? SCT_OK : SCT_BAD_INPUT);
    sct_issues_free(issues);
}
END_TEST

START_TEST(every_beginning_of_a_good_text_is_refused)
{
    const char text[] = "{\"a\": [1, -2.5e3, true, null, \"x\\u00e9\\n\xC3\xA9\"], \"b\": {\"c\": {}, \"d\": []}}";
    for (size_t size = 0; size + 1 < sizeof text; size++) ck_assert_int_eq(check(text, size, NULL), SCT_BAD_INPUT);
    ck_assert_int_eq(check(text, sizeof text - 1, NULL), SCT_OK);
}
END_TEST

START_TEST(doubled_keys_are_told_with_both_places)
{
    char line[512];
    sct_issues *issues = sct_issues_new();
    const char text[] = "{\"x/y\": [0, {\"~\": {\"area\": 1,\n \"b\": 2,\n \"\\u0061rea\": 3}}]}";
    ck_assert_int_eq(check(text, sizeof text - 1, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_issues_count(issues), 1);
    ck_assert_str_eq(first_line(issues, line),
                     "3:2: error: /x~1y/1/~0/area: the key \"area\" stands twice in one object; the first is at 1:20");
    sct_issues_free(issues);
}
END_TEST

START_TEST(keys_that_differ_in_case_are_two_keys)
{
    ck_assert_int_eq(check("{\"E\":1,\"e\":2}", 13, NULL), SCT_OK);
}
END_TEST

START_TEST(doubled_keys_of_a_large_object_are_told_in_order)
{
    enum { N = 1000 };
    sct_text text = {0};
    sct_issues *issues = sct_issues_new();
    sct_text_add(&text, "{");
    for (int i = 0; i < N; i++) sct_text_format(&text, "%s\n\"k%d\":%d", i == 0 ? "" : ",", i % 997, i);
    sct_text_add(&text, "}");
    ck_assert_int_eq(check(text.data, text.size, issues), SCT_BAD_INPUT);
    ck_assert_int_eq(sct_issues_errors(issues), 3);
    for (int i = 0; i < 3; i++) ck_assert_int_eq(sct_issues_get(issues, i)->line, 999 + i);
    sct_issues_free(issues);
    sct_text_free(&text);
}
END_TEST

START_TEST(nesting_ends_at_its_limit)
{
    static const char *const OPEN[] = {"[", "{\"a\":"}, *const CLOSE[] = {"]", "}"}, *const INNER[] = {"", "1"};
    static const int DEPTHS[] = {SCT_MOST_DEPTH, SCT_MOST_DEPTH + 1, 1000, 100000};
    for (int kind = 0; kind < 2; kind++) {
        for (int k = 0; k < 4; k++) {
            sct_text text = {0};
            for (int i = 0; i < DEPTHS[k]; i++) sct_text_add(&text, OPEN[kind]);
            sct_text_add(&text, INNER[kind]);
            for (int i = 0; i < DEPTHS[k]; i++) sct_text_add(&text, CLOSE[kind]);
            ck_assert_int_eq(check(text.data, text.size, NULL), k == 0 ? SCT_OK : SCT_BAD_INPUT);
            sct_text_free(&text);
        }
    }
}
END_TEST

START_TEST(strings_and_numbers_end_at_their_limits)
{
    for (int over = 0; over < 2; over++) {
        sct_text string = {0}, number = {0};
        sct_text_add(&string, "[\"");
        for (int i = 0; i < SCT_MOST_STRING_BYTES + over; i++) sct_text_bytes(&string, "x", 1);
        sct_text_add(&string, "\"]");
        sct_text_add(&number, "[");
        for (int i = 0; i < SCT_MOST_NUMBER_CHARACTERS + over; i++) sct_text_bytes(&number, "1", 1);
        sct_text_add(&number, "]");
        ck_assert_int_eq(check(string.data, string.size, NULL), over == 0 ? SCT_OK : SCT_BAD_INPUT);
        ck_assert_int_eq(check(number.data, number.size, NULL), over == 0 ? SCT_OK : SCT_BAD_INPUT);
        sct_text_free(&string);
        sct_text_free(&number);
    }
}
END_TEST

START_TEST(a_text_above_the_size_limit_is_too_large)
{
    sct_gate_value *values;
    size_t n;
    ck_assert_int_eq(sct_gate_check("f", "", (size_t)SCT_MOST_BYTES + 1, &values, &n, NULL), SCT_TOO_LARGE);
}
END_TEST

START_TEST(every_value_and_key_has_its_place)
{
    const char text[] = "{\"a\":\r\n  [10,\r \"\xC3\xA9\", {}],\n\"\xC3\xA9\": null}";
    sct_gate_value *v;
    size_t n;
    ck_assert_int_eq(sct_gate_check("f", text, sizeof text - 1, &v, &n, NULL), SCT_OK);
    ck_assert_uint_eq(n, 6);
    static const int PLACES[6][4] = {{1, 1, 0, 0}, {2, 3, 1, 2}, {2, 4, 0, 0},
                                     {3, 2, 0, 0}, {3, 7, 0, 0}, {4, 6, 4, 1}};
    for (int i = 0; i < 6; i++) {
        ck_assert_int_eq(v[i].line, PLACES[i][0]);
        ck_assert_int_eq(v[i].column, PLACES[i][1]);
        ck_assert_int_eq(v[i].key_line, PLACES[i][2]);
        ck_assert_int_eq(v[i].key_column, PLACES[i][3]);
    }
    ck_assert_int_eq(memcmp(text + v[1].begin, "[10,\r \"\xC3\xA9\", {}]", v[1].end - v[1].begin), 0);
    ck_assert_int_eq(memcmp(text + v[5].key_begin, "\"\xC3\xA9\"", v[5].key_end - v[5].key_begin), 0);
    free(v);
}
END_TEST

/* ---- the tree -----------------------------------------------------------------------------------------------------
 */

START_TEST(the_tree_has_kinds_values_and_places)
{
    const char text[] =
        "\xEF\xBB\xBF{\"n\": -1.5, \"s\": \"a\\u00e9\",\n \"list\": [true, false, null, {}, [[7]]], \"a/b~\": 0}";
    sct_document *d;
    ck_assert_int_eq(sct_document_parse("f", text, sizeof text - 1, &d, NULL), SCT_OK);
    const sct_node *root = sct_document_root(d), *list = sct_node_find(root, "list");
    ck_assert_int_eq(sct_node_kind_of(root), SCT_OBJECT);
    ck_assert_int_eq(sct_node_count(root), 4);
    ck_assert(sct_node_number(sct_node_find(root, "n")) == -1.5);
    ck_assert_str_eq(sct_node_string(sct_node_find(root, "s")), "a\xC3\xA9");
    ck_assert_ptr_null(sct_node_find(root, "S"));
    static const sct_node_kind KINDS[] = {SCT_TRUE, SCT_FALSE, SCT_NULL, SCT_OBJECT, SCT_ARRAY};
    int i = 0;
    for (const sct_node *c = sct_node_first(list); c != NULL; c = sct_node_next(c)) {
        ck_assert_int_eq(sct_node_kind_of(c), KINDS[i++]);
        ck_assert_ptr_eq(sct_node_parent(c), list);
    }
    ck_assert_int_eq(i, 5);
    ck_assert_int_eq(sct_node_where(d, list).line, 2);
    ck_assert_int_eq(sct_node_where(d, list).column, 10);
    ck_assert_int_eq(sct_node_key_where(d, list).column, 2);
    sct_text pointer = {0};
    sct_node_pointer(sct_node_find(root, "a/b~"), &pointer);
    ck_assert_str_eq(pointer.data, "/a~1b~0");
    sct_text_free(&pointer);
    const sct_node *last = list;
    while (sct_node_first(last) != NULL)
        for (last = sct_node_first(last); sct_node_next(last) != NULL;) last = sct_node_next(last);
    sct_node_pointer(last, &pointer);
    ck_assert_str_eq(pointer.data, "/list/4/0/0");
    sct_text_free(&pointer);
    sct_document_free(d);
}
END_TEST

START_TEST(a_number_is_the_nearest_double)
{
    const char text[] = "[9007199254740993, 0.1, 0.1000000000000000055511151231257827021181583404541015625, 1e23]";
    sct_document *d;
    ck_assert_int_eq(sct_document_parse("f", text, sizeof text - 1, &d, NULL), SCT_OK);
    const sct_node *c = sct_node_first(sct_document_root(d));
    ck_assert(sct_node_number(c) == 9007199254740992.0);
    c = sct_node_next(c);
    ck_assert(sct_node_number(c) == 0.1);
    c = sct_node_next(c);
    ck_assert(sct_node_number(c) == 0.1);
    c = sct_node_next(c);
    ck_assert(sct_node_number(c) == 1e23);
    sct_document_free(d);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("gate");
    TCase *c = tcase_create("gate");
    tcase_add_loop_test(c, every_fault_is_told_at_its_place, 0, (int)(sizeof CASES / sizeof *CASES));
    tcase_add_test(c, every_beginning_of_a_good_text_is_refused);
    tcase_add_test(c, doubled_keys_are_told_with_both_places);
    tcase_add_test(c, keys_that_differ_in_case_are_two_keys);
    tcase_add_test(c, doubled_keys_of_a_large_object_are_told_in_order);
    tcase_add_test(c, nesting_ends_at_its_limit);
    tcase_add_test(c, strings_and_numbers_end_at_their_limits);
    tcase_add_test(c, a_text_above_the_size_limit_is_too_large);
    tcase_add_test(c, every_value_and_key_has_its_place);
    tcase_add_test(c, the_tree_has_kinds_values_and_places);
    tcase_add_test(c, a_number_is_the_nearest_double);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}
