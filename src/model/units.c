/* Units by name: one table. Names are matched exactly: mPa is not MPa. */
#include "units.h"

#include <stddef.h>
#include <stdio.h>
#include <string.h>

#include "scantling.h"
#include "base/number.h"
#include "base/text.h"

#define PI 3.14159265358979323846

/* Exact by definition: 1 in = 0.0254 m, 1 lb = 0.45359237 kg (International yard and pound agreement, 1959), standard
 * gravity 9.80665 m/s2 (3rd CGPM, 1901), so 1 lbf = 4.4482216152605 N. Each is written as a ratio of whole numbers, or
 * of the doubles nearest to what is none (degrees, moments in lbf). */
static const sct_unit UNITS[] = {
    {"m", SCT_LENGTH, 1, 1},
    {"cm", SCT_LENGTH, 1, 1e2},
    {"mm", SCT_LENGTH, 1, 1e3},
    {"km", SCT_LENGTH, 1e3, 1},
    {"in", SCT_LENGTH, 254, 1e4},
    {"ft", SCT_LENGTH, 3048, 1e4},
    {"yd", SCT_LENGTH, 9144, 1e4},
    {"N", SCT_FORCE, 1, 1},
    {"kN", SCT_FORCE, 1e3, 1},
    {"MN", SCT_FORCE, 1e6, 1},
    {"lbf", SCT_FORCE, 44482216152605, 1e13},
    {"kip", SCT_FORCE, 44482216152605, 1e10},
    {"Pa", SCT_STRESS, 1, 1},
    {"kPa", SCT_STRESS, 1e3, 1},
    {"MPa", SCT_STRESS, 1e6, 1},
    {"GPa", SCT_STRESS, 1e9, 1},
    {"N/mm2", SCT_STRESS, 1e6, 1},
    {"kN/mm2", SCT_STRESS, 1e9, 1},
    {"kN/cm2", SCT_STRESS, 1e7, 1},
    {"kN/m2", SCT_STRESS, 1e3, 1},
    {"psi", SCT_STRESS, 44482216152605, 64516e5},
    {"ksi", SCT_STRESS, 44482216152605, 64516e2},
    {"psf", SCT_STRESS, 44482216152605, 9290304e5},
    {"m2", SCT_AREA, 1, 1},
    {"cm2", SCT_AREA, 1, 1e4},
    {"mm2", SCT_AREA, 1, 1e6},
    {"in2", SCT_AREA, 64516, 1e8},
    {"ft2", SCT_AREA, 9290304, 1e8},
    {"m4", SCT_SECOND_MOMENT, 1, 1},
    {"cm4", SCT_SECOND_MOMENT, 1, 1e8},
    {"mm4", SCT_SECOND_MOMENT, 1, 1e12},
    {"in4", SCT_SECOND_MOMENT, 4162314256, 1e16},
    {"kg/m3", SCT_DENSITY, 1, 1},
    {"t/m3", SCT_DENSITY, 1e3, 1},
    {"g/cm3", SCT_DENSITY, 1e3, 1},
    {"lb/in3", SCT_DENSITY, 45359237e4, 16387064},
    {"lb/ft3", SCT_DENSITY, 45359237e4, 28316846592},
    {"K", SCT_TEMPERATURE, 1, 1},
    {"C", SCT_TEMPERATURE, 1, 1},
    {"F", SCT_TEMPERATURE, 5, 9},
    {"1/K", SCT_EXPANSION, 1, 1},
    {"1/C", SCT_EXPANSION, 1, 1},
    {"1/F", SCT_EXPANSION, 9, 5},
    {"rad", SCT_ANGLE, 1, 1},
    {"mrad", SCT_ANGLE, 1, 1e3},
    {"deg", SCT_ANGLE, PI, 180},
    {"N m", SCT_MOMENT, 1, 1},
    {"kN m", SCT_MOMENT, 1e3, 1},
    {"MN m", SCT_MOMENT, 1e6, 1},
    {"N mm", SCT_MOMENT, 1, 1e3},
    {"kN cm", SCT_MOMENT, 10, 1},
    {"lbf in", SCT_MOMENT, 1129848290276167, 1e16},
    {"lbf ft", SCT_MOMENT, 13558179483314004.0, 1e16},
    {"kip in", SCT_MOMENT, 1129848290276167, 1e13},
    {"kip ft", SCT_MOMENT, 13558179483314004.0, 1e13},
    {"N/m", SCT_FORCE_PER_LENGTH, 1, 1},
    {"kN/m", SCT_FORCE_PER_LENGTH, 1e3, 1},
    {"MN/m", SCT_FORCE_PER_LENGTH, 1e6, 1},
    {"N/mm", SCT_FORCE_PER_LENGTH, 1e3, 1},
    {"kN/mm", SCT_FORCE_PER_LENGTH, 1e6, 1},
    {"kN/cm", SCT_FORCE_PER_LENGTH, 1e5, 1},
    {"lbf/in", SCT_FORCE_PER_LENGTH, 44482216152605, 254e9},
    {"lbf/ft", SCT_FORCE_PER_LENGTH, 44482216152605, 3048e9},
    {"kip/in", SCT_FORCE_PER_LENGTH, 44482216152605, 254e6},
    {"kip/ft", SCT_FORCE_PER_LENGTH, 44482216152605, 3048e6},
    {"N m/rad", SCT_TURN_STIFFNESS, 1, 1},
    {"kN m/rad", SCT_TURN_STIFFNESS, 1e3, 1},
    {"MN m/rad", SCT_TURN_STIFFNESS, 1e6, 1},
    {"kN m/deg", SCT_TURN_STIFFNESS, 180e3, PI},
    {"lbf in/rad", SCT_TURN_STIFFNESS, 1129848290276167, 1e16},
    {"kip in/rad", SCT_TURN_STIFFNESS, 1129848290276167, 1e13},
    {"kip ft/rad", SCT_TURN_STIFFNESS, 13558179483314004.0, 1e13},
    {"m3", SCT_SECTION_MODULUS, 1, 1},
    {"cm3", SCT_SECTION_MODULUS, 1, 1e6},
    {"mm3", SCT_SECTION_MODULUS, 1, 1e9},
    {"in3", SCT_SECTION_MODULUS, 16387064, 1e12},
    {"K/m", SCT_GRADIENT, 1, 1},
    {"C/m", SCT_GRADIENT, 1, 1},
    {"K/mm", SCT_GRADIENT, 1e3, 1},
    {"F/ft", SCT_GRADIENT, 5e4, 27432},
    {"F/in", SCT_GRADIENT, 5e4, 2286},
    {"Hz", SCT_FREQUENCY, 1, 1},
};
enum { N_UNITS = sizeof UNITS / sizeof *UNITS };

/* What people write instead. */
static const char *const SLIPS[][2] = {
    {"foot", "ft"},        {"feet", "ft"},          {"'", "ft"},
    {"inch", "in"},        {"inches", "in"},        {"\"", "in"},
    {"metre", "m"},        {"meter", "m"},          {"metres", "m"},
    {"meters", "m"},       {"millimetre", "mm"},    {"millimeter", "mm"},
    {"newton", "N"},       {"lb", "lbf"},           {"lbs", "lbf"},
    {"pound", "lbf"},      {"pounds", "lbf"},       {"kips", "kip"},
    {"pascal", "Pa"},      {"psig", "psi"},         {"N/mm\u00b2", "N/mm2"},
    {"N/mm^2", "N/mm2"},   {"kN/m\u00b2", "kN/m2"}, {"kN/m^2", "kN/m2"},
    {"m\u00b2", "m2"},     {"m^2", "m2"},           {"mm\u00b2", "mm2"},
    {"mm^2", "mm2"},       {"cm\u00b2", "cm2"},     {"cm^2", "cm2"},
    {"sqin", "in2"},       {"in^2", "in2"},         {"in\u00b2", "in2"},
    {"mm^4", "mm4"},       {"cm^4", "cm4"},         {"mm\u2074", "mm4"},
    {"cm\u2074", "cm4"},   {"in^4", "in4"},         {"kg/m\u00b3", "kg/m3"},
    {"kg/m^3", "kg/m3"},   {"t/m^3", "t/m3"},       {"pcf", "lb/ft3"},
    {"pci", "lb/in3"},     {"lb/in^3", "lb/in3"},   {"\u00b0C", "C"},
    {"\u00b0", "deg"},     {"degree", "deg"},       {"degrees", "deg"},
    {"kNm", "kN m"},       {"kN*m", "kN m"},        {"kN-m", "kN m"},
    {"kN.m", "kN m"},      {"Nm", "N m"},           {"Nmm", "N mm"},
    {"kNcm", "kN cm"},     {"lb-ft", "lbf ft"},     {"ft-lb", "lbf ft"},
    {"lbf-ft", "lbf ft"},  {"lb-in", "lbf in"},     {"kip-ft", "kip ft"},
    {"kip-in", "kip in"},  {"ft-kip", "kip ft"},    {"plf", "lbf/ft"},
    {"lb/ft", "lbf/ft"},   {"klf", "kip/ft"},       {"kNm/rad", "kN m/rad"},
    {"Nm/rad", "N m/rad"}, {"kNm", "kN m/rad"},     {"kN m", "kN m/rad"},
    {"N m", "N m/rad"},    {"mm^3", "mm3"},         {"mm\u00b3", "mm3"},
    {"cm^3", "cm3"},       {"cm\u00b3", "cm3"},     {"in^3", "in3"},
    {"1/s", "Hz"},         {"hertz", "Hz"},         {"\u00b0F", "F"},
    {"degC", "C"},         {"degF", "F"},           {"celsius", "C"},
    {"kelvin", "K"},       {"/K", "1/K"},           {"/C", "1/C"},
    {"/F", "1/F"},         {"1/\u00b0C", "1/C"},    {"1/\u00b0F", "1/F"},
    {"K^-1", "1/K"},
};

static const char *const WORDS[SCT_QUANTITIES] = {"a length",
                                                  "a force",
                                                  "a stress",
                                                  "an area",
                                                  "a second moment of area",
                                                  "a density",
                                                  "a temperature difference",
                                                  "an expansion coefficient",
                                                  "an angle",
                                                  "a moment",
                                                  "a force per length",
                                                  "a rotational stiffness",
                                                  "a section modulus",
                                                  "a temperature gradient",
                                                  "a frequency"};
static const char *const EXAMPLES[SCT_QUANTITIES] = {"3 m",        "4.2 kN",       "210 MPa",   "700 mm2", "2.8e5 mm4",
                                                     "7850 kg/m3", "30 K",         "12e-6 1/K", "30 deg",  "12 kN m",
                                                     "5 kN/m",     "200 kN m/rad", "9.2e3 mm3", "10 K/m",  "3 Hz"};

const sct_unit *sct_unit_find(const char *name)
{
    for (int i = 0; i < N_UNITS; i++)
        if (strcmp(UNITS[i].name, name) == 0) return &UNITS[i];
    return NULL;
}

const sct_unit *sct_unit_of(sct_quantity quantity, int i)
{
    for (int k = 0; k < N_UNITS; k++)
        if (UNITS[k].quantity == quantity && i-- == 0) return &UNITS[k];
    return NULL;
}

const char *sct_quantity_example(sct_quantity quantity)
{
    return EXAMPLES[quantity];
}

static bool same_but_for_case(const char *a, const char *b)
{
    for (; *a != '\0' && *b != '\0'; a++, b++) {
        const int x = *a >= 'A' && *a <= 'Z' ? *a + 32 : *a, y = *b >= 'A' && *b <= 'Z' ? *b + 32 : *b;
        if (x != y) return false;
    }
    return *a == *b;
}

static const char *nearest_unit(const char *name, sct_quantity quantity)
{
    const char *list[N_UNITS];
    for (int i = 0; i < N_UNITS; i++) list[i] = UNITS[i].quantity == quantity ? UNITS[i].name : NULL;
    for (int i = 0; i < N_UNITS; i++)
        if (list[i] != NULL && same_but_for_case(list[i], name)) return list[i];
    for (size_t i = 0; i < sizeof SLIPS / sizeof *SLIPS; i++) {
        const sct_unit *meant = sct_unit_find(SLIPS[i][1]);
        if (meant != NULL && meant->quantity == quantity && same_but_for_case(SLIPS[i][0], name)) return meant->name;
    }
    return strlen(name) < 2 ? NULL : sct_nearest(list, N_UNITS, name); /* of one letter, every unit is one edit away */
}

static void list_units(sct_quantity quantity, char *out, size_t room)
{
    size_t used = 0;
    out[0] = '\0';
    for (int i = 0; i < N_UNITS && used < room; i++) {
        if (UNITS[i].quantity != quantity) continue;
        const int n = snprintf(out + used, room - used, "%s%s", used == 0 ? "" : ", ", UNITS[i].name);
        used += n > 0 ? (size_t)n : 0;
    }
}

/* A text cut and cleaned for a message. */
static void show(const char *raw, char *out, size_t room)
{
    sct_text text = {0};
    sct_text_plain(&text, raw, 40);
    snprintf(out, room, "%s", text.data != NULL ? text.data : "");
    sct_text_free(&text);
}

const sct_unit *sct_unit_read(const char *name, sct_quantity quantity, char fault[SCT_UNIT_FAULT_ROOM])
{
    const sct_unit *unit = sct_unit_find(name);
    if (unit != NULL && unit->quantity == quantity) return unit;
    char shown[164], units[120];
    show(name, shown, sizeof shown);
    list_units(quantity, units, sizeof units);
    if (unit != NULL) {
        snprintf(fault, SCT_UNIT_FAULT_ROOM, "%s is the unit of %s; expected %s in one of %s", name,
                 WORDS[unit->quantity], WORDS[quantity], units);
    } else if (quantity == SCT_DENSITY && (strcmp(name, "kN/m3") == 0 || strcmp(name, "N/m3") == 0)) {
        snprintf(fault, SCT_UNIT_FAULT_ROOM, "%s is a weight per volume, not a density; expected one of %s", name,
                 units);
    } else if (quantity == SCT_FORCE && (strcmp(name, "kg") == 0 || strcmp(name, "t") == 0)) {
        snprintf(fault, SCT_UNIT_FAULT_ROOM, "%s is a mass, not a force; expected one of %s", name, units);
    } else {
        const char *near = nearest_unit(name, quantity);
        if (near != NULL)
            snprintf(fault, SCT_UNIT_FAULT_ROOM, "no unit \"%s\"; did you mean \"%s\"?", shown, near);
        else
            snprintf(fault, SCT_UNIT_FAULT_ROOM, "no unit \"%s\"; expected one of %s", shown, units);
    }
    return NULL;
}

bool sct_quantity_read(const char *text, sct_quantity quantity, double *value, const sct_unit **unit,
                       char fault[SCT_UNIT_FAULT_ROOM])
{
    char shown[164];
    show(text, shown, sizeof shown);
    size_t digits = strspn(text, "0123456789+-.,eE");
    /* the longest beginning that is a number: the E of "3 E" and the e of "3em" belong to what follows */
    while (digits > 0 && !sct_number_read(text, digits, value)) digits--;
    if (text[digits] >= '0' && text[digits] <= '9') digits = 0; /* cut in the middle: too large, or no number */
    const char *rest = text + digits;
    const size_t blanks = strspn(rest, " ");
    if (digits == 0) {
        snprintf(fault, SCT_UNIT_FAULT_ROOM, "found \"%s\"; expected %s: a number and its unit, such as \"%s\"", shown,
                 WORDS[quantity], EXAMPLES[quantity]);
        return false;
    }
    if (rest[0] == ',') {
        snprintf(fault, SCT_UNIT_FAULT_ROOM, "found \"%s\"; the decimal mark is a point, such as in \"%s\"", shown,
                 EXAMPLES[quantity]);
        return false;
    }
    if (rest[blanks] == '\0') {
        snprintf(fault, SCT_UNIT_FAULT_ROOM,
                 "found the string \"%s\" without a unit; expected %s such as \"%s\", or a number without quotes",
                 shown, WORDS[quantity], EXAMPLES[quantity]);
        return false;
    }
    *unit = sct_unit_read(rest + blanks, quantity, fault);
    if (*unit == NULL) return false;
    if (blanks == 0) {
        snprintf(fault, SCT_UNIT_FAULT_ROOM, "found \"%s\"; expected a blank between the number and its unit", shown);
        return false;
    }
    return true;
}
