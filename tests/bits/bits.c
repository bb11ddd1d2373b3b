/* Prints one line a result, "name hash": the same lines are expected of every compiler, option and
   processor. The caller's own numbers are made from integers, so that no option can change them.

   Lines that begin alike up to the dot must have one and the same hash: run's names say what is
   compared (one.inline and one.run, for example). */
#include <inttypes.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "numbers.h"
#include "rampwise.h"

enum { SYSTEMS = 4000, OSCILLATORS = 60, N = 1500 };

static void coefficients(void)
{
    uint64_t hash = empty;
    for (int i = 0; i < SYSTEMS; ++i) {
        const int kind = i % KINDS;
        const rampwise_system sys = random_system(kind);
        rampwise_coeffs c;
        memset(&c, 0, sizeof c);
        const int status =
            rampwise_coeffs_make(&c, &sys, number(range(-12, 8)), kinds[kind][0], kinds[kind][1]);
        hash = hashed(hash, &status, sizeof status);
        hash = hashed(hash, &c, sizeof c);
    }
    printf("coefficients %016" PRIx64 "\n", hash);
    hash = empty;
    for (int i = 0; i < SYSTEMS; ++i) {
        rampwise_system sys[3];
        const double frequency = number(range(-200, 200)), zeta = number(range(-12, 4));
        if (rampwise_system_natural(&sys[0], frequency, zeta) != RAMPWISE_OK ||
            rampwise_system_hertz(&sys[1], frequency, zeta) != RAMPWISE_OK ||
            rampwise_system_period(&sys[2], frequency, zeta) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
        hash = hashed(hash, sys, sizeof sys);
    }
    printf("systems %016" PRIx64 "\n", hash);
}

/* Loud, silent, loud again, with jumps. */
static void record(double *p, int n)
{
    for (int i = 0; i < n; ++i)
        p[i] = i > n / 3 && i < 2 * n / 3 ? 0 : signed_number(range(-30, 3));
    p[n / 2] = signed_number(-905);
}

typedef struct answers {
    double u[N], v[N], a[N], total[N];
    rampwise_state end;
} answers;

static rampwise_history into(answers *o, int from)
{
    return (rampwise_history){o->u + from, o->v + from, o->a + from, o->total + from};
}

static rampwise_state first_state(double p0)
{
    rampwise_state s;
    rampwise_start(&s, 0.25, -0.5, p0);
    return s;
}

static void by_inline_steps(const rampwise_coeffs *c, const double *p, answers *o)
{
    rampwise_state s = first_state(p[0]);
    for (int i = 1; i < N; ++i) {
        rampwise_step(c, &s, p[i]);
        o->u[i] = s.u;
        o->v[i] = s.v;
        o->a[i] = rampwise_acceleration(c, &s);
        o->total[i] = rampwise_total_acceleration(c, &s);
    }
    o->end = s;
}

static void by_chunks(const rampwise_coeffs *c, const double *p, answers *o)
{
    rampwise_state s = first_state(p[0]);
    for (int i = 1, n = 0; i < N; i += n, n = n % 17 + 1) {
        const rampwise_history out = into(o, i);
        n = n > N - i ? N - i : n;
        if (rampwise_run(c, &s, (size_t)n, p + i, &out, NULL) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
    }
    o->end = s;
}

static void by_one_call(const rampwise_coeffs *c, const double *p, answers *o)
{
    const rampwise_history out = into(o, 1);
    o->end = first_state(p[0]);
    if (rampwise_run(c, &o->end, N - 1, p + 1, &out, NULL) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
}

/* The record as channel 2 of 3, beside others. */
static void by_frames(const rampwise_coeffs *c, const double *p, answers *o)
{
    static double frames[N][3], out[4][N][3];
    const rampwise_history there = {out[0][1], out[1][1], out[2][1], out[3][1]};
    const rampwise_coeffs all[3] = {*c, *c, *c};
    rampwise_state s[3] = {first_state(1), first_state(2), first_state(p[0])};
    for (int i = 0; i < N; ++i) {
        frames[i][0] = i % 5;
        frames[i][1] = -i % 7;
        frames[i][2] = p[i];
    }
    if (rampwise_run_frames(3, all, s, N - 1, frames[1], &there, NULL) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
    for (int i = 1; i < N; ++i) {
        o->u[i] = out[0][i][2];
        o->v[i] = out[1][i][2];
        o->a[i] = out[2][i][2];
        o->total[i] = out[3][i][2];
    }
    o->end = s[2];
}

/* The record as the second of three under one oscillator. */
static void by_records(const rampwise_coeffs *c, const double *p, answers *o)
{
    static double records[3 * (N - 1)], out[4][3][N - 1];
    const rampwise_history there = {out[0][0], out[1][0], out[2][0], out[3][0]};
    rampwise_state s[3] = {first_state(1), first_state(p[0]), first_state(2)};
    for (int i = 1; i < N; ++i) {
        records[i - 1] = i % 3;
        records[N - 1 + i - 1] = p[i];
        records[2 * (N - 1) + i - 1] = -i % 4;
    }
    if (rampwise_run_records(c, 3, s, N - 1, records, &there, NULL) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
    memcpy(o->u + 1, out[0][1], sizeof out[0][1]);
    memcpy(o->v + 1, out[1][1], sizeof out[1][1]);
    memcpy(o->a + 1, out[2][1], sizeof out[2][1]);
    memcpy(o->total + 1, out[3][1], sizeof out[3][1]);
    o->end = s[1];
}

/* The oscillator as number 2 of a bank of 3, its history and its state, on one set of instructions. */
static void by_bank(int set, const rampwise_coeffs *c, const double *p, answers *o)
{
    const rampwise_coeffs all[3] = {*c, *c, *c};
    const size_t chosen = 2;
    rampwise_state s[3] = {first_state(p[0]), first_state(p[0]), first_state(p[0])};
    rampwise_bank_wanted wanted;
    rampwise_bank *bank;
    s[0].u = 3;
    s[1].v = 4;
    rampwise_bank_wanted_init(&wanted);
    wanted.chosen_count = 1;
    wanted.chosen = &chosen;
    wanted.history = into(o, 1);
    if (rampwise_bank_create(3, all, set, &bank) != RAMPWISE_OK ||
        rampwise_bank_set(bank, s) != RAMPWISE_OK ||
        rampwise_bank_run(bank, N - 1, p + 1, &wanted, NULL) != RAMPWISE_OK ||
        rampwise_bank_get(bank, s) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
    o->end = s[2];
    rampwise_bank_free(bank);
}

/* Every set that runs here, each with the answers of the first. */
static void by_banks(const rampwise_coeffs *c, const double *p, answers *o)
{
    static answers other;
    by_bank(RAMPWISE_BASELINE, c, p, o);
    for (int set = RAMPWISE_BASELINE + 1; set <= RAMPWISE_NEON; ++set)
        if (rampwise_instructions(set) == set) {
            memset(&other, 0, sizeof other);
            by_bank(set, c, p, &other);
            if (memcmp(o, &other, sizeof other) != 0)
                printf("instructions %d differ\n", set);
        }
}

static void by_times(const rampwise_coeffs *c, const double *p, answers *o)
{
    static double t[N];
    const rampwise_history out = into(o, 1);
    double t_last = 0;
    for (int i = 0; i < N; ++i)
        t[i] = i * 0x1p-7;
    o->end = first_state(p[0]);
    if (rampwise_run_at(c, &o->end, &t_last, N - 1, t + 1, p + 1, &out, NULL) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
}

typedef void (*way)(const rampwise_coeffs *, const double *, answers *);

static void histories(const char *name, way by)
{
    static double p[N];
    static answers o;
    uint64_t hash = empty;
    state = 77;
    for (int i = 0; i < OSCILLATORS; ++i) {
        const int kind = i % KINDS;
        rampwise_system sys = random_system(kind);
        rampwise_coeffs c;
        sys.stiffness = sys.stiffness < 0 ? -sys.stiffness : sys.stiffness;
        sys.damper = sys.damper < 0 ? -sys.damper : sys.damper;
        record(p, N);
        if (rampwise_coeffs_make(&c, &sys, 0x1p-7, kinds[kind][0], kinds[kind][1]) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
        memset(&o, 0, sizeof o);
        by(&c, p, &o);
        hash = hashed(hash, &o, sizeof o);
    }
    printf("histories.%s %016" PRIx64 "\n", name, hash);
}

static void irregular(void)
{
    static double p[N], t[N], u[N], v[N], a[N], total[N];
    const rampwise_history out = {u, v, a, total};
    uint64_t hash = empty;
    for (int i = 0; i < OSCILLATORS; ++i) {
        const int kind = i % KINDS;
        const rampwise_system sys = {2, kind == KINDS - 1 ? 0 : 0.375, 36};
        rampwise_coeffs c;
        rampwise_state s = first_state(0), at;
        double t_last = 0;
        record(p, N);
        for (int j = 0; j < N; ++j)
            t[j] = (j > 0 ? t[j - 1] : 0) + number(range(-9, -4));
        if (rampwise_coeffs_make(&c, &sys, 0.01, kinds[kind][0], kinds[kind][1]) != RAMPWISE_OK ||
            rampwise_run_at(&c, &s, &t_last, N, t, p, &out, NULL) != RAMPWISE_OK ||
            rampwise_inside(&c, &s, 1, number(-2), &at) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
        hash = hashed(hash, u, sizeof u);
        hash = hashed(hash, v, sizeof v);
        hash = hashed(hash, a, sizeof a);
        hash = hashed(hash, total, sizeof total);
        hash = hashed(hash, &s, sizeof s);
        hash = hashed(hash, &at, sizeof at);
    }
    printf("irregular %016" PRIx64 "\n", hash);
}

typedef struct single_answers {
    float u[N], v[N], a[N], total[N];
    rampwise_state_f32 end;
} single_answers;

static rampwise_history_f32 single_into(single_answers *o, int from)
{
    return (rampwise_history_f32){o->u + from, o->v + from, o->a + from, o->total + from};
}

static rampwise_state_f32 single_first(float p0)
{
    rampwise_state_f32 s;
    rampwise_start_f32(&s, 0.25f, -0.5f, p0);
    return s;
}

static void single_inline(const rampwise_coeffs_f32 *c, const float *p, single_answers *o)
{
    rampwise_state_f32 s = single_first(p[0]);
    for (int i = 1; i < N; ++i) {
        rampwise_step_f32(c, &s, p[i]);
        o->u[i] = s.u;
        o->v[i] = s.v;
        o->a[i] = rampwise_acceleration_f32(c, &s);
        o->total[i] = rampwise_total_acceleration_f32(c, &s);
    }
    o->end = s;
}

static void single_run(const rampwise_coeffs_f32 *c, const float *p, single_answers *o)
{
    const rampwise_history_f32 out = single_into(o, 1);
    o->end = single_first(p[0]);
    if (rampwise_run_f32(c, &o->end, N - 1, p + 1, &out, NULL) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
}

/* The oscillator as number 2 of a bank of 3, its history and its state. */
static void single_bank(int set, const rampwise_coeffs_f32 *c, const float *p, single_answers *o)
{
    const rampwise_coeffs_f32 all[3] = {*c, *c, *c};
    const size_t chosen = 2;
    rampwise_state_f32 s[3] = {single_first(p[0]), single_first(p[0]), single_first(p[0])};
    rampwise_bank_wanted_f32 wanted;
    rampwise_bank_f32 *bank;
    s[0].u = 3;
    s[1].v = 4;
    rampwise_bank_wanted_init_f32(&wanted);
    wanted.chosen_count = 1;
    wanted.chosen = &chosen;
    wanted.history = single_into(o, 1);
    if (rampwise_bank_create_f32(3, all, set, &bank) != RAMPWISE_OK ||
        rampwise_bank_set_f32(bank, s) != RAMPWISE_OK ||
        rampwise_bank_run_f32(bank, N - 1, p + 1, &wanted, NULL) != RAMPWISE_OK ||
        rampwise_bank_get_f32(bank, s) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
    o->end = s[2];
    rampwise_bank_free_f32(bank);
}

static void singles(const char *name,
                    void (*by)(const rampwise_coeffs_f32 *, const float *, single_answers *))
{
    static double p[N];
    static float single_p[N];
    static single_answers o;
    uint64_t hash = empty;
    state = 78;
    for (int i = 0; i < OSCILLATORS; ++i) {
        const int kind = i % KINDS;
        rampwise_system sys = random_system(kind);
        rampwise_coeffs_f32 c;
        sys.stiffness = sys.stiffness < 0 ? -sys.stiffness : sys.stiffness;
        sys.damper = sys.damper < 0 ? -sys.damper : sys.damper;
        record(p, N);
        for (int j = 0; j < N; ++j)
            single_p[j] = (float)p[j];
        single_p[N / 2 + 1] = (float)signed_number(-95);
        if (rampwise_coeffs_make_f32(&c, &sys, 0x1p-7, kinds[kind][0], kinds[kind][1]) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
        hash = hashed(hash, &c, sizeof c);
        memset(&o, 0, sizeof o);
        by(&c, single_p, &o);
        hash = hashed(hash, &o, sizeof o);
    }
    printf("singles.%s %016" PRIx64 "\n", name, hash);
}

/* Every set that runs here, each with the answers of the first. */
static void single_sets(const rampwise_coeffs_f32 *c, const float *p, single_answers *o)
{
    static single_answers other;
    single_bank(RAMPWISE_BASELINE, c, p, o);
    for (int set = RAMPWISE_BASELINE + 1; set <= RAMPWISE_NEON; ++set)
        if (rampwise_instructions(set) == set) {
            memset(&other, 0, sizeof other);
            single_bank(set, c, p, &other);
            if (memcmp(o, &other, sizeof other) != 0)
                printf("instructions %d differ in single precision\n", set);
        }
}

/* Every system for which there is a meter, in both frames, and the refusals of the others. */
static void energies(void)
{
    static double p[N];
    static rampwise_energy e[N];
    uint64_t hash = empty;
    record(p, N);
    for (int i = 0; i < 2 * OSCILLATORS; ++i) {
        const int kind = i % KINDS, frame = i < OSCILLATORS ? RAMPWISE_RELATIVE : RAMPWISE_ABSOLUTE;
        const rampwise_system sys = random_system(kind);
        rampwise_coeffs c;
        size_t bad = 0;
        if (rampwise_coeffs_make(&c, &sys, 0x1p-7, kinds[kind][0], kinds[kind][1]) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
        memset(e, 0, sizeof e);
        const int status = rampwise_energy_solve(&c, frame, 0.25, -0.5, N, p, e, &bad);
        hash = hashed(hash, &status, sizeof status);
        hash = hashed(hash, &bad, sizeof bad);
        hash = hashed(hash, e, sizeof e);
    }
    printf("energies %016" PRIx64 "\n", hash);
}

/* A structure with equipment and peaks, in calls of `part` samples. */
enum { MODES = 37, OUTPUTS = 5, PIECES = 3 };

static rampwise_modes *make_structure(int kind)
{
    static rampwise_coeffs c[MODES];
    static double load[MODES], weight[3][MODES * OUTPUTS], on_input[OUTPUTS];
    static rampwise_system piece[PIECES];
    static const size_t point[PIECES] = {0, 1, 4};
    rampwise_modes_plan plan;
    rampwise_modes *modes = NULL;
    rampwise_modes_plan_init(&plan);
    for (int j = 0; j < MODES; ++j) {
        const rampwise_system sys = {number(0), number(range(-8, 3)), number(range(2, 14))};
        if (rampwise_coeffs_make(&c[j], &sys, 0x1p-7, kinds[kind][0], kinds[kind][1]) != RAMPWISE_OK)
            exit(EXIT_FAILURE);
        load[j] = signed_number(0);
        for (int i = 0; i < 3 * OUTPUTS; ++i)
            weight[i % 3][j * OUTPUTS + i / 3] = signed_number(-3 * (i % 3));
    }
    for (int i = 0; i < OUTPUTS; ++i)
        on_input[i] = signed_number(-2);
    for (int i = 0; i < PIECES; ++i)
        piece[i] = (rampwise_system){number(0), number(0), number(range(4, 10))};
    piece[0] = c[0].system;
    plan.modes = MODES;
    plan.inputs = 1;
    plan.outputs = OUTPUTS;
    plan.c = c;
    plan.load = load;
    plan.on_displacement = weight[0];
    plan.on_velocity = weight[1];
    plan.on_acceleration = weight[2];
    plan.on_input = on_input;
    plan.peaks = 1;
    plan.equipment_count = PIECES;
    plan.equipment = piece;
    plan.point = point;
    if (rampwise_modes_create(&plan, &modes) != RAMPWISE_OK)
        exit(EXIT_FAILURE);
    return modes;
}

static uint64_t hashed_peaks(uint64_t hash, const rampwise_peak *peak, size_t n)
{
    for (size_t i = 0; i < n; ++i) {
        const double values[4] = {peak[i].high.value, peak[i].high.fraction, peak[i].low.value,
                                  peak[i].low.fraction};
        hash = hashed(hash, values, sizeof values);
    }
    return hash;
}

static void structures(const char *name, size_t part)
{
    enum { SHORT = 300 };
    static double p[SHORT], output[SHORT * OUTPUTS], x[SHORT * PIECES];
    uint64_t hash = empty;
    state = 99;
    for (int kind = 0; kind < 4; ++kind) {
        rampwise_peak peak[OUTPUTS + PIECES], after[PIECES];
        double later[PIECES];
        rampwise_modes *const modes = make_structure(kind);
        for (int i = 0; i < SHORT; ++i)
            p[i] = signed_number(range(-4, 0));
        for (size_t i = 0; i < SHORT; i += part) {
            const rampwise_history out = {NULL, NULL, NULL, x + i * PIECES};
            if (rampwise_equipment_run(modes, part, p + i, output + i * OUTPUTS, &out, NULL) != RAMPWISE_OK)
                exit(EXIT_FAILURE);
        }
        (void)rampwise_modes_peaks(modes, peak);
        (void)rampwise_equipment_peaks(modes, RAMPWISE_TOTAL_ACCELERATION, peak + OUTPUTS);
        hash = hashed(hashed(hash, output, sizeof output), x, sizeof x);
        hash = hashed_peaks(hash, peak, OUTPUTS + PIECES);
        (void)rampwise_equipment_residual(modes, RAMPWISE_DISPLACEMENT, SHORT, after, later);
        hash = hashed(hashed_peaks(hash, after, PIECES), later, sizeof later);
        rampwise_modes_free(modes);
    }
    printf("structures.%s %016" PRIx64 "\n", name, hash);
}

int main(void)
{
    const int status = rampwise_self_test();
    if (status != RAMPWISE_OK) {
        printf("self test: %s\n", rampwise_status_text(status));
        return EXIT_FAILURE;
    }
    coefficients();
    irregular();
    energies();
    histories("inline", by_inline_steps);
    histories("run", by_one_call);
    histories("chunks", by_chunks);
    histories("frames", by_frames);
    histories("times", by_times);
    histories("records", by_records);
    histories("banks", by_banks);
    singles("inline", single_inline);
    singles("run", single_run);
    singles("banks", single_sets);
    structures("whole", 300);
    structures("parts", 30);
    structures("samples", 1);
    return EXIT_SUCCESS;
}
