/* Coefficients and columns of histories, included once a precision. */

PRECISION(rampwise_coeffs) * PRECISION(make_coefficients)(mxArray **out, const mxArray **in)
{
    const size_t n = count_systems(in[0]);
    const double *const given = mxGetPr(in[0]), dt = scalar(in[1]);
    const int input = integer(in[2]), between = integer(in[3]);
    PRECISION(rampwise_coeffs) *const c = mxCalloc(n + 1, sizeof *c);
    for (size_t i = 0; i < n; ++i) {
        const rampwise_system system = {given[3 * i], given[3 * i + 1], given[3 * i + 2]};
        const int status = PRECISION(rampwise_coeffs_make)(&c[i], &system, dt, input, between);
        if (status != RAMPWISE_OK) {
            answer(out, status, i + 1);
            return NULL;
        }
    }
    return c;
}

REAL *PRECISION(column)(const mxArray *a, size_t n, size_t j)
{
    return mxIsEmpty(a) ? NULL : (REAL *)mxGetData(a) + n * j;
}

PRECISION(rampwise_history) PRECISION(histories)(mxArray **out, size_t n, size_t j)
{
    return (PRECISION(rampwise_history)){PRECISION(column)(out[2], n, j), PRECISION(column)(out[3], n, j),
                                         PRECISION(column)(out[4], n, j), PRECISION(column)(out[5], n, j)};
}
