/* Prints the coefficients of one oscillator as constants of a C source, for programs that shall not make them:
   a microcontroller without double arithmetic, or a table in read-only memory. See --help. */
#include <ctype.h>
#include <errno.h>
#include <getopt.h>
#include <inttypes.h>
#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include "rampwise.h"

static const char help[] =
    "coefficients_as_source: the coefficients of one oscillator as C constants\n"
    "\n"
    "  --period T, --hertz F or --omega W   its natural period, frequency, or angular frequency\n"
    "  --damping-ratio Z                    1 is critical\n"
    "  --dt H                               the interval between samples, in the unit of time of T\n"
    "  --input force|base-acceleration|base-velocity|base-displacement\n"
    "  --between ramp|hold                  between samples; ramp where it is not given\n"
    "  --name NAME                          of the constant; oscillator where it is not given\n"
    "  --double                             the same in double precision too, as NAME_double\n"
    "  --ticks N --intervals A,B,C...       prepared intervals of a stream too, as NAME_intervals: A, B, C "
    "ticks\n"
    "                                       long, where dt is N\n"
    "  --help\n"
    "\n"
    "The mass is 1: a force counts per mass. The header goes to standard output. It refuses to be compiled "
    "with\n"
    "headers of another edition of the arithmetic. Hexadecimal floating constants need C99 or C++17.\n";

typedef struct word {
    const char *name;
    int value;
} word;

static const word inputs[] = {{"force", RAMPWISE_FORCE},
                              {"base-acceleration", RAMPWISE_BASE_ACCELERATION},
                              {"base-velocity", RAMPWISE_BASE_VELOCITY},
                              {"base-displacement", RAMPWISE_BASE_DISPLACEMENT},
                              {NULL, 0}};
static const word betweens[] = {{"ramp", RAMPWISE_RAMP}, {"hold", RAMPWISE_HOLD}, {NULL, 0}};

typedef struct request {
    int frequency_option; /* 'p', 'f' or 'o'; 0 where not given */
    double frequency, zeta, dt;
    int input, between, in_double;
    uint64_t ticks; /* 0 where not given */
    const char *intervals, *name;
} request;

static _Noreturn void refuse(const char *format, ...)
{
    va_list arguments;
    va_start(arguments, format);
    fputs("coefficients_as_source: ", stderr);
    vfprintf(stderr, format, arguments);
    fputc('\n', stderr);
    va_end(arguments);
    exit(2);
}

static double number(const char *option)
{
    char *end;
    const double x = strtod(optarg, &end);
    if (end == optarg || *end != '\0' || !isfinite(x))
        refuse("--%s: '%s' is not a number", option, optarg);
    return x;
}

/* A number of ticks at *text, which goes on behind it. */
static uint64_t whole_number(const char *option, const char **text)
{
    char *end;
    errno = 0;
    const unsigned long long x = strtoull(*text, &end, 10);
    if (!isdigit((unsigned char)**text) || errno != 0 || x == 0)
        refuse("--%s: '%s' is not a whole number above 0", option, *text);
    *text = end;
    return x;
}

static uint64_t ticks_of_dt(void)
{
    const char *text = optarg;
    const uint64_t ticks = whole_number("ticks", &text);
    if (*text != '\0')
        refuse("--ticks: '%s' is not a whole number above 0", optarg);
    return ticks;
}

static int choice(const char *option, const word *known)
{
    for (; known->name != NULL; ++known)
        if (strcmp(known->name, optarg) == 0)
            return known->value;
    refuse("--%s: there is no '%s'; see --help", option, optarg);
}

static const char *identifier(void)
{
    const char *c = optarg;
    if (!isalpha((unsigned char)*c) && *c != '_')
        refuse("--name: '%s' is no name in C", optarg);
    for (; *c != '\0'; ++c)
        if (!isalnum((unsigned char)*c) && *c != '_')
            refuse("--name: '%s' is no name in C", optarg);
    return optarg;
}

static void set_frequency(request *r, int option, const char *name)
{
    if (r->frequency_option != 0)
        refuse("one of --period, --hertz and --omega, once");
    r->frequency_option = option;
    r->frequency = number(name);
}

static request read_options(int argc, char **argv)
{
    static const struct option options[] = {{"period", required_argument, NULL, 'p'},
                                            {"hertz", required_argument, NULL, 'f'},
                                            {"omega", required_argument, NULL, 'o'},
                                            {"damping-ratio", required_argument, NULL, 'z'},
                                            {"dt", required_argument, NULL, 't'},
                                            {"input", required_argument, NULL, 'i'},
                                            {"between", required_argument, NULL, 'b'},
                                            {"name", required_argument, NULL, 'n'},
                                            {"double", no_argument, NULL, 'd'},
                                            {"ticks", required_argument, NULL, 'k'},
                                            {"intervals", required_argument, NULL, 'l'},
                                            {"help", no_argument, NULL, 'h'},
                                            {NULL, 0, NULL, 0}};
    request r = {.zeta = NAN, .dt = NAN, .between = RAMPWISE_RAMP, .name = "oscillator"};
    for (int option, which = 0; (option = getopt_long(argc, argv, ":", options, &which)) != -1;)
        switch (option) {
        case 'p':
        case 'f':
        case 'o':
            set_frequency(&r, option, options[which].name);
            break;
        case 'z':
            r.zeta = number("damping-ratio");
            break;
        case 't':
            r.dt = number("dt");
            break;
        case 'i':
            r.input = choice("input", inputs);
            break;
        case 'b':
            r.between = choice("between", betweens);
            break;
        case 'n':
            r.name = identifier();
            break;
        case 'd':
            r.in_double = 1;
            break;
        case 'k':
            r.ticks = ticks_of_dt();
            break;
        case 'l':
            r.intervals = optarg;
            break;
        case 'h':
            fputs(help, stdout);
            exit(EXIT_SUCCESS);
        case ':':
            refuse("%s: a value is missing; see --help", argv[optind - 1]);
        default:
            refuse("%s: no such option; see --help", argv[optind - 1]);
        }
    if (optind < argc)
        refuse("'%s' is not an option; see --help", argv[optind]);
    if (r.frequency_option == 0 || isnan(r.zeta) || isnan(r.dt) || r.input == 0)
        refuse("--period, --hertz or --omega, --damping-ratio, --dt and --input are needed; see --help");
    if ((r.ticks == 0) != (r.intervals == NULL))
        refuse("--ticks and --intervals belong together; see --help");
    return r;
}

static void demand(int status)
{
    if (status != RAMPWISE_OK)
        refuse("%s", rampwise_status_text(status));
}

static rampwise_system system_of(const request *r)
{
    rampwise_system sys;
    demand(r->frequency_option == 'p'   ? rampwise_system_period(&sys, r->frequency, r->zeta)
           : r->frequency_option == 'f' ? rampwise_system_hertz(&sys, r->frequency, r->zeta)
                                        : rampwise_system_natural(&sys, r->frequency, r->zeta));
    return sys;
}

static void print_begin(const request *r)
{
    const char *const what = r->frequency_option == 'p'   ? "period"
                             : r->frequency_option == 'f' ? "frequency in hertz"
                                                          : "angular frequency";
    printf("/* Made by coefficients_as_source of rampwise %s: unit mass, %s %.17g, damping ratio %.17g,\n"
           "   dt %.17g. Not to be edited. */\n"
           "#ifndef COEFFICIENTS_%s_H\n#define COEFFICIENTS_%s_H\n\n",
           rampwise_version(), what, r->frequency, r->zeta, r->dt, r->name, r->name);
    printf("#include <rampwise/%s.h>\n#include <rampwise/version.h>\n\n"
           "#if RAMPWISE_ARITHMETIC_EDITION != %d\n"
           "#error \"these coefficients belong to edition %d of rampwise's arithmetic: make them "
           "anew\"\n#endif\n",
           r->intervals != NULL ? "stream" : "coefficients", rampwise_arithmetic_edition(),
           rampwise_arithmetic_edition());
}

/* The ten coefficients and both rows, in the order of the structs. */
static void print_values(const double *values, const char *suffix)
{
    static const char *const names[] = {"A",  "B",  "C",  "D",         "Ap",
                                        "Bp", "Cp", "Dp", "A_minus_1", "Bp_minus_1"};
    for (int i = 0; i < 10; ++i)
        printf("    %a%s, /* %s = %.9g */\n", values[i], suffix, names[i], values[i]);
    for (int i = 10; i < 18; i += 4)
        printf("    {%a%s, %a%s, %a%s, %a%s}, /* %s */\n", values[i], suffix, values[i + 1], suffix,
               values[i + 2], suffix, values[i + 3], suffix, i == 10 ? "acceleration" : "total");
}

static void print_kinds(int32_t input, int32_t between)
{
    const word *in = inputs, *how = betweens;
    while (in->value != input)
        ++in;
    while (how->value != between)
        ++how;
    printf("    %d, /* input: %s */\n    %d, /* between: %s */\n", (int)input, in->name, (int)between,
           how->name);
}

/* The members of a rampwise_coeffs_f32. */
static void print_single_members(const rampwise_coeffs_f32 *c)
{
    double values[18];
    for (int i = 0; i < 10; ++i)
        values[i] = (&c->A)[i];
    for (int i = 0; i < 4; ++i) {
        values[10 + i] = c->acceleration[i];
        values[14 + i] = c->total[i];
    }
    print_values(values, "f");
    printf("    %af, %af, %af, %af, /* mass, damper, stiffness, rate */\n", (double)c->mass,
           (double)c->damper, (double)c->stiffness, (double)c->rate);
    printf("    %a, /* dt = %.17g */\n", c->dt, c->dt);
    print_kinds(c->input, c->between);
    printf("    {0}, /* reserve */\n");
}

static void print_single(const char *name, const rampwise_coeffs_f32 *c)
{
    printf("\nstatic const rampwise_coeffs_f32 %s = {\n", name);
    print_single_members(c);
    printf("};\n");
}

/* Goes through the list of intervals: made, so that what is wrong is told before anything is printed, or printed. */
static void go_through_intervals(const request *r, const rampwise_coeffs_f32 *c, int printed)
{
    const char *text = r->intervals;
    for (int ends = 0; !ends; ++text) {
        rampwise_interval_f32 interval;
        const uint64_t length = whole_number("intervals", &text);
        ends = *text == '\0';
        if (!ends && *text != ',')
            refuse("--intervals: '%s' is not a whole number above 0", text);
        demand(rampwise_interval_make_f32(&interval, c, r->ticks, length));
        if (printed) {
            printf("    {UINT64_C(%" PRIu64 "), {\n", interval.ticks);
            print_single_members(&interval.c);
            printf("    }},\n");
        }
    }
}

static void print_intervals(const request *r, const rampwise_coeffs_f32 *c)
{
    printf("\n/* For dt of %" PRIu64 " ticks. */\nstatic const rampwise_interval_f32 %s_intervals[] = {\n",
           r->ticks, r->name);
    go_through_intervals(r, c, 1);
    printf("};\n");
}

static void print_double(const char *name, const rampwise_coeffs *c)
{
    double values[18];
    memcpy(values, c, 10 * sizeof *values);
    memcpy(values + 10, c->acceleration, sizeof c->acceleration);
    memcpy(values + 14, c->total, sizeof c->total);
    printf("\nstatic const rampwise_coeffs %s_double = {\n", name);
    print_values(values, "");
    printf("    {%a, %a, %a}, /* mass, damper, stiffness */\n", c->system.mass, c->system.damper,
           c->system.stiffness);
    printf("    %a, /* dt = %.17g */\n", c->dt, c->dt);
    print_kinds(c->input, c->between);
    printf("    {0}, /* reserve */\n};\n");
}

int main(int argc, char **argv)
{
    const request r = read_options(argc, argv);
    const rampwise_system sys = system_of(&r);
    rampwise_coeffs_f32 single;
    rampwise_coeffs c;
    demand(rampwise_self_test());
    demand(rampwise_coeffs_make_f32(&single, &sys, r.dt, r.input, r.between));
    demand(rampwise_coeffs_make(&c, &sys, r.dt, r.input, r.between));
    if (r.intervals != NULL)
        go_through_intervals(&r, &single, 0);
    print_begin(&r);
    print_single(r.name, &single);
    if (r.in_double)
        print_double(r.name, &c);
    if (r.intervals != NULL)
        print_intervals(&r, &single);
    puts("\n#endif");
    if (fflush(stdout) != 0 || ferror(stdout))
        refuse("standard output: cannot be written: %s", strerror(errno));
    return EXIT_SUCCESS;
}
