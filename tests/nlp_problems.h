/* Published nonlinear programs: W. Hock and K. Schittkowski, Test Examples for Nonlinear Programming Codes, Springer
 * 1981, by their numbers there. Functions, starts and solutions from memory; the tests verify the KKT conditions of
 * every solution and the derivatives of every function. Their constraints g >= 0 are written here as -g <= 0. */
#ifndef TESTS_NLP_PROBLEMS_H
#define TESTS_NLP_PROBLEMS_H

#include <math.h>
#include <stddef.h>

enum { NLP_N = 10, NLP_M = 8 };

typedef struct nlp_problem {
    const char *name;
    int n, m, m_eq;
    double start[NLP_N], f; /* f: at the solution */
    const double *lower, *upper;
    /* f, g and, into rows of n entries, their gradients */
    void (*functions)(const double x[], double *f, double g[], double df[], double dg[][NLP_N]);
} nlp_problem;

#define FUNCTIONS(number)                                                                                              \
    static void hs##number(const double x[], double *f, double g[], double df[], double dg[][NLP_N])
#define SET(target, ...)                                                                                               \
    do {                                                                                                               \
        const double values_[] = {__VA_ARGS__};                                                                        \
        for (size_t k_ = 0; k_ < sizeof values_ / sizeof *values_; ++k_) (target)[k_] = values_[k_];                   \
    } while (0)

static inline double sq(double a)
{
    return a * a;
}
static inline double cube(double a)
{
    return a * a * a;
}

FUNCTIONS(1)
{
    (void)g, (void)dg;
    *f = 100 * sq(x[1] - sq(x[0])) + sq(1 - x[0]);
    SET(df, -400 * x[0] * (x[1] - sq(x[0])) - 2 * (1 - x[0]), 200 * (x[1] - sq(x[0])));
}

FUNCTIONS(6)
{
    *f = sq(1 - x[0]);
    g[0] = 10 * (x[1] - sq(x[0]));
    SET(df, -2 * (1 - x[0]), 0);
    SET(dg[0], -20 * x[0], 10);
}

FUNCTIONS(7)
{
    const double q = 1 + sq(x[0]);
    *f = log(q) - x[1];
    g[0] = sq(q) + sq(x[1]) - 4;
    SET(df, 2 * x[0] / q, -1);
    SET(dg[0], 4 * x[0] * q, 2 * x[1]);
}

FUNCTIONS(10)
{
    *f = x[0] - x[1];
    g[0] = 3 * sq(x[0]) - 2 * x[0] * x[1] + sq(x[1]) - 1;
    SET(df, 1, -1);
    SET(dg[0], 6 * x[0] - 2 * x[1], 2 * x[1] - 2 * x[0]);
}

FUNCTIONS(11)
{
    *f = sq(x[0] - 5) + sq(x[1]) - 25;
    g[0] = sq(x[0]) - x[1];
    SET(df, 2 * (x[0] - 5), 2 * x[1]);
    SET(dg[0], 2 * x[0], -1);
}

FUNCTIONS(12)
{
    *f = 0.5 * sq(x[0]) + sq(x[1]) - x[0] * x[1] - 7 * x[0] - 7 * x[1];
    g[0] = 4 * sq(x[0]) + sq(x[1]) - 25;
    SET(df, x[0] - x[1] - 7, 2 * x[1] - x[0] - 7);
    SET(dg[0], 8 * x[0], 2 * x[1]);
}

FUNCTIONS(14)
{
    *f = sq(x[0] - 2) + sq(x[1] - 1);
    g[0] = x[0] - 2 * x[1] + 1;
    g[1] = 0.25 * sq(x[0]) + sq(x[1]) - 1;
    SET(df, 2 * (x[0] - 2), 2 * (x[1] - 1));
    SET(dg[0], 1, -2);
    SET(dg[1], 0.5 * x[0], 2 * x[1]);
}

FUNCTIONS(22)
{
    *f = sq(x[0] - 2) + sq(x[1] - 1);
    g[0] = x[0] + x[1] - 2;
    g[1] = sq(x[0]) - x[1];
    SET(df, 2 * (x[0] - 2), 2 * (x[1] - 1));
    SET(dg[0], 1, 1);
    SET(dg[1], 2 * x[0], -1);
}

FUNCTIONS(26)
{
    *f = sq(x[0] - x[1]) + sq(sq(x[1] - x[2]));
    g[0] = (1 + sq(x[1])) * x[0] + sq(sq(x[2])) - 3;
    SET(df, 2 * (x[0] - x[1]), -2 * (x[0] - x[1]) + 4 * cube(x[1] - x[2]), -4 * cube(x[1] - x[2]));
    SET(dg[0], 1 + sq(x[1]), 2 * x[0] * x[1], 4 * cube(x[2]));
}

FUNCTIONS(28)
{
    *f = sq(x[0] + x[1]) + sq(x[1] + x[2]);
    g[0] = x[0] + 2 * x[1] + 3 * x[2] - 1;
    SET(df, 2 * (x[0] + x[1]), 2 * (x[0] + 2 * x[1] + x[2]), 2 * (x[1] + x[2]));
    SET(dg[0], 1, 2, 3);
}

FUNCTIONS(29)
{
    *f = -x[0] * x[1] * x[2];
    g[0] = sq(x[0]) + 2 * sq(x[1]) + 4 * sq(x[2]) - 48;
    SET(df, -x[1] * x[2], -x[0] * x[2], -x[0] * x[1]);
    SET(dg[0], 2 * x[0], 4 * x[1], 8 * x[2]);
}

FUNCTIONS(30)
{
    *f = sq(x[0]) + sq(x[1]) + sq(x[2]);
    g[0] = 1 - sq(x[0]) - sq(x[1]);
    SET(df, 2 * x[0], 2 * x[1], 2 * x[2]);
    SET(dg[0], -2 * x[0], -2 * x[1], 0);
}

FUNCTIONS(35)
{
    *f =
        9 - 8 * x[0] - 6 * x[1] - 4 * x[2] + 2 * sq(x[0]) + 2 * sq(x[1]) + sq(x[2]) + 2 * x[0] * x[1] + 2 * x[0] * x[2];
    g[0] = x[0] + x[1] + 2 * x[2] - 3;
    SET(df, -8 + 4 * x[0] + 2 * x[1] + 2 * x[2], -6 + 4 * x[1] + 2 * x[0], -4 + 2 * x[2] + 2 * x[0]);
    SET(dg[0], 1, 1, 2);
}

FUNCTIONS(39)
{
    *f = -x[0];
    g[0] = x[1] - cube(x[0]) - sq(x[2]);
    g[1] = sq(x[0]) - x[1] - sq(x[3]);
    SET(df, -1, 0, 0, 0);
    SET(dg[0], -3 * sq(x[0]), 1, -2 * x[2], 0);
    SET(dg[1], 2 * x[0], -1, 0, -2 * x[3]);
}

FUNCTIONS(40)
{
    *f = -x[0] * x[1] * x[2] * x[3];
    g[0] = cube(x[0]) + sq(x[1]) - 1;
    g[1] = sq(x[0]) * x[3] - x[2];
    g[2] = sq(x[3]) - x[1];
    SET(df, -x[1] * x[2] * x[3], -x[0] * x[2] * x[3], -x[0] * x[1] * x[3], -x[0] * x[1] * x[2]);
    SET(dg[0], 3 * sq(x[0]), 2 * x[1], 0, 0);
    SET(dg[1], 2 * x[0] * x[3], 0, -1, sq(x[0]));
    SET(dg[2], 0, -1, 0, 2 * x[3]);
}

FUNCTIONS(43)
{
    *f = sq(x[0]) + sq(x[1]) + 2 * sq(x[2]) + sq(x[3]) - 5 * x[0] - 5 * x[1] - 21 * x[2] + 7 * x[3];
    g[0] = sq(x[0]) + sq(x[1]) + sq(x[2]) + sq(x[3]) + x[0] - x[1] + x[2] - x[3] - 8;
    g[1] = sq(x[0]) + 2 * sq(x[1]) + sq(x[2]) + 2 * sq(x[3]) - x[0] - x[3] - 10;
    g[2] = 2 * sq(x[0]) + sq(x[1]) + sq(x[2]) + 2 * x[0] - x[1] - x[3] - 5;
    SET(df, 2 * x[0] - 5, 2 * x[1] - 5, 4 * x[2] - 21, 2 * x[3] + 7);
    SET(dg[0], 2 * x[0] + 1, 2 * x[1] - 1, 2 * x[2] + 1, 2 * x[3] - 1);
    SET(dg[1], 2 * x[0] - 1, 4 * x[1], 2 * x[2], 4 * x[3] - 1);
    SET(dg[2], 4 * x[0] + 2, 2 * x[1] - 1, 2 * x[2], -1);
}

FUNCTIONS(48)
{
    *f = sq(x[0] - 1) + sq(x[1] - x[2]) + sq(x[3] - x[4]);
    g[0] = x[0] + x[1] + x[2] + x[3] + x[4] - 5;
    g[1] = x[2] - 2 * (x[3] + x[4]) + 3;
    SET(df, 2 * (x[0] - 1), 2 * (x[1] - x[2]), -2 * (x[1] - x[2]), 2 * (x[3] - x[4]), -2 * (x[3] - x[4]));
    SET(dg[0], 1, 1, 1, 1, 1);
    SET(dg[1], 0, 0, 1, -2, -2);
}

FUNCTIONS(49)
{
    *f = sq(x[0] - x[1]) + sq(x[2] - 1) + sq(sq(x[3] - 1)) + sq(cube(x[4] - 1));
    g[0] = x[0] + x[1] + x[2] + 4 * x[3] - 7;
    g[1] = x[2] + 5 * x[4] - 6;
    SET(df, 2 * (x[0] - x[1]), -2 * (x[0] - x[1]), 2 * (x[2] - 1), 4 * cube(x[3] - 1),
        6 * sq(x[4] - 1) * cube(x[4] - 1));
    SET(dg[0], 1, 1, 1, 4, 0);
    SET(dg[1], 0, 0, 1, 0, 5);
}

FUNCTIONS(50)
{
    *f = sq(x[0] - x[1]) + sq(x[1] - x[2]) + sq(sq(x[2] - x[3])) + sq(x[3] - x[4]);
    for (int j = 0; j < 3; ++j) {
        g[j] = x[j] + 2 * x[j + 1] + 3 * x[j + 2] - 6;
        SET(dg[j], 0, 0, 0, 0, 0);
        for (int i = 0; i < 3; ++i) dg[j][j + i] = i + 1;
    }
    SET(df, 2 * (x[0] - x[1]), -2 * (x[0] - x[1]) + 2 * (x[1] - x[2]), -2 * (x[1] - x[2]) + 4 * cube(x[2] - x[3]),
        -4 * cube(x[2] - x[3]) + 2 * (x[3] - x[4]), -2 * (x[3] - x[4]));
}

FUNCTIONS(51)
{
    *f = sq(x[0] - x[1]) + sq(x[1] + x[2] - 2) + sq(x[3] - 1) + sq(x[4] - 1);
    g[0] = x[0] + 3 * x[1] - 4;
    g[1] = x[2] + x[3] - 2 * x[4];
    g[2] = x[1] - x[4];
    SET(df, 2 * (x[0] - x[1]), -2 * (x[0] - x[1]) + 2 * (x[1] + x[2] - 2), 2 * (x[1] + x[2] - 2), 2 * (x[3] - 1),
        2 * (x[4] - 1));
    SET(dg[0], 1, 3, 0, 0, 0);
    SET(dg[1], 0, 0, 1, 1, -2);
    SET(dg[2], 0, 1, 0, 0, -1);
}

FUNCTIONS(65)
{
    *f = sq(x[0] - x[1]) + sq(x[0] + x[1] - 10) / 9 + sq(x[2] - 5);
    g[0] = sq(x[0]) + sq(x[1]) + sq(x[2]) - 48;
    const double a = 2 * (x[0] - x[1]), b = 2 * (x[0] + x[1] - 10) / 9;
    SET(df, a + b, b - a, 2 * (x[2] - 5));
    SET(dg[0], 2 * x[0], 2 * x[1], 2 * x[2]);
}

FUNCTIONS(71)
{
    const double s = x[0] + x[1] + x[2];
    *f = x[0] * x[3] * s + x[2];
    g[0] = sq(x[0]) + sq(x[1]) + sq(x[2]) + sq(x[3]) - 40;
    g[1] = 25 - x[0] * x[1] * x[2] * x[3];
    SET(df, x[3] * (s + x[0]), x[0] * x[3], x[0] * x[3] + 1, x[0] * s);
    SET(dg[0], 2 * x[0], 2 * x[1], 2 * x[2], 2 * x[3]);
    SET(dg[1], -x[1] * x[2] * x[3], -x[0] * x[2] * x[3], -x[0] * x[1] * x[3], -x[0] * x[1] * x[2]);
}

FUNCTIONS(76)
{
    *f = sq(x[0]) + 0.5 * sq(x[1]) + sq(x[2]) + 0.5 * sq(x[3]) - x[0] * x[2] + x[2] * x[3] - x[0] - 3 * x[1] + x[2] -
         x[3];
    g[0] = x[0] + 2 * x[1] + x[2] + x[3] - 5;
    g[1] = 3 * x[0] + x[1] + 2 * x[2] - x[3] - 4;
    g[2] = 1.5 - x[1] - 4 * x[2];
    SET(df, 2 * x[0] - x[2] - 1, x[1] - 3, 2 * x[2] - x[0] + x[3] + 1, x[3] + x[2] - 1);
    SET(dg[0], 1, 2, 1, 1);
    SET(dg[1], 3, 1, 2, -1);
    SET(dg[2], 0, -1, -4, 0);
}

FUNCTIONS(78)
{
    *f = x[0] * x[1] * x[2] * x[3] * x[4];
    g[0] = sq(x[0]) + sq(x[1]) + sq(x[2]) + sq(x[3]) + sq(x[4]) - 10;
    g[1] = x[1] * x[2] - 5 * x[3] * x[4];
    g[2] = cube(x[0]) + cube(x[1]) + 1;
    SET(df, x[1] * x[2] * x[3] * x[4], x[0] * x[2] * x[3] * x[4], x[0] * x[1] * x[3] * x[4], x[0] * x[1] * x[2] * x[4],
        x[0] * x[1] * x[2] * x[3]);
    SET(dg[0], 2 * x[0], 2 * x[1], 2 * x[2], 2 * x[3], 2 * x[4]);
    SET(dg[1], 0, x[2], x[1], -5 * x[4], -5 * x[3]);
    SET(dg[2], 3 * sq(x[0]), 3 * sq(x[1]), 0, 0, 0);
}

FUNCTIONS(100)
{
    *f = sq(x[0] - 10) + 5 * sq(x[1] - 12) + sq(sq(x[2])) + 3 * sq(x[3] - 11) + 10 * sq(cube(x[4])) + 7 * sq(x[5]) +
         sq(sq(x[6])) - 4 * x[5] * x[6] - 10 * x[5] - 8 * x[6];
    g[0] = 2 * sq(x[0]) + 3 * sq(sq(x[1])) + x[2] + 4 * sq(x[3]) + 5 * x[4] - 127;
    g[1] = 7 * x[0] + 3 * x[1] + 10 * sq(x[2]) + x[3] - x[4] - 282;
    g[2] = 23 * x[0] + sq(x[1]) + 6 * sq(x[5]) - 8 * x[6] - 196;
    g[3] = 4 * sq(x[0]) + sq(x[1]) - 3 * x[0] * x[1] + 2 * sq(x[2]) + 5 * x[5] - 11 * x[6];
    SET(df, 2 * (x[0] - 10), 10 * (x[1] - 12), 4 * cube(x[2]), 6 * (x[3] - 11), 60 * sq(x[4]) * cube(x[4]),
        14 * x[5] - 4 * x[6] - 10, 4 * cube(x[6]) - 4 * x[5] - 8);
    SET(dg[0], 4 * x[0], 12 * cube(x[1]), 1, 8 * x[3], 5, 0, 0);
    SET(dg[1], 7, 3, 20 * x[2], 1, -1, 0, 0);
    SET(dg[2], 23, 2 * x[1], 0, 0, 0, 12 * x[5], -8);
    SET(dg[3], 8 * x[0] - 3 * x[1], 2 * x[1] - 3 * x[0], 4 * x[2], 0, 0, 5, -11);
}

FUNCTIONS(113)
{
    *f = sq(x[0]) + sq(x[1]) + x[0] * x[1] - 14 * x[0] - 16 * x[1] + sq(x[2] - 10) + 4 * sq(x[3] - 5) + sq(x[4] - 3) +
         2 * sq(x[5] - 1) + 5 * sq(x[6]) + 7 * sq(x[7] - 11) + 2 * sq(x[8] - 10) + sq(x[9] - 7) + 45;
    g[0] = -105 + 4 * x[0] + 5 * x[1] - 3 * x[6] + 9 * x[7];
    g[1] = 10 * x[0] - 8 * x[1] - 17 * x[6] + 2 * x[7];
    g[2] = -8 * x[0] + 2 * x[1] + 5 * x[8] - 2 * x[9] - 12;
    g[3] = 3 * sq(x[0] - 2) + 4 * sq(x[1] - 3) + 2 * sq(x[2]) - 7 * x[3] - 120;
    g[4] = 5 * sq(x[0]) + 8 * x[1] + sq(x[2] - 6) - 2 * x[3] - 40;
    g[5] = 0.5 * sq(x[0] - 8) + 2 * sq(x[1] - 4) + 3 * sq(x[4]) - x[5] - 30;
    g[6] = sq(x[0]) + 2 * sq(x[1] - 2) - 2 * x[0] * x[1] + 14 * x[4] - 6 * x[5];
    g[7] = -3 * x[0] + 6 * x[1] + 12 * sq(x[8] - 8) - 7 * x[9];
    SET(df, 2 * x[0] + x[1] - 14, 2 * x[1] + x[0] - 16, 2 * (x[2] - 10), 8 * (x[3] - 5), 2 * (x[4] - 3), 4 * (x[5] - 1),
        10 * x[6], 14 * (x[7] - 11), 4 * (x[8] - 10), 2 * (x[9] - 7));
    SET(dg[0], 4, 5, 0, 0, 0, 0, -3, 9, 0, 0);
    SET(dg[1], 10, -8, 0, 0, 0, 0, -17, 2, 0, 0);
    SET(dg[2], -8, 2, 0, 0, 0, 0, 0, 0, 5, -2);
    SET(dg[3], 6 * (x[0] - 2), 8 * (x[1] - 3), 4 * x[2], -7, 0, 0, 0, 0, 0, 0);
    SET(dg[4], 10 * x[0], 8, 2 * (x[2] - 6), -2, 0, 0, 0, 0, 0, 0);
    SET(dg[5], x[0] - 8, 4 * (x[1] - 4), 0, 0, 6 * x[4], -1, 0, 0, 0, 0);
    SET(dg[6], 2 * x[0] - 2 * x[1], 4 * (x[1] - 2) - 2 * x[0], 0, 0, 14, -6, 0, 0, 0, 0);
    SET(dg[7], -3, 6, 0, 0, 0, 0, 0, 0, 24 * (x[8] - 8), -7);
}

static const double ZERO[NLP_N] = {0};
static const double LOWER_1[] = {-INFINITY, -1.5};
static const double LOWER_30[] = {1, -10, -10}, UPPER_30[] = {10, 10, 10};
static const double LOWER_65[] = {-4.5, -4.5, -5}, UPPER_65[] = {4.5, 4.5, 5};
static const double LOWER_71[] = {1, 1, 1, 1}, UPPER_71[] = {5, 5, 5, 5};

static const nlp_problem NLP_PROBLEMS[] = {
    {"HS1", 2, 0, 0, {-2, 1}, 0, LOWER_1, NULL, hs1},
    {"HS6", 2, 1, 1, {-1.2, 1}, 0, NULL, NULL, hs6},
    {"HS7", 2, 1, 1, {2, 2}, -1.7320508075688772, NULL, NULL, hs7},
    {"HS10", 2, 1, 0, {-10, 10}, -1, NULL, NULL, hs10},
    {"HS11", 2, 1, 0, {4.9, 0.1}, -8.498464223, NULL, NULL, hs11},
    {"HS12", 2, 1, 0, {0, 0}, -30, NULL, NULL, hs12},
    {"HS14", 2, 2, 1, {2, 2}, 1.3934649806889, NULL, NULL, hs14},
    {"HS22", 2, 2, 0, {2, 2}, 1, NULL, NULL, hs22},
    {"HS26", 3, 1, 1, {-2.6, 2, 2}, 0, NULL, NULL, hs26},
    {"HS28", 3, 1, 1, {-4, 1, 1}, 0, NULL, NULL, hs28},
    {"HS29", 3, 1, 0, {1, 1, 1}, -22.627416997969522, NULL, NULL, hs29},
    {"HS30", 3, 1, 0, {1, 1, 1}, 1, LOWER_30, UPPER_30, hs30},
    {"HS35", 3, 1, 0, {0.5, 0.5, 0.5}, 1.0 / 9, ZERO, NULL, hs35},
    {"HS39", 4, 2, 2, {2, 2, 2, 2}, -1, NULL, NULL, hs39},
    {"HS40", 4, 3, 3, {0.8, 0.8, 0.8, 0.8}, -0.25, NULL, NULL, hs40},
    {"HS43", 4, 3, 0, {0, 0, 0, 0}, -44, NULL, NULL, hs43},
    {"HS48", 5, 2, 2, {3, 5, -3, 2, -2}, 0, NULL, NULL, hs48},
    {"HS49", 5, 2, 2, {10, 7, 2, -3, 0.8}, 0, NULL, NULL, hs49},
    {"HS50", 5, 3, 3, {35, -31, 11, 5, -5}, 0, NULL, NULL, hs50},
    {"HS51", 5, 3, 3, {2.5, 0.5, 2, -1, 0.5}, 0, NULL, NULL, hs51},
    {"HS65", 3, 1, 0, {-5, 5, 0}, 0.9535288567, LOWER_65, UPPER_65, hs65},
    {"HS71", 4, 2, 1, {1, 5, 5, 1}, 17.0140173, LOWER_71, UPPER_71, hs71},
    {"HS76", 4, 3, 0, {0.5, 0.5, 0.5, 0.5}, -4.681818181818182, ZERO, NULL, hs76},
    {"HS78", 5, 3, 3, {-2, 1.5, 2, -1, -1}, -2.91970041, NULL, NULL, hs78},
    {"HS100", 7, 4, 0, {1, 2, 0, 4, 0, 1, 1}, 680.6300573, NULL, NULL, hs100},
    {"HS113", 10, 8, 0, {2, 3, 5, 5, 1, 2, 7, 3, 6, 10}, 24.3062091, NULL, NULL, hs113},
};
enum { N_NLP_PROBLEMS = (int)(sizeof NLP_PROBLEMS / sizeof NLP_PROBLEMS[0]) };
#undef FUNCTIONS
#endif
