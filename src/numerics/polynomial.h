/**
 * Polynomials p[0] + p[1] s + ... of low degree on the unit interval.
 */
#ifndef SCT_NUMERICS_POLYNOMIAL_H
#define SCT_NUMERICS_POLYNOMIAL_H

#define SCT_POLYNOMIAL_DEGREE 5 /* at most */

/** p(s), by Horner. */
double sct_polynomial_value(int degree, const double p[], double s);

/** dp (degree entries) = the coefficients of p'. */
void sct_polynomial_derivative(int degree, const double p[], double dp[]);

/**
 * Where p changes its sign inside (0, 1), ascending; their number. Roots without a change of sign (double ones) may be
 * left out. Degree 2 in closed form (without cancellation); above, by Newton steps kept inside brackets between the
 * sign changes of p'.
 *
 * roots  out, `degree` entries
 */
int sct_polynomial_roots(int degree, const double p[], double roots[]);
#endif
