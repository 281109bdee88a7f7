#include "report/worked.h"

#include <math.h>
#include <string.h>

#include "base/number.h"
#include "report/shown.h"

enum { DIGITS = 5 }; /* significant */

sct_hand_units sct_hand_units_of(bool us_customary)
{
    static const sct_hand_units METRIC = {1e6, 1e-3, 1.0, "MPa", "mm", "N"};
    static const sct_hand_units US = {6894757.2931683617, 0.0254, 4448.2216152605, "ksi", "in", "kip"};
    return us_customary ? US : METRIC;
}

/* Without exponent and without trailing zeros: 210000, 39.068, 0.00125. */
static void number(sct_text *out, double value)
{
    const int whole = value == 0.0 ? 1 : 1 + (int)floor(log10(fabs(value)));
    char text[400];
    const int decimals = DIGITS - whole > 0 ? DIGITS - whole : 0;
    sct_number_format(text, sizeof text, "%.*f", decimals, value);
    if (decimals > 0) {
        size_t n = strlen(text);
        while (text[n - 1] == '0') text[--n] = '\0';
        if (text[n - 1] == '.') text[n - 1] = '\0';
    }
    sct_text_add(out, text);
}

void sct_worked_line(sct_worked *s, const char *words, const double numbers[])
{
    for (int k = 0; *words != '\0'; words++) {
        if (*words == '#')
            number(s->out, numbers[k++]);
        else if (*words == '$')
            sct_text_add(s->out, s->in.stress_name);
        else if (*words == '@')
            sct_text_add(s->out, s->in.length_name);
        else if (*words == '!')
            sct_text_add(s->out, s->in.force_name);
        else
            sct_text_bytes(s->out, words, 1);
    }
}

void sct_worked_first_column(sct_worked *s, const char *words)
{
    const size_t start = s->out->size;
    sct_text_add(s->out, "  ");
    sct_text_add(s->out, words);
    sct_text_pad(s->out, start, s->first_column, false);
}

void sct_worked_verdict(sct_worked *s, double utilisation)
{
    sct_text_add(s->out, " = ");
    sct_text_utilisation(s->out, utilisation);
    sct_text_add(s->out, utilisation <= 1.0 + SCT_KEPT_TO ? "  passes\n" : "  fails\n");
}
