#include "gateway.h"

#include <math.h>

void refuse(const char *what)
{
    mexErrMsgIdAndTxt("rampwise:gateway", "__rampwise__: %s", what);
}

/* ---- what comes in ---- */

const mxArray *real_double(const mxArray *a)
{
    if (!mxIsDouble(a) || mxIsComplex(a) || mxIsSparse(a) || mxGetNumberOfDimensions(a) != 2)
        refuse("a number must be a real, full matrix of doubles");
    return a;
}

double scalar(const mxArray *a)
{
    if (mxGetNumberOfElements(real_double(a)) != 1)
        refuse("a scalar is needed");
    return mxGetPr(a)[0];
}

int integer(const mxArray *a)
{
    const double x = scalar(a);
    if (!(x >= -2147483647 && x <= 2147483647) || x != floor(x))
        refuse("an integer is needed");
    return (int)x;
}

const double *doubles(const mxArray *a, size_t count)
{
    if (mxGetNumberOfElements(real_double(a)) != count)
        refuse("a matrix has the wrong number of elements");
    return mxGetPr(a);
}

const char *text(const mxArray *a)
{
    if (!mxIsChar(a))
        refuse("a string is needed");
    char *const s = mxArrayToString(a);
    if (s == NULL)
        refuse("a string is needed");
    return s;
}

size_t whole_number(const mxArray *a)
{
    const int n = integer(a);
    if (n < 0)
        refuse("a number of things is negative");
    return (size_t)n;
}

size_t count_systems(const mxArray *a)
{
    if (mxGetM(real_double(a)) != 3)
        refuse("systems are columns of three");
    return mxGetN(a);
}

void *memory(size_t bytes, size_t alignment)
{
    if (bytes == 0 || bytes > SIZE_MAX - alignment)
        refuse("too many oscillators");
    const uintptr_t start = (uintptr_t)mxMalloc(bytes + alignment);
    return (void *)((start + alignment - 1) / alignment * alignment);
}

/* ---- what goes out ---- */

/* mwSize is signed here, unsigned there. */
mxArray *matrix(size_t rows, size_t columns)
{
    return mxCreateDoubleMatrix((mwSize)rows, (mwSize)columns, mxREAL);
}

mxArray *number(double x)
{
    return mxCreateDoubleScalar(x);
}

mxArray *empty(void)
{
    return matrix(0, 0);
}

int answer(mxArray **out, int status, size_t fault)
{
    out[0] = number(status);
    out[1] = number((double)fault);
    for (int i = 2; i < ANSWERS; ++i)
        out[i] = empty();
    return status;
}

/* ---- both ---- */

rampwise_coeffs *make_coefficients(mxArray **out, const mxArray **in)
{
    const size_t n = count_systems(in[0]);
    const double *const given = mxGetPr(in[0]), dt = scalar(in[1]);
    const int input = integer(in[2]), between = integer(in[3]);
    rampwise_coeffs *const c = mxCalloc(n + 1, sizeof *c);
    for (size_t i = 0; i < n; ++i) {
        const rampwise_system system = {given[3 * i], given[3 * i + 1], given[3 * i + 2]};
        const int status = rampwise_coeffs_make(&c[i], &system, dt, input, between);
        if (status != RAMPWISE_OK) {
            answer(out, status, i + 1);
            return NULL;
        }
    }
    return c;
}

void want_histories(mxArray **out, const mxArray *wanted, size_t n, size_t columns)
{
    const double *const w = doubles(wanted, 4);
    for (int i = 0; i < 4; ++i)
        if (w[i] != 0)
            out[2 + i] = matrix(n, columns);
}

static double *column(const mxArray *a, size_t n, size_t j)
{
    return mxIsEmpty(a) ? NULL : mxGetPr(a) + n * j;
}

rampwise_history histories(mxArray **out, size_t n, size_t j)
{
    return (rampwise_history){column(out[2], n, j), column(out[3], n, j), column(out[4], n, j),
                              column(out[5], n, j)};
}
