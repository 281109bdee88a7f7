/* The same span by vectors that are as local as they can be. */
#ifndef SCT_NUMERICS_LOCAL_BASIS_H
#define SCT_NUMERICS_LOCAL_BASIS_H

/** V: m vectors of n entries, column-major, linearly independent. Each gets an entry 1, its largest, where the others
 * have 0; they are ordered by their first entries of at least `shown`. */
void sct_local_basis(int n, int m, double V[], double shown);
#endif
