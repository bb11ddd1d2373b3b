/* floor_spectra: what a shake of the ground does to equipment on the floors of a frame.

   The invented pump hall as a small shear frame. Its modes come from GSL's solver for symmetric matrices; rampwise
   takes the shake to the floors, and light equipment of every period along with it. Printed: modes, the mass they
   take, what rules for peaks make of a spectrum, and the demand on the instrument cabinet; the floor spectra as CSV,
   beside those of the floors' sampled histories.

       floor_spectra SHAKE [SPECTRA]                                examples/first_run runs it.

   Exit status: 0; 2 where an input is refused or something cannot be written: one line then says why on standard
   error, nothing is on standard output, and no file is left. */
#include <gsl/gsl_eigen.h>
#include <math.h>
#include <stdio.h>
#include <stdlib.h>
#include <string.h>
#include <rampwise.h>
#include "site_data.h"
#include "site_options.h"
#include "site_report.h"
#include "text_table.h"
#include "whole_file.h"

const char *const program_name = "floor_spectra";

/* The frame: kg and N/m of storeys from the ground up; damping of all modes. The cabinet stands on the first floor. */
enum {
    STOREYS = 3,
    LOWER = 0,
    UPPER = STOREYS - 1,
    FLOORS = 2,
    PERIODS = 300,
    PIECES = FLOORS * PERIODS + FLOORS,
    AFTER = 100000 /* samples of free motion at most; damped as all is here, it ends with the first cycles */
};
static const double storey_mass[STOREYS] = {42000, 38000, 21000};
static const double storey_stiffness[STOREYS] = {6.2e7, 4.8e7, 2.9e7};
static const double damping = 0.04, cabinet_hertz = 7.5, cabinet_damping = 0.04;
static const double shortest = 0.02, longest = 2, pi = 3.14159265358979323846;
static const size_t floors[FLOORS] = {LOWER, UPPER};
static const char *const floor_names[FLOORS] = {"first floor", "roof"};

typedef struct frame {
    double omega[STOREYS], shape[STOREYS * STOREYS]; /* [mode][storey], modal mass 1 */
    double factor[STOREYS];                          /* of participation */
} frame;

/* Outputs: total acceleration of every storey, then the displacement of the roof. */
enum { OUTPUTS = STOREYS + 1, ROOF_DISPLACEMENT = STOREYS };

typedef struct hall {
    frame modes;
    site_record record;
    rampwise_coeffs c[STOREYS];
    double weight[2][STOREYS * OUTPUTS], on_input[OUTPUTS], period[PERIODS];
    rampwise_system piece[PIECES]; /* PERIODS on each floor, then a cabinet on each */
    size_t point[PIECES];
    rampwise_peak floor_peak[OUTPUTS], peak[PIECES], stretch[PIECES]; /* total acceleration, displacement */
    rampwise_peak after[PIECES];                                      /* total acceleration after the shake */
    double *history;                                                  /* [n][OUTPUTS] */
    rampwise_peak resampled[PIECES];
    double share[STOREYS], roof[STOREYS]; /* of the mass, with all modes up to one; each mode's largest */
} hall;

static int check(int status)
{
    return status == RAMPWISE_OK ? 0 : complain("%s", rampwise_status_text(status));
}

/* K shape = omega^2 M shape with M diagonal, slowest first. */
static void solve_frame(frame *f)
{
    gsl_matrix *const K = gsl_matrix_calloc(STOREYS, STOREYS), *const M = gsl_matrix_calloc(STOREYS, STOREYS);
    gsl_matrix *const shapes = gsl_matrix_alloc(STOREYS, STOREYS);
    gsl_vector *const squares = gsl_vector_alloc(STOREYS);
    gsl_eigen_gensymmv_workspace *const work = gsl_eigen_gensymmv_alloc(STOREYS);
    for (size_t i = 0; i < STOREYS; ++i) {
        gsl_matrix_set(M, i, i, storey_mass[i]);
        gsl_matrix_set(K, i, i, storey_stiffness[i] + (i + 1 < STOREYS ? storey_stiffness[i + 1] : 0));
        if (i > 0) {
            gsl_matrix_set(K, i, i - 1, -storey_stiffness[i]);
            gsl_matrix_set(K, i - 1, i, -storey_stiffness[i]);
        }
    }
    gsl_eigen_gensymmv(K, M, squares, shapes, work);
    gsl_eigen_gensymmv_sort(squares, shapes, GSL_EIGEN_SORT_VAL_ASC);
    for (size_t j = 0; j < STOREYS; ++j) {
        double modal = 0, load = 0;
        f->omega[j] = sqrt(gsl_vector_get(squares, j));
        for (size_t i = 0; i < STOREYS; ++i) {
            const double x = gsl_matrix_get(shapes, i, j);
            modal += x * x * storey_mass[i];
            load += x * storey_mass[i];
        }
        f->factor[j] = load / sqrt(modal);
        for (size_t i = 0; i < STOREYS; ++i)
            f->shape[j * STOREYS + i] = gsl_matrix_get(shapes, i, j) / sqrt(modal);
    }
    gsl_eigen_gensymmv_free(work);
    gsl_matrix_free(K);
    gsl_matrix_free(M);
    gsl_matrix_free(shapes);
    gsl_vector_free(squares);
}

static int make_plan(hall *h, rampwise_modes_plan *plan)
{
    const frame *const f = &h->modes;
    for (size_t j = 0; j < STOREYS; ++j) {
        rampwise_system sys;
        if (check(rampwise_system_natural(&sys, f->omega[j], damping)) != 0 ||
            check(rampwise_coeffs_make(&h->c[j], &sys, h->record.interval, RAMPWISE_BASE_ACCELERATION,
                                       RAMPWISE_RAMP)) != 0)
            return -1;
        for (size_t i = 0; i < STOREYS; ++i)
            h->weight[1][j * OUTPUTS + i] = f->shape[j * STOREYS + i];
        h->weight[0][j * OUTPUTS + ROOF_DISPLACEMENT] = f->shape[j * STOREYS + UPPER];
    }
    for (size_t i = 0; i < STOREYS; ++i)
        h->on_input[i] = 1; /* against a fixed frame: the ground's own */
    for (size_t e = 0; e < PIECES; ++e) {
        const size_t floor = e < FLOORS * PERIODS ? e / PERIODS : e - FLOORS * PERIODS;
        const int status = e < FLOORS * PERIODS
                               ? rampwise_system_period(&h->piece[e], h->period[e % PERIODS], cabinet_damping)
                               : rampwise_system_hertz(&h->piece[e], cabinet_hertz, cabinet_damping);
        if (check(status) != 0)
            return -1;
        h->point[e] = floors[floor];
    }
    rampwise_modes_plan_init(plan);
    plan->modes = STOREYS;
    plan->inputs = 1;
    plan->outputs = OUTPUTS;
    plan->c = h->c;
    plan->load = f->factor;
    plan->on_displacement = h->weight[0];
    plan->on_acceleration = h->weight[1];
    plan->on_input = h->on_input;
    plan->peaks = 1;
    plan->equipment_count = PIECES;
    plan->equipment = h->piece;
    plan->point = h->point;
    return 0;
}

static int shake(hall *h, const rampwise_modes_plan *plan)
{
    rampwise_modes *modes = NULL;
    h->history = malloc(h->record.n * OUTPUTS * sizeof *h->history);
    if (h->history == NULL)
        return complain("no memory");
    if (check(rampwise_modes_create(plan, &modes)) != 0)
        return -1;
    const double *const ground = h->record.acceleration;
    int status = rampwise_modes_start(modes, ground);
    if (status == RAMPWISE_OK)
        status = rampwise_modes_read(modes, h->history);
    if (status == RAMPWISE_OK)
        status = rampwise_modes_run(modes, h->record.n - 1, ground + 1, h->history + OUTPUTS, NULL);
    if (status == RAMPWISE_OK)
        status = rampwise_modes_peaks(modes, h->floor_peak);
    if (status == RAMPWISE_OK)
        status = rampwise_equipment_peaks(modes, RAMPWISE_TOTAL_ACCELERATION, h->peak);
    if (status == RAMPWISE_OK)
        status = rampwise_equipment_peaks(modes, RAMPWISE_DISPLACEMENT, h->stretch);
    if (status == RAMPWISE_OK)
        status = rampwise_equipment_residual(modes, RAMPWISE_TOTAL_ACCELERATION, AFTER, h->after, NULL);
    rampwise_modes_free(modes);
    return check(status);
}

/* The usual way: the floor's history at the samples, taken as straight between them. */
static int resample(hall *h)
{
    const size_t n = h->record.n;
    double *const floor = malloc(n * sizeof *floor);
    int status = floor != NULL ? RAMPWISE_OK : RAMPWISE_ERROR_MEMORY;
    for (size_t e = 0; status == RAMPWISE_OK && e < PIECES; ++e) {
        const double omega = sqrt(h->piece[e].stiffness), zeta = h->piece[e].damper / (2 * omega);
        for (size_t i = 0; i < n; ++i)
            floor[i] = h->history[i * OUTPUTS + h->point[e]];
        status = rampwise_spectrum(n, h->record.interval, floor, RAMPWISE_BASE_ACCELERATION, 1, &omega, &zeta,
                                   RAMPWISE_TOTAL_ACCELERATION, 0, &h->resampled[e], NULL);
    }
    free(floor);
    return check(status);
}

static double size(const rampwise_peak *peak)
{
    return fabs(rampwise_peak_larger(peak)->value);
}

static int share_mass(hall *h, const rampwise_modes_plan *plan)
{
    double whole = 0;
    rampwise_modes_plan first = *plan;
    for (size_t i = 0; i < STOREYS; ++i)
        whole += storey_mass[i];
    int status = RAMPWISE_OK;
    for (size_t j = 0; status == RAMPWISE_OK && j < STOREYS; ++j) {
        first.modes = j + 1;
        status = rampwise_mass_share(&first, &whole, &h->share[j]);
    }
    return check(status);
}

static void print_modes(const hall *h)
{
    puts("Frame of three storeys (invented), modes from GSL, 4 % damped\n\n"
         "  mode  frequency   period  mass taken so far\n"
         "             (Hz)      (s)       (%)");
    for (size_t j = 0; j < STOREYS; ++j)
        printf("%6zu %10.3f %8.4f %9.1f\n", j + 1, h->modes.omega[j] / (2 * pi), 2 * pi / h->modes.omega[j],
               100 * h->share[j]);
}

/* The roof's displacement from the spectrum of the ground alone: each mode's largest. */
static int apply_rules(hall *h)
{
    for (size_t j = 0; j < STOREYS; ++j) {
        rampwise_peak mode;
        if (check(rampwise_spectrum(h->record.n, h->record.interval, h->record.acceleration,
                                    RAMPWISE_BASE_ACCELERATION, 1, &h->modes.omega[j], &damping,
                                    RAMPWISE_DISPLACEMENT, 0, &mode, NULL)) != 0)
            return -1;
        h->roof[j] = h->modes.shape[j * STOREYS + UPPER] * h->modes.factor[j] * size(&mode);
    }
    return 0;
}

/* By each rule, beside the true peak. */
static void print_rules(const hall *h)
{
    const double zeta[STOREYS] = {damping, damping, damping};
    printf("\nLargest displacement of the roof against the ground (mm)\n"
           "  exact, all modes together                %8.3f\n"
           "  square root of the sum of squares        %8.3f\n"
           "  complete quadratic combination           %8.3f\n"
           "  absolute sum                             %8.3f\n",
           1000 * size(&h->floor_peak[ROOF_DISPLACEMENT]),
           1000 * rampwise_combine_root_of_squares(STOREYS, h->roof),
           1000 * rampwise_combine_complete_quadratic(STOREYS, h->roof, h->modes.omega, zeta),
           1000 * rampwise_combine_absolute_sum(STOREYS, h->roof));
}

static void print_cabinet(const hall *h)
{
    printf("\nInstrument cabinet, %g Hz, %g %% damped: largest values, for the shake as it is sampled\n\n"
           "                  floor's own        cabinet's    after the      the same from the    stretch\n"
           "                 acceleration     acceleration      shake    floor's sampled history\n"
           "                      (m/s^2)          (m/s^2)    (m/s^2)             (m/s^2)          (mm)\n",
           cabinet_hertz, 100 * cabinet_damping);
    for (size_t i = 0; i < FLOORS; ++i) {
        const size_t e = FLOORS * PERIODS + i;
        printf("  on the %-11s %8.3f %16.3f %10.3f %19.3f %13.3f\n", floor_names[i],
               size(&h->floor_peak[floors[i]]), size(&h->peak[e]), size(&h->after[e]), size(&h->resampled[e]),
               1000 * size(&h->stretch[e]));
    }
    double worst = 0, at = 0;
    for (size_t e = 0; e < FLOORS * PERIODS; ++e) {
        const double off = 1 - size(&h->resampled[e]) / size(&h->peak[e]);
        if (fabs(off) > fabs(worst)) {
            worst = off;
            at = h->period[e % PERIODS];
        }
    }
    printf("\nA floor spectrum of the sampled history is off by up to %.2f %% (at a period of %.3g s).\n",
           100 * fabs(worst), at);
}

static void write_spectra(FILE *stream, const void *content)
{
    const hall *const h = content;
    fprintf(stream, "# light equipment on an invented frame, %g %% damped: largest total acceleration\n",
            100 * cabinet_damping);
    fprintf(stream, "# rampwise %s, arithmetic edition %d\nperiod (s)", rampwise_version(),
            rampwise_arithmetic_edition());
    for (size_t i = 0; i < FLOORS; ++i)
        fprintf(stream, ",%s (m/s^2),%s: from its sampled history (m/s^2)", floor_names[i], floor_names[i]);
    fputc('\n', stream);
    for (size_t k = 0; k < PERIODS; ++k) {
        whole_file_number(stream, h->period[k]);
        for (size_t i = 0; i < FLOORS; ++i) {
            fputc(',', stream);
            whole_file_number(stream, size(&h->peak[i * PERIODS + k]));
            fputc(',', stream);
            whole_file_number(stream, size(&h->resampled[i * PERIODS + k]));
        }
        fputc('\n', stream);
    }
}

static int do_hall(hall *h, const char *shake_path, const char *spectra_path)
{
    rampwise_modes_plan plan;
    if (site_record_read(&h->record, shake_path, site_time_units[0], site_acceleration_units[0]) != 0)
        return -1;
    if (!h->record.uniform)
        return complain("%s: the intervals differ", shake_path);
    solve_frame(&h->modes);
    (void)rampwise_list_log(PERIODS, shortest, longest, h->period);
    if (make_plan(h, &plan) != 0 || shake(h, &plan) != 0 || resample(h) != 0)
        return -1;
    if (share_mass(h, &plan) != 0 || apply_rules(h) != 0)
        return -1;
    if (spectra_path != NULL && whole_file_write(spectra_path, 1, &shake_path, write_spectra, h) != 0)
        return -1;
    print_modes(h);
    print_rules(h);
    print_cabinet(h);
    if (spectra_path != NULL)
        printf("\nThe floor spectra are in %s\n", spectra_path);
    site_report_caution(stdout);
    return 0;
}

static int check_words(int count, char **word)
{
    for (int i = 1; i < count; ++i)
        if (word[i][0] == '-')
            return complain("%s: no such option; usage: floor_spectra SHAKE [SPECTRA]", word[i]);
    if (count < 2 || count > 3)
        return complain("%s; usage: floor_spectra SHAKE [SPECTRA]",
                        count < 2 ? "SHAKE is missing" : "too many files");
    return 0;
}

int main(int count, char **word)
{
    static hall h;
    int status = check_words(count, word);
    if (status == 0)
        status = do_hall(&h, word[1], count == 3 ? word[2] : NULL);
    free(h.history);
    site_record_free(&h.record);
    return site_end(status);
}
