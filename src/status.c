#include "rampwise/status.h"

const char *rampwise_status_text(int status)
{
    switch (status) {
    case RAMPWISE_OK:
        return "No error";
    case RAMPWISE_ERROR_MISSING:
        return "A pointer that is needed is NULL";
    case RAMPWISE_ERROR_INPUT:
        return "The kind of input is not force, base acceleration, base velocity or base "
               "displacement";
    case RAMPWISE_ERROR_BETWEEN:
        return "The input between samples is neither ramp nor hold";
    case RAMPWISE_ERROR_IMPULSES:
        return "Held base velocity, held base displacement with a damper, and the relative energies of a "
               "base displacement, would be trains of impulses";
    case RAMPWISE_ERROR_FRAME:
        return "The frame of the energies is neither relative nor absolute";
    case RAMPWISE_ERROR_NOT_MADE:
        return "The coefficients have not been made";
    case RAMPWISE_ERROR_DIFFERENT:
        return "Oscillators that must share a sample interval, a kind or an input do not";
    case RAMPWISE_ERROR_NAME:
        return "There is no constant of that name";
    case RAMPWISE_ERROR_MEMORY:
        return "The memory is too small, not aligned, or not to be had";
    case RAMPWISE_ERROR_COUNT:
        return "A number of things, or the number of one of them, is out of range";
    case RAMPWISE_ERROR_QUANTITY:
        return "The quantity is not displacement, velocity or total acceleration, or not one asked for "
               "before";
    case RAMPWISE_ERROR_FLAGS:
        return "The flags are unknown, or not for this call";
    case RAMPWISE_ERROR_INSTRUCTIONS:
        return "The set of instructions is unknown, was not built, or does not run on this "
               "processor";
    case RAMPWISE_ERROR_MASS:
        return "The mass is not a finite number above zero";
    case RAMPWISE_ERROR_DAMPER:
        return "The damper or damping ratio is not a finite number, or too large";
    case RAMPWISE_ERROR_STIFFNESS:
        return "The stiffness is not a finite number";
    case RAMPWISE_ERROR_FREQUENCY:
        return "The frequency is negative, the period is not above zero, or either is beyond range";
    case RAMPWISE_ERROR_INTERVAL:
        return "The sample interval is not a finite number above zero";
    case RAMPWISE_ERROR_STEP_LENGTH:
        return "The step is too long for an oscillator: no digits would be left, or there is no looking "
               "between its samples";
    case RAMPWISE_ERROR_COEFFICIENT:
        return "A coefficient of the step overflows";
    case RAMPWISE_ERROR_FRACTION:
        return "The fraction of a step is not from zero to one";
    case RAMPWISE_ERROR_PERCENT:
        return "A percentile is not from 0 to 100";
    case RAMPWISE_ERROR_NO_REST:
        return "A load on a mass without a spring has no position of rest";
    case RAMPWISE_ERROR_DEFECTIVE:
        return "The spectrum is defective: roots coincide, or nearly, without a mode of their own each";
    case RAMPWISE_ERROR_WEIGHT:
        return "A load factor or weight is not finite";
    case RAMPWISE_ERROR_ROOTS:
        return "Complex roots do not come in conjugate pairs, or a root is not finite";
    case RAMPWISE_ERROR_SAMPLE:
        return "A sample is not a finite number";
    case RAMPWISE_ERROR_STATE:
        return "A state is not finite";
    case RAMPWISE_ERROR_TIME:
        return "A time is not finite, or not later than the one before";
    case RAMPWISE_ERROR_GAP:
        return "More samples in a row are missing than allowed";
    case RAMPWISE_ERROR_DAMAGED:
        return "The bytes are no saved object, not a whole one, or damaged";
    case RAMPWISE_ERROR_KIND:
        return "The bytes are a saved object of another kind";
    case RAMPWISE_ERROR_EDITION:
        return "The bytes were saved by a version of the library that gives other bits";
    case RAMPWISE_ERROR_OVERFLOW:
        return "The response is too large for its precision";
    case RAMPWISE_ERROR_FUSED:
        return "The fused multiply-add of this platform is not correctly rounded";
    case RAMPWISE_ERROR_ARITHMETIC:
        return "Known answers do not come out: a compiler option or rounding mode changes "
               "arithmetic";
    default:
        return "No status of this library";
    }
}
