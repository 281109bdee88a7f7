/* Counting sort of pairs. */
#include "numerics/pairs.h"

#include <string.h>

/* to: the `count` items of `from` (NULL: 0, 1, ...) by key, stable. start: scratch, n + 1. */
static void by_key(int n, int count, const int key[], const int from[], int to[], int start[])
{
    memset(start, 0, ((size_t)n + 1) * sizeof *start);
    for (int p = 0; p < count; p++) start[key[p] + 1]++;
    for (int k = 0; k < n; k++) start[k + 1] += start[k];
    for (int p = 0; p < count; p++) {
        const int item = from != NULL ? from[p] : p;
        to[start[key[item]]++] = item;
    }
}

void sct_sort_pairs(int n, int count, const int row[], const int column[], int order[], int work[])
{
    by_key(n, count, row, NULL, work + n + 1, work);
    by_key(n, count, column, work + n + 1, order, work);
}
