/* Spans of a few short vectors: rows of up to six numbers, of which only the first n count. */
#ifndef SCT_NUMERICS_SPAN_H
#define SCT_NUMERICS_SPAN_H

enum { SCT_ROW = 6 };
typedef double sct_row[SCT_ROW];

double sct_dot(int n, const double a[], const double b[]);
void sct_span_normalise(int n, double v[]);

/** v -= its parts along the r orthonormal rows of E; twice, so that what is left is orthogonal to rounding. */
void sct_span_remove(int n, int r, sct_row E[], double v[]);

/** Orthonormal null space N of m rows, which are overwritten; returns its dimension, 0 to n. What is left of a row
 * counts as zero when it is not longer than tol. */
int sct_span_null(int m, int n, sct_row rows[], double tol, sct_row N[]);

/** Gauss-Jordan with full pivoting on columns [from, to): rows first, first + 1, ... of V (k rows) get a pivot 1 that
 * no other row has in its column. Returns how many; stops where no entry is larger than tol. pivot (NULL: not wanted)
 * gets the columns. */
int sct_span_reduce(int k, int n, int first, int from, int to, sct_row V[], double tol, int pivot[]);
#endif
