/* Numbers to text and back, whatever the locale of the host program. */
#ifndef SCT_BASE_NUMBER_H
#define SCT_BASE_NUMBER_H

#include <stdarg.h>
#include <stdbool.h>
#include <stddef.h>

enum { SCT_NUMBER_ROOM = 40 };

/** Shortest decimal that reads back to the same double ("null" for NAN and infinities). */
void sct_number_write(double value, char out[SCT_NUMBER_ROOM]);

/** Reads a whole text as a finite number by the JSON grammar; false when it is none or overflows. `length` bytes. */
bool sct_number_read(const char *text, size_t length, double *value);

/** The least number of one decimal digit not below `bound`, so that "%.0e" never prints a bound too small. What is not
 * positive, or 1e300 and more, comes back as it is. */
double sct_number_rounded_up(double bound);

/** vsnprintf with '.' as decimal mark in any locale. Returns as vsnprintf. */
int sct_number_vformat(char *out, size_t room, const char *format, va_list args);
__attribute__((format(printf, 3, 4))) int sct_number_format(char *out, size_t room, const char *format, ...);
#endif
