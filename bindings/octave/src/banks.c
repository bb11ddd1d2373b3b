/* Banks: many oscillators under one input. */
#include <math.h>
#include "gateway.h"

#define BODY "banks_body.h"
#include "both_precisions.h"
