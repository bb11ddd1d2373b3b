/* Complex numbers. Those of compilers look after infinities and NaN in every product, by calls. */
#ifndef RAMPWISE_COMPLEX_NUMBER_H
#define RAMPWISE_COMPLEX_NUMBER_H

typedef struct complex_number {
    double re, im;
} complex_number;

static inline complex_number sum_of(complex_number a, complex_number b)
{
    return (complex_number){a.re + b.re, a.im + b.im};
}

static inline complex_number product_of(complex_number a, complex_number b)
{
    return (complex_number){a.re * b.re - a.im * b.im, a.re * b.im + a.im * b.re};
}

static inline complex_number scaled(double factor, complex_number a)
{
    return (complex_number){factor * a.re, factor * a.im};
}

#endif
