/* What the fuzzers share: one entry for libFuzzer, AFL++ and the replay of the kept inputs (fuzz/replay.c). */
#ifndef TESTS_FUZZ_H
#define TESTS_FUZZ_H

#include <stddef.h>
#include <stdio.h>
#include <stdlib.h>

#include "scantling.h"

int LLVMFuzzerTestOneInput(const unsigned char *data, size_t size);

/* What must hold, whatever the input. */
#define MUST(fact)                                                                                                     \
    do {                                                                                                               \
        if (!(fact)) {                                                                                                 \
            fprintf(stderr, "%s:%d: does not hold: %s\n", __FILE__, __LINE__, #fact);                                  \
            abort();                                                                                                   \
        }                                                                                                              \
    } while (0)

/* The bytes with a zero behind them, in a block of that size, so that a step too far is seen. For free(). */
static inline char *fuzz_copy(const unsigned char *data, size_t size)
{
    char *text = malloc(size + 1);
    MUST(text != NULL);
    for (size_t i = 0; i < size; i++) text[i] = (char)data[i];
    text[size] = '\0';
    return text;
}
#endif
