/* __rampwise__ (COMMAND, ...): the one door from Octave into the library. The commands' arguments and answers stand
   over their functions, users' explanations in inst. */
#include <string.h>
#include "gateway.h"

static void version(mxArray **out, const mxArray **in)
{
    (void)in;
    out[0] = mxCreateString(rampwise_version());
    out[1] = number(rampwise_arithmetic_edition());
    out[2] = number(rampwise_instructions(RAMPWISE_FASTEST));
    out[3] = number(rampwise_self_test());
}

/* full name -> value, or empty where there is none */
static void constant(mxArray **out, const mxArray **in)
{
    int value;
    out[0] = rampwise_constant(text(in[0]), &value) == RAMPWISE_OK ? number(value) : empty();
}

static void status_text(mxArray **out, const mxArray **in)
{
    out[0] = mxCreateString(rampwise_status_text(integer(in[0])));
}

static const struct command {
    char name[24];
    int takes, answers;
    command_call *call;
} commands[] = {
    /* clang-format off */
    {"bank_count", 1, 3, bank_count},
    {"bank_count_f32", 1, 3, bank_count_f32},
    {"bank_make", 4, 3, bank_make},
    {"bank_make_f32", 4, 3, bank_make_f32},
    {"bank_read", 1, 5, bank_read},
    {"bank_read_f32", 1, 5, bank_read_f32},
    {"bank_retune", 6, 2, bank_retune},
    {"bank_retune_f32", 6, 2, bank_retune_f32},
    {"bank_run", 4, 7, bank_run},
    {"bank_run_f32", 4, 7, bank_run_f32},
    {"bank_set", 2, 2, bank_set},
    {"bank_set_f32", 2, 2, bank_set_f32},
    {"bank_start", 2, 2, bank_start},
    {"bank_start_f32", 2, 2, bank_start_f32},
    {"coefficients", 4, 3, coefficients},
    {"combine", 5, 1, combine},
    {"constant", 1, 1, constant},
    {"directions", 9, 3, directions},
    {"energies", 8, 6, energies},
    {"energy_spectrum", 6, 4, energy_spectrum},
    {"list_log", 3, 3, list_log},
    {"list_octaves", 3, 3, list_octaves},
    {"mass_share", 6, 3, mass_share},
    {"object_free", 1, 1, object_free},
    {"objects", 0, 1, objects},
    {"peaks", 7, 4, peaks},
    {"percentiles_over_angle", 3, 3, percentiles_over_angle},
    {"response", 10, 10, response},
    {"response_f32", 10, 10, response_f32},
    {"rigid_peaks", 5, 4, rigid_peaks},
    {"roots_to_modes", 7, 6, roots_to_modes},
    {"static_correction", 7, 3, static_correction},
    {"status_text", 1, 1, status_text},
    {"stream_make", 12, 3, stream_make},
    {"stream_make_f32", 12, 3, stream_make_f32},
    {"stream_put", 3, 4, stream_put},
    {"stream_put_f32", 3, 4, stream_put_f32},
    {"stream_read", 1, 4, stream_read},
    {"stream_read_f32", 1, 4, stream_read_f32},
    {"stream_resume", 2, 2, stream_resume},
    {"stream_resume_f32", 2, 2, stream_resume_f32},
    {"stream_retune", 5, 2, stream_retune},
    {"stream_retune_f32", 5, 2, stream_retune_f32},
    {"stream_save", 1, 3, stream_save},
    {"stream_save_f32", 1, 3, stream_save_f32},
    {"stream_skip", 2, 2, stream_skip},
    {"stream_skip_f32", 2, 2, stream_skip_f32},
    {"stream_start", 3, 2, stream_start},
    {"stream_start_f32", 3, 2, stream_start_f32},
    {"stream_watch", 5, 3, stream_watch},
    {"stream_watch_f32", 5, 3, stream_watch_f32},
    {"structure_make", 14, 3, structure_make},
    {"structure_read", 3, 8, structure_read},
    {"structure_resume", 2, 2, structure_resume},
    {"structure_run", 3, 7, structure_run},
    {"structure_save", 1, 3, structure_save},
    {"structure_start", 1, 2, structure_start},
    {"system", 3, 3, system_from},
    {"version", 0, 4, version},
    {"watch_events", 2, 1, watch_events},
    {"watch_events_f32", 2, 1, watch_events_f32},
    {"watch_read", 2, 4, watch_read},
    {"watch_read_f32", 2, 4, watch_read_f32},
    {"watch_release", 3, 2, watch_release},
    {"watch_release_f32", 3, 2, watch_release_f32},
    {"watch_reset", 2, 2, watch_reset},
    {"watch_reset_f32", 2, 2, watch_reset_f32},
    /* clang-format on */
};

void mexFunction(int nlhs, mxArray *plhs[], int nrhs, const mxArray *prhs[])
{
    if (!mexIsLocked()) {
        mexLock();
        mexAtExit(objects_clear);
    }
    if (nrhs < 1)
        refuse("a command is needed");
    const char *const name = text(prhs[0]);
    for (size_t i = 0; i < sizeof commands / sizeof *commands; ++i)
        if (strcmp(name, commands[i].name) == 0) {
            if (nrhs - 1 != commands[i].takes || nlhs > commands[i].answers)
                refuse("the wrong number of arguments");
            mxArray *out[ANSWERS] = {NULL};
            commands[i].call(out, prhs + 1);
            for (int j = 0; j < (nlhs > 0 ? nlhs : 1); ++j)
                plhs[j] = out[j];
            return;
        }
    refuse("no such command");
}
