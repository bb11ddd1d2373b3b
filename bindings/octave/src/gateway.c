/* __rampwise__ (COMMAND, ...): the one door from Octave into the library.

   Thin: a command is one call of the library, or one for each column, between checked arrays. What users see is in
   inst/. Commands that can fail answer the library's status first and then the index of what was at fault,
   from 1, or 0; the other answers are empty then. Wrong arguments of the gateway itself are errors
   "rampwise:gateway".

   Systems are a matrix of a column {mass; damper; stiffness} each. Samples are columns. Coefficients travel with
   dt, input and between, and are made where they are used.

   Errors leave by a jump. So memory is mxMalloc's, which Octave frees then, or belongs to the table of objects. */
#include <math.h>
#include <stdlib.h>
#include <string.h>
#include <mex.h>
#include <rampwise.h>

enum { ANSWERS = 7 };

static void refuse(const char *what)
{
    mexErrMsgIdAndTxt("rampwise:gateway", "__rampwise__: %s", what);
}

/* ---- what comes in ---- */

static const mxArray *real_double(const mxArray *a)
{
    if (!mxIsDouble(a) || mxIsComplex(a) || mxIsSparse(a) || mxGetNumberOfDimensions(a) != 2)
        refuse("a number must be a real, full matrix of doubles");
    return a;
}

static double scalar(const mxArray *a)
{
    if (mxGetNumberOfElements(real_double(a)) != 1)
        refuse("a scalar is needed");
    return mxGetPr(a)[0];
}

static int integer(const mxArray *a)
{
    const double x = scalar(a);
    if (!(x >= -2147483647 && x <= 2147483647) || x != floor(x))
        refuse("an integer is needed");
    return (int)x;
}

/* A vector or matrix of so many elements. */
static const double *doubles(const mxArray *a, size_t count)
{
    if (mxGetNumberOfElements(real_double(a)) != count)
        refuse("a matrix has the wrong number of elements");
    return mxGetPr(a);
}

/* Valid until the call ends. */
static const char *text(const mxArray *a)
{
    if (!mxIsChar(a))
        refuse("a string is needed");
    char *const s = mxArrayToString(a);
    if (s == NULL)
        refuse("a string is needed");
    return s;
}

static size_t count_systems(const mxArray *a)
{
    if (mxGetM(real_double(a)) != 3)
        refuse("systems are columns of three");
    return mxGetN(a);
}

/* Aligned, and freed when the call ends. */
static void *memory(size_t bytes, size_t alignment)
{
    if (bytes == 0 || bytes > SIZE_MAX - alignment)
        refuse("too many oscillators");
    const uintptr_t start = (uintptr_t)mxMalloc(bytes + alignment);
    return (void *)((start + alignment - 1) / alignment * alignment);
}

/* ---- what goes out ---- */

/* Of zeros. mwSize is signed here, unsigned there. */
static mxArray *matrix(size_t rows, size_t columns)
{
    return mxCreateDoubleMatrix((mwSize)rows, (mwSize)columns, mxREAL);
}

static mxArray *number(double x)
{
    return mxCreateDoubleScalar(x);
}

static mxArray *empty(void)
{
    return matrix(0, 0);
}

/* The status, and where; all other answers empty. Returns the status. */
static int answer(mxArray **out, int status, size_t fault)
{
    out[0] = number(status);
    out[1] = number((double)fault);
    for (int i = 2; i < ANSWERS; ++i)
        out[i] = empty();
    return status;
}

/* ---- coefficients ---- */

/* One set a system, from in[0..3]: systems, dt, input, between. NULL, with the answer given, where it fails. */
static rampwise_coeffs *make_coefficients(mxArray **out, const mxArray **in)
{
    const size_t n = count_systems(in[0]);
    const double *const given = mxGetPr(in[0]), dt = scalar(in[1]);
    const int input = integer(in[2]), between = integer(in[3]);
    rampwise_coeffs *const c = mxCalloc(n + 1, sizeof *c);
    for (size_t i = 0; i < n; ++i) {
        const rampwise_system system = {given[3 * i], given[3 * i + 1], given[3 * i + 2]};
        const int status = rampwise_coeffs_make(&c[i], &system, dt, input, between);
        if (status != RAMPWISE_OK) {
            answer(out, status, i + 1);
            return NULL;
        }
    }
    return c;
}

/* systems, dt, input, between -> A B C D A' B' C' D' A-1 B'-1, row of u'', row of total: columns of 18 */
static void coefficients(mxArray **out, const mxArray **in)
{
    const size_t n = count_systems(in[0]);
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    answer(out, RAMPWISE_OK, 0);
    out[2] = matrix(18, n);
    for (size_t i = 0; i < n; ++i)
        memcpy(mxGetPr(out[2]) + 18 * i, &c[i], 18 * sizeof(double));
}

/* way, values, damping ratios of the same number -> systems */
static void system_from(mxArray **out, const mxArray **in)
{
    const char *const way = text(in[0]);
    int (*const make)(rampwise_system *, double, double) =
        strcmp(way, "period") == 0      ? rampwise_system_period
        : strcmp(way, "frequency") == 0 ? rampwise_system_hertz
        : strcmp(way, "omega") == 0     ? rampwise_system_natural
                                        : NULL;
    if (make == NULL)
        refuse("the way is period, frequency or omega");
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const double *const value = mxGetPr(in[1]), *const zeta = doubles(in[2], n);
    mxArray *const made = matrix(3, n);
    for (size_t i = 0; i < n; ++i) {
        rampwise_system s;
        const int status = make(&s, value[i], zeta[i]);
        if (status != RAMPWISE_OK) {
            answer(out, status, i + 1);
            return;
        }
        memcpy(mxGetPr(made) + 3 * i, (double[3]){s.mass, s.damper, s.stiffness}, 3 * sizeof(double));
    }
    answer(out, RAMPWISE_OK, 0);
    out[2] = made;
}

/* ---- whole records ---- */

enum { AT_ONCE, BY_A_RAMP, SETTLED }; /* the starts of step.h */

typedef struct whole {
    size_t n, columns, systems;
    const double *p, *t; /* t is NULL for regular samples */
    const double *u0, *v0;
    int start;
    rampwise_coeffs *c;
} whole;

/* The answers begin where histories are wanted; the others stay empty. */
static void want_histories(mxArray **out, const mxArray *wanted, size_t n, size_t columns)
{
    const double *const w = doubles(wanted, 4);
    for (int i = 0; i < 4; ++i)
        if (w[i] != 0)
            out[2 + i] = matrix(n, columns);
}

static double *column(const mxArray *a, size_t n, size_t j)
{
    return mxIsEmpty(a) ? NULL : mxGetPr(a) + n * j;
}

static rampwise_history histories(mxArray **out, size_t n, size_t j)
{
    return (rampwise_history){column(out[2], n, j), column(out[3], n, j), column(out[4], n, j),
                              column(out[5], n, j)};
}

/* The first sample of a column, and the state there. */
static int begin(const whole *w, size_t j, rampwise_state *s)
{
    const rampwise_coeffs *const c = &w->c[w->systems > 1 ? j : 0];
    const double p0 = w->p[w->columns > 1 ? j * w->n : 0];
    if (w->start == SETTLED)
        return rampwise_start_settled(c, s, p0);
    rampwise_start(s, w->u0[j], w->v0[j], w->start == AT_ONCE ? p0 : 0);
    return RAMPWISE_OK;
}

static int respond(const whole *w, size_t j, const rampwise_history *h, size_t *bad)
{
    const rampwise_coeffs *const c = &w->c[w->systems > 1 ? j : 0];
    const double *const p = w->p + (w->columns > 1 ? j * w->n : 0);
    rampwise_state s;
    *bad = 0;
    int status = begin(w, j, &s);
    if (status != RAMPWISE_OK)
        return status;
    if (w->start == BY_A_RAMP)
        return rampwise_run(c, &s, w->n, p, h, bad);
    if (w->t == NULL)
        return rampwise_solve(c, s.u, s.v, w->n, p, h, bad);
    /* Entry 0 is the initial state; its own call refuses a sample that is not finite. */
    status = rampwise_solve(c, s.u, s.v, 1, p, h, bad);
    if (status != RAMPWISE_OK || w->n < 2)
        return status;
    double last = w->t[0];
    const rampwise_history rest = {h->u ? h->u + 1 : NULL, h->v ? h->v + 1 : NULL, h->a ? h->a + 1 : NULL,
                                   h->total ? h->total + 1 : NULL};
    status = rampwise_run_at(c, &s, &last, w->n - 1, w->t + 1, p + 1, &rest, bad);
    *bad += status != RAMPWISE_OK;
    return status;
}

/* From in: systems, dt, input, between, start, u0, v0, samples, wanted, times (empty where regular).
   One column of answers for each system or column of samples; where both are many they go in pairs. */
static void response(mxArray **out, const mxArray **in)
{
    whole w = {.n = mxGetM(real_double(in[7])), .columns = mxGetN(in[7]), .systems = count_systems(in[0])};
    const size_t wide = w.systems > 1 ? w.systems : w.columns;
    if (w.n == 0 || w.systems == 0 || (w.columns > 1 ? w.columns : wide) != wide || w.columns == 0)
        refuse("systems and columns of samples must be as many, or one");
    w.start = integer(in[4]);
    w.u0 = doubles(in[5], wide);
    w.v0 = doubles(in[6], wide);
    w.p = mxGetPr(in[7]);
    w.t = mxIsEmpty(in[9]) ? NULL : doubles(in[9], w.n);
    if (w.start < AT_ONCE || w.start > SETTLED || (w.t != NULL && w.start == BY_A_RAMP))
        refuse("no such start");
    w.c = make_coefficients(out, in);
    if (w.c == NULL)
        return;
    answer(out, RAMPWISE_OK, 0);
    want_histories(out, in[8], w.n, wide);
    for (size_t j = 0; j < wide; ++j) {
        const rampwise_history h = histories(out, w.n, j);
        size_t bad;
        const int status = respond(&w, j, &h, &bad);
        if (status != RAMPWISE_OK) {
            answer(out, status, bad + 1 + (w.columns > 1 ? j * w.n : 0));
            return;
        }
    }
}

/* ---- peaks ---- */

static const int quantities[3] = {RAMPWISE_DISPLACEMENT, RAMPWISE_VELOCITY, RAMPWISE_TOTAL_ACCELERATION};

static double seconds(const rampwise_instant *at, double dt)
{
    return at->sample == UINT64_MAX ? INFINITY : ((double)at->sample + at->fraction) * dt;
}

/* larger in size, its time, high, its time, low, its time */
static void put_peak(double *six, const rampwise_peak *peak, double dt)
{
    const rampwise_instant *const larger = rampwise_peak_larger(peak);
    six[0] = larger->value;
    six[1] = seconds(larger, dt);
    six[2] = peak->high.value;
    six[3] = seconds(&peak->high, dt);
    six[4] = peak->low.value;
    six[5] = seconds(&peak->low, dt);
}

/* From in: systems, dt, input, between, samples, flags of the run, flags of the question
   -> 6 x (systems x quantities x columns of samples) */
static void peaks(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetM(real_double(in[4])), columns = mxGetN(in[4]), systems = count_systems(in[0]);
    const unsigned run = (unsigned)integer(in[5]), question = (unsigned)integer(in[6]);
    const double dt = scalar(in[1]);
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    rampwise_peaks *object;
    const size_t bytes = rampwise_peaks_size(systems);
    int status = rampwise_peaks_init(memory(bytes, rampwise_peaks_alignment()), bytes, systems, c, 3,
                                     quantities, run, RAMPWISE_FASTEST, &object);
    rampwise_peak *const found = mxCalloc(systems, sizeof *found);
    mxArray *const made = matrix(6, systems * 3 * columns);
    double *six = mxGetPr(made);
    size_t bad = 0;
    for (size_t j = 0; status == RAMPWISE_OK && j < columns; ++j) {
        bad = j * n;
        size_t at = 0;
        status = rampwise_peaks_start(object, NULL);
        if (status == RAMPWISE_OK)
            status = rampwise_peaks_run(object, n, mxGetPr(in[4]) + j * n, &at);
        bad += at;
        for (int q = 0; status == RAMPWISE_OK && q < 3; ++q) {
            status = rampwise_peaks_get(object, quantities[q], question, found);
            for (size_t i = 0; status == RAMPWISE_OK && i < systems; ++i, six += 6)
                put_peak(six, &found[i], dt);
        }
    }
    answer(out, status, status == RAMPWISE_OK ? 0 : bad + 1);
    if (status == RAMPWISE_OK)
        out[2] = made;
}

/* The limit of stiff oscillators. From in: dt, input, samples, flags -> 6 x (quantities x columns of samples) */
static void rigid_peaks(mxArray **out, const mxArray **in)
{
    const size_t n = mxGetM(real_double(in[2])), columns = mxGetN(in[2]);
    const double dt = scalar(in[0]), omega = INFINITY, zeta = 0;
    const int input = integer(in[1]), flags = integer(in[3]);
    mxArray *const made = matrix(6, 3 * columns);
    for (size_t j = 0; j < columns; ++j)
        for (size_t q = 0; q < 3; ++q) {
            rampwise_peak peak;
            size_t bad = 0;
            const int status = rampwise_spectrum(n, dt, mxGetPr(in[2]) + j * n, input, 1, &omega, &zeta,
                                                 quantities[q], (unsigned)flags, &peak, &bad);
            if (status != RAMPWISE_OK) {
                answer(out, status, bad + 1 + j * n);
                return;
            }
            put_peak(mxGetPr(made) + 6 * (3 * j + q), &peak, dt);
        }
    answer(out, RAMPWISE_OK, 0);
    out[2] = made;
}

enum { LONGEST_LIST = 100000000 };

/* A refusal, or the list. */
static void put_list(mxArray **out, int status, mxArray *list)
{
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = list;
}

static mxArray *list_of(size_t n)
{
    if (n > LONGEST_LIST)
        refuse("a list is too long");
    return matrix(n, 1);
}

static size_t whole_number(const mxArray *a)
{
    const int n = integer(a);
    if (n < 0)
        refuse("a number of things is negative");
    return (size_t)n;
}

/* first, last, how many -> a column */
static void list_log(mxArray **out, const mxArray **in)
{
    const size_t n = whole_number(in[2]);
    mxArray *const list = list_of(n);
    put_list(out, rampwise_list_log(n, scalar(in[0]), scalar(in[1]), mxGetPr(list)), list);
}

/* first, last, how many an octave -> a column */
static void list_octaves(mxArray **out, const mxArray **in)
{
    const double first = scalar(in[0]), last = scalar(in[1]);
    const size_t per_octave = whole_number(in[2]);
    size_t n = 0;
    int status = rampwise_list_octaves(first, last, per_octave, 0, NULL, &n);
    mxArray *const list = list_of(n);
    if (status == RAMPWISE_OK)
        status = rampwise_list_octaves(first, last, per_octave, n, mxGetPr(list), &n);
    put_list(out, status, list);
}

/* ---- objects that stay ---- */

typedef enum kind { NOTHING, BANK } kind;

/* An object's number is its place in the table, and above that how often the place was given away: numbers never
   come again. The gateway stays loaded while Octave runs; what is left over is freed when it ends. */
typedef struct place {
    kind kind;
    uint32_t times;
    void *object;
    double dt;
    int input, between;
} place;

static place *table;
static size_t places;

static void clear_place(place *at)
{
    if (at->kind == BANK)
        rampwise_bank_free(at->object);
    at->kind = NOTHING;
    at->object = NULL;
}

static void clear_table(void)
{
    for (size_t i = 0; i < places; ++i)
        clear_place(&table[i]);
    free(table);
    table = NULL;
    places = 0;
}

/* A free place; the table is whole whatever happens next. */
static place *free_place(void)
{
    for (size_t i = 0; i < places; ++i)
        if (table[i].kind == NOTHING)
            return &table[i];
    const size_t more = places > 0 ? 2 * places : 16;
    place *const grown = more <= UINT32_MAX ? realloc(table, more * sizeof *table) : NULL;
    if (grown == NULL)
        refuse("no memory for one more object");
    place *const first = grown + places;
    memset(first, 0, (more - places) * sizeof *grown);
    table = grown;
    places = more;
    return first;
}

static mxArray *object_number(place *at)
{
    mxArray *const a = mxCreateNumericMatrix(1, 1, mxUINT64_CLASS, mxREAL);
    *(uint64_t *)mxGetData(a) = (uint64_t)++at->times << 32 | (uint64_t)(at - table);
    return a;
}

/* NULL where there is no such object any more. */
static place *find(const mxArray *a, kind wanted)
{
    if (!mxIsUint64(a) || mxIsComplex(a) || mxGetNumberOfElements(a) != 1)
        refuse("an object is a scalar of class uint64");
    const uint64_t number = *(const uint64_t *)mxGetData(a);
    const size_t i = number & UINT32_MAX;
    return i < places && table[i].kind == wanted && table[i].times == number >> 32 ? &table[i] : NULL;
}

static place *find_bank(const mxArray *a)
{
    place *const at = find(a, BANK);
    if (at == NULL)
        mexErrMsgIdAndTxt("rampwise:freed",
                          "rampwise: this bank has been freed, or belongs to an earlier run of Octave");
    return at;
}

/* object: gone, if it is still there */
static void object_free(mxArray **out, const mxArray **in)
{
    place *const at = find(in[0], BANK);
    out[0] = number(at != NULL);
    if (at != NULL)
        clear_place(at);
}

/* -> how many there are */
static void objects(mxArray **out, const mxArray **in)
{
    (void)in;
    size_t count = 0;
    for (size_t i = 0; i < places; ++i)
        count += table[i].kind != NOTHING;
    out[0] = number((double)count);
}

/* systems, dt, input, between -> object */
static void bank_make(mxArray **out, const mxArray **in)
{
    const rampwise_coeffs *const c = make_coefficients(out, in);
    if (c == NULL)
        return;
    place *const at = free_place();
    rampwise_bank *bank = NULL;
    const int status = rampwise_bank_create(count_systems(in[0]), c, RAMPWISE_FASTEST, &bank);
    if (status == RAMPWISE_OK)
        *at = (place){BANK, at->times, bank, scalar(in[1]), integer(in[2]), integer(in[3])};
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = object_number(at);
}

/* object, input before the next sample */
static void bank_start(mxArray **out, const mxArray **in)
{
    const place *const at = find_bank(in[0]);
    answer(out, rampwise_bank_start(at->object, scalar(in[1])), 1);
}

/* object, samples, numbers of the oscillators chosen (from 1), wanted histories
   -> u, v, u'', total (samples x chosen), largest |u| of all; an overflow is a status beside answers, NaN where
   there is none */
static void bank_run(mxArray **out, const mxArray **in)
{
    rampwise_bank *const bank = find_bank(in[0])->object;
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const size_t chosen = mxGetNumberOfElements(real_double(in[2]));
    size_t *const which = mxMalloc((chosen + 1) * sizeof *which);
    for (size_t i = 0; i < chosen; ++i) {
        const double number = mxGetPr(in[2])[i];
        which[i] = number >= 1 && number <= 4e9 && number == floor(number) ? (size_t)number - 1 : SIZE_MAX;
    }
    answer(out, RAMPWISE_OK, 0);
    want_histories(out, in[3], n, chosen);
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
static void bank_read(mxArray **out, const mxArray **in)
{
    const rampwise_bank *const bank = find_bank(in[0])->object;
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
static void bank_set(mxArray **out, const mxArray **in)
{
    rampwise_bank *const bank = find_bank(in[0])->object;
    const double *const s = doubles(in[1], 4 * rampwise_bank_count(bank));
    answer(out, rampwise_bank_set(bank, (const rampwise_state *)(const void *)s), 0);
}

/* object, number (from 1), system */
static void bank_retune(mxArray **out, const mxArray **in)
{
    const place *const at = find_bank(in[0]);
    const double number = scalar(in[1]), *const s = doubles(in[2], 3);
    const rampwise_system system = {s[0], s[1], s[2]};
    rampwise_coeffs c;
    int status = rampwise_coeffs_make(&c, &system, at->dt, at->input, at->between);
    if (status == RAMPWISE_OK)
        status = number >= 1 && number == floor(number) && number <= 4e9
                     ? rampwise_bank_retune(at->object, (size_t)number - 1, &c)
                     : RAMPWISE_ERROR_COUNT;
    answer(out, status, 1);
}

/* object -> how many, how many are stopped, the first of these (from 1, or 0) */
static void bank_count(mxArray **out, const mxArray **in)
{
    const rampwise_bank *const bank = find_bank(in[0])->object;
    size_t first = 0;
    const size_t stopped = rampwise_bank_stopped(bank, &first);
    out[0] = number((double)rampwise_bank_count(bank));
    out[1] = number((double)stopped);
    out[2] = number(stopped > 0 ? (double)first + 1 : 0);
}

/* ---- the library itself ---- */

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

/* ---- the door ---- */

static const struct command {
    char name[16];
    int takes, answers;
    void (*call)(mxArray **out, const mxArray **in);
} commands[] = {
    {"bank_count", 1, 3, bank_count},     {"bank_make", 4, 3, bank_make},
    {"bank_read", 1, 5, bank_read},       {"bank_retune", 3, 2, bank_retune},
    {"bank_run", 4, 7, bank_run},         {"bank_set", 2, 2, bank_set},
    {"bank_start", 2, 2, bank_start},     {"coefficients", 4, 3, coefficients},
    {"constant", 1, 1, constant},         {"list_log", 3, 3, list_log},
    {"list_octaves", 3, 3, list_octaves}, {"object_free", 1, 1, object_free},
    {"objects", 0, 1, objects},           {"peaks", 7, 3, peaks},
    {"response", 10, 6, response},        {"rigid_peaks", 4, 3, rigid_peaks},
    {"status_text", 1, 1, status_text},   {"system", 3, 3, system_from},
    {"version", 0, 4, version},
};

void mexFunction(int nlhs, mxArray *plhs[], int nrhs, const mxArray *prhs[])
{
    if (!mexIsLocked()) {
        mexLock();
        mexAtExit(clear_table);
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
