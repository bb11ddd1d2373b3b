/* make_vectors DIRECTORY: writes the shared vectors, files of inputs and of the bits that must come out, for the
   library and every binding.

   Nothing here comes from the library; only its headers' names are used. Systems and coefficients are the closed
   forms in MPFR, rounded once. A coefficient set is left out where one of its values lies within 2^-10 ulp of a
   tie, where a library that works with a few bits beyond a double's could answer either neighbour. Steps are the
   order of operations of step.h, each operation rounded once by MPFR.

   Every number is a hexadecimal float with 13 digits after the point, every object is one line. Random numbers
   come from GSL's generator of a fixed seed by sums, products and powers of two, so that every machine writes the
   same files. */
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include "../support/exact.h"
#include "../support/nearest.h"
#include "../support/random.h"

enum { MARGIN_BITS = 10, SAMPLES = 48, REGIMES = 9, KINDS = 7 };

static gsl_rng *generator;

/* Between 2^low and 2^high, every octave as likely. */
static double any_size(int low, int high)
{
    const int exponent = low + (int)gsl_rng_uniform_int(generator, (unsigned long)(high - low));
    return ldexp(random_between(generator, 1, 2), exponent);
}

/* ---- files ---- */

static FILE *file_begin(const char *directory, const char *name)
{
    char path[4096];
    snprintf(path, sizeof path, "%s/%s.json", directory, name);
    FILE *const f = fopen(path, "w");
    if (f == NULL) {
        perror(path);
        exit(EXIT_FAILURE);
    }
    fprintf(f, "[\n");
    return f;
}

static void file_end(FILE *f)
{
    fprintf(f, "]\n");
    if (ferror(f) || fclose(f) != 0) {
        perror("a file of vectors");
        exit(EXIT_FAILURE);
    }
}

/* Before an object; every one but the first follows a comma. */
static void object_begin(FILE *f, int *count)
{
    fprintf(f, "%s{", (*count)++ > 0 ? "," : " ");
}

static void put_text(FILE *f, const char *key, const char *text)
{
    fprintf(f, "\"%s\": \"%s\", ", key, text);
}

static void put_number(FILE *f, const char *key, double x)
{
    fprintf(f, "\"%s\": \"%.13a\", ", key, x);
}

static void put_numbers(FILE *f, const char *key, int n, const double *x, const char *after)
{
    fprintf(f, "\"%s\": [", key);
    for (int i = 0; i < n; ++i)
        fprintf(f, "%s\"%.13a\"", i > 0 ? ", " : "", x[i]);
    fprintf(f, "]%s", after);
}

/* ---- exact values ---- */

/* x rounded once, and whether it is that double for all neighbours within the margin. */
static int clear_of_ties(mpfr_t x, double *rounded)
{
    mpfr_t low, high;
    mpfr_inits2(mpfr_get_prec(x), low, high, (mpfr_ptr)0);
    mpfr_mul_2si(low, x, -53 - MARGIN_BITS, MPFR_RNDN);
    mpfr_add(high, x, low, MPFR_RNDN);
    mpfr_sub(low, x, low, MPFR_RNDN);
    *rounded = mpfr_get_d(x, MPFR_RNDN) + 0.0;
    const int clear = mpfr_get_d(low, MPFR_RNDN) == *rounded && mpfr_get_d(high, MPFR_RNDN) == *rounded;
    mpfr_clears(low, high, (mpfr_ptr)0);
    return clear;
}

typedef struct oscillator {
    rampwise_system sys;
    double dt;
    int kind;
    double value[EXACT_COUNT], acceleration[4], total[4];
} oscillator;

static const struct kind {
    int input, between;
    const char *input_name, *between_name;
} kinds[KINDS] = {
    {RAMPWISE_FORCE, RAMPWISE_RAMP, "RAMPWISE_FORCE", "RAMPWISE_RAMP"},
    {RAMPWISE_FORCE, RAMPWISE_HOLD, "RAMPWISE_FORCE", "RAMPWISE_HOLD"},
    {RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP, "RAMPWISE_BASE_ACCELERATION", "RAMPWISE_RAMP"},
    {RAMPWISE_BASE_ACCELERATION, RAMPWISE_HOLD, "RAMPWISE_BASE_ACCELERATION", "RAMPWISE_HOLD"},
    {RAMPWISE_BASE_VELOCITY, RAMPWISE_RAMP, "RAMPWISE_BASE_VELOCITY", "RAMPWISE_RAMP"},
    {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_RAMP, "RAMPWISE_BASE_DISPLACEMENT", "RAMPWISE_RAMP"},
    {RAMPWISE_BASE_DISPLACEMENT, RAMPWISE_HOLD, "RAMPWISE_BASE_DISPLACEMENT", "RAMPWISE_HOLD"},
};

/* u'' = -(k/m) u - (c/m) v + the input's part; the fourth meets the input's change over the last step. */
static void rows(oscillator *o)
{
    const double stiffness = nearest_quotient(o->sys.stiffness, o->sys.mass);
    const double damper = nearest_quotient(o->sys.damper, o->sys.mass);
    double *const a = o->acceleration, *const total = o->total;
    a[0] = total[0] = 0.0 - stiffness;
    a[1] = total[1] = 0.0 - damper;
    a[2] = total[2] = a[3] = total[3] = 0;
    switch (kinds[o->kind].input) {
    case RAMPWISE_FORCE:
        a[2] = total[2] = nearest_quotient(1, o->sys.mass);
        break;
    case RAMPWISE_BASE_ACCELERATION:
        a[2] = -1;
        break;
    case RAMPWISE_BASE_VELOCITY:
        a[3] = nearest_quotient(-1, o->dt);
        break;
    default:
        a[2] = total[2] = stiffness;
        a[3] = total[3] = nearest_rate(o->sys.damper, o->sys.mass, o->dt);
    }
}

/* Fills the coefficients; 0 where one is too close to a tie. */
static int solved(oscillator *o)
{
    exact_step e;
    int clear = 1;
    exact_init(&e, &o->sys, o->dt);
    exact_free_motion(&e, o->dt, 1);
    exact_input(&e, kinds[o->kind].input, kinds[o->kind].between);
    for (int i = 0; i < EXACT_COUNT; ++i)
        clear &= clear_of_ties(e.value[i], &o->value[i]);
    exact_clear(&e);
    rows(o);
    return clear;
}

/* Undamped, lightly, strongly, critically and over-damped, free mass, mass on a damper, negative stiffness,
   negative damper; theta, the angle of a step, from 2^low to 2^high. */
static void draw_system(oscillator *o, int regime, int low, int high)
{
    static const double zeta[REGIMES] = {0, 0.05, 0.7, 1, 30, 0, 0.5, 0.1, -0.02};
    static const int spring[REGIMES] = {1, 1, 1, 1, 1, 0, 0, -1, 1};
    o->dt = any_size(-8, 0);
    o->sys.mass = any_size(-6, 6);
    const double omega = any_size(low, high) / o->dt;
    o->sys.damper = 2 * zeta[regime] * omega * o->sys.mass + 0.0;
    o->sys.stiffness = spring[regime] * (omega * omega * o->sys.mass) + 0.0;
}

static int allowed(const oscillator *o)
{
    return kinds[o->kind].input != RAMPWISE_BASE_DISPLACEMENT || kinds[o->kind].between != RAMPWISE_HOLD ||
           o->sys.damper == 0;
}

/* A set for the regime and kind, where it is allowed. Only undamped systems get steps of more than 8 radians: the
   coefficients of others die out there, or grow without bound, and are promised to their largest value inside the
   step only. */
static int draw(oscillator *o, int regime, int kind, int low, int high)
{
    if (regime > 0 && high > 3)
        high = 3;
    if (low >= high)
        low = high - 1;
    do {
        o->kind = kind;
        draw_system(o, regime, low, high);
        if (!allowed(o))
            return 0;
    } while (!solved(o));
    return 1;
}

static void put_oscillator(FILE *f, const oscillator *o)
{
    put_number(f, "mass", o->sys.mass);
    put_number(f, "damper", o->sys.damper);
    put_number(f, "stiffness", o->sys.stiffness);
    put_number(f, "dt", o->dt);
    put_text(f, "input", kinds[o->kind].input_name);
    put_text(f, "between", kinds[o->kind].between_name);
}

/* ---- systems ---- */

enum { OMEGA, FREQUENCY, PERIOD, WAYS };

/* omega to 400 bits */
static void circular_frequency(mpfr_t omega, int way, double given)
{
    mpfr_set_d(omega, given, MPFR_RNDN);
    if (way == OMEGA)
        return;
    mpfr_t two_pi;
    mpfr_init2(two_pi, 400);
    mpfr_const_pi(two_pi, MPFR_RNDN);
    mpfr_mul_ui(two_pi, two_pi, 2, MPFR_RNDN);
    if (way == FREQUENCY)
        mpfr_mul(omega, two_pi, omega, MPFR_RNDN);
    else
        mpfr_div(omega, two_pi, omega, MPFR_RNDN);
    mpfr_clear(two_pi);
}

static void put_systems(FILE *f)
{
    static const char *const names[WAYS] = {"omega", "frequency", "period"};
    static const double damping[] = {0, 0.02, 1, 7.5, -0.01};
    int count = 0;
    mpfr_t omega, x;
    mpfr_inits2(400, omega, x, (mpfr_ptr)0);
    while (count < 60) {
        const int way = count % WAYS;
        const double given = any_size(-40, 40), zeta = damping[count / WAYS % 5];
        double damper, stiffness;
        circular_frequency(omega, way, given);
        mpfr_mul_d(x, omega, 2 * zeta, MPFR_RNDN);
        int clear = clear_of_ties(x, &damper);
        mpfr_sqr(x, omega, MPFR_RNDN);
        clear &= clear_of_ties(x, &stiffness);
        if (!clear)
            continue;
        object_begin(f, &count);
        put_text(f, "way", names[way]);
        put_number(f, "given", given);
        put_number(f, "damping", zeta);
        put_numbers(f, "system", 3, (double[]){1, damper, stiffness}, "}\n");
    }
    mpfr_clears(omega, x, (mpfr_ptr)0);
}

/* ---- coefficients ---- */

static void put_coefficients(FILE *f)
{
    static const int sizes[][2] = {{-30, -6}, {-6, 1}, {1, 10}};
    int count = 0;
    for (int size = 0; size < 3; ++size)
        for (int regime = 0; regime < REGIMES; ++regime)
            for (int kind = 0; kind < KINDS; ++kind) {
                oscillator o;
                if (!draw(&o, regime, kind, sizes[size][0], sizes[size][1]))
                    continue;
                object_begin(f, &count);
                put_oscillator(f, &o);
                put_numbers(f, "coefficients", EXACT_COUNT, o.value, ", ");
                put_numbers(f, "acceleration", 4, o.acceleration, ", ");
                put_numbers(f, "total", 4, o.total, "}\n");
            }
}

/* ---- steps ---- */

static double product(double x, double y)
{
    return nearest_fma(x, y, -0.0); /* -0 leaves every sign as it is */
}

/* The rule of silence of step.h. */
static double rested(double x, double p, double p_next)
{
    const int silent = fabs(p) < 0x1p-900 && fabs(p_next) < 0x1p-900;
    return silent && fabs(x) < 0x1p-960 ? 0.0 : x;
}

enum { A, B, C, D, AP, BP, CP, DP, A_MINUS_1, BP_MINUS_1 };

static double stepped(double x, const double *value, int of_u, int of_v, int of_p, const rampwise_state *s,
                      double p_next)
{
    const double loaded = nearest_fma(value[of_p], s->p, product(value[of_p + 1], p_next));
    return nearest_sum(x, nearest_fma(value[of_u], s->u, nearest_fma(value[of_v], s->v, loaded)));
}

static rampwise_state step(const oscillator *o, const rampwise_state *s, double p_next)
{
    const double u = stepped(s->u, o->value, A_MINUS_1, B, C, s, p_next);
    const double v = stepped(s->v, o->value, AP, BP_MINUS_1, CP, s, p_next);
    return (rampwise_state){rested(u, s->p, p_next), rested(v, s->p, p_next), p_next, s->p};
}

static double row_value(const double row[4], const rampwise_state *s)
{
    const double change = row[3] != 0 ? product(row[3], nearest_sum(s->p, -s->p_before)) : 0;
    return nearest_fma(row[0], s->u, nearest_fma(row[1], s->v, nearest_fma(row[2], s->p, change)));
}

typedef struct record {
    double t[SAMPLES], p[SAMPLES], u[SAMPLES], v[SAMPLES], a[SAMPLES], total[SAMPLES];
} record;

static void keep(record *r, int i, const oscillator *o, const rampwise_state *s)
{
    r->u[i] = s->u;
    r->v[i] = s->v;
    r->a[i] = row_value(o->acceleration, s);
    r->total[i] = row_value(o->total, s);
}

static void put_record(FILE *f, const record *r)
{
    put_numbers(f, "p", SAMPLES, r->p, ", ");
    put_numbers(f, "u", SAMPLES, r->u, ", ");
    put_numbers(f, "v", SAMPLES, r->v, ", ");
    put_numbers(f, "a", SAMPLES, r->a, ", ");
    put_numbers(f, "total", SAMPLES, r->total, "}\n");
}

/* A record of plain samples, or one around the limits of silence. */
static rampwise_state draw_start(record *r, const oscillator *o, int whispered)
{
    rampwise_state s;
    s.u = random_between(generator, -1, 1);
    s.v = random_between(generator, -1, 1) / o->dt;
    random_record(generator, r->p, SAMPLES);
    if (whispered) {
        random_whisper(generator, r->p, SAMPLES);
        s.u = ldexp(s.u, -955);
        s.v = ldexp(s.v, -955);
    }
    s.p = s.p_before = r->p[0];
    return s;
}

static void put_steps(FILE *f)
{
    int count = 0;
    for (int i = 0; i < 3 * KINDS; ++i) {
        oscillator o;
        record r;
        if (!draw(&o, i % 5, i % KINDS, -5, 2))
            continue;
        rampwise_state s = draw_start(&r, &o, i % 3 == 2);
        keep(&r, 0, &o, &s);
        for (int k = 1; k < SAMPLES; ++k) {
            s = step(&o, &s, r.p[k]);
            keep(&r, k, &o, &s);
        }
        object_begin(f, &count);
        put_oscillator(f, &o);
        put_number(f, "u0", r.u[0]);
        put_number(f, "v0", r.v[0]);
        put_record(f, &r);
    }
}

/* ---- irregular times ---- */

/* The oscillator over another interval than its own. */
static int solved_for(oscillator *part, const oscillator *o, double dt)
{
    *part = *o;
    part->dt = dt;
    return solved(part);
}

/* Steps of a whole record; 0 where an interval has a coefficient too close to a tie. */
static int irregular(record *r, const oscillator *o)
{
    rampwise_state s = draw_start(r, o, 0);
    r->t[0] = any_size(-2, 4);
    keep(r, 0, o, &s);
    for (int k = 1; k < SAMPLES; ++k) {
        oscillator part;
        const double wanted = o->dt * random_between(generator, 0.25, 4);
        r->t[k] = k % 4 == 0 ? r->t[k - 1] + o->dt : r->t[k - 1] + wanted;
        if (!solved_for(&part, o, r->t[k] - r->t[k - 1]))
            return 0;
        s = step(&part, &s, r->p[k]);
        keep(r, k, o, &s);
    }
    return 1;
}

/* Force and base acceleration, whose accelerations do not look back over an interval. */
static void put_times(FILE *f)
{
    int count = 0;
    for (int i = 0; i < 8; ++i) {
        oscillator o;
        record r;
        do
            draw(&o, i % 5, i % 4, -5, 1);
        while (!irregular(&r, &o));
        object_begin(f, &count);
        put_oscillator(f, &o);
        put_number(f, "u0", r.u[0]);
        put_number(f, "v0", r.v[0]);
        put_numbers(f, "t", SAMPLES, r.t, ", ");
        put_record(f, &r);
    }
}

int main(int argc, char **argv)
{
    static const struct {
        const char *name;
        void (*put)(FILE *f);
    } files[] = {{"systems", put_systems},
                 {"coefficients", put_coefficients},
                 {"steps", put_steps},
                 {"times", put_times}};
    if (argc != 2) {
        fprintf(stderr, "usage: make_vectors DIRECTORY\n");
        return EXIT_FAILURE;
    }
    generator = gsl_rng_alloc(gsl_rng_mt19937);
    gsl_rng_set(generator, 20240611);
    for (size_t i = 0; i < sizeof files / sizeof *files; ++i) {
        FILE *const f = file_begin(argv[1], files[i].name);
        files[i].put(f);
        file_end(f);
    }
    gsl_rng_free(generator);
    mpfr_free_cache();
    return EXIT_SUCCESS;
}
