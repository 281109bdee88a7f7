/* Measurements of this program against libraries on the same data in one run: ratios, not times, are what counts. */
#ifndef TESTS_BENCH_H
#define TESTS_BENCH_H

#include <stdbool.h>

/* [s] of processor time of this process: other programs on the machine do not count, though they do disturb caches. */
double bench_seconds(void);

/* One thing to be timed. */
typedef struct bench_racer {
    void (*run)(void *arg);
    void *arg;
    double seconds; /* out: median of one run */
} bench_racer;

/** Times the racers in turns, `rounds` times, each turn long enough for the clock; medians. */
void bench_race(int n, bench_racer racers[], int rounds);

/** A heading in the text, an object in the JSON. */
void bench_section(const char *name, const char *what);
/** One figure. target: a ratio that it must not exceed (at_least: not stay below); NAN: told only. */
void bench_figure(const char *name, double value, const char *unit, double target, bool at_least);

void bench_analysis(bool full);
void bench_frames(bool full);
void bench_descent(bool full);
#endif
