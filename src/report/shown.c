/* How numbers are shown to people: one table of units and digits. */
#include "shown.h"

#include <math.h>
#include <string.h>

typedef struct unit_shown {
    const char *name;
    double size; /* in SI */
    int decimals;
} unit_shown;

static const struct {
    unit_shown metric, us;
    int significant; /* digits at least; 0: as the decimals give */
} SHOWN[SCT_SHOWN_COUNT] = {
#define SCT_SHOWN_ROW(quantity, metric, metric_size, metric_decimals, us, us_size, us_decimals, significant)           \
    {{metric, metric_size, metric_decimals}, {us, us_size, us_decimals}, significant},
    SCT_SHOWN_LIST(SCT_SHOWN_ROW)
#undef SCT_SHOWN_ROW
};

enum { MOST_DECIMALS = 12 };
static const double ROUND_OFF = 1e-9; /* of a hundredth: 0.07 * 100 is 7.000000000000001 and still 0.07 */

static unit_shown unit_of(sct_display quantity, bool us_customary)
{
    return us_customary ? SHOWN[quantity].us : SHOWN[quantity].metric;
}

const char *sct_shown_unit(sct_display quantity, bool us_customary)
{
    return unit_of(quantity, us_customary).name;
}

double sct_shown_size(sct_display quantity, bool us_customary)
{
    return unit_of(quantity, us_customary).size;
}

/* True when the value is no finite number; what stands for it is written. */
static bool add_special(sct_text *text, double value)
{
    if (isfinite(value)) return false;
    if (!isnan(value)) sct_text_add(text, value > 0 ? "inf" : "-inf");
    return true;
}

void sct_text_shown(sct_text *text, double value, sct_display quantity, bool us_customary)
{
    if (add_special(text, value)) return;
    const unit_shown unit = unit_of(quantity, us_customary);
    const double x = value / unit.size;
    int decimals = unit.decimals;
    if (SHOWN[quantity].significant > 0 && x != 0) {
        const double needed = SHOWN[quantity].significant - 1 - floor(log10(fabs(x)));
        if (needed > decimals) decimals = needed < MOST_DECIMALS ? (int)needed : MOST_DECIMALS;
        if (fabs(x) >= 1000) decimals = 0;
    }
    sct_text_fixed(text, x, decimals);
}

void sct_text_utilisation(sct_text *text, double utilisation)
{
    if (add_special(text, utilisation)) return;
    const double up = ceil(utilisation * 100 - ROUND_OFF) / 100;
    sct_text_fixed(text, utilisation > 1 ? fmax(up, 1.01) : fmin(up, 1), 2);
}

void sct_text_slenderness(sct_text *text, double lambda)
{
    if (add_special(text, lambda)) return;
    sct_text_fixed(text, ceil(lambda * (1 - ROUND_OFF)), 0);
}

size_t sct_whole_characters(const char *words)
{
    const size_t size = strlen(words);
    size_t lead = size;
    while (lead > 0 && size - lead < 4 && ((unsigned char)words[lead - 1] & 0xC0) == 0x80) lead--;
    if (lead == 0) return size;
    const unsigned char c = (unsigned char)words[--lead];
    const size_t length = c >= 0xF0 ? 4 : c >= 0xE0 ? 3 : c >= 0xC0 ? 2 : 1;
    return size - lead < length ? lead : size;
}
