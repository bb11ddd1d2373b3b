#include "gateway.h"

#include <math.h>

void refuse(const char *what)
{
    mexErrMsgIdAndTxt("rampwise:gateway", "__rampwise__: %s", what);
}

/* ---- what comes in ---- */

const mxArray *of_class(const mxArray *a, mxClassID class)
{
    if (mxGetClassID(a) != class || mxIsComplex(a) || mxIsSparse(a) || mxGetNumberOfDimensions(a) != 2)
        refuse(class == mxDOUBLE_CLASS ? "a number must be a real, full matrix of doubles"
                                       : "numbers must be a real, full matrix of their class");
    return a;
}

const mxArray *real_double(const mxArray *a)
{
    return of_class(a, mxDOUBLE_CLASS);
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

const double *of_size(const mxArray *a, size_t rows, size_t columns)
{
    if (mxGetM(real_double(a)) != rows || mxGetN(a) != columns)
        refuse("a matrix has the wrong size");
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

uint64_t sample_number(const mxArray *a)
{
    const double x = scalar(a);
    if (!(x >= 0 && x <= 9007199254740992.0) || x != floor(x))
        refuse("a number of samples is whole, and not negative");
    return (uint64_t)x;
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
mxArray *zeros(mxClassID class, size_t rows, size_t columns)
{
    return mxCreateNumericMatrix((mwSize)rows, (mwSize)columns, class, mxREAL);
}

mxArray *matrix(size_t rows, size_t columns)
{
    return zeros(mxDOUBLE_CLASS, rows, columns);
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

#define BODY "coefficients_body.h"
#include "both_precisions.h"

void want_histories(mxArray **out, const mxArray *wanted, int most, mxClassID class, size_t n, size_t columns)
{
    const double *const w = doubles(wanted, (size_t)most);
    for (int i = 0; i < most; ++i)
        if (w[i] != 0)
            out[2 + i] = zeros(class, n, columns);
}
