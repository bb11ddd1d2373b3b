#include "rampwise/fused.h"

#include <stdint.h>
#include <string.h>

/* Fused multiply-add in integers. The product of two significands is exact in 128 bits; the third
   operand is lined up with it, what is shifted out is kept as one sticky bit, and the sum is
   rounded once. */

typedef struct wide {
    uint64_t high, low;
} wide;

/* significand 2^exponent, top bit of the significand at the format's place */
typedef struct number {
    int negative, exponent;
    uint64_t significand;
} number;

/* An IEEE 754 binary format of `precision` significant bits. */
typedef struct format {
    int precision, smallest_exponent, largest_exponent; /* of a leading bit */
} format;

static const format binary64 = {53, -1022, 1023}, binary32 = {24, -126, 127};

static wide wide_product(uint64_t a, uint64_t b)
{
    const uint64_t half = 0xffffffffu;
    const uint64_t low = (a & half) * (b & half);
    const uint64_t cross = (a >> 32) * (b & half) + (low >> 32);
    const uint64_t other = (a & half) * (b >> 32) + (cross & half);
    return (wide){(a >> 32) * (b >> 32) + (cross >> 32) + (other >> 32), other << 32 | (low & half)};
}

static wide wide_left(wide a, int by)
{
    if (by >= 64)
        return (wide){a.low << (by - 64), 0};
    return by == 0 ? a : (wide){a.high << by | a.low >> (64 - by), a.low << by};
}

/* Right, any bit lost kept in the last one. */
static wide wide_right_sticky(wide a, int by)
{
    if (by == 0)
        return a;
    if (by >= 128)
        return (wide){0, (a.high | a.low) != 0};
    if (by >= 64) {
        const uint64_t lost = by == 64 ? a.low : a.low | a.high << (128 - by);
        return (wide){0, (by == 64 ? a.high : a.high >> (by - 64)) | (lost != 0)};
    }
    return (wide){a.high >> by, (a.high << (64 - by) | a.low >> by) | (a.low << (64 - by) != 0)};
}

static wide wide_sum(wide a, wide b)
{
    const uint64_t low = a.low + b.low;
    return (wide){a.high + b.high + (low < a.low), low};
}

static wide wide_difference(wide a, wide b)
{
    return (wide){a.high - b.high - (a.low < b.low), a.low - b.low};
}

static int leading_zeros(uint64_t x)
{
    int zeros = 0;
    for (int step = 32; step > 0; step /= 2)
        if (x >> (64 - step) == 0) {
            zeros += step;
            x <<= step;
        }
    return zeros;
}

static number unpack(uint64_t magnitude, int negative, const format *f)
{
    const int field = (int)(magnitude >> (f->precision - 1));
    const uint64_t fraction = magnitude & ((UINT64_C(1) << (f->precision - 1)) - 1);
    const int scale = f->smallest_exponent - f->precision + 1;
    if (field > 0)
        return (number){negative, scale + field - 1, fraction | UINT64_C(1) << (f->precision - 1)};
    const int shift = leading_zeros(fraction) - (64 - f->precision);
    return (number){negative, scale - shift, fraction << shift};
}

/* The bits, without sign, of `sum` 2^exponent, whose bit 127 is set, rounded to nearest even. */
static uint64_t pack(wide sum, int exponent, const format *f)
{
    const int leading = exponent + 127;
    const int missing = f->smallest_exponent - leading;
    const int kept = missing > 0 ? f->precision - missing : f->precision;
    if (kept < 0)
        return 0;
    const uint64_t half = UINT64_C(1) << 63;
    const uint64_t whole = kept == 0 ? 0 : sum.high >> (64 - kept);
    const uint64_t rest = sum.high << kept;
    const int up = rest > half || (rest == half && (sum.low != 0 || (whole & 1)));
    const uint64_t infinite = (uint64_t)(f->largest_exponent - f->smallest_exponent + 2)
                              << (f->precision - 1);
    if (leading > f->largest_exponent)
        return infinite;
    const uint64_t field = missing > 0 ? 0 : (uint64_t)(leading - f->smallest_exponent);
    return (field << (f->precision - 1)) + whole + (uint64_t)up;
}

/* x y + z for finite numbers other than zero. The top bits of product and addend go to bits 125 and
   126, so that a sum cannot run over; where bits are shifted out, the other operand is larger by
   far and nothing cancels. */
static uint64_t fused(number x, number y, number z, const format *f, int *negative)
{
    const int product_shift = 127 - 2 * f->precision, addend_shift = 126 - f->precision;
    wide product = wide_left(wide_product(x.significand, y.significand), product_shift);
    wide addend = wide_left((wide){0, z.significand}, addend_shift);
    int exponent = x.exponent + y.exponent - product_shift;
    const int above = exponent - (z.exponent - addend_shift);
    if (above > 0) {
        addend = wide_right_sticky(addend, above);
    } else {
        product = wide_right_sticky(product, -above);
        exponent -= above;
    }
    wide sum;
    *negative = x.negative ^ y.negative;
    if (*negative == z.negative) {
        sum = wide_sum(product, addend);
    } else if (product.high > addend.high || (product.high == addend.high && product.low >= addend.low)) {
        sum = wide_difference(product, addend);
    } else {
        sum = wide_difference(addend, product);
        *negative = z.negative;
    }
    if ((sum.high | sum.low) == 0) {
        *negative = 0;
        return 0;
    }
    const int zeros = sum.high != 0 ? leading_zeros(sum.high) : 64 + leading_zeros(sum.low);
    return pack(wide_left(sum, zeros), exponent - zeros, f);
}

/* Infinite, NaN and zero operands: x y + z and x y are exact there, or rounded once. */
double rampwise_fma(double x, double y, double z)
{
    const uint64_t sign = UINT64_C(1) << 63, infinite = UINT64_C(0x7ff) << 52;
    uint64_t a, b, c;
    memcpy(&a, &x, sizeof a);
    memcpy(&b, &y, sizeof b);
    memcpy(&c, &z, sizeof c);
    if ((a & ~sign) - 1 >= infinite - 1 || (b & ~sign) - 1 >= infinite - 1)
        return x * y + z;
    if ((c & ~sign) - 1 >= infinite - 1)
        return (c & ~sign) == 0 ? x * y : z + z;
    int negative;
    uint64_t bits =
        fused(unpack(a & ~sign, a >> 63 != 0, &binary64), unpack(b & ~sign, b >> 63 != 0, &binary64),
              unpack(c & ~sign, c >> 63 != 0, &binary64), &binary64, &negative);
    bits |= negative ? sign : 0;
    double result;
    memcpy(&result, &bits, sizeof result);
    return result;
}

float rampwise_fmaf(float x, float y, float z)
{
    const uint32_t sign = UINT32_C(1) << 31, infinite = UINT32_C(0xff) << 23;
    uint32_t a, b, c;
    memcpy(&a, &x, sizeof a);
    memcpy(&b, &y, sizeof b);
    memcpy(&c, &z, sizeof c);
    if ((a & ~sign) - 1 >= infinite - 1 || (b & ~sign) - 1 >= infinite - 1)
        return x * y + z;
    if ((c & ~sign) - 1 >= infinite - 1)
        return (c & ~sign) == 0 ? x * y : z + z;
    int negative;
    uint32_t bits = (uint32_t)fused(unpack(a & ~sign, a >> 31 != 0, &binary32),
                                    unpack(b & ~sign, b >> 31 != 0, &binary32),
                                    unpack(c & ~sign, c >> 31 != 0, &binary32), &binary32, &negative);
    bits |= negative ? sign : 0;
    float result;
    memcpy(&result, &bits, sizeof result);
    return result;
}
