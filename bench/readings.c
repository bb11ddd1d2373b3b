#include "readings.h"

#include <math.h>
#include <stdarg.h>
#include <stdio.h>
#include "machine.h"
#include "machine_limits.h"

typedef struct readings {
    reading *r;
    size_t count;
    const task_list *list;
} readings;

enum bound { AT_LEAST = 1, AT_MOST = 0 };

/* Leaves out what was not measured, a value of NAN. */
static void add(readings *all, const char *id, double value, enum bound bound, double target,
                const char *text, ...) __attribute__((format(printf, 6, 7)));

static void add(readings *all, const char *id, double value, enum bound bound, double target,
                const char *text, ...)
{
    va_list rest;
    if (isnan(value) || all->count == READINGS_MOST)
        return;
    reading *const r = &all->r[all->count++];
    *r = (reading){.id = id, .value = value, .target = target, .at_least = bound == AT_LEAST};
    va_start(rest, text);
    vsnprintf(r->text, sizeof r->text, text, rest);
    va_end(rest);
}

/* How many times the cost of `fast` that of `slow` is. */
static double times(const readings *all, const char *slow, const char *fast)
{
    const task *const a = task_find(all->list, slow), *const b = task_find(all->list, fast);
    return a != NULL && b != NULL ? a->best / b->best : NAN;
}

static double share_of_limit(const readings *all, const char *bank, const char *set)
{
    const task *const t = task_find(all->list, bank);
    const double limit = limits_rate(all->list, "mix", set);
    return t != NULL && limit > 0 ? 1 / t->best / limit : NAN;
}

static double times_chain(const readings *all, const char *id)
{
    const task *const t = task_find(all->list, id);
    const double rate = limits_rate(all->list, "chain", "scalar");
    return t != NULL && rate > 0 ? t->best * rate : NAN;
}

static void against_limits(readings *all)
{
    add(all, "bank_of_limit_avx512", share_of_limit(all, "bank_1000_avx512_largest", "AVX-512"), AT_LEAST,
        0.85, "bank, AVX-512: rate / limit of a step's operations");
    add(all, "bank_of_limit_avx2", share_of_limit(all, "bank_1000_avx2_largest", "AVX2"), AT_LEAST, 0.85,
        "bank, AVX2: rate / limit of a step's operations");
    add(all, "bank_of_limit_neon", share_of_limit(all, "bank_1000_neon_largest", "NEON"), AT_LEAST, 0.85,
        "bank, NEON: rate / limit of a step's operations");
    add(all, "run_of_chain", times_chain(all, "run"), AT_MOST, 1.2, "rampwise_run, last state / bare chain");
    add(all, "run_history_of_chain", times_chain(all, "run_history"), AT_MOST, NAN,
        "rampwise_run, u / bare chain");
    add(all, "inline_of_chain", times_chain(all, "inline_step_fused"), AT_MOST, NAN,
        "rampwise_step inline, u / bare chain");
}

static void against_gsl(readings *all)
{
    const double h = CASE_DT, error = task_find(all->list, "gsl_rk8pd_10")->error;
    const double ours = task_find(all->list, "run_history")->error;
    add(all, "gsl_of_bank_avx512", times(all, "gsl_rk8pd_10", "bank_1000_avx512_largest"), AT_LEAST, 1000,
        "GSL rk8pd at 1e-10 (error %.1e) / bank, AVX-512 (%.1e)", error, ours);
    add(all, "gsl_of_bank_avx2", times(all, "gsl_rk8pd_10", "bank_1000_avx2_largest"), AT_LEAST, 450,
        "GSL rk8pd at 1e-10 (error %.1e) / bank, AVX2 (%.1e)", error, ours);
    add(all, "gsl_of_bank_shortest", times(all, "gsl_rk8pd_10_shortest", "bank_1000_largest"), AT_LEAST, NAN,
        "GSL rk8pd at 1e-10 / bank, T/h = %.0f alone", CASE_SHORTEST / h);
    add(all, "gsl_of_bank_longest", times(all, "gsl_rk8pd_10_longest", "bank_1000_largest"), AT_LEAST, NAN,
        "GSL rk8pd at 1e-10 / bank, T/h = %.0f alone", CASE_LONGEST / h);
}

static void of_spectra(readings *all)
{
    add(all, "spectrum_of_limit", share_of_limit(all, "spectrum_samples", machine_best_set()), AT_LEAST, 0.85,
        "spectrum of 200 periods at samples: rate / limit, %s", machine_best_set());
    add(all, "spectrum_between_of_samples", times(all, "spectrum_between", "spectrum_samples"), AT_MOST, 1.25,
        "the same between samples / at samples");
    add(all, "spectrum_evidence_of_samples", times(all, "spectrum_evidence", "spectrum_samples"), AT_MOST,
        2.2, "the same with evidence / at samples");
    add(all, "directions_of_spectrum", times(all, "directions_samples", "spectrum_samples"), AT_MOST, 4,
        "percentiles of two components / peaks of one, at samples");
    add(all, "directions_between_of_spectrum", times(all, "directions_between", "spectrum_between"), AT_MOST,
        NAN, "the same between samples");
}

static void against_others(readings *all)
{
    add(all, "lfilter_of_bank_avx512", times(all, "scipy_lfilter", "bank_1000_avx512_largest"), AT_LEAST, 30,
        "SciPy lfilter / bank, AVX-512");
    add(all, "lfilter_of_bank_avx2", times(all, "scipy_lfilter", "bank_1000_avx2_largest"), AT_LEAST, 15,
        "SciPy lfilter / bank, AVX2");
    add(all, "lfilter_of_run", times(all, "scipy_lfilter", "run_history"), AT_LEAST, NAN,
        "SciPy lfilter / rampwise_run, u");
    add(all, "printed_of_run", times(all, "printed_double", "run_history"), AT_LEAST, NAN,
        "printed formulas in double / rampwise_run, u");
}

/* Steps a second of a mode with its 50 outputs are bounded by 10 + 50 operations and more, those of the bank by 12. */
static void of_modes(readings *all)
{
    static const struct {
        const char *id, *name;
    } sizes[] = {
        {"modes_10", "10"}, {"modes_100", "100"}, {"modes_1000", "1,000"}, {"modes_10000", "10,000"}};
    for (size_t i = 0; i < sizeof sizes / sizeof *sizes; ++i) {
        const task *const t = task_find(all->list, sizes[i].id);
        const double limit = limits_rate(all->list, "fused", machine_best_set());
        add(all, sizes[i].id, t != NULL && limit > 0 ? 60 / t->best / limit : NAN, AT_LEAST, NAN,
            "%s modes, 50 outputs: 60 operations a mode and sample / limit", sizes[i].name);
    }
    add(all, "modes_of_bank", times(all, "modes_1000", "bank_1000"), AT_MOST, NAN,
        "1,000 modes, 50 outputs / bank of 1,000, last state");
    add(all, "modes_one_of_bank", times(all, "modes_1000_one", "bank_1000"), AT_MOST, NAN,
        "1,000 modes, 1 output / bank of 1,000, last state");
    add(all, "modes_peaks", times(all, "modes_100_peaks", "modes_100"), AT_MOST, NAN,
        "100 modes, 50 outputs: with true peaks / without");
    static const struct {
        const char *with, *without, *name;
    } peaks[] = {{"modes_100_total_peaks", "modes_100_total", "100 modes, 50 total accelerations"},
                 {"modes_100_total_white", "modes_100_total", "the same, white noise"},
                 {"equipment_100_peaks", "equipment_100", "100 modes, 10 floors, 100 pieces of equipment"},
                 {"equipment_100_white", "equipment_100", "the same, white noise"}};
    for (size_t i = 0; i < sizeof peaks / sizeof *peaks; ++i)
        add(all, peaks[i].with, times(all, peaks[i].with, peaks[i].without), AT_MOST, NAN,
            "%s: with true peaks / without", peaks[i].name);
    static const struct {
        const char *direct, *modes, *name;
    } pairs[] = {{"newmark_10", "modes_10", "10"},
                 {"newmark_10_fine", "modes_10", "10"},
                 {"newmark_100", "modes_100", "100"},
                 {"newmark_100_fine", "modes_100", "100"}};
    for (size_t i = 0; i < sizeof pairs / sizeof *pairs; ++i)
        add(all, pairs[i].direct, times(all, pairs[i].direct, pairs[i].modes), AT_LEAST, NAN,
            "Newmark, %s full equations (error %.1e) / %s modes", pairs[i].name,
            task_find(all->list, pairs[i].direct)->error, pairs[i].name);
}

static void of_size(readings *all)
{
    add(all, "samples_200", times(all, "bank_1000_largest_n200", "bank_1000_largest"), AT_MOST, NAN,
        "a step of the bank over 200 samples / over 20,000");
    add(all, "samples_2000", times(all, "bank_1000_largest_n2000", "bank_1000_largest"), AT_MOST, NAN,
        "a step of the bank over 2,000 samples / over 20,000");
    add(all, "oscillators_10000", times(all, "bank_10000_largest", "bank_1000_largest"), AT_MOST, NAN,
        "a step of the bank of 10,000 / of 1,000");
    add(all, "frames_200", times(all, "run_frames_n200", "bank_1000"), AT_MOST, NAN,
        "run_frames, 64 channels, 200 samples / bank, last state");
    add(all, "records_200", times(all, "run_records_n200", "bank_1000"), AT_MOST, NAN,
        "run_records, 64 records, 200 samples / bank, last state");
    add(all, "bank_bytes", (double)rampwise_bank_size(CASE_OSCILLATORS) / CASE_OSCILLATORS, AT_MOST, NAN,
        "memory of the bank: bytes an oscillator, whatever the record");
}

size_t readings_make(reading *r, const task_list *list)
{
    readings all = {r, 0, list};
    against_limits(&all);
    against_gsl(&all);
    against_others(&all);
    of_spectra(&all);
    of_modes(&all);
    of_size(&all);
    return all.count;
}

int reading_met(const reading *r)
{
    return r->at_least ? r->value >= r->target : r->value <= r->target;
}
