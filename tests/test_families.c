/* The shipped section families, the CSV reader that reads them, and shapes that grow in proportion. */
#include "model/families.h"

#include <string.h>

#include "model/csv.h"
#include "model/shapes.h"
#include "support.h"

static sct_family load(sct_arena *arena, const char *name)
{
    sct_family family;
    const int i = sct_family_find(name);
    ck_assert_int_ge(i, 0);
    ck_assert_int_eq(sct_family_load(&sct_shipped_families[i], arena, &family), SCT_OK);
    return family;
}

static const sct_section *find(const sct_family *family, const char *name)
{
    for (int i = 0; i < family->n; i++)
        if (strcmp(family->sections[i].name, name) == 0) return &family->sections[i];
    ck_abort_msg("no section %s", name);
}

START_TEST(the_shipped_families_are_all_there)
{
    static const char *const NAMES[] = {"CHS", "SHS hot", "RHS hot", "SHS cold",     "RHS cold",
                                        "IPE", "HEA",     "HEB",     "double angles"};
    static const int COUNTS[] = {80, 69, 62, 61, 52, 18, 24, 24, 30};
    sct_arena *arena = sct_arena_new();
    ck_assert_int_eq(sct_n_shipped_families, 9);
    for (int i = 0; i < 9; i++) ck_assert_int_eq(load(arena, NAMES[i]).n, COUNTS[i]);
    ck_assert_int_eq(sct_family_find("chs"), -1);
    sct_arena_free(arena);
}
END_TEST

START_TEST(every_family_is_sorted_and_has_each_name_once)
{
    sct_arena *arena = sct_arena_new();
    for (int f = 0; f < sct_n_shipped_families; f++) {
        const sct_family family = load(arena, sct_shipped_families[f].name);
        for (int i = 0; i < family.n; i++) {
            const sct_section *s = &family.sections[i];
            ck_assert(s->A > 0 && s->I[0] > 0 && s->I[1] > 0 && s->depth > 0);
            ck_assert(s->I[0] < s->A * s->depth * s->depth / 4);
            ck_assert(s->W[0] > 0 && s->W[1] > 0 && s->J > 0);
            ck_assert(s->W[0] <= 1.02 * s->I[0] / (s->depth / 2)); /* no fibre is nearer than half of the depth */
            if (i > 0) ck_assert(family.sections[i - 1].A <= s->A);
            for (int k = 0; k < i; k++) ck_assert_str_ne(family.sections[k].name, s->name);
        }
    }
    sct_arena_free(arena);
}
END_TEST

START_TEST(tubes_have_the_properties_of_a_ring)
{
    const double pi = acos(-1.0);
    sct_arena *arena = sct_arena_new();
    const sct_family family = load(arena, "CHS");
    for (int i = 0; i < family.n; i++) {
        double D, t;
        ck_assert_int_eq(sscanf(family.sections[i].name, "CHS %lfx%lf", &D, &t), 2);
        D /= 1e3;
        t /= 1e3;
        const double d = D - 2 * t;
        ck_close(family.sections[i].A, pi / 4 * (D * D - d * d), 5e-4);
        ck_close(family.sections[i].I[0], pi / 64 * (pow(D, 4) - pow(d, 4)), 5e-4);
        ck_close(family.sections[i].depth, D, 1e-12);
        ck_close(family.sections[i].W[1], pi / 32 * (pow(D, 4) - pow(d, 4)) / D, 5e-4);
        ck_close(family.sections[i].J, pi / 32 * (pow(D, 4) - pow(d, 4)), 5e-4);
    }
    sct_arena_free(arena);
}
END_TEST

/* IPE 330: A = 62.6 cm2, Iy = 11770 cm4, Iz = 788 cm4, Wy = 713 cm3, Wz = 98.5 cm3, It = 28.15 cm4, as in the tables to
 * EN 10365. Pair of L 150x150x15 at a gap of
 * 10 mm: Steel Buildings in Europe, Single-Storey, Part 5 (2010), 4.1.3: 1796 cm4 in plane, 3737 cm4 out of plane. */
START_TEST(known_sections_have_their_tabulated_values)
{
    sct_arena *arena = sct_arena_new();
    const sct_family ipe = load(arena, "IPE"), pair = load(arena, "double angles");
    const sct_section *s = find(&ipe, "IPE 330");
    ck_close(s->A, 62.6e-4, 2e-3);
    ck_close(s->I[SCT_IN_PLANE], 11770e-8, 2e-3);
    ck_close(s->I[SCT_OUT_OF_PLANE], 788e-8, 2e-3);
    ck_close(s->W[SCT_IN_PLANE], 713e-6, 2e-3);
    ck_close(s->W[SCT_OUT_OF_PLANE], 98.5e-6, 2e-3);
    ck_close(s->J, 28.15e-8, 2e-3);
    ck_close(s->depth, 0.330, 1e-12);
    s = find(&pair, "2L 150x150x15 gap 10");
    ck_close(s->A, 86e-4, 2e-3);
    ck_close(s->I[SCT_IN_PLANE], 1796e-8, 1e-3);
    ck_close(s->I[SCT_OUT_OF_PLANE], 3737e-8, 1e-3);
    sct_arena_free(arena);
}
END_TEST

/* Torsion: k1 of J = k1 a b^3 by Timoshenko and Goodier, Theory of Elasticity, 3rd ed., section 109: 0.1406, 0.229 and
 * 0.312 for sides as 1, 2 and 10 to 1. */
START_TEST(similar_rectangles_have_the_properties_of_one)
{
    static const double RATIO[] = {1, 2, 10, 0.5}, K1[] = {0.1406, 0.229, 0.312, 0.229};
    for (int i = 0; i < 4; i++) {
        const sct_shape shape = sct_shape_of(SCT_SHAPE_RECTANGLE, RATIO[i]);
        const double b = 0.03, h = b * RATIO[i], A = b * h, a = fmax(b, h), thin = fmin(b, h);
        ck_close(shape.c_I[SCT_IN_PLANE] * A * A, b * h * h * h / 12, 1e-14);
        ck_close(shape.c_I[SCT_OUT_OF_PLANE] * A * A, h * b * b * b / 12, 1e-14);
        ck_close(shape.c_W[SCT_IN_PLANE] * pow(A, 1.5), b * h * h / 6, 1e-14);
        ck_close(shape.c_W[SCT_OUT_OF_PLANE] * pow(A, 1.5), h * b * b / 6, 1e-14);
        ck_close(shape.c_J * A * A, K1[i] * a * thin * thin * thin, 2.5e-3);
    }
    const sct_shape bar = sct_shape_of(SCT_SHAPE_SQUARE_BAR, 1), square = sct_shape_of(SCT_SHAPE_RECTANGLE, 1);
    ck_assert(bar.c_I[0] == square.c_I[0] && bar.c_J == square.c_J);
}
END_TEST

/* Rings by their formulas; a thin one is the limit r^3 t of both; the square by Bredt's formula. */
START_TEST(similar_tubes_have_the_properties_of_one)
{
    const double pi = acos(-1.0), D = 0.2, t = 0.01, d = D - 2 * t, A = pi / 4 * (D * D - d * d);
    const sct_shape tube = sct_shape_of(SCT_SHAPE_ROUND_TUBE, D / t), bar = sct_shape_of(SCT_SHAPE_ROUND_BAR, 1);
    ck_close(tube.c_I[0] * A * A, pi / 64 * (pow(D, 4) - pow(d, 4)), 1e-14);
    ck_close(tube.c_W[1] * pow(A, 1.5), pi / 32 * (pow(D, 4) - pow(d, 4)) / D, 1e-14);
    ck_close(tube.c_J, 2 * tube.c_I[0], 1e-14);
    ck_close(bar.c_I[1], 1 / (4 * pi), 1e-14);
    ck_close(bar.c_W[0], 1 / (4 * sqrt(pi)), 1e-14);
    const double B = 0.1, w = 0.005, inner = B - 2 * w, A_square = B * B - inner * inner;
    const sct_shape square = sct_shape_of(SCT_SHAPE_SQUARE_TUBE, B / w);
    ck_close(square.c_I[0] * A_square * A_square, (pow(B, 4) - pow(inner, 4)) / 12, 1e-14);
    ck_close(square.c_W[0] * pow(A_square, 1.5), (pow(B, 4) - pow(inner, 4)) / 6 / B, 1e-14);
    ck_close(square.c_J * A_square * A_square, pow(B - w, 3) * w, 1e-13);
}
END_TEST

START_TEST(equal_areas_stay_in_their_order)
{
    sct_section s[] = {{.name = "b", .A = 2}, {.name = "a", .A = 1}, {.name = "c", .A = 2}, {.name = "d", .A = 1}};
    ck_assert(sct_sections_sort(s, 4));
    const char *const ORDER[] = {"a", "d", "b", "c"};
    for (int i = 0; i < 4; i++) ck_assert_str_eq(s[i].name, ORDER[i]);
}
END_TEST

START_TEST(csv_follows_rfc_4180)
{
    const char text[] = "# comment\r\na,b,c\r\n\r\n\"x, \"\"y\"\"\",,\"two\nlines\"\r1\n\"\"";
    sct_csv csv;
    sct_csv_start(&csv, text, sizeof text - 1);
    ck_assert(sct_csv_next(&csv));
    ck_assert_int_eq(csv.n, 3);
    ck_assert_int_eq(csv.line, 2);
    ck_assert_int_eq(sct_csv_column(&csv, "b"), 1);
    ck_assert_int_eq(sct_csv_column(&csv, "B"), -1);
    ck_assert(sct_csv_next(&csv));
    ck_assert_int_eq(csv.n, 3);
    ck_assert_int_eq(csv.line, 4);
    ck_assert_str_eq(csv.field[0], "x, \"y\"");
    ck_assert_str_eq(csv.field[1], "");
    ck_assert_str_eq(csv.field[2], "two\nlines");
    ck_assert(sct_csv_next(&csv));
    ck_assert_int_eq(csv.n, 1);
    ck_assert_int_eq(csv.line, 6);
    ck_assert(sct_csv_next(&csv));
    ck_assert_str_eq(csv.field[0], "");
    ck_assert(!sct_csv_next(&csv));
    ck_assert_ptr_null(csv.fault);
}
END_TEST

START_TEST(csv_stops_at_a_fault)
{
    static const char *const BAD[] = {"a,\"b", "a,\"b\"c,d"};
    sct_csv csv;
    for (int i = 0; i < 2; i++) {
        sct_csv_start(&csv, BAD[i], strlen(BAD[i]));
        ck_assert(!sct_csv_next(&csv));
        ck_assert_ptr_nonnull(csv.fault);
    }
    char many[200], longest[2 * SCT_CSV_MOST_BYTES];
    memset(many, ',', sizeof many);
    sct_csv_start(&csv, many, sizeof many);
    ck_assert(!sct_csv_next(&csv));
    ck_assert_ptr_nonnull(csv.fault);
    memset(longest, 'x', sizeof longest);
    for (int comma = 0; comma < 3; comma++) { /* the end of the room in a field, at its end, and behind a comma */
        longest[SCT_CSV_MOST_BYTES - 2 + comma] = ',';
        sct_csv_start(&csv, longest, sizeof longest);
        ck_assert(!sct_csv_next(&csv));
        ck_assert_ptr_nonnull(csv.fault);
        longest[SCT_CSV_MOST_BYTES - 2 + comma] = 'x';
    }
}
END_TEST

START_TEST(a_quoted_field_has_no_more_room_and_nothing_follows_a_fault)
{
    char longest[2 * SCT_CSV_MOST_BYTES];
    sct_csv csv;
    memset(longest, 'x', sizeof longest);
    longest[0] = '"';
    sct_csv_start(&csv, longest, sizeof longest);
    ck_assert(!sct_csv_next(&csv) && csv.fault != NULL);
    ck_assert(!sct_csv_next(&csv));
}
END_TEST

#define HEAD "name,A_mm2,Iy_mm4,Iz_mm4,h_mm,It_mm4\n"

START_TEST(a_damaged_family_is_told_and_a_sound_one_read)
{
    static const char *const DAMAGED[] = {
        "",
        HEAD,
        "name,A_mm2,Iy_mm4,Iz_mm4\na,1,2,3\n",
        HEAD "a,1,2,3,4\n",
        HEAD ",1,2,3,4,5\n",
        HEAD "a,x,2,3,4,5\n",
        HEAD "a,0,2,3,4,5\n",
        HEAD "a,1,-2,3,4,5\n",
        HEAD "a,1,2,,4,5\n",
        HEAD "a,1,2,3,h,5\n",
        HEAD "a,1,2,3,4,0\n",
        HEAD "a,1,2,3,4,5\n\"b,1,2,3,4,5\n",
    };
    sct_arena *arena = sct_arena_new();
    sct_family family;
    for (size_t i = 0; i < sizeof DAMAGED / sizeof *DAMAGED; i++) {
        const sct_shipped_family shipped = {"damaged", DAMAGED[i], strlen(DAMAGED[i])};
        ck_assert_msg(sct_family_load(&shipped, arena, &family) == SCT_SELF_CHECK, "%s", DAMAGED[i]);
    }
    const sct_shipped_family sound = {"sound", HEAD "b,20,2,3,4,5\na,10,2,3,4,5",
                                      strlen(HEAD "b,20,2,3,4,5\na,10,2,3,4,5")};
    ck_assert_int_eq(sct_family_load(&sound, arena, &family), SCT_OK);
    ck_assert(family.n == 2 && strcmp(family.sections[0].name, "a") == 0);
    ck_close(family.sections[0].A, 10e-6, 1e-15);
    ck_close(family.sections[1].J, 5e-12, 1e-15);
    ck_assert(isnan(family.sections[0].W[0]));
    sct_arena_free(arena);
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("families");
    TCase *c = tcase_create("families");
    tcase_add_test(c, the_shipped_families_are_all_there);
    tcase_add_test(c, every_family_is_sorted_and_has_each_name_once);
    tcase_add_test(c, tubes_have_the_properties_of_a_ring);
    tcase_add_test(c, known_sections_have_their_tabulated_values);
    tcase_add_test(c, similar_rectangles_have_the_properties_of_one);
    tcase_add_test(c, similar_tubes_have_the_properties_of_one);
    tcase_add_test(c, equal_areas_stay_in_their_order);
    tcase_add_test(c, csv_follows_rfc_4180);
    tcase_add_test(c, csv_stops_at_a_fault);
    tcase_add_test(c, a_quoted_field_has_no_more_room_and_nothing_follows_a_fault);
    tcase_add_test(c, a_damaged_family_is_told_and_a_sound_one_read);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}
