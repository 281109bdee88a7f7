/* Places of a matrix in the order of compressed columns. */
#ifndef SCT_NUMERICS_PAIRS_H
#define SCT_NUMERICS_PAIRS_H

/**
 * order (count): the pairs (row[p], column[p]) by column, then by row; equal ones in the order given. Two counting
 * passes, so the time is proportional to count + n.
 *
 * 0 <= row, column < n; work: scratch, n + 1 + count
 */
void sct_sort_pairs(int n, int count, const int row[], const int column[], int order[], int work[]);
#endif
