/* Two numbers side by side: what every 64-bit processor adds and multiplies at once. Right-hand sides are swept in
 * pairs; the bits are those of single numbers. */
#ifndef SCT_NUMERICS_LANES_H
#define SCT_NUMERICS_LANES_H

typedef double sct_lanes __attribute__((vector_size(2 * sizeof(double)), may_alias));

#define SCT_INLINE static inline __attribute__((always_inline)) /* so that widths are constants inside */
#define SCT_UNROLL _Pragma("GCC unroll 8") /* loops of constant length: what they work on stays in registers */

enum { SCT_AT_ONCE = 2 }; /* pairs of right-hand sides in one sweep */

/** b (n x P pairs) gets `count` <= 2 P right-hand sides (n x count, column-major) in the order given; the others are
 * zero. */
SCT_INLINE void sct_lanes_gather(const int P, int n, int count, const int order[], const double rhs[], sct_lanes b[])
{
    for (int k = 0; k < n; k++) {
        SCT_UNROLL
        for (int r = 0; r < 2 * P; r++) b[k * P + r / 2][r % 2] = r < count ? rhs[(long)r * n + order[k]] : 0.0;
    }
}

/** The way back. */
SCT_INLINE void sct_lanes_scatter(const int P, int n, int count, const int order[], const sct_lanes b[], double rhs[])
{
    for (int k = 0; k < n; k++) {
        SCT_UNROLL
        for (int r = 0; r < 2 * P; r++)
            if (r < count) rhs[(long)r * n + order[k]] = b[k * P + r / 2][r % 2];
    }
}
#endif
