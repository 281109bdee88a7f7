/* Files read whole, and files saved whole or not at all. */
#ifndef SCT_BASE_SAVE_H
#define SCT_BASE_SAVE_H

#include <stddef.h>

#include "issues.h"

/** Reads a file ("-": standard input) up to `most` bytes into new memory with a zero behind it, for free().
 * SCT_CANNOT_READ, SCT_TOO_LARGE, SCT_NO_MEMORY; issues say why. */
sct_status sct_read_file(const char *path, size_t most, char **bytes, size_t *size, sct_issues *issues);
#endif
