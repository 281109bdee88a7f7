/* How numbers are shown to people: the unit of each quantity and its digits, metric or US customary. */
#ifndef SCT_REPORT_SHOWN_H
#define SCT_REPORT_SHOWN_H

#include "base/text.h"

/* Quantity, metric and US unit with their size in SI and their decimals. Where the last column is not 0, at least so
 * many significant digits are shown, whatever the decimals: a pin of 2 g has a mass too. */
#define SCT_SHOWN_LIST(X)                                                                                              \
    X(SCT_SHOWN_FORCE, "kN", 1e3, 1, "kip", 4448.2216152605, 2, 0)                                                     \
    X(SCT_SHOWN_LENGTH, "m", 1, 3, "ft", 0.3048, 2, 0)                                                                 \
    X(SCT_SHOWN_DEFLECTION, "mm", 1e-3, 1, "in", 0.0254, 3, 0)                                                         \
    X(SCT_SHOWN_STRESS, "MPa", 1e6, 0, "ksi", 6894757.2931683617, 1, 0)                                                \
    X(SCT_SHOWN_AREA, "mm2", 1e-6, 0, "in2", 6.4516e-4, 2, 4)                                                          \
    X(SCT_SHOWN_SECOND_MOMENT, "mm4", 1e-12, 0, "in4", 4.162314256e-7, 2, 4)                                           \
    X(SCT_SHOWN_MASS, "kg", 1, 1, "lb", 0.45359237, 1, 3)                                                              \
    X(SCT_SHOWN_UNIT_MASS, "kg/m", 1, 2, "lb/ft", 1.4881639435695538, 2, 3)                                            \
    X(SCT_SHOWN_MOMENT, "kNm", 1e3, 1, "kip ft", 1355.8179483314004, 2, 0)                                             \
    X(SCT_SHOWN_SECTION_MODULUS, "mm3", 1e-9, 0, "in3", 1.6387064e-5, 2, 4)

#define SCT_SHOWN_NAME(name, ...) name,
typedef enum sct_display { SCT_SHOWN_LIST(SCT_SHOWN_NAME) SCT_SHOWN_COUNT } sct_display;
#undef SCT_SHOWN_NAME

/** "kN" or "kip", ... */
const char *sct_shown_unit(sct_display quantity, bool us_customary);

/** That unit in SI. */
double sct_shown_size(sct_display quantity, bool us_customary);

/** A value in SI, in the unit shown, with its digits and without the unit. Nothing is written for NAN; infinities are
 * "inf". A rounded zero has no sign. */
void sct_text_shown(sct_text *text, double value, sct_display quantity, bool us_customary);

/** A utilisation with 2 decimals, rounded up: above 1 by any amount it shows at least 1.01, so that no failure reads as
 * a pass. NAN as above. */
void sct_text_utilisation(sct_text *text, double utilisation);

/** A slenderness, rounded up to a whole number. */
void sct_text_slenderness(sct_text *text, double lambda);

/** Length of `words` in bytes without a UTF-8 character that was cut off at its end (texts of fixed room). */
size_t sct_whole_characters(const char *words);
#endif
