/* Loads and random loads on one member, for the tests of beams. */
#ifndef TESTS_BEAM_LOADS_H
#define TESTS_BEAM_LOADS_H

#include "analysis/beam.h"

/* From qa at a to qb at b, across in plane. */
static inline sct_beam_load across(double a, double b, double qa, double qb)
{
    return (sct_beam_load){.a = a, .b = b, .qa = {0, qa, 0}, .qb = {0, qb, 0}};
}

static inline sct_beam_load force_at(double a, double P)
{
    return (sct_beam_load){.is_point = true, .a = a, .b = a, .F = {0, P, 0}};
}

static inline sct_beam_load moment_at(double a, double m)
{
    return (sct_beam_load){.is_point = true, .a = a, .b = a, .M = {0, 0, m}};
}

/* The same hinges in both planes; held against twist. */
static inline sct_beam_hinges hinged(bool from, bool to)
{
    return (sct_beam_hinges){{{from, to}, {from, to}, {false, false}}};
}

/* Every way to hinge the two ends in the two planes and to free one of them or none to twist: 0 to 47. */
enum { ALL_HINGES = 48 };
static inline sct_beam_hinges hinges_number(int i)
{
    const int twist = i / 16;
    return (sct_beam_hinges){{{i & 1, (i & 2) != 0}, {(i & 4) != 0, (i & 8) != 0}, {twist == 1, twist == 2}}};
}

/* -1 to 1; the generator is Knuth's MMIX (The Art of Computer Programming, 2, 3.3.4). */
static inline double random_unit(unsigned long long *seed)
{
    *seed = *seed * 6364136223846793005ULL + 1442695040888963407ULL;
    return (double)(*seed >> 11) * 0x1p-52 - 1;
}

/* Loads of all kinds; some at the very ends, some meeting. */
static inline void random_loads(unsigned long long *seed, double L, int n, sct_beam_load load[])
{
    for (int i = 0; i < n; ++i) {
        double a = L * (random_unit(seed) + 1) / 2, b = L * (random_unit(seed) + 1) / 2;
        if (i % 5 == 1) a = 0;
        if (i % 5 == 2) b = L;
        if (i % 5 == 3) a = load[i - 1].a;
        load[i] = (sct_beam_load){.is_point = i % 2 == 0, .a = fmin(a, b), .b = fmax(a, b)};
        if (load[i].is_point && i % 5 == 1) load[i].b = 0;
        if (load[i].is_point) load[i].a = load[i].b;
        for (int j = 0; j < 3; ++j) {
            if (load[i].is_point) {
                load[i].F[j] = random_unit(seed);
                load[i].M[j] = random_unit(seed);
            } else {
                load[i].qa[j] = random_unit(seed);
                load[i].qb[j] = random_unit(seed);
            }
        }
    }
}
#endif
