/* One lane at a time, for every processor. */
#include <math.h>
#include <stddef.h>
#include "../precision.h"

#define WIDTH 1
#define VECTOR real
#define MASK int
#define KERNELS PRIVATE(kernels_baseline)
#define KERNELS_NAME RAMPWISE_BASELINE

static inline real vector_load(const real *x)
{
    return *x;
}

static inline void vector_store(real *x, real a)
{
    *x = a;
}

static inline real vector_all(real a)
{
    return a;
}

static inline real vector_fma(real a, real b, real c)
{
    return REAL_FMA(a, b, c);
}

static inline real vector_product(real a, real b)
{
    return a * b;
}

static inline real vector_sum(real a, real b)
{
    return a + b;
}

static inline real vector_difference(real a, real b)
{
    return a - b;
}

static inline real vector_product_unless_zero(real a, real b)
{
    return a != 0 ? a * b : 0;
}

static inline real vector_size(real a)
{
    return REAL_SIZE(a);
}

static inline real vector_larger(real a, real b)
{
    return a > b ? a : b;
}

/* The larger of |a| and top, which is not negative */
static inline real vector_larger_size(real a, real top)
{
    return vector_larger(vector_size(a), top);
}

static inline real vector_smaller(real a, real b)
{
    return a < b ? a : b;
}

static inline int vector_positive(real a)
{
    return a > 0;
}

/* A bit a lane, the first lane lowest */
static inline unsigned mask_bits(int a)
{
    return (unsigned)a;
}

static inline int mask_all(void)
{
    return 1;
}

static inline int mask_below(real a, real limit)
{
    return REAL_SIZE(a) < limit;
}

static inline int mask_both(int a, int b)
{
    return a & b;
}

static inline int mask_any(int a)
{
    return a;
}

static inline int vector_any_nan(real a)
{
    return isnan(a);
}

/* a, or +0 where the mask is set */
static inline real vector_unless(real a, int mask)
{
    return mask ? 0 : a;
}

/* to[j][i] = from[i][j] */
static inline void transpose_4_by_4(const real *from, size_t from_stride, real *to, size_t to_stride)
{
    for (size_t i = 0; i < 4; ++i)
        for (size_t j = 0; j < 4; ++j)
            to[j * to_stride + i] = from[i * from_stride + j];
}

#include "body.h"
