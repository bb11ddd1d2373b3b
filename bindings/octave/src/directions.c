/* Two components at right angles, over all directions in their plane. */
#include "gateway.h"

/* Vectors of as many elements. */
static size_t count_pairs(const mxArray *first, const mxArray *second)
{
    const size_t n = mxGetNumberOfElements(real_double(first));
    (void)doubles(second, n);
    return n;
}

/* dt, first samples, second samples, input, omegas, damping ratios, quantity, flags, percentiles
   -> percentiles x oscillators */
void directions(mxArray **out, const mxArray **in)
{
    const size_t n = count_pairs(in[1], in[2]), oscillators = count_pairs(in[4], in[5]);
    const size_t percents = mxGetNumberOfElements(real_double(in[8]));
    mxArray *const value = matrix(percents, oscillators);
    size_t bad = 0;
    const int status = rampwise_spectrum_directions(n, scalar(in[0]), mxGetPr(in[1]), mxGetPr(in[2]),
                                                    integer(in[3]), oscillators, mxGetPr(in[4]),
                                                    mxGetPr(in[5]), integer(in[6]), (unsigned)integer(in[7]),
                                                    percents, mxGetPr(in[8]), mxGetPr(value), &bad);
    if (answer(out, status, bad + 1) == RAMPWISE_OK)
        out[2] = value;
}

/* first history, second history, percentiles -> a column of values */
void percentiles_over_angle(mxArray **out, const mxArray **in)
{
    const size_t n = count_pairs(in[0], in[1]), percents = mxGetNumberOfElements(real_double(in[2]));
    mxArray *const value = matrix(percents, 1);
    size_t bad = 0;
    const int status = rampwise_percentiles_over_angle(n, mxGetPr(in[0]), mxGetPr(in[1]), percents,
                                                       mxGetPr(in[2]), mxGetPr(value), &bad);
    if (answer(out, status, bad + 1) == RAMPWISE_OK)
        out[2] = value;
}
