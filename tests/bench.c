/* `make bench`: prints every figure as text and leaves them in build/bench.json. Needs the bench's own packages. */
#define _POSIX_C_SOURCE 200809L /* clock_gettime */
#include "bench.h"

#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <sys/resource.h>
#include <time.h>

static FILE *json;
static int n_sections, n_figures, n_held, n_missed;

double bench_seconds(void)
{
    struct timespec now;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &now);
    return (double)now.tv_sec + 1e-9 * (double)now.tv_nsec;
}

static double timed(const bench_racer *racer, int times)
{
    const double start = bench_seconds();
    for (int i = 0; i < times; i++) racer->run(racer->arg);
    return (bench_seconds() - start) / times;
}

static int ascending(const void *a, const void *b)
{
    const double x = *(const double *)a, y = *(const double *)b;
    return (x > y) - (x < y);
}

void bench_race(int n, bench_racer racers[], int rounds)
{
    enum { MOST_RACERS = 8, MOST_ROUNDS = 51, MOST_TIMES = 1000000 };
    const double TURN = 2e-3; /* [s] at least */
    double times[MOST_RACERS][MOST_ROUNDS];
    int repeat[MOST_RACERS];
    for (int i = 0; i < n; i++) {
        double once = timed(&racers[i], 1); /* the first run touches the memory */
        for (repeat[i] = 1; repeat[i] < MOST_TIMES; repeat[i] *= 2) {
            once = timed(&racers[i], repeat[i]);
            if (once * repeat[i] >= TURN) break;
        }
    }
    for (int round = 0; round < rounds; round++)
        for (int i = 0; i < n; i++) times[i][round] = timed(&racers[i], repeat[i]);
    for (int i = 0; i < n; i++) {
        qsort(times[i], (size_t)rounds, sizeof times[i][0], ascending);
        racers[i].seconds = times[i][rounds / 2];
    }
}

void bench_section(const char *name, const char *what)
{
    printf("\n%s\n", what);
    fprintf(json, "%s\n  \"%s\": {", n_sections++ > 0 ? "\n  }," : "", name);
    n_figures = 0;
}

void bench_figure(const char *name, double value, const char *unit, double target, bool at_least)
{
    const bool is_held = at_least ? value >= target : value <= target;
    printf("  %-58s %10.4g %-9s", name, value, unit);
    if (!isnan(target)) printf(" %s %.4g: %s", at_least ? "at least" : "at most", target, is_held ? "held" : "MISSED");
    printf("\n");
    fflush(stdout);
    fprintf(json, "%s\n    \"%s\": {\"value\": %.6g, \"unit\": \"%s\"", n_figures++ > 0 ? "," : "", name, value, unit);
    if (!isnan(target))
        fprintf(json, ", \"%s\": %.6g, \"held\": %s", at_least ? "at_least" : "at_most", target,
                is_held ? "true" : "false");
    fprintf(json, "}");
    if (isnan(target)) return;
    if (is_held)
        n_held++;
    else
        n_missed++;
}

static double peak_MB(void)
{
    struct rusage usage;
    getrusage(RUSAGE_SELF, &usage);
    return (double)usage.ru_maxrss / 1024.0;
}

int main(int argc, char **argv)
{
    const bool full = argc > 2 && strcmp(argv[2], "full") == 0;
    json = argc > 1 ? fopen(argv[1], "w") : NULL;
    if (json == NULL) {
        fprintf(stderr, "usage: bench FILE.json [full]\n");
        return 1;
    }
    fprintf(json, "{");
    bench_descent(full); /* first: the large matrices leave a large heap behind */
    bench_frames(full);
    bench_analysis(full);
    bench_section("whole_run", "This run");
    bench_figure("processor time", bench_seconds(), "s", NAN, false);
    bench_figure("peak memory", peak_MB(), "MB", NAN, false);
    fprintf(json, "\n  }\n}\n");
    printf("\n%d targets held, %d missed\n", n_held, n_missed);
    return fclose(json) == 0 ? 0 : 1;
}
