/* Numbers to text and back: the C library's conversions in the C locale, whatever the host has set. */
#define _GNU_SOURCE /* strtod_l */
#include "number.h"

#include <locale.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>

/* glibc hands out its constant C locale here: no memory is taken, nothing needs to be freed. */
static locale_t c_locale(void)
{
    return newlocale(LC_ALL_MASK, "C", (locale_t)0);
}

int sct_number_vformat(char *out, size_t room, const char *format, va_list args)
{
    const locale_t before = uselocale(c_locale());
    const int length = vsnprintf(out, room, format, args);
    uselocale(before);
    return length;
}

int sct_number_format(char *out, size_t room, const char *format, ...)
{
    va_list args;
    va_start(args, format);
    const int length = sct_number_vformat(out, room, format, args);
    va_end(args);
    return length;
}

static double read_double(const char *text)
{
    return strtod_l(text, NULL, c_locale());
}

void sct_number_write(double value, char out[SCT_NUMBER_ROOM])
{
    if (!isfinite(value)) {
        memcpy(out, "null", 5);
        return;
    }
    int digits = 14; /* 17 always read back */
    do {
        sct_number_format(out, SCT_NUMBER_ROOM, "%.*g", ++digits, value);
    } while (digits < 17 && read_double(out) != value); /* exact comparison is the point here */
}

static size_t digits_at(const char *text, size_t length, size_t at)
{
    size_t n = 0;
    while (at + n < length && text[at + n] >= '0' && text[at + n] <= '9') n++;
    return n;
}

bool sct_number_read(const char *text, size_t length, double *value)
{
    char copy[72];
    size_t at = 0;
    if (length == 0 || length >= sizeof copy) return false;
    if (text[at] == '-') at++;
    const size_t whole = digits_at(text, length, at);
    if (whole == 0 || (whole > 1 && text[at] == '0')) return false;
    at += whole;
    if (at < length && text[at] == '.') {
        const size_t fraction = digits_at(text, length, ++at);
        if (fraction == 0) return false;
        at += fraction;
    }
    if (at < length && (text[at] == 'e' || text[at] == 'E')) {
        at++;
        if (at < length && (text[at] == '+' || text[at] == '-')) at++;
        const size_t exponent = digits_at(text, length, at);
        if (exponent == 0) return false;
        at += exponent;
    }
    if (at != length) return false;
    memcpy(copy, text, length);
    copy[length] = '\0';
    const double x = read_double(copy);
    if (!isfinite(x)) return false;
    *value = x;
    return true;
}

double sct_number_rounded_up(double bound)
{
    char text[SCT_NUMBER_ROOM];
    double up = bound;
    if (!(bound > 0.0 && bound < 1e300)) return bound;
    sct_number_format(text, sizeof text, "%.0e", bound);
    sct_number_read(text, strlen(text), &up);
    if (up >= bound) return up;
    sct_number_format(text, sizeof text, "%.0e", up + up / (text[0] - '0')); /* one more in that digit */
    sct_number_read(text, strlen(text), &up);
    return up;
}
