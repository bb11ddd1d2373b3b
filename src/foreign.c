#include "rampwise/foreign.h"

#include <string.h>
#include "rampwise.h"

/* clang-format off */
#define CONSTANT(name) {#name, name}
/* clang-format on */

/* Names are arrays: no pointers that the loader would have to write. */
static const struct {
    char name[28];
    int value;
} constants[] = {
    CONSTANT(RAMPWISE_VERSION_MAJOR),
    CONSTANT(RAMPWISE_VERSION_MINOR),
    CONSTANT(RAMPWISE_VERSION_PATCH),
    CONSTANT(RAMPWISE_ARITHMETIC_EDITION),
    CONSTANT(RAMPWISE_OK),
    CONSTANT(RAMPWISE_ERROR_MISSING),
    CONSTANT(RAMPWISE_ERROR_INPUT),
    CONSTANT(RAMPWISE_ERROR_BETWEEN),
    CONSTANT(RAMPWISE_ERROR_IMPULSES),
    CONSTANT(RAMPWISE_ERROR_FRAME),
    CONSTANT(RAMPWISE_ERROR_NOT_MADE),
    CONSTANT(RAMPWISE_ERROR_DIFFERENT),
    CONSTANT(RAMPWISE_ERROR_NAME),
    CONSTANT(RAMPWISE_ERROR_MEMORY),
    CONSTANT(RAMPWISE_ERROR_COUNT),
    CONSTANT(RAMPWISE_ERROR_QUANTITY),
    CONSTANT(RAMPWISE_ERROR_INSTRUCTIONS),
    CONSTANT(RAMPWISE_ERROR_FLAGS),
    CONSTANT(RAMPWISE_ERROR_MASS),
    CONSTANT(RAMPWISE_ERROR_DAMPER),
    CONSTANT(RAMPWISE_ERROR_STIFFNESS),
    CONSTANT(RAMPWISE_ERROR_FREQUENCY),
    CONSTANT(RAMPWISE_ERROR_INTERVAL),
    CONSTANT(RAMPWISE_ERROR_STEP_LENGTH),
    CONSTANT(RAMPWISE_ERROR_COEFFICIENT),
    CONSTANT(RAMPWISE_ERROR_FRACTION),
    CONSTANT(RAMPWISE_ERROR_PERCENT),
    CONSTANT(RAMPWISE_ERROR_NO_REST),
    CONSTANT(RAMPWISE_ERROR_DEFECTIVE),
    CONSTANT(RAMPWISE_ERROR_WEIGHT),
    CONSTANT(RAMPWISE_ERROR_ROOTS),
    CONSTANT(RAMPWISE_ERROR_SAMPLE),
    CONSTANT(RAMPWISE_ERROR_STATE),
    CONSTANT(RAMPWISE_ERROR_TIME),
    CONSTANT(RAMPWISE_ERROR_GAP),
    CONSTANT(RAMPWISE_ERROR_DAMAGED),
    CONSTANT(RAMPWISE_ERROR_KIND),
    CONSTANT(RAMPWISE_ERROR_EDITION),
    CONSTANT(RAMPWISE_ERROR_OVERFLOW),
    CONSTANT(RAMPWISE_ERROR_FUSED),
    CONSTANT(RAMPWISE_ERROR_ARITHMETIC),
    CONSTANT(RAMPWISE_FORCE),
    CONSTANT(RAMPWISE_BASE_ACCELERATION),
    CONSTANT(RAMPWISE_BASE_VELOCITY),
    CONSTANT(RAMPWISE_BASE_DISPLACEMENT),
    CONSTANT(RAMPWISE_RAMP),
    CONSTANT(RAMPWISE_HOLD),
    CONSTANT(RAMPWISE_FASTEST),
    CONSTANT(RAMPWISE_BASELINE),
    CONSTANT(RAMPWISE_AVX2),
    CONSTANT(RAMPWISE_AVX512),
    CONSTANT(RAMPWISE_NEON),
    CONSTANT(RAMPWISE_DISPLACEMENT),
    CONSTANT(RAMPWISE_VELOCITY),
    CONSTANT(RAMPWISE_TOTAL_ACCELERATION),
    CONSTANT(RAMPWISE_AT_SAMPLES),
    CONSTANT(RAMPWISE_RESIDUAL),
    CONSTANT(RAMPWISE_MAXIMAX),
    CONSTANT(RAMPWISE_EVIDENCE),
    CONSTANT(RAMPWISE_ABRUPT_START),
    CONSTANT(RAMPWISE_ABRUPT_END),
    CONSTANT(RAMPWISE_ACCELERATION),
    CONSTANT(RAMPWISE_SPRING_FORCE),
    CONSTANT(RAMPWISE_DAMPER_FORCE),
    CONSTANT(RAMPWISE_LOAD),
    CONSTANT(RAMPWISE_WEIGHTED),
    CONSTANT(RAMPWISE_WATCH_LEVELS),
    CONSTANT(RAMPWISE_STARTED),
    CONSTANT(RAMPWISE_CLIPPED),
    CONSTANT(RAMPWISE_BRIDGED),
    CONSTANT(RAMPWISE_WAITING),
    CONSTANT(RAMPWISE_SINCE_START),
    CONSTANT(RAMPWISE_SINCE_RESET),
    CONSTANT(RAMPWISE_IN_WINDOW),
    CONSTANT(RAMPWISE_EVENT_LEVEL),
    CONSTANT(RAMPWISE_EVENT_RESET),
    CONSTANT(RAMPWISE_STREAM_OUTPUTS),
    CONSTANT(RAMPWISE_AT_REST),
    CONSTANT(RAMPWISE_SETTLED),
    CONSTANT(RAMPWISE_GAP_BRIDGE),
    CONSTANT(RAMPWISE_GAP_HOLD),
    CONSTANT(RAMPWISE_GAP_REFUSE),
    CONSTANT(RAMPWISE_GAP_RESTART),
    CONSTANT(RAMPWISE_RELATIVE),
    CONSTANT(RAMPWISE_ABSOLUTE),
};

static const struct {
    char name[28];
    size_t size;
} structs[] = {
    {"rampwise_system", sizeof(rampwise_system)},
    {"rampwise_coeffs", sizeof(rampwise_coeffs)},
    {"rampwise_state", sizeof(rampwise_state)},
    {"rampwise_history", sizeof(rampwise_history)},
    {"rampwise_bank_wanted", sizeof(rampwise_bank_wanted)},
    {"rampwise_coeffs_f32", sizeof(rampwise_coeffs_f32)},
    {"rampwise_state_f32", sizeof(rampwise_state_f32)},
    {"rampwise_history_f32", sizeof(rampwise_history_f32)},
    {"rampwise_bank_wanted_f32", sizeof(rampwise_bank_wanted_f32)},
    {"rampwise_modes_plan", sizeof(rampwise_modes_plan)},
    {"rampwise_roots", sizeof(rampwise_roots)},
    {"rampwise_instant", sizeof(rampwise_instant)},
    {"rampwise_peak", sizeof(rampwise_peak)},
    {"rampwise_evidence", sizeof(rampwise_evidence)},
    {"rampwise_output", sizeof(rampwise_output)},
    {"rampwise_response", sizeof(rampwise_response)},
    {"rampwise_event", sizeof(rampwise_event)},
    {"rampwise_level", sizeof(rampwise_level)},
    {"rampwise_level_report", sizeof(rampwise_level_report)},
    {"rampwise_watched", sizeof(rampwise_watched)},
    {"rampwise_watch_options", sizeof(rampwise_watch_options)},
    {"rampwise_watch", sizeof(rampwise_watch)},
    {"rampwise_interval", sizeof(rampwise_interval)},
    {"rampwise_stream_options", sizeof(rampwise_stream_options)},
    {"rampwise_stream_counts", sizeof(rampwise_stream_counts)},
    {"rampwise_stream", sizeof(rampwise_stream)},
    {"rampwise_instant_f32", sizeof(rampwise_instant_f32)},
    {"rampwise_peak_f32", sizeof(rampwise_peak_f32)},
    {"rampwise_watched_f32", sizeof(rampwise_watched_f32)},
    {"rampwise_watch_f32", sizeof(rampwise_watch_f32)},
    {"rampwise_interval_f32", sizeof(rampwise_interval_f32)},
    {"rampwise_stream_f32", sizeof(rampwise_stream_f32)},
    {"rampwise_energy", sizeof(rampwise_energy)},
    {"rampwise_meter", sizeof(rampwise_meter)},
};

int rampwise_constant(const char *name, int *value)
{
    if (name == NULL || value == NULL)
        return RAMPWISE_ERROR_MISSING;
    for (size_t i = 0; i < sizeof constants / sizeof *constants; ++i)
        if (strcmp(name, constants[i].name) == 0) {
            *value = constants[i].value;
            return RAMPWISE_OK;
        }
    return RAMPWISE_ERROR_NAME;
}

size_t rampwise_struct_size(const char *name)
{
    for (size_t i = 0; name != NULL && i < sizeof structs / sizeof *structs; ++i)
        if (strcmp(name, structs[i].name) == 0)
            return structs[i].size;
    return 0;
}
