/* Operations on doubles by MPFR, each rounded once to the nearest double, subnormal ones included. */
#ifndef NEAREST_H
#define NEAREST_H

double nearest_fma(double x, double y, double z);
float nearest_fmaf(float x, float y, float z);
double nearest_sum(double x, double y);
double nearest_quotient(double x, double y);
double nearest_rate(double x, double y, double z); /* x / y / z */

#endif
