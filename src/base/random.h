/* Seeded random numbers: the same everywhere. */
#ifndef SCT_BASE_RANDOM_H
#define SCT_BASE_RANDOM_H

#include <stdint.h>

typedef struct sct_random {
    uint64_t state;
} sct_random;

/** Next 64 bits (splitmix64; Steele, Lea and Flood 2014). */
static inline uint64_t sct_random_bits(sct_random *r)
{
    uint64_t z = (r->state += 0x9E3779B97F4A7C15u);
    z = (z ^ (z >> 30)) * 0xBF58476D1CE4E5B9u;
    z = (z ^ (z >> 27)) * 0x94D049BB133111EBu;
    return z ^ (z >> 31);
}

/** Uniform in [0, 1). */
static inline double sct_random_unit(sct_random *r)
{
    return (double)(sct_random_bits(r) >> 11) * 0x1p-53;
}
#endif
