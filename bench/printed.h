/* The step as books print it: closed forms of a lightly damped oscillator of unit mass, with exp, sin and cos,
   as they are programmed from the page. In double and in single precision, from one body.

   With w_d = w sqrt(1 - z^2), e = exp(-z w h), s = sin(w_d h), c = cos(w_d h) and r = z/sqrt(1 - z^2):

       A  = e (r s + c)                 B  = e s/w_d
       A' = -e w s/sqrt(1 - z^2)        B' = e (c - r s)
       C  = (2z/(w h) + e (((1 - 2z^2)/(w_d h) - r) s - (1 + 2z/(w h)) c))/k
       D  = (1 - 2z/(w h) + e ((2z^2 - 1)/(w_d h) s + 2z/(w h) c))/k
       C' = (-1/h + e ((w/sqrt(1 - z^2) + r/h) s + c/h))/k
       D' = (1 - e (r s + c))/(k h)

   N. C. Nigam and P. C. Jennings, Bull. Seism. Soc. Am. 59(2), 909-922, 1969, in the arrangement that is
   common in textbooks. */
#ifndef PRINTED_H
#define PRINTED_H

#include <stddef.h>

typedef struct printed_double {
    double A, B, C, D, Ap, Bp, Cp, Dp;
} printed_double;

typedef struct printed_single {
    float A, B, C, D, Ap, Bp, Cp, Dp;
} printed_single;

void printed_double_make(printed_double *x, double w, double z, double h);
void printed_single_make(printed_single *x, float w, float z, float h);

/* From rest under no load, over p[0] to p[n - 1]; displacements to u. */
void printed_double_run(const printed_double *x, size_t n, const double *p, double *u);
void printed_single_run(const printed_single *x, size_t n, const float *p, float *u);

#endif
