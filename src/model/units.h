/* Units by name, and quantities written with their unit. */
#ifndef SCT_MODEL_UNITS_H
#define SCT_MODEL_UNITS_H

#include <stdbool.h>

typedef enum sct_quantity {
    SCT_LENGTH,
    SCT_FORCE,
    SCT_STRESS,
    SCT_AREA,
    SCT_SECOND_MOMENT,
    SCT_DENSITY,
    SCT_TEMPERATURE, /* a difference */
    SCT_EXPANSION,
    SCT_ANGLE,
    SCT_MOMENT,
    SCT_FORCE_PER_LENGTH, /* line loads, stiffness of springs */
    SCT_TURN_STIFFNESS,   /* moment per angle */
    SCT_SECTION_MODULUS,
    SCT_GRADIENT, /* of temperature */
    SCT_FREQUENCY,
    SCT_QUANTITIES
} sct_quantity;

/* SI value = value * numerator / denominator: both are exact, so that 20 mm is the double nearest to 0.02 m. */
typedef struct sct_unit {
    const char *name;
    sct_quantity quantity;
    double numerator, denominator;
} sct_unit;

static inline double sct_unit_to_SI(const sct_unit *unit, double value)
{
    return value * unit->numerator / unit->denominator;
}

static inline double sct_unit_from_SI(const sct_unit *unit, double value)
{
    return value * unit->denominator / unit->numerator;
}

/** The unit with exactly this name; NULL: none. */
const sct_unit *sct_unit_find(const char *name);
/** The i-th unit of a quantity, the SI unit first; NULL behind the last. */
const sct_unit *sct_unit_of(sct_quantity quantity, int i);
/** An example such as "3 m". */
const char *sct_quantity_example(sct_quantity quantity);

enum { SCT_UNIT_FAULT_ROOM = 320 };

/** The unit of a quantity; NULL: no such unit, or one of another quantity; `fault` then says it with the nearest name.
 */
const sct_unit *sct_unit_read(const char *name, sct_quantity quantity, char fault[SCT_UNIT_FAULT_ROOM]);

/**
 * Reads a text such as "24 m" or "-4.2 kN": a JSON number, blanks, a unit of the quantity.
 *
 * value, unit  out: the number as written and its unit
 * fault        out when false: what was found and what was expected
 */
bool sct_quantity_read(const char *text, sct_quantity quantity, double *value, const sct_unit **unit,
                       char fault[SCT_UNIT_FAULT_ROOM]);
#endif
