/* Reference optima of models/benchmarks, for tests: every local optimum that a search may end at, best first.
 *
 * "Re-computed": found independently with a general nonlinear programming library (sequential quadratic programming,
 * analytic gradients, feasible to 1e-9), from 30 and more starts; trusted to `tol`. Published "optima" below these
 * values violate a limit by 0.07 to 0.2 % and are not listed. */
#ifndef TESTS_BENCHMARK_OPTIMA_H
#define TESTS_BENCHMARK_OPTIMA_H

#include <stdbool.h>

#define BENCHMARK_LB 0.45359237 /* [kg] the international pound, exact by definition */

typedef struct benchmark_optimum {
    const char *file; /* in models/benchmarks */
    bool is_discrete; /* mass[0]: best known from the list, not proven; mass[1]: continuous relaxation (local) */
    int n;            /* entries of mass */
    double mass[4];   /* [kg] best first */
    double tol;       /* relative, of each entry */
    const char *source;
} benchmark_optimum;

static const benchmark_optimum BENCHMARKS[] = {
    {"3bar_symmetric.json",
     false,
     1,
     {2.638958434 * BENCHMARK_LB},
     1e-8,
     "closed form 2 sqrt(2) (3 + sqrt(3))/6 + 1/sqrt(6); textbook value 2.639 (memory)"},
    {"3bar_schmit1960.json",
     false,
     1,
     {15.9685966 * BENCHMARK_LB},
     1e-5,
     "re-computed; Schmit 1960 gives 15.97 (memory)"},
    {"3bar_263p8958.json",
     false,
     1,
     {263.8958434e-6},
     1e-8,
     "closed form 100 (2 sqrt(2) (3 + sqrt(3))/6 + 1/sqrt(6)) cm3, at 1 kg/m3"},
    {"10bar_case1.json",
     false,
     2,
     {5060.85366 * BENCHMARK_LB, 5076.66930 * BENCHMARK_LB},
     1e-5,
     "re-computed; Haftka and Gurdal 1992 give 5060.85, Rizzi 1976 gives 5076.66 (memory)"},
    {"10bar_case2.json", false, 1, {4676.9227 * BENCHMARK_LB}, 1e-5, "re-computed; Rizzi 1976 gives 4676.92 (memory)"},
    {"10bar_stress.json",
     false,
     1,
     {1593.18091 * BENCHMARK_LB},
     1e-5,
     "re-computed; Haftka and Gurdal 1992 give 1593.2 (memory)"},
    {"18bar_euler.json",
     false,
     1,
     {6430.52905 * BENCHMARK_LB},
     1e-5,
     "re-computed; Imai and Schmit 1981 give 6430.529 (memory)"},
    {"25bar.json",
     false,
     1,
     {545.16271 * BENCHMARK_LB},
     1e-5,
     "re-computed; Schmit and Miura 1976 give 545.17 (memory)"},
    {"72bar_case1.json",
     false,
     1,
     {379.6148 * BENCHMARK_LB},
     1e-5,
     "re-computed; Schmit and Miura 1976 give 379.64 (memory)"},
    {"200bar.json",
     false,
     4,
     {25446.65752 * BENCHMARK_LB, 25448.798 * BENCHMARK_LB, 25450.18 * BENCHMARK_LB, 25452.93 * BENCHMARK_LB},
     1e-5,
     "re-computed, 48 starts ended 11, 23, 10 and 4 times there; Lamberti 2008 gives 25445.63, which violates a stress "
     "limit by 0.07 % and lies in the basin of the second (memory)"},
    {"10bar_discrete42.json",
     true,
     2,
     {5490.7379 * BENCHMARK_LB, 5482.8335 * BENCHMARK_LB},
     1e-5,
     "several metaheuristics give 5490.74 (memory); re-computed by list exchange"},
    {"10bar_discrete_half.json",
     true,
     2,
     {5067.3314 * BENCHMARK_LB, 5060.8537 * BENCHMARK_LB},
     1e-5,
     "several metaheuristics give 5067.33 (memory); re-computed by list exchange"},
    {"25bar_discrete.json",
     true,
     2,
     {484.8542 * BENCHMARK_LB, 484.0514 * BENCHMARK_LB},
     1e-5,
     "several metaheuristics give 484.85 (memory); re-computed by list exchange"},
    {"72bar_discrete32.json",
     true,
     2,
     {385.5427 * BENCHMARK_LB, 379.6148 * BENCHMARK_LB},
     1e-5,
     "several metaheuristics give 385.54 (memory); re-computed by list exchange"},
};
enum { N_BENCHMARKS = (int)(sizeof BENCHMARKS / sizeof BENCHMARKS[0]), N_CONTINUOUS = 10 }; /* the first ten */
#endif
