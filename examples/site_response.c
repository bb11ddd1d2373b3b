/* site_response: what a shake of the base does to gear on springs and dampers.

   Reads a record of base acceleration and a list of gear, solves each piece from rest, prints the
   largest motions and forces with their times, and can write all histories as CSV. Run it with
   --help; examples/first_run runs it twice. The work is in solve() below. */
#include <getopt.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <rampwise.h>
#include "site_data.h"
#include "site_histories.h"
#include "site_options.h"
#include "site_report.h"
#include "text_table.h"

const char *const program_name = "site_response";
static const double pi = 3.14159265358979323846;

typedef struct job {
    const char *gear_path, *record_path, *histories_path;
    site_unit time_unit, acceleration_unit;
    site_record record;
    site_gear gear;
    site_motion *motion;
    site_largest *largest;
} job;

/* From rest under the first sample, over all samples; *s becomes the state at the last one. */
static int run(const rampwise_coeffs *c, const site_record *record, rampwise_state *s,
               const rampwise_history *out)
{
    const size_t later = record->n - 1;
    const rampwise_history rest = {.u = out->u + 1, .v = out->v + 1, .total = out->total + 1};
    double time = record->time[0];
    int status;

    rampwise_start(s, 0, 0, record->acceleration[0]);
    out->u[0] = s->u;
    out->v[0] = s->v;
    out->total[0] = rampwise_total_acceleration(c, s);
    if (record->uniform)
        status = rampwise_run(c, s, later, record->acceleration + 1, &rest, NULL);
    else
        status = rampwise_run_at(c, s, &time, later, record->time + 1, record->acceleration + 1, &rest, NULL);
    return status;
}

static int find_largest(const rampwise_coeffs *c, const site_record *record, const rampwise_history *history,
                        site_largest *r)
{
    *r = (site_largest){0};
    for (size_t i = 0; i < record->n; ++i) {
        const rampwise_state s = {.u = history->u[i], .v = history->v[i]};
        site_note(&r->displacement, s.u, i);
        site_note(&r->acceleration, history->total[i], i);
        site_note(&r->force, rampwise_spring_force(c, &s) + rampwise_damper_force(c, &s), i);
    }
    return isfinite(r->force.value) ? RAMPWISE_OK : RAMPWISE_ERROR_OVERFLOW;
}

/* One piece of gear: the oscillator, its coefficients, its history, its largest values. */
static int solve(const gear_piece *piece, const site_record *record, const rampwise_history *out,
                 site_largest *r)
{
    rampwise_system system;
    rampwise_coeffs c;
    rampwise_state end;

    int status = rampwise_system_hertz(&system, piece->frequency, piece->damping_ratio);
    if (status != RAMPWISE_OK)
        return status;
    system.mass *= piece->mass;
    system.damper *= piece->mass;
    system.stiffness *= piece->mass;

    status = rampwise_coeffs_make(&c, &system, record->interval, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP);
    if (status == RAMPWISE_OK)
        status = run(&c, record, &end, out);
    if (status != RAMPWISE_OK)
        return status;
    status = find_largest(&c, record, out, r);
    /* Free motion never has more energy than it starts with. */
    r->may_reach = hypot(end.u, end.v / (2 * pi * piece->frequency));
    return status;
}

static double *new_history(const site_record *record)
{
    return calloc(record->n, sizeof(double));
}

static int solve_piece(job *work, size_t j, double *velocity)
{
    const gear_piece *const piece = &work->gear.piece[j];
    site_motion *const motion = &work->motion[j];
    motion->displacement = new_history(&work->record);
    motion->acceleration = new_history(&work->record);
    if (motion->displacement == NULL || motion->acceleration == NULL)
        return complain("%s: too long for the memory of this machine", work->record_path);
    const rampwise_history out = {.u = motion->displacement, .v = velocity, .total = motion->acceleration};
    const int status = solve(piece, &work->record, &out, &work->largest[j]);
    if (status != RAMPWISE_OK)
        return complain("%s:%zu: '%s' cannot be solved for %s: %s", work->gear_path, piece->line, piece->name,
                        work->record_path, rampwise_status_text(status));
    return 0;
}

static int solve_all(job *work)
{
    work->motion = calloc(work->gear.n, sizeof *work->motion);
    work->largest = calloc(work->gear.n, sizeof *work->largest);
    double *const velocity = new_history(&work->record);
    int status = 0;
    if (work->motion == NULL || work->largest == NULL || velocity == NULL)
        status = complain("%s: too long for the memory of this machine", work->record_path);
    for (size_t j = 0; j < work->gear.n && status == 0; ++j)
        status = solve_piece(work, j, velocity);
    free(velocity);
    return status;
}

static int do_job(job *work)
{
    if (site_gear_read(&work->gear, work->gear_path) != 0 ||
        site_record_read(&work->record, work->record_path, work->time_unit, work->acceleration_unit) != 0 ||
        solve_all(work) != 0)
        return -1;
    if (work->histories_path != NULL &&
        site_histories_write(work->histories_path, &work->record, &work->gear, work->motion) != 0)
        return -1;
    site_report_print(&work->record, &work->gear, work->largest);
    if (work->histories_path != NULL)
        printf("\nHistories are in %s\n", work->histories_path);
    return 0;
}

static void free_job(job *work)
{
    for (size_t j = 0; work->motion != NULL && j < work->gear.n; ++j) {
        free(work->motion[j].displacement);
        free(work->motion[j].acceleration);
    }
    free(work->motion);
    free(work->largest);
    site_record_free(&work->record);
    site_gear_free(&work->gear);
}

static void print_help(void)
{
    puts("Usage: site_response --gear GEAR [OPTION...] RECORD [HISTORIES]\n"
         "\n"
         "What a shake of the base does to gear on springs and dampers: the largest relative\n"
         "displacement, total acceleration and force of each piece, as a table; all samples of\n"
         "them as CSV in the file HISTORIES, if one is named.\n"
         "\n"
         "  -g, --gear GEAR               the gear, one piece a line: name, mass (kg), natural\n"
         "                                frequency (Hz), damping ratio (1 is critical)\n"
         "  -t, --time-unit UNIT          of RECORD: s (default) or ms\n"
         "  -a, --acceleration-unit UNIT  of RECORD: m/s2 (default), cm/s2, or g (9.80665 m/s2)\n"
         "  -h, --help                    print this\n"
         "  -V, --version                 print the version\n"
         "\n"
         "RECORD has two columns, time and base acceleration, at regular or irregular times, with\n"
         "comma, semicolon, tab or blanks between them and a decimal point in the numbers. Both\n"
         "files may have one heading and lines that begin with '#'.\n"
         "\n"
         "Exit status: 0, or 2 with one message where something is wrong and nothing is written.");
}

static int take_paths(job *work, int n, char **path)
{
    if (work->gear_path == NULL)
        return complain("--gear is missing; see --help");
    if (n < 1 || n > 2)
        return complain("%s; see --help", n < 1 ? "RECORD is missing" : "too many files");
    work->record_path = path[0];
    work->histories_path = n == 2 ? path[1] : NULL;
    return 0;
}

/* 0: go on; 1: nothing is left to do; -1 after a message. */
static int take_option(job *work, int option, char **argv)
{
    switch (option) {
    case 'g':
        work->gear_path = optarg;
        return 0;
    case 't':
        return site_choose_unit(&work->time_unit, site_time_units, "time-unit");
    case 'a':
        return site_choose_unit(&work->acceleration_unit, site_acceleration_units, "acceleration-unit");
    case 'h':
        print_help();
        return 1;
    case 'V':
        printf("site_response (rampwise %s)\n", rampwise_version());
        return 1;
    default:
        return site_refuse_option(option, argv);
    }
}

static int read_arguments(job *work, int argc, char **argv)
{
    static const struct option options[] = {{"gear", required_argument, NULL, 'g'},
                                            {"time-unit", required_argument, NULL, 't'},
                                            {"acceleration-unit", required_argument, NULL, 'a'},
                                            {"help", no_argument, NULL, 'h'},
                                            {"version", no_argument, NULL, 'V'},
                                            {NULL, 0, NULL, 0}};
    int option, status = 0;
    opterr = 0;
    while (status == 0 && (option = getopt_long(argc, argv, ":g:t:a:hV", options, NULL)) != -1)
        status = take_option(work, option, argv);
    return status != 0 ? status : take_paths(work, argc - optind, argv + optind);
}

int main(int argc, char **argv)
{
    job work = {.time_unit = site_time_units[0], .acceleration_unit = site_acceleration_units[0]};
    int status = rampwise_self_test();
    if (status != RAMPWISE_OK)
        status = complain("this build of rampwise: %s", rampwise_status_text(status));
    else
        status = read_arguments(&work, argc, argv);
    if (status == 0)
        status = do_job(&work);
    free_job(&work);
    return site_end(status);
}
