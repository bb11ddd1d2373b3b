#include "rampwise/version.h"

#define TEXT_OF(x) #x
#define TEXT(x) TEXT_OF(x)

const char *rampwise_version(void)
{
    return TEXT(RAMPWISE_VERSION_MAJOR) "." TEXT(RAMPWISE_VERSION_MINOR) "." TEXT(RAMPWISE_VERSION_PATCH);
}

int rampwise_arithmetic_edition(void)
{
    return RAMPWISE_ARITHMETIC_EDITION;
}
