#include "site_spectrum.h"

#include <math.h>
#include <stdio.h>
#include "site_report.h"
#include "whole_file.h"

enum { TABLE_ROWS = 12 };

static double pseudo_acceleration(const site_spectrum *spectrum, size_t d, size_t i)
{
    const size_t j = d * spectrum->n_periods + i;
    return rampwise_pseudo_acceleration(spectrum->omega[j], &spectrum->peak[LOOK_DISPLACEMENT][j]);
}

/* The damping of the table: the one nearest to 5 %. */
static size_t table_damping(const site_spectrum *spectrum)
{
    size_t nearest = 0;
    for (size_t d = 1; d < spectrum->n_dampings; ++d)
        if (fabs(spectrum->damping[d] - 5) < fabs(spectrum->damping[nearest] - 5))
            nearest = d;
    return nearest;
}

static void print_request(const site_spectrum *spectrum)
{
    printf("Spectrum %zu periods from %g s to %g s at equal ratios; damping", spectrum->n_periods,
           spectrum->from, spectrum->to);
    for (size_t d = 0; d < spectrum->n_dampings; ++d)
        printf("%s %g %%", d == 0 ? "" : ",", spectrum->damping[d]);
    puts("\n         each oscillator from rest, base acceleration straight between samples\n");
}

/* The estimated error of the sampling, in per cent of the value, with the sign that it has towards larger sizes. */
static void print_share(const site_spectrum *spectrum, int look, size_t d, size_t i)
{
    const double size = site_spectrum_size(spectrum, look, d, i);
    const double share = size > 0 ? 100 * (1 - site_spectrum_corrected(spectrum, look, d, i) / size) : 0;
    printf("%10.2f", fabs(share) < 0.005 ? 0 : share); /* no minus before zeros */
}

static void print_table(const site_spectrum *spectrum)
{
    const size_t d = table_damping(spectrum), n = spectrum->n_periods;
    const size_t rows = n < TABLE_ROWS ? n : TABLE_ROWS;
    printf("Largest values at %g %% of critical damping\n\n", spectrum->damping[d]);
    puts(" natural      relative  sampling         total  sampling        pseudo-\n"
         "  period  displacement     error  acceleration     error  acceleration\n"
         "     (s)          (mm)       (%)       (m/s^2)       (%)       (m/s^2)");
    for (size_t row = 0; row < rows; ++row) {
        const size_t i = row * (n - 1) / (rows - 1);
        site_report_value(7, spectrum->period[i], 0);
        site_report_value(13, 1000 * site_spectrum_size(spectrum, LOOK_DISPLACEMENT, d, i), 0);
        print_share(spectrum, LOOK_DISPLACEMENT, d, i);
        site_report_value(13, site_spectrum_size(spectrum, LOOK_ACCELERATION, d, i), 0);
        print_share(spectrum, LOOK_ACCELERATION, d, i);
        site_report_value(13, pseudo_acceleration(spectrum, d, i), 0);
        putchar('\n');
    }
    puts("\n"
         "Displacement is against the base, total acceleration against a fixed frame. Pseudo-\n"
         "acceleration is displacement times (2 pi / period)^2. All are sizes, without a sign.\n"
         "Sampling errors are estimates: below 0, the value is too small by that.\n");
}

/* The share of the size in one look that another one does not show. */
static double missed(const site_spectrum *spectrum, int look, int other, size_t d, size_t i)
{
    const double size = site_spectrum_size(spectrum, look, d, i);
    return size > 0 ? 1 - site_spectrum_size(spectrum, other, d, i) / size : 0;
}

static void print_missed(const site_spectrum *spectrum, const char *name, int look, int other)
{
    size_t worst_d = 0, worst_i = 0;
    for (size_t d = 0; d < spectrum->n_dampings; ++d)
        for (size_t i = 0; i < spectrum->n_periods; ++i)
            if (missed(spectrum, look, other, d, i) > missed(spectrum, look, other, worst_d, worst_i)) {
                worst_d = d;
                worst_i = i;
            }
    const double most = missed(spectrum, look, other, worst_d, worst_i);
    if (most > 0)
        printf("  %s  up to %.3g %%, at a period of %.4g s with %g %% of damping\n", name, 100 * most,
               spectrum->period[worst_i], spectrum->damping[worst_d]);
    else
        printf("  %s  nothing\n", name);
}

static void print_sampling(const site_spectrum *spectrum, const site_record *record)
{
    puts("Largest values are the true ones, between the samples too. At the samples alone one\n"
         "would have missed, in all of the spectrum:");
    print_missed(spectrum, "of displacement  ", LOOK_DISPLACEMENT, LOOK_DISPLACEMENT_AT_SAMPLES);
    print_missed(spectrum, "of acceleration  ", LOOK_ACCELERATION, LOOK_ACCELERATION_AT_SAMPLES);
    printf("The shortest period has %.3g samples.\n", spectrum->from / record->interval);
}

static void print_abrupt(const rampwise_evidence *evidence)
{
    if (evidence->abrupt & RAMPWISE_ABRUPT_START)
        puts("WARNING: the record starts abruptly; these estimates are worth nothing.");
    else if (evidence->abrupt & RAMPWISE_ABRUPT_END)
        puts("WARNING: the record stops abruptly; for its last samples these estimates are worth nothing.");
}

static void print_verdict(const site_spectrum *spectrum, const site_record *record, const char *name,
                          int look)
{
    const size_t n = spectrum->n_dampings * spectrum->n_periods;
    double period = INFINITY;
    (void)rampwise_shortest_period(n, spectrum->omega, spectrum->peak[look], spectrum->evidence[look], 0.01,
                                   &period);
    if (isinf(period))
        printf("  %s  of none of these periods\n", name);
    else
        printf("  %s  of all periods from %.4g s on (%.3g samples)\n", name, period,
               period / record->interval);
}

/* What the samples have lost of a shake that is smooth between them. */
static void print_evidence(const site_spectrum *spectrum, const site_record *record)
{
    puts("\nThe base acceleration is taken as straight between its samples. If it is smooth, that\n"
         "costs, by estimate, 1 % or less");
    print_verdict(spectrum, record, "of displacement  ", LOOK_DISPLACEMENT);
    print_verdict(spectrum, record, "of acceleration  ", LOOK_ACCELERATION);
    puts("for every damping. A shake with real corners at the samples needs no such estimate; and it\n"
         "sees neither aliasing nor earlier resampling.");
    print_abrupt(spectrum->evidence[LOOK_ACCELERATION]);
    putchar('\n');
}

static void print_after_end(const site_spectrum *spectrum)
{
    size_t beyond = 0;
    double shortest = INFINITY, longest = 0;
    for (size_t d = 0; d < spectrum->n_dampings; ++d)
        for (size_t i = 0; i < spectrum->n_periods; ++i)
            if (site_spectrum_size(spectrum, LOOK_DISPLACEMENT_AFTER, d, i) >
                1.01 * site_spectrum_size(spectrum, LOOK_DISPLACEMENT, d, i)) {
                ++beyond;
                shortest = fmin(shortest, spectrum->period[i]);
                longest = fmax(longest, spectrum->period[i]);
            }
    if (beyond > 0)
        printf("WARNING: %zu of %zu oscillators, with periods from %.4g s to %.4g s, go further after\n"
               "         the record ends than before; the spectrum has what comes before.\n",
               beyond, spectrum->n_dampings * spectrum->n_periods, shortest, longest);
}

void site_spectrum_print(const site_spectrum *spectrum, const site_record *record)
{
    site_report_record(record);
    print_request(spectrum);
    print_table(spectrum);
    print_sampling(spectrum, record);
    print_evidence(spectrum, record);
    print_after_end(spectrum);
    site_report_caution(stdout);
}

static void write_heading(FILE *stream, const site_spectrum *spectrum)
{
    fprintf(stream, "# response spectrum: largest sizes from the first sample to the last and between them,\n"
                    "# from rest, base acceleration straight between samples\n"
                    "# displacement against the base, acceleration against a fixed frame\n"
                    "# corrected: less the estimated error of the sampling, at the same instants\n");
    fprintf(stream, "# rampwise %s, arithmetic edition %d\n", rampwise_version(),
            rampwise_arithmetic_edition());
    fprintf(stream, "period (s)");
    for (size_t d = 0; d < spectrum->n_dampings; ++d) {
        const double damping = spectrum->damping[d];
        fprintf(stream,
                ",%g %%: displacement (m),%g %%: total acceleration (m/s^2),"
                "%g %%: pseudo-acceleration (m/s^2),%g %%: corrected displacement (m),"
                "%g %%: corrected total acceleration (m/s^2)",
                damping, damping, damping, damping, damping);
    }
    fputc('\n', stream);
}

static void write_spectrum(FILE *stream, const void *content)
{
    const site_spectrum *const spectrum = content;
    write_heading(stream, spectrum);
    for (size_t i = 0; i < spectrum->n_periods && !ferror(stream); ++i) {
        whole_file_number(stream, spectrum->period[i]);
        for (size_t d = 0; d < spectrum->n_dampings; ++d) {
            fputc(',', stream);
            whole_file_number(stream, site_spectrum_size(spectrum, LOOK_DISPLACEMENT, d, i));
            fputc(',', stream);
            whole_file_number(stream, site_spectrum_size(spectrum, LOOK_ACCELERATION, d, i));
            fputc(',', stream);
            whole_file_number(stream, pseudo_acceleration(spectrum, d, i));
            fputc(',', stream);
            whole_file_number(stream, site_spectrum_corrected(spectrum, LOOK_DISPLACEMENT, d, i));
            fputc(',', stream);
            whole_file_number(stream, site_spectrum_corrected(spectrum, LOOK_ACCELERATION, d, i));
        }
        fputc('\n', stream);
    }
}

int site_spectrum_write(const char *path, const site_record *record, const site_spectrum *spectrum)
{
    return whole_file_write(path, 1, &record->path, write_spectrum, spectrum);
}
