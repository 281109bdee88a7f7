#include "numerics/polynomial.h"

#include <float.h>
#include <math.h>
#include <stdbool.h>

double sct_polynomial_value(int degree, const double p[], double s)
{
    double value = p[degree];
    for (int i = degree - 1; i >= 0; --i) value = value * s + p[i];
    return value;
}

void sct_polynomial_derivative(int degree, const double p[], double dp[])
{
    for (int i = 0; i < degree; ++i) dp[i] = (i + 1) * p[i + 1];
}

/* Adds num/den when it lies inside (0, 1); asks before it divides, so that den may be 0 or tiny. */
static int add_ratio(double num, double den, int n, double roots[])
{
    if (!(fabs(num) < fabs(den)) || num == 0 || signbit(num) != signbit(den)) return n;
    roots[n] = num / den;
    return n + 1;
}

/* c + b s + a s^2 = 0: with r = -(b + sign(b) sqrt(b^2 - 4ac))/2 the roots are r/a and c/r; no difference of near
 * numbers is taken outside the discriminant. */
static int quadratic(const double p[3], double roots[])
{
    const double scale = fmax(fabs(p[0]), fmax(fabs(p[1]), fabs(p[2])));
    if (!(scale > 0)) return 0;
    const double c = p[0] / scale, b = p[1] / scale, a = p[2] / scale, D = b * b - 4 * a * c;
    if (D < 0) return 0;
    const double r = -(b + copysign(sqrt(D), b)) / 2;
    int n = add_ratio(r, a, 0, roots);
    n = add_ratio(c, r, n, roots);
    if (n < 2) return n;
    if (roots[0] == roots[1]) return 1;
    if (roots[0] > roots[1]) {
        const double t = roots[0];
        roots[0] = roots[1];
        roots[1] = t;
    }
    return 2;
}

/* The root of p in [lo, hi], where it goes monotonically from one sign to the other: Newton, and bisection where that
 * would leave the bracket. */
static double bracketed(int degree, const double p[], const double dp[], double lo, double hi)
{
    const bool rises = sct_polynomial_value(degree, p, lo) < 0;
    double s = 0.5 * (lo + hi);
    for (int i = 0; i < 200; ++i) {
        const double f = sct_polynomial_value(degree, p, s), df = sct_polynomial_value(degree - 1, dp, s);
        if (f == 0) return s;
        if ((f < 0) == rises)
            lo = s;
        else
            hi = s;
        const double to = df != 0 ? s - f / df : NAN, next = to > lo && to < hi ? to : 0.5 * (lo + hi);
        if (fabs(next - s) <= 0.5 * DBL_EPSILON * fabs(next)) return next;
        s = next;
    }
    return s;
}

int sct_polynomial_roots(int degree, const double p[], double roots[])
{
    while (degree > 0 && p[degree] == 0) --degree; /* loads are uniform, or none, on most members */
    if (degree <= 0) return 0;
    if (degree == 1) return add_ratio(-p[0], p[1], 0, roots);
    if (degree == 2) return quadratic(p, roots);
    double dp[SCT_POLYNOMIAL_DEGREE], turn[SCT_POLYNOMIAL_DEGREE + 1];
    sct_polynomial_derivative(degree, p, dp);
    const int n_turns = sct_polynomial_roots(degree - 1, dp, turn);
    turn[n_turns] = 1;
    int n = 0;
    double lo = 0, at_lo = p[0];
    for (int i = 0; i <= n_turns; ++i) {
        const double hi = turn[i], at_hi = sct_polynomial_value(degree, p, hi);
        if ((at_lo < 0 && at_hi > 0) || (at_lo > 0 && at_hi < 0)) roots[n++] = bracketed(degree, p, dp, lo, hi);
        if (at_hi != 0) { /* a zero just at a turn is seen as a change over both of its neighbours */
            lo = hi;
            at_lo = at_hi;
        }
    }
    return n;
}
