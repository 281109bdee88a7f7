/* What every error bound takes for granted of the processor. */
#ifndef SCT_BASE_ARITHMETIC_H
#define SCT_BASE_ARITHMETIC_H

/** NULL when numbers are rounded to the nearest, subnormal ones are kept, and not-a-number is none; else what is not
 * so, in words. A host program, or a library that it loads, may have changed that for the whole process. */
const char *sct_arithmetic_fault(void);
#endif
