/* Units and quantities. Factors: the international inch, pound and standard gravity, exact by definition. */
#include "model/units.h"

#include <string.h>

#include "support.h"

static double in_SI(const char *text, sct_quantity quantity)
{
    double value;
    const sct_unit *unit;
    char fault[SCT_UNIT_FAULT_ROOM];
    ck_assert_msg(sct_quantity_read(text, quantity, &value, &unit, fault), "%s: %s", text, fault);
    return sct_unit_to_SI(unit, value);
}

START_TEST(metric_quantities_are_the_nearest_double)
{
    ck_assert(in_SI("24 m", SCT_LENGTH) == 24.0);
    ck_assert(in_SI("20 mm", SCT_LENGTH) == 0.02);
    ck_assert(in_SI("60.3 mm", SCT_LENGTH) == 0.0603);
    ck_assert(in_SI("-4.2 kN", SCT_FORCE) == -4200.0);
    ck_assert(in_SI("707.5 mm2", SCT_AREA) == 707.5e-6);
    ck_assert(in_SI("3 cm4", SCT_SECOND_MOMENT) == 3e-8);
    ck_assert(in_SI("7.85 t/m3", SCT_DENSITY) == 7850.0);
    ck_assert(in_SI("12e-6 1/K", SCT_EXPANSION) == 12e-6);
    ck_assert(in_SI("21 kN/cm2", SCT_STRESS) == 210e6);
}
END_TEST

START_TEST(customary_units_follow_from_their_definitions)
{
    const double in = 0.0254, lb = 0.45359237, lbf = lb * 9.80665;
    ck_close(in_SI("1 in", SCT_LENGTH), in, 1e-15);
    ck_close(in_SI("1 ft", SCT_LENGTH), 12 * in, 1e-15);
    ck_close(in_SI("1 yd", SCT_LENGTH), 36 * in, 1e-15);
    ck_close(in_SI("1 lbf", SCT_FORCE), lbf, 1e-15);
    ck_close(in_SI("1 kip", SCT_FORCE), 1000 * lbf, 1e-15);
    ck_close(in_SI("1 psi", SCT_STRESS), lbf / (in * in), 1e-15);
    ck_close(in_SI("36 ksi", SCT_STRESS), 36000 * lbf / (in * in), 1e-15);
    ck_close(in_SI("1 psf", SCT_STRESS), lbf / (144 * in * in), 1e-15);
    ck_close(in_SI("1 in2", SCT_AREA), in * in, 1e-15);
    ck_close(in_SI("1 ft2", SCT_AREA), 144 * in * in, 1e-15);
    ck_close(in_SI("1 in4", SCT_SECOND_MOMENT), in * in * in * in, 1e-15);
    ck_close(in_SI("0.1 lb/in3", SCT_DENSITY), 0.1 * lb / (in * in * in), 1e-15);
    ck_close(in_SI("490 lb/ft3", SCT_DENSITY), 490 * lb / (1728 * in * in * in), 1e-15);
}
END_TEST

START_TEST(units_of_frames_follow_from_those_of_length_and_force)
{
    const double in = 0.0254, lbf = 0.45359237 * 9.80665, pi = acos(-1.0);
    ck_assert(in_SI("12 kN m", SCT_MOMENT) == 12e3);
    ck_assert(in_SI("250 N mm", SCT_MOMENT) == 0.25);
    ck_assert(in_SI("3 kN cm", SCT_MOMENT) == 30);
    ck_close(in_SI("1 lbf in", SCT_MOMENT), lbf * in, 1e-15);
    ck_close(in_SI("1 lbf ft", SCT_MOMENT), lbf * 12 * in, 1e-15);
    ck_close(in_SI("1 kip in", SCT_MOMENT), 1000 * lbf * in, 1e-15);
    ck_close(in_SI("1 kip ft", SCT_MOMENT), 12000 * lbf * in, 1e-15);
    ck_assert(in_SI("-5 kN/m", SCT_FORCE_PER_LENGTH) == -5e3 && in_SI("5 N/mm", SCT_FORCE_PER_LENGTH) == 5e3);
    ck_assert(in_SI("5 kN/mm", SCT_FORCE_PER_LENGTH) == 5e6 && in_SI("5 kN/cm", SCT_FORCE_PER_LENGTH) == 5e5);
    ck_close(in_SI("1 lbf/in", SCT_FORCE_PER_LENGTH), lbf / in, 1e-15);
    ck_close(in_SI("1 lbf/ft", SCT_FORCE_PER_LENGTH), lbf / (12 * in), 1e-15);
    ck_close(in_SI("1 kip/in", SCT_FORCE_PER_LENGTH), 1000 * lbf / in, 1e-15);
    ck_close(in_SI("1 kip/ft", SCT_FORCE_PER_LENGTH), 1000 * lbf / (12 * in), 1e-15);
    ck_assert(in_SI("200 kN m/rad", SCT_TURN_STIFFNESS) == 200e3);
    ck_close(in_SI("1 kN m/deg", SCT_TURN_STIFFNESS), 1e3 * 180 / pi, 1e-15);
    ck_close(in_SI("1 kip ft/rad", SCT_TURN_STIFFNESS), 12000 * lbf * in, 1e-15);
    ck_close(in_SI("1 kip in/rad", SCT_TURN_STIFFNESS), 1000 * lbf * in, 1e-15);
    ck_close(in_SI("1 lbf in/rad", SCT_TURN_STIFFNESS), lbf * in, 1e-15);
    ck_close(in_SI("30 deg", SCT_ANGLE), pi / 6, 1e-15);
    ck_assert(in_SI("2 mrad", SCT_ANGLE) == 0.002);
    ck_assert(in_SI("713 cm3", SCT_SECTION_MODULUS) == 713e-6 && in_SI("5 mm3", SCT_SECTION_MODULUS) == 5e-9);
    ck_close(in_SI("1 in3", SCT_SECTION_MODULUS), in * in * in, 1e-15);
    ck_assert(in_SI("10 K/m", SCT_GRADIENT) == 10 && in_SI("1 K/mm", SCT_GRADIENT) == 1000);
    ck_close(in_SI("9 F/in", SCT_GRADIENT), 5 / in, 1e-15);
    ck_close(in_SI("9 F/ft", SCT_GRADIENT), 5 / (12 * in), 1e-15);
    ck_assert(in_SI("3 Hz", SCT_FREQUENCY) == 3);
}
END_TEST

START_TEST(a_temperature_is_a_difference)
{
    ck_assert(in_SI("30 K", SCT_TEMPERATURE) == 30.0);
    ck_assert(in_SI("30 C", SCT_TEMPERATURE) == 30.0);
    ck_assert(in_SI("-90 F", SCT_TEMPERATURE) == -50.0);
    ck_close(in_SI("6.5e-6 1/F", SCT_EXPANSION), 11.7e-6, 1e-15);
}
END_TEST

typedef struct refused {
    const char *text;
    sct_quantity quantity;
    const char *fault;
} refused;
static const refused REFUSED[] = {
    {"5 KN", SCT_FORCE, "no unit \"KN\"; did you mean \"kN\"?"},
    {"5 mPa", SCT_STRESS, "no unit \"mPa\"; did you mean \"MPa\"?"},
    {"5 lbs", SCT_FORCE, "no unit \"lbs\"; did you mean \"lbf\"?"},
    {"5 lb", SCT_FORCE, "no unit \"lb\"; did you mean \"lbf\"?"},
    {"5 foot", SCT_LENGTH, "no unit \"foot\"; did you mean \"ft\"?"},
    {"5 mm\xC2\xB2", SCT_AREA, "no unit \"mm\xC2\xB2\"; did you mean \"mm2\"?"},
    {"5 \xC2\xB0"
     "C",
     SCT_TEMPERATURE,
     "no unit \"\xC2\xB0"
     "C\"; did you mean \"C\"?"},
    {"5 furlong", SCT_LENGTH, "no unit \"furlong\"; expected one of m, cm, mm, km, in, ft, yd"},
    {"5 m m", SCT_LENGTH, "no unit \"m m\"; did you mean \"mm\"?"},
    {"5 kN", SCT_LENGTH, "kN is the unit of a force; expected a length in one of m, cm, mm, km, in, ft, yd"},
    {"5 kg", SCT_FORCE, "kg is a mass, not a force; expected one of N, kN, MN, lbf, kip"},
    {"77 kN/m3", SCT_DENSITY,
     "kN/m3 is a weight per volume, not a density; expected one of kg/m3, t/m3, g/cm3, lb/in3, lb/ft3"},
    {"12 kNm", SCT_MOMENT, "no unit \"kNm\"; did you mean \"kN m\"?"},
    {"12 kNm", SCT_TURN_STIFFNESS, "no unit \"kNm\"; did you mean \"kN m/rad\"?"},
    {"12 kN", SCT_MOMENT,
     "kN is the unit of a force; expected a moment in one of N m, kN m, MN m, N mm, kN cm, lbf in, lbf ft, kip in, "
     "kip ft"},
    {"30 degrees", SCT_ANGLE, "no unit \"degrees\"; did you mean \"deg\"?"},
    {"5 plf", SCT_FORCE_PER_LENGTH, "no unit \"plf\"; did you mean \"lbf/ft\"?"},
    {"0.01", SCT_AREA,
     "found the string \"0.01\" without a unit; expected an area such as \"700 mm2\", or a number without quotes"},
    {"", SCT_LENGTH, "found \"\"; expected a length: a number and its unit, such as \"3 m\""},
    {"m", SCT_LENGTH, "found \"m\"; expected a length: a number and its unit, such as \"3 m\""},
    {" 3 m", SCT_LENGTH, "found \" 3 m\"; expected a length: a number and its unit, such as \"3 m\""},
    {"+3 m", SCT_LENGTH, "found \"+3 m\"; expected a length: a number and its unit, such as \"3 m\""},
    {"3m", SCT_LENGTH, "found \"3m\"; expected a blank between the number and its unit"},
    {"3 m ", SCT_LENGTH, "no unit \"m \"; did you mean \"m\"?"},
    {"1,5 m", SCT_LENGTH, "found \"1,5 m\"; the decimal mark is a point, such as in \"3 m\""},
    {"1e999 m", SCT_LENGTH, NULL},
    {"nan m", SCT_LENGTH, NULL},
    {"0x10 m", SCT_LENGTH, NULL},
    {"1.2.3 m", SCT_LENGTH, NULL},
};

START_TEST(what_is_no_quantity_is_told_with_the_likely_slip)
{
    const refused *r = &REFUSED[_i];
    double value;
    const sct_unit *unit;
    char fault[SCT_UNIT_FAULT_ROOM] = "";
    ck_assert(!sct_quantity_read(r->text, r->quantity, &value, &unit, fault));
    ck_assert(fault[0] != '\0');
    if (r->fault != NULL) ck_assert_str_eq(fault, r->fault);
}
END_TEST

START_TEST(every_unit_is_found_by_its_own_name_only)
{
    for (int q = 0; q < SCT_QUANTITIES; q++) {
        const sct_unit *unit;
        for (int i = 0; (unit = sct_unit_of((sct_quantity)q, i)) != NULL; i++) {
            ck_assert_ptr_eq(sct_unit_find(unit->name), unit);
            ck_assert_double_eq_tol(sct_unit_from_SI(unit, sct_unit_to_SI(unit, 12.5)), 12.5, 1e-14);
        }
        ck_assert(sct_unit_of((sct_quantity)q, 0)->numerator == sct_unit_of((sct_quantity)q, 0)->denominator);
    }
    ck_assert_ptr_null(sct_unit_find("MM"));
    ck_assert_ptr_null(sct_unit_find(""));
}
END_TEST

int main(void)
{
    Suite *suite = suite_create("units");
    TCase *c = tcase_create("units");
    tcase_add_test(c, metric_quantities_are_the_nearest_double);
    tcase_add_test(c, customary_units_follow_from_their_definitions);
    tcase_add_test(c, units_of_frames_follow_from_those_of_length_and_force);
    tcase_add_test(c, a_temperature_is_a_difference);
    tcase_add_loop_test(c, what_is_no_quantity_is_told_with_the_likely_slip, 0,
                        (int)(sizeof REFUSED / sizeof *REFUSED));
    tcase_add_test(c, every_unit_is_found_by_its_own_name_only);
    suite_add_tcase(suite, c);
    return run_suite(suite);
}
