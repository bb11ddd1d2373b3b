/* Energies of oscillators under whole records. */
#include "gateway.h"

/* A column of each: input, kinetic, strain, dissipated. */
static void put_energies(mxArray **out, size_t j, size_t n, const rampwise_energy *energy)
{
    for (size_t i = 0; i < n; ++i) {
        mxGetPr(out[2])[j * n + i] = energy[i].input;
        mxGetPr(out[3])[j * n + i] = energy[i].kinetic;
        mxGetPr(out[4])[j * n + i] = energy[i].strain;
        mxGetPr(out[5])[j * n + i] = energy[i].dissipated;
    }
}

/* systems, dt, input, between, frame, u0, v0, samples -> input, kinetic, strain, dissipated: a column for each system
   or column of samples, in pairs where both are many */
void energies(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetM(real_double(in[7])), columns = mxGetN(in[7]), systems = count_systems(in[0]);
    const size_t wide = systems > 1 ? systems : columns;
    const int frame = integer(in[4]);
    if (n == 0 || systems == 0 || columns == 0 || (columns > 1 && columns != wide))
        refuse("systems and columns of samples must be as many, or one");
    const double *const u0 = doubles(in[5], wide), *const v0 = doubles(in[6], wide);
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    rampwise_energy *const energy = mxCalloc(n, sizeof *energy);
    answer(out, RAMPWISE_OK, 0);
    for (int i = 2; i < 6; ++i)
        out[i] = matrix(n, wide);
    for (size_t j = 0; j < wide; ++j) {
        size_t bad = 0;
        const size_t first = columns > 1 ? j * n : 0;
        const int status = rampwise_energy_solve(&c[systems > 1 ? j : 0], frame, u0[j], v0[j], n,
                                                 mxGetPr(in[7]) + first, energy, &bad);
        if (status != RAMPWISE_OK) {
            answer(out, status, bad + 1 + first);
            return;
        }
        put_energies(out, j, n, energy);
    }
}

/* dt, samples (one column), input, frame, omegas, damping ratios -> {input; kinetic; strain; dissipated} at the
   last sample x oscillators, greatest input */
void energy_spectrum(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const size_t oscillators = mxGetNumberOfElements(real_double(in[4]));
    const double *const zeta = doubles(in[5], oscillators);
    rampwise_energy *const last = mxCalloc(oscillators + 1, sizeof *last);
    mxArray *const at_last = matrix(4, oscillators), *const greatest = matrix(1, oscillators);
    size_t bad = 0;
    const int status =
        rampwise_energy_spectrum(n, scalar(in[0]), mxGetPr(in[1]), integer(in[2]), integer(in[3]),
                                 oscillators, mxGetPr(in[4]), zeta, last, mxGetPr(greatest), &bad);
    if (answer(out, status, bad + 1) != RAMPWISE_OK)
        return;
    for (size_t i = 0; i < oscillators; ++i) {
        double *const four = mxGetPr(at_last) + 4 * i;
        four[0] = last[i].input;
        four[1] = last[i].kinetic;
        four[2] = last[i].strain;
        four[3] = last[i].dissipated;
    }
    out[2] = at_last;
    out[3] = greatest;
}
