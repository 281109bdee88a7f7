/* Quantities as they stand in a drawing: fewer digits than in a table, thin gaps between thousands, true minus. */
#ifndef SCT_REPORT_QUANTITY_H
#define SCT_REPORT_QUANTITY_H

#include <stdbool.h>

enum { SCT_QUANTITY_ROOM = 64 };
typedef char sct_quantity[SCT_QUANTITY_ROOM];

/** `value` with `digits` decimals: groups of three by U+202F from five digits on, minus U+2212, no sign for zero. */
void sct_quantity_number(sct_quantity out, double value, int digits);
/** Metres or feet, 2 decimals unless `digits` says more; without unit. */
void sct_quantity_length(sct_quantity out, double metres, int digits, bool us_customary);
/** Size of a force: kN or kip, no decimals from 100 on, one below; without unit. */
void sct_quantity_force(sct_quantity out, double newtons, bool us_customary);
/** Size of a moment: kNm or kip ft, of a load along a member: kN/m or kip/ft, 1 decimal; without unit. */
void sct_quantity_moment(sct_quantity out, double newton_metres, bool us_customary);
void sct_quantity_line_load(sct_quantity out, double newtons_per_metre, bool us_customary);
/** Size of a movement: mm with 1 decimal, in with 2; without unit. */
void sct_quantity_movement(sct_quantity out, double metres, bool us_customary);
/** A mass with its unit: kg or lb, no decimals. */
void sct_quantity_mass(sct_quantity out, double kilograms, bool us_customary);
/** An area with its unit: mm² or in². */
void sct_quantity_area(sct_quantity out, double square_metres, bool us_customary);
/** A utilisation, rounded up; "∞" and ">999" where the number would not fit. */
void sct_quantity_utilisation(sct_quantity out, double utilisation);

/** A stiffness with its unit: kN/m or kNm/rad, kip/ft or kip ft/rad. */
void sct_quantity_stiffness(sct_quantity out, double stiffness, bool of_turning, bool us_customary);

/** The length unit of the drawing in metres. */
double sct_length_unit(bool us_customary);
/** "m" or "ft". */
const char *sct_length_unit_name(bool us_customary);
#endif
