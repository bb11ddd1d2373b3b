/* Banks: many oscillators under one input. */
#include <math.h>
#include "gateway.h"

#define REAL double
#define CLASS mxDOUBLE_CLASS
#define WORD "bank"
#define PRECISION(name) name
#include "banks_body.h"
#undef REAL
#undef CLASS
#undef WORD
#undef PRECISION
#define REAL float
#define CLASS mxSINGLE_CLASS
#define WORD "bank of single precision"
#define PRECISION(name) name##_f32
#include "banks_body.h"
