/* Banks: many oscillators under one input. */
#include <math.h>
#include "gateway.h"

static void release_bank(void *bank)
{
    rampwise_bank_free(bank);
}

static const object_kind banks = {"bank", release_bank};

/* systems, dt, input, between -> object */
void bank_make(mxArray **out, const mxArray **in)
{
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    rampwise_bank *bank;
    if (answer(out, rampwise_bank_create(count_systems(in[0]), c, RAMPWISE_FASTEST, &bank), 0) == RAMPWISE_OK)
        out[2] = object_keep(&banks, bank);
}

/* object, input before the next sample */
void bank_start(mxArray **out, const mxArray **in)
{
    rampwise_bank *const bank = object_find(in[0], &banks);
    answer(out, rampwise_bank_start(bank, scalar(in[1])), 1);
}

/* object, samples, numbers of the oscillators chosen (from 1), wanted histories
   -> u, v, u'', total (samples x chosen), largest |u| of all; an overflow is a status beside answers, NaN where
   there is none */
void bank_run(mxArray **out, const mxArray **in)
{
    rampwise_bank *const bank = object_find(in[0], &banks);
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const size_t chosen = mxGetNumberOfElements(real_double(in[2]));
    size_t *const which = mxMalloc((chosen + 1) * sizeof *which);
    for (size_t i = 0; i < chosen; ++i) {
        const double number = mxGetPr(in[2])[i];
        which[i] = number >= 1 && number <= 4e9 && number == floor(number) ? (size_t)number - 1 : SIZE_MAX;
    }
    answer(out, RAMPWISE_OK, 0);
    want_histories(out, in[3], HISTORIES, mxDOUBLE_CLASS, n, chosen);
    out[6] = matrix(rampwise_bank_count(bank), 1);
    for (int i = 2; i < 6; ++i)
        for (size_t j = 0; j < mxGetNumberOfElements(out[i]); ++j)
            mxGetPr(out[i])[j] = NAN;
    rampwise_bank_wanted wanted;
    rampwise_bank_wanted_init(&wanted);
    wanted.chosen_count = chosen;
    wanted.chosen = which;
    wanted.history = histories(out, 0, 0);
    wanted.largest = mxGetPr(out[6]);
    size_t bad = 0;
    const int status = rampwise_bank_run(bank, n, mxGetPr(in[1]), &wanted, &bad);
    mxGetPr(out[0])[0] = status;
    mxGetPr(out[1])[0] = status == RAMPWISE_OK ? 0 : (double)bad + 1;
}

/* object -> u, v, u'', total now (a column each), states (4 x N) */
void bank_read(mxArray **out, const mxArray **in)
{
    const rampwise_bank *const bank = object_find(in[0], &banks);
    const size_t n = rampwise_bank_count(bank);
    out[0] = matrix(n, 1);
    out[1] = matrix(n, 1);
    out[2] = matrix(n, 1);
    out[3] = matrix(n, 1);
    out[4] = matrix(4, n);
    const rampwise_history now = {mxGetPr(out[0]), mxGetPr(out[1]), mxGetPr(out[2]), mxGetPr(out[3])};
    if (rampwise_bank_read(bank, &now) != RAMPWISE_OK ||
        rampwise_bank_get(bank, (rampwise_state *)(void *)mxGetPr(out[4])) != RAMPWISE_OK)
        refuse("a bank cannot be read");
}

/* object, states (4 x N) */
void bank_set(mxArray **out, const mxArray **in)
{
    rampwise_bank *const bank = object_find(in[0], &banks);
    const double *const s = doubles(in[1], 4 * rampwise_bank_count(bank));
    answer(out, rampwise_bank_set(bank, (const rampwise_state *)(const void *)s), 0);
}

/* object, number (from 1), then as for coefficients: of one system, and the bank's dt, input and between */
void bank_retune(mxArray **out, const mxArray **in)
{
    rampwise_bank *const bank = object_find(in[0], &banks);
    const double number = scalar(in[1]);
    const rampwise_coeffs *const c = make_coefficients(out, in + 2);
    if (c == NULL)
        return;
    const int whole = number >= 1 && number <= 4e9 && number == floor(number);
    answer(out, whole ? rampwise_bank_retune(bank, (size_t)number - 1, c) : RAMPWISE_ERROR_COUNT, 1);
}

/* object -> how many, how many are stopped, the first of these (from 1, or 0) */
void bank_count(mxArray **out, const mxArray **in)
{
    const rampwise_bank *const bank = object_find(in[0], &banks);
    size_t first = 0;
    const size_t stopped = rampwise_bank_stopped(bank, &first);
    out[0] = number((double)rampwise_bank_count(bank));
    out[1] = number((double)stopped);
    out[2] = number(stopped > 0 ? (double)first + 1 : 0);
}
