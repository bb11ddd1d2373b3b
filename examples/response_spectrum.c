/* response_spectrum: what a shake of the base does to oscillators of every period.

   Reads a uniform record of base acceleration, finds the largest relative displacement and total
   acceleration of a list of oscillators, prints some of them, and can write all as CSV. Run it with
   --help; examples/first_run runs it. The work is in site_spectrum.c, split over threads. */
#include <getopt.h>
#include <math.h>
#include <stdio.h>
#include <string.h>
#include <rampwise.h>
#include "site_data.h"
#include "site_options.h"
#include "site_spectrum.h"
#include "text_table.h"

const char *const program_name = "response_spectrum";

typedef struct job {
    const char *record_path, *spectrum_path;
    site_unit time_unit, acceleration_unit;
    int threads; /* 0: one a processor */
    site_record record;
    site_spectrum spectrum;
} job;

static int do_job(job *work)
{
    site_record *const record = &work->record;
    if (site_record_read(record, work->record_path, work->time_unit, work->acceleration_unit) != 0)
        return -1;
    if (!record->uniform)
        return complain("%s: irregular, with intervals from %.4g s to %.4g s; a spectrum needs equal ones",
                        record->path, record->shortest, record->interval);
    if (site_spectrum_solve(&work->spectrum, record, work->threads) != 0)
        return -1;
    if (work->spectrum_path != NULL && site_spectrum_write(work->spectrum_path, record, &work->spectrum) != 0)
        return -1;
    site_spectrum_print(&work->spectrum, record);
    if (work->spectrum_path != NULL)
        printf("\nThe whole spectrum is in %s\n", work->spectrum_path);
    return 0;
}

static void print_help(void)
{
    puts("Usage: response_spectrum [OPTION...] RECORD [SPECTRUM]\n"
         "\n"
         "What a shake of the base does to oscillators of every period: the largest relative\n"
         "displacement and total acceleration, between the samples too. Some of them as a table;\n"
         "all of them as CSV in the file SPECTRUM, if one is named.\n"
         "\n"
         "  -d, --damping LIST            per cent of critical, up to 8 with commas between them;\n"
         "                                0,2,5,10 by default\n"
         "  -p, --periods N               number of natural periods, at equal ratios: 200 by default\n"
         "  -f, --from PERIOD             the shortest, in s: 0.05 by default\n"
         "  -l, --to PERIOD               the longest, in s: 10 by default\n"
         "  -j, --threads N               to work on: one a processor by default\n"
         "  -t, --time-unit UNIT          of RECORD: s (default) or ms\n"
         "  -a, --acceleration-unit UNIT  of RECORD: m/s2 (default), cm/s2, or g (9.80665 m/s2)\n"
         "  -h, --help                    print this\n"
         "  -V, --version                 print the version\n"
         "\n"
         "RECORD has two columns, time and base acceleration, at regular times, with comma,\n"
         "semicolon, tab or blanks between them and a decimal point in the numbers. It may have\n"
         "one heading and lines that begin with '#'.\n"
         "\n"
         "Exit status: 0, or 2 with one message where something is wrong and nothing is written.");
}

/* The value of an option as a number from least to most. */
static int take_number(double *number, const char *option, const char *text, double least, double most)
{
    if (!text_is_number(text, number))
        return complain("--%s: '%s' is not a number; see --help", option, text);
    if (!(*number >= least && *number <= most))
        return complain("--%s: %s is not from %g to %g", option, text, least, most);
    return 0;
}

static int take_count(long *count, const char *option, const char *text, double least, double most)
{
    double number;
    if (take_number(&number, option, text, least, most) != 0)
        return -1;
    *count = (long)number;
    return number == floor(number) ? 0 : complain("--%s: %s is not a whole number", option, text);
}

static int add_damping(site_spectrum *spectrum, const char *text)
{
    double damping;
    if (take_number(&damping, "damping", text, 0, 1000) != 0)
        return -1;
    for (size_t d = 0; d < spectrum->n_dampings; ++d)
        if (spectrum->damping[d] == damping)
            return complain("--damping: %s is there twice", text);
    if (spectrum->n_dampings == MOST_DAMPINGS)
        return complain("--damping: more than %d values", MOST_DAMPINGS);
    spectrum->damping[spectrum->n_dampings++] = damping + 0; /* no minus before 0 */
    return 0;
}

static int take_dampings(site_spectrum *spectrum, char *list)
{
    int status = 0;
    spectrum->n_dampings = 0;
    for (char *text = list, *next; text != NULL && status == 0; text = next) {
        next = strchr(text, ',');
        if (next != NULL)
            *next++ = '\0';
        status = add_damping(spectrum, text);
    }
    return status;
}

static int take_periods(site_spectrum *spectrum, const char *text)
{
    long count;
    if (take_count(&count, "periods", text, 2, 100000) != 0)
        return -1;
    spectrum->n_periods = (size_t)count;
    return 0;
}

static int take_threads(int *threads, const char *text)
{
    long count;
    if (take_count(&count, "threads", text, 1, 1024) != 0)
        return -1;
#ifndef _OPENMP
    if (count > 1)
        return complain("--threads: this build has one thread only; it was made without OpenMP");
#endif
    *threads = (int)count;
    return 0;
}

static int take_paths(job *work, int n, char **path)
{
    if (work->spectrum.from >= work->spectrum.to)
        return complain("--from, --to: %g s is not below %g s", work->spectrum.from, work->spectrum.to);
    if (n < 1 || n > 2)
        return complain("%s; see --help", n < 1 ? "RECORD is missing" : "too many files");
    work->record_path = path[0];
    work->spectrum_path = n == 2 ? path[1] : NULL;
    return 0;
}

/* 0: go on; 1: nothing is left to do; -1 after a message. */
static int take_option(job *work, int option, char **argv)
{
    switch (option) {
    case 'd':
        return take_dampings(&work->spectrum, optarg);
    case 'p':
        return take_periods(&work->spectrum, optarg);
    case 'f':
        return take_number(&work->spectrum.from, "from", optarg, 1e-6, 1e6);
    case 'l':
        return take_number(&work->spectrum.to, "to", optarg, 1e-6, 1e6);
    case 'j':
        return take_threads(&work->threads, optarg);
    case 't':
        return site_choose_unit(&work->time_unit, site_time_units, "time-unit");
    case 'a':
        return site_choose_unit(&work->acceleration_unit, site_acceleration_units, "acceleration-unit");
    case 'h':
        print_help();
        return 1;
    case 'V':
        printf("response_spectrum (rampwise %s)\n", rampwise_version());
        return 1;
    default:
        return site_refuse_option(option, argv);
    }
}

static int read_arguments(job *work, int argc, char **argv)
{
    static const struct option options[] = {{"damping", required_argument, NULL, 'd'},
                                            {"periods", required_argument, NULL, 'p'},
                                            {"from", required_argument, NULL, 'f'},
                                            {"to", required_argument, NULL, 'l'},
                                            {"threads", required_argument, NULL, 'j'},
                                            {"time-unit", required_argument, NULL, 't'},
                                            {"acceleration-unit", required_argument, NULL, 'a'},
                                            {"help", no_argument, NULL, 'h'},
                                            {"version", no_argument, NULL, 'V'},
                                            {NULL, 0, NULL, 0}};
    int option, status = 0;
    opterr = 0;
    while (status == 0 && (option = getopt_long(argc, argv, ":d:p:f:l:j:t:a:hV", options, NULL)) != -1)
        status = take_option(work, option, argv);
    return status != 0 ? status : take_paths(work, argc - optind, argv + optind);
}

int main(int argc, char **argv)
{
    job work = {
        .time_unit = site_time_units[0],
        .acceleration_unit = site_acceleration_units[0],
        .spectrum = {.n_dampings = 4, .damping = {0, 2, 5, 10}, .n_periods = 200, .from = 0.05, .to = 10}};
    int status = rampwise_self_test();
    if (status != RAMPWISE_OK)
        status = complain("this build of rampwise: %s", rampwise_status_text(status));
    else
        status = read_arguments(&work, argc, argv);
    if (status == 0)
        status = do_job(&work);
    site_spectrum_free(&work.spectrum);
    site_record_free(&work.record);
    return site_end(status);
}
