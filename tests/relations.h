/* Metamorphic relations: a fact about two models, each tried on many seeded random models.
 *
 * RELATION(fact, kind, tolerance) { ... } defines the test `fact`. Its body sees the model `m`, a random stream `r`,
 * and returns how far the fact is missed (relative), or DOES_NOT_APPLY to have another model. Tolerance 0: every bit.
 */
#ifndef TESTS_RELATIONS_H
#define TESTS_RELATIONS_H

#include "random_models.h"

#include <sys/mman.h>

#define DOES_NOT_APPLY (-1.0)

/* What was seen, in memory that the forked tests share. */
typedef struct seen {
    int relations, models;
    double farthest; /* largest deviation / tolerance of those with a tolerance */
    char at[120];
} seen;

static seen *seen_by_all;

/* Models for each relation: a few, or many in the full run. */
static inline int relations_count(int few, int many)
{
    return getenv("SCT_TEST_FULL") != NULL ? many : few;
}

typedef double relation(const rm_model *m, sct_random *r);

static inline void try_relation(const char *fact, unsigned kind, double tolerance, relation *miss, int few)
{
    const int count = relations_count(few, 200);
    double farthest = 0.0;
    for (int tried = 0, seed = 1; tried < count; seed++) {
        ck_assert_msg(seed < 20 * count + 100, "applies to too few models");
        rm_seed = seed;
        const rm_model m = rm_random(kind, (uint64_t)seed);
        sct_random r = {(uint64_t)seed};
        const double off = miss(&m, &r);
        if (off == DOES_NOT_APPLY) continue;
        ck_assert_msg(off <= tolerance, "seed %d: missed by %.3g, at most %g", seed, off, tolerance);
        farthest = fmax(farthest, off);
        tried++;
    }
    seen_by_all->relations++;
    seen_by_all->models += count;
    if (tolerance > 0.0 && farthest / tolerance > seen_by_all->farthest) {
        seen_by_all->farthest = farthest / tolerance;
        snprintf(seen_by_all->at, sizeof seen_by_all->at, "%.1e of %g allowed in %s", farthest, tolerance, fact);
    }
    if (getenv("SCT_TEST_VERBOSE") != NULL) printf("%-90s %8.1e of %g\n", fact, farthest, tolerance);
    fflush(stdout);
}

#define RELATION(fact, kind, tolerance)                                                                                \
    static double fact##_missed(const rm_model *m, sct_random *r);                                                     \
    START_TEST(fact)                                                                                                   \
    {                                                                                                                  \
        try_relation(#fact, kind, tolerance, fact##_missed, FEW_MODELS);                                               \
    }                                                                                                                  \
    END_TEST                                                                                                           \
    static double fact##_missed(const rm_model *m, sct_random *r)

static inline void open_relations(void)
{
    seen_by_all = mmap(NULL, sizeof *seen_by_all, PROT_READ | PROT_WRITE, MAP_SHARED | MAP_ANONYMOUS, -1, 0);
    if (seen_by_all == MAP_FAILED) abort();
    memset(seen_by_all, 0, sizeof *seen_by_all);
}

static inline void tell_relations(const char *of)
{
    printf("measured: %d relations of %s held on %d random models; nearest to its limit: %s\n", seen_by_all->relations,
           of, seen_by_all->models, seen_by_all->at);
    fflush(stdout);
}
#endif
