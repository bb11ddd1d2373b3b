/* One lane at a time, for every processor. */
#include <math.h>
#include <stddef.h>
#include "rampwise/fused.h"

#define WIDTH 1
#define VECTOR double
#define MASK int
#define KERNELS rampwise_kernels_baseline_
#define KERNELS_NAME RAMPWISE_BASELINE

static inline double vector_load(const double *x)
{
    return *x;
}

static inline void vector_store(double *x, double a)
{
    *x = a;
}

static inline double vector_all(double a)
{
    return a;
}

static inline double vector_fma(double a, double b, double c)
{
    return RAMPWISE_FMA(a, b, c);
}

static inline double vector_product(double a, double b)
{
    return a * b;
}

static inline double vector_sum(double a, double b)
{
    return a + b;
}

static inline double vector_difference(double a, double b)
{
    return a - b;
}

static inline double vector_product_unless_zero(double a, double b)
{
    return a != 0 ? a * b : 0;
}

static inline double vector_size(double a)
{
    return fabs(a);
}

static inline double vector_larger(double a, double b)
{
    return a > b ? a : b;
}

/* The larger of |a| and top, which is not negative */
static inline double vector_larger_size(double a, double top)
{
    return vector_larger(vector_size(a), top);
}

static inline double vector_smaller(double a, double b)
{
    return a < b ? a : b;
}

static inline int vector_positive(double a)
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

static inline int mask_below(double a, double limit)
{
    return fabs(a) < limit;
}

static inline int mask_both(int a, int b)
{
    return a & b;
}

static inline int mask_any(int a)
{
    return a;
}

static inline int vector_any_nan(double a)
{
    return isnan(a);
}

/* a, or +0 where the mask is set and |a| < limit */
static inline double vector_unless_below(double a, double limit, int mask)
{
    return mask && fabs(a) < limit ? 0 : a;
}

/* to[j][i] = from[i][j] */
static inline void transpose_4_by_4(const double *from, size_t from_stride, double *to, size_t to_stride)
{
    for (size_t i = 0; i < 4; ++i)
        for (size_t j = 0; j < 4; ++j)
            to[j * to_stride + i] = from[i * from_stride + j];
}

#include "body.h"
