#include "rampwise/instructions.h"

#include "kernels/kernels.h"
#include "rampwise/status.h"

int rampwise_instructions(int instructions)
{
    const kernels *const chosen = rampwise_kernels_(instructions);
    return chosen != NULL ? chosen->name : RAMPWISE_ERROR_INSTRUCTIONS;
}
