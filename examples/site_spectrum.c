#include "site_spectrum.h"

#include <math.h>
#include <stdlib.h>
#include "text_table.h"
#ifdef _OPENMP
#include <omp.h>
#endif

enum { OSCILLATORS_A_PART = 32 };
static const double pi = 3.14159265358979323846;

static const struct {
    int quantity;
    unsigned flags;
} looks[LOOKS] = {
    [LOOK_DISPLACEMENT] = {RAMPWISE_DISPLACEMENT, 0},
    [LOOK_ACCELERATION] = {RAMPWISE_TOTAL_ACCELERATION, 0},
    [LOOK_DISPLACEMENT_AT_SAMPLES] = {RAMPWISE_DISPLACEMENT, RAMPWISE_AT_SAMPLES},
    [LOOK_ACCELERATION_AT_SAMPLES] = {RAMPWISE_TOTAL_ACCELERATION, RAMPWISE_AT_SAMPLES},
    [LOOK_DISPLACEMENT_AFTER] = {RAMPWISE_DISPLACEMENT, RAMPWISE_RESIDUAL},
};

/* A piece of work for one thread, and what came of it. */
typedef struct part {
    int look;
    size_t first, count; /* of the oscillators */
    int status;
    size_t bad; /* counted from first */
} part;

static void solve_part(part *p, const site_spectrum *spectrum, const site_record *record)
{
    const double *const omega = spectrum->omega + p->first, *const zeta = spectrum->zeta + p->first;
    rampwise_peak *const peak = spectrum->peak[p->look] + p->first;
    const int quantity = looks[p->look].quantity;
    const unsigned flags = looks[p->look].flags;
    if (p->look < LOOKS_WITH_EVIDENCE)
        p->status = rampwise_spectrum_evidence(record->n, record->interval, record->acceleration,
                                               RAMPWISE_BASE_ACCELERATION, p->count, omega, zeta, quantity,
                                               flags, peak, spectrum->evidence[p->look] + p->first, &p->bad);
    else
        p->status =
            rampwise_spectrum(record->n, record->interval, record->acceleration, RAMPWISE_BASE_ACCELERATION,
                              p->count, omega, zeta, quantity, flags, peak, &p->bad);
}

/* No part writes where another one reads or writes, so threads need not wait for each other, and
   the results do not depend on their number. */
static void solve_parts(part *parts, long n_parts, const site_spectrum *spectrum, const site_record *record,
                        int threads)
{
#ifdef _OPENMP
    const int n_threads = threads > 0 ? threads : omp_get_max_threads();
#pragma omp parallel for schedule(dynamic) num_threads(n_threads)
#else
    (void)threads;
#endif
    for (long k = 0; k < n_parts; ++k)
        solve_part(&parts[k], spectrum, record);
}

static size_t cut(part *parts, size_t n_oscillators)
{
    size_t n_parts = 0;
    for (int look = 0; look < LOOKS; ++look)
        for (size_t first = 0; first < n_oscillators; first += OSCILLATORS_A_PART) {
            const size_t left = n_oscillators - first;
            const size_t count = left < OSCILLATORS_A_PART ? left : OSCILLATORS_A_PART;
            parts[n_parts++] = (part){.look = look, .first = first, .count = count};
        }
    return n_parts;
}

static int report_part(const part *p, const site_spectrum *spectrum, const site_record *record)
{
    const size_t bad = p->first + p->bad;
    if (p->status == RAMPWISE_OK)
        return 0;
    return complain("%s: a period of %g s with %g %% of damping cannot be solved: %s", record->path,
                    spectrum->period[bad % spectrum->n_periods], spectrum->damping[bad / spectrum->n_periods],
                    rampwise_status_text(p->status));
}

/* A peak beyond the largest double is told by the library as an infinite one, not as an error. */
static int check_finite(const site_spectrum *spectrum, const site_record *record)
{
    for (int look = 0; look < LOOKS; ++look)
        for (size_t d = 0; d < spectrum->n_dampings; ++d)
            for (size_t i = 0; i < spectrum->n_periods; ++i)
                if (!isfinite(site_spectrum_size(spectrum, look, d, i)))
                    return complain("%s: a period of %g s with %g %% of damping cannot be solved: %s",
                                    record->path, spectrum->period[i], spectrum->damping[d],
                                    rampwise_status_text(RAMPWISE_ERROR_OVERFLOW));
    return 0;
}

static int allocate(site_spectrum *spectrum)
{
    const size_t n = spectrum->n_dampings * spectrum->n_periods;
    spectrum->period = calloc(spectrum->n_periods, sizeof *spectrum->period);
    spectrum->omega = calloc(n, sizeof *spectrum->omega);
    spectrum->zeta = calloc(n, sizeof *spectrum->zeta);
    int complete = spectrum->period != NULL && spectrum->omega != NULL && spectrum->zeta != NULL;
    for (int look = 0; look < LOOKS; ++look) {
        spectrum->peak[look] = calloc(n, sizeof *spectrum->peak[look]);
        complete = complete && spectrum->peak[look] != NULL;
    }
    for (int look = 0; look < LOOKS_WITH_EVIDENCE; ++look) {
        spectrum->evidence[look] = calloc(n, sizeof *spectrum->evidence[look]);
        complete = complete && spectrum->evidence[look] != NULL;
    }
    return complete;
}

static int list_oscillators(site_spectrum *spectrum)
{
    const size_t n = spectrum->n_periods;
    const int status = rampwise_list_log(n, spectrum->from, spectrum->to, spectrum->period);
    for (size_t j = 0; j < spectrum->n_dampings * n; ++j) {
        spectrum->omega[j] = 2 * pi / spectrum->period[j % n];
        spectrum->zeta[j] = spectrum->damping[j / n] / 100;
    }
    return status == RAMPWISE_OK ? 0 : complain("--from, --to: %s", rampwise_status_text(status));
}

int site_spectrum_solve(site_spectrum *spectrum, const site_record *record, int threads)
{
    const size_t n = spectrum->n_dampings * spectrum->n_periods;
    part *const parts = calloc(LOOKS * (n / OSCILLATORS_A_PART + 1), sizeof *parts);
    int status = 0;
    if (!allocate(spectrum) || parts == NULL)
        status = complain("--periods: too many for the memory of this machine");
    if (status == 0)
        status = list_oscillators(spectrum);
    if (status == 0) {
        const size_t n_parts = cut(parts, n);
        solve_parts(parts, (long)n_parts, spectrum, record, threads);
        for (size_t k = 0; k < n_parts && status == 0; ++k)
            status = report_part(&parts[k], spectrum, record);
    }
    if (status == 0)
        status = check_finite(spectrum, record);
    free(parts);
    return status;
}

void site_spectrum_free(site_spectrum *spectrum)
{
    for (int look = 0; look < LOOKS; ++look)
        free(spectrum->peak[look]);
    for (int look = 0; look < LOOKS_WITH_EVIDENCE; ++look)
        free(spectrum->evidence[look]);
    free(spectrum->period);
    free(spectrum->omega);
    free(spectrum->zeta);
}

double site_spectrum_size(const site_spectrum *spectrum, int look, size_t d, size_t i)
{
    return fabs(rampwise_peak_larger(&spectrum->peak[look][d * spectrum->n_periods + i])->value);
}

double site_spectrum_corrected(const site_spectrum *spectrum, int look, size_t d, size_t i)
{
    const size_t j = d * spectrum->n_periods + i;
    const rampwise_peak *const peak = &spectrum->peak[look][j];
    const rampwise_evidence *const evidence = &spectrum->evidence[look][j];
    const rampwise_instant *const larger = rampwise_peak_larger(peak);
    return fabs(larger->value - (larger == &peak->high ? evidence->error_high : evidence->error_low));
}
