/* The file BODY in double, then in single precision. No guard: each body comes through here. */
#define REAL double
#define CLASS mxDOUBLE_CLASS
#define IN_WORDS ""
#define PRECISION(name) name
#include BODY
#undef REAL
#undef CLASS
#undef IN_WORDS
#undef PRECISION
#define REAL float
#define CLASS mxSINGLE_CLASS
#define IN_WORDS " of single precision"
#define PRECISION(name) name##_f32
#include BODY
#undef REAL
#undef CLASS
#undef IN_WORDS
#undef PRECISION
#undef BODY
