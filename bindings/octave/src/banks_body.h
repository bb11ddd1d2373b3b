/* Commands of banks, included once a precision. */

static void PRECISION(release_bank)(void *bank)
{
    PRECISION(rampwise_bank_free)(bank);
}

static const object_kind PRECISION(banks) = {"bank" IN_WORDS, PRECISION(release_bank)};

/* systems, dt, input, between -> object */
void PRECISION(bank_make)(mxArray **out, const mxArray **in)
{
    const PRECISION(rampwise_coeffs) *const c = PRECISION(make_coefficients)(out, in);
    if (c == NULL)
        return;
    PRECISION(rampwise_bank) * bank;
    if (answer(out, PRECISION(rampwise_bank_create)(count_systems(in[0]), c, RAMPWISE_FASTEST, &bank), 0) ==
        RAMPWISE_OK)
        out[2] = object_keep(&PRECISION(banks), bank);
}

/* object, input before the next sample */
void PRECISION(bank_start)(mxArray **out, const mxArray **in)
{
    PRECISION(rampwise_bank) *const bank = object_find(in[0], &PRECISION(banks));
    answer(out, PRECISION(rampwise_bank_start)(bank, (REAL)scalar(in[1])), 1);
}

/* object, samples, numbers of the oscillators chosen (from 1), wanted histories
   -> u, v, u'', total (samples x chosen), largest |u| of all; an overflow is a status beside answers, NaN where
   there is none */
void PRECISION(bank_run)(mxArray **out, const mxArray **in)
{
    PRECISION(rampwise_bank) *const bank = object_find(in[0], &PRECISION(banks));
    const size_t n = mxGetNumberOfElements(of_class(in[1], CLASS));
    const size_t chosen = mxGetNumberOfElements(real_double(in[2]));
    size_t *const which = mxMalloc((chosen + 1) * sizeof *which);
    for (size_t i = 0; i < chosen; ++i) {
        const double number = mxGetPr(in[2])[i];
        which[i] = number >= 1 && number <= 4e9 && number == floor(number) ? (size_t)number - 1 : SIZE_MAX;
    }
    answer(out, RAMPWISE_OK, 0);
    want_histories(out, in[3], HISTORIES, CLASS, n, chosen);
    out[6] = zeros(CLASS, PRECISION(rampwise_bank_count)(bank), 1);
    for (int i = 2; i < 6; ++i)
        for (size_t j = 0; j < mxGetNumberOfElements(out[i]); ++j)
            ((REAL *)mxGetData(out[i]))[j] = (REAL)NAN;
    PRECISION(rampwise_bank_wanted) wanted;
    PRECISION(rampwise_bank_wanted_init)(&wanted);
    wanted.chosen_count = chosen;
    wanted.chosen = which;
    wanted.history = PRECISION(histories)(out, 0, 0);
    wanted.largest = mxGetData(out[6]);
    size_t bad = 0;
    const int status = PRECISION(rampwise_bank_run)(bank, n, mxGetData(in[1]), &wanted, &bad);
    mxGetPr(out[0])[0] = status;
    mxGetPr(out[1])[0] = status == RAMPWISE_OK ? 0 : (double)bad + 1;
}

/* object -> u, v, u'', total now (a column each), states (a column each) */
void PRECISION(bank_read)(mxArray **out, const mxArray **in)
{
    const PRECISION(rampwise_bank) *const bank = object_find(in[0], &PRECISION(banks));
    const size_t n = PRECISION(rampwise_bank_count)(bank);
    for (int i = 0; i < 4; ++i)
        out[i] = zeros(CLASS, n, 1);
    out[4] = zeros(CLASS, sizeof(PRECISION(rampwise_state)) / sizeof(REAL), n);
    const PRECISION(rampwise_history)
        now = {mxGetData(out[0]), mxGetData(out[1]), mxGetData(out[2]), mxGetData(out[3])};
    if (PRECISION(rampwise_bank_read)(bank, &now) != RAMPWISE_OK ||
        PRECISION(rampwise_bank_get)(bank, mxGetData(out[4])) != RAMPWISE_OK)
        refuse("a bank cannot be read");
}

/* object, states */
void PRECISION(bank_set)(mxArray **out, const mxArray **in)
{
    PRECISION(rampwise_bank) *const bank = object_find(in[0], &PRECISION(banks));
    const size_t rows = sizeof(PRECISION(rampwise_state)) / sizeof(REAL);
    if (mxGetNumberOfElements(of_class(in[1], CLASS)) != rows * PRECISION(rampwise_bank_count)(bank))
        refuse("a matrix has the wrong number of elements");
    answer(out, PRECISION(rampwise_bank_set)(bank, mxGetData(in[1])), 0);
}

/* object, number (from 1), then as for coefficients: of one system, and the bank's dt, input and between */
void PRECISION(bank_retune)(mxArray **out, const mxArray **in)
{
    PRECISION(rampwise_bank) *const bank = object_find(in[0], &PRECISION(banks));
    const double number = scalar(in[1]);
    const PRECISION(rampwise_coeffs) *const c = PRECISION(make_coefficients)(out, in + 2);
    if (c == NULL)
        return;
    const int whole = number >= 1 && number <= 4e9 && number == floor(number);
    answer(out, whole ? PRECISION(rampwise_bank_retune)(bank, (size_t)number - 1, c) : RAMPWISE_ERROR_COUNT,
           1);
}

/* object -> how many, how many are stopped, the first of these (from 1, or 0) */
void PRECISION(bank_count)(mxArray **out, const mxArray **in)
{
    const PRECISION(rampwise_bank) *const bank = object_find(in[0], &PRECISION(banks));
    size_t first = 0;
    const size_t stopped = PRECISION(rampwise_bank_stopped)(bank, &first);
    out[0] = number((double)PRECISION(rampwise_bank_count)(bank));
    out[1] = number((double)stopped);
    out[2] = number(stopped > 0 ? (double)first + 1 : 0);
}
