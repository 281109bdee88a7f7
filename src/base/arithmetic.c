/* Volatile operands, so that the processor answers and not the compiler. */
#include "base/arithmetic.h"

#include <fenv.h>
#include <float.h>
#include <math.h>
#include <stddef.h>

const char *sct_arithmetic_fault(void)
{
    volatile double smallest = DBL_MIN, none = NAN;
    if (fegetround() != FE_TONEAREST) return "numbers are not rounded to the nearest";
    if (!(smallest / 2.0 > 0.0)) return "small numbers are flushed to zero";
    if (none == none) return "not-a-number equals itself";
    return NULL;
}
