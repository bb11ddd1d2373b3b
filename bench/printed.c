#include "printed.h"

#include <math.h>

#define REAL double
#define SET printed_double
#define MAKE printed_double_make
#define RUN printed_double_run
#define EXP exp
#define SIN sin
#define COS cos
#define SQRT sqrt
#include "printed_body.h"

#define REAL float
#define SET printed_single
#define MAKE printed_single_make
#define RUN printed_single_run
#define EXP expf
#define SIN sinf
#define COS cosf
#define SQRT sqrtf
#include "printed_body.h"
