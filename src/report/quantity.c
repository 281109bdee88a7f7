/* Quantities as they stand in a drawing. */
#include "quantity.h"

#include <math.h>
#include <string.h>

#include "base/number.h"
#include "shown.h"

static const double FOOT = 0.3048, INCH = 0.0254, KIP = 4448.2216152605, POUND = 0.45359237; /* SI, exact but kip */
static const char NARROW[] = "\xE2\x80\xAF", MINUS[] = "\xE2\x88\x92";

void sct_quantity_number(sct_quantity out, double value, int digits)
{
    char plain[SCT_QUANTITY_ROOM];
    if (!(fabs(value) < 1e15)) { /* nothing in a drawing is so large; "inf" and NAN end here too */
        memcpy(out, "\xE2\x88\x9E", 4);
        return;
    }
    sct_number_format(plain, sizeof plain, "%.*f", digits, fabs(value));
    const bool is_zero = strspn(plain, "0.") == strlen(plain);
    const size_t whole = strcspn(plain, ".");
    size_t n = 0;
    if (value < 0 && !is_zero) {
        memcpy(out, MINUS, 3);
        n = 3;
    }
    for (size_t i = 0; plain[i] != '\0'; i++) {
        if (whole >= 5 && i > 0 && i < whole && (whole - i) % 3 == 0) {
            memcpy(out + n, NARROW, 3);
            n += 3;
        }
        out[n++] = plain[i];
    }
    out[n] = '\0';
}

static void with_unit(sct_quantity out, const char *unit)
{
    const size_t n = strlen(out);
    sct_number_format(out + n, SCT_QUANTITY_ROOM - n, "%s%s", NARROW, unit);
}

double sct_length_unit(bool us_customary)
{
    return us_customary ? FOOT : 1;
}

const char *sct_length_unit_name(bool us_customary)
{
    return sct_shown_unit(SCT_SHOWN_LENGTH, us_customary);
}

void sct_quantity_length(sct_quantity out, double metres, int digits, bool us_customary)
{
    sct_quantity_number(out, metres / sct_length_unit(us_customary), digits);
}

void sct_quantity_force(sct_quantity out, double newtons, bool us_customary)
{
    const double size = fabs(newtons) / (us_customary ? KIP : 1e3);
    sct_quantity_number(out, size, size < 99.95 ? 1 : 0);
}

void sct_quantity_moment(sct_quantity out, double newton_metres, bool us_customary)
{
    sct_quantity_number(out, fabs(newton_metres) / (us_customary ? KIP * FOOT : 1e3), 1);
}

void sct_quantity_line_load(sct_quantity out, double newtons_per_metre, bool us_customary)
{
    const double size = fabs(newtons_per_metre) / (us_customary ? KIP / FOOT : 1e3);
    sct_quantity_number(out, size, size < 0.95 ? 2 : 1);
}

void sct_quantity_stiffness(sct_quantity out, double stiffness, bool of_turning, bool us_customary)
{
    const double unit = !us_customary ? 1e3 : of_turning ? KIP * FOOT : KIP / FOOT;
    const char *name = us_customary ? (of_turning ? "kip ft/rad" : "kip/ft") : (of_turning ? "kNm/rad" : "kN/m");
    const double size = stiffness / unit;
    sct_quantity_number(out, size, size < 99.5 ? 1 : 0);
    with_unit(out, name);
}

void sct_quantity_movement(sct_quantity out, double metres, bool us_customary)
{
    sct_quantity_number(out, fabs(metres) / (us_customary ? INCH : 1e-3), us_customary ? 2 : 1);
}

void sct_quantity_mass(sct_quantity out, double kilograms, bool us_customary)
{
    sct_quantity_number(out, kilograms / (us_customary ? POUND : 1), 0);
    with_unit(out, sct_shown_unit(SCT_SHOWN_MASS, us_customary));
}

void sct_quantity_area(sct_quantity out, double square_metres, bool us_customary)
{
    const double a = square_metres / (us_customary ? INCH * INCH : 1e-6);
    sct_quantity_number(out, a, us_customary ? 2 : a < 100 ? 1 : 0);
    with_unit(out, us_customary ? "in\xC2\xB2" : "mm\xC2\xB2");
}

/* The rule of sct_text_utilisation, without memory: a drawing must not lose a number when there is none. */
void sct_quantity_utilisation(sct_quantity out, double utilisation)
{
    static const double ROUND_OFF = 1e-9; /* of a hundredth */
    const double up = ceil(utilisation * 100 - ROUND_OFF) / 100;
    if (utilisation > 999 && !isinf(utilisation))
        memcpy(out, ">999", 5);
    else if (isnan(utilisation))
        memcpy(out, "\xE2\x80\x93", 4);
    else
        sct_quantity_number(out, utilisation > 1 ? fmax(up, 1.01) : fmin(up, 1), 2);
}
