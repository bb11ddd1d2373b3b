#include "site_report.h"

#include <math.h>
#include <stdio.h>

enum { ENOUGH_SAMPLES = 10 };
static const double standard_gravity = 9.80665; /* m/s^2 */

void site_note(site_extreme *furthest, double value, size_t sample)
{
    if (fabs(value) > fabs(furthest->value))
        *furthest = (site_extreme){value, sample};
}

/* Four digits, with as many decimals as they take; exponents only where nothing else fits. */
void site_report_value(int width, double value, int with_sign)
{
    const double size = fabs(value);
    if (size != 0 && (size < 1e-5 || size >= 1e9)) {
        printf(with_sign ? " %+*.3e" : " %*.3e", width, value);
        return;
    }
    const int above_point = size == 0 ? 0 : (int)floor(log10(size));
    printf(with_sign ? " %+*.*f" : " %*.*f", width, above_point > 2 ? 0 : 3 - above_point, value);
}

/* In letters, not bytes, so that columns stand straight under any UTF-8 name. */
static int letters(const char *name)
{
    int count = 0;
    for (; *name != '\0'; ++name)
        count += ((unsigned char)*name & 0xC0) != 0x80;
    return count;
}

/* As many decimals as it takes to tell two samples apart. */
static int time_decimals(const site_record *record)
{
    const double needed = ceil(-log10(record->shortest) - 1e-4);
    return needed < 0 ? 0 : needed > 12 ? 12 : (int)needed;
}

void site_report_record(const site_record *record)
{
    const int decimals = time_decimals(record);
    const double start = record->acceleration[0];
    site_extreme base = {0, 0};
    for (size_t i = 0; i < record->n; ++i)
        site_note(&base, record->acceleration[i], i);
    printf("Record   %s, time in %s, acceleration in %s\n", record->path, record->time_unit.name,
           record->acceleration_unit.name);
    printf("         %zu samples, %.*f s to %.*f s; largest %+.4g m/s^2 (%.3g g) at %.*f s\n", record->n,
           decimals, record->time[0], decimals, record->time[record->n - 1], base.value,
           fabs(base.value) / standard_gravity, decimals, record->time[base.sample]);
    if (fabs(start) > 0.05 * fabs(base.value))
        printf("         starts with a jump from 0 to %+.4g m/s^2\n", start);
    if (record->uniform)
        printf("         uniform: solved with one interval of %.10g s\n", record->interval);
    else
        printf("         irregular: solved at its own times, intervals of %.4g s to %.4g s\n",
               record->shortest, record->interval);
}

static int widest_name(const site_gear *gear)
{
    int width = 4;
    for (size_t j = 0; j < gear->n; ++j)
        width = letters(gear->piece[j].name) > width ? letters(gear->piece[j].name) : width;
    return width;
}

static void print_piece(const gear_piece *piece, const site_largest *r, const site_record *record,
                        int name_width, int time_width)
{
    const int decimals = time_decimals(record);
    printf("%s%*s %8.4g %8.4g", piece->name, name_width - letters(piece->name), "", 1 / piece->frequency,
           100 * piece->damping_ratio);
    site_report_value(10, 1000 * r->displacement.value, 1);
    printf(" %*.*f", time_width, decimals, record->time[r->displacement.sample]);
    site_report_value(10, r->acceleration.value, 1);
    printf(" %*.*f", time_width, decimals, record->time[r->acceleration.sample]);
    site_report_value(20, r->force.value, 1);
    putchar('\n');
}

static void print_table(const site_record *record, const site_gear *gear, const site_largest *largest)
{
    const int name = widest_name(gear);
    const int last = snprintf(NULL, 0, "%.*f", time_decimals(record), record->time[record->n - 1]);
    const int time = last > 8 ? last : 8;
    const int pair = 10 + 1 + time; /* a value and its time */
    printf("%-*s  natural  damping  %*s  %*s %20s\n", name, "", pair - 1, "largest relative", pair - 1,
           "largest total", "largest spring and");
    printf("%-*s   period           %*s  %*s %20s\n", name, "", pair - 1, "displacement", pair - 1,
           "acceleration", "damper force");
    printf("%-*s      (s)      (%%) %10s %*s %10s %*s %20s\n", name, "gear", "(mm)", time, "at (s)",
           "(m/s^2)", time, "at (s)", "(N)");
    for (size_t j = 0; j < gear->n; ++j)
        print_piece(&gear->piece[j], &largest[j], record, name, time);
}

static double samples_per_period(const site_record *record, const gear_piece *piece)
{
    return 1 / (piece->frequency * record->interval);
}

static void print_sampling(const site_record *record, const site_gear *gear)
{
    size_t fastest = 0;
    for (size_t j = 1; j < gear->n; ++j)
        if (gear->piece[j].frequency > gear->piece[fastest].frequency)
            fastest = j;
    puts("\n"
         "Displacement is against the base, total acceleration against a fixed frame; both are +\n"
         "in the direction of the record. Force, mass times total acceleration, is + where it "
         "pulls back.");
    printf("Largest values are read at the samples. The fastest gear, %s,\n"
           "has %.3g samples in a natural period%s.\n",
           gear->piece[fastest].name, samples_per_period(record, &gear->piece[fastest]),
           record->uniform ? "" : ", where they are furthest apart");
    for (size_t j = 0; j < gear->n; ++j)
        if (samples_per_period(record, &gear->piece[j]) < ENOUGH_SAMPLES)
            printf("WARNING: %s: %.3g samples in a natural period, fewer than %d; its largest "
                   "values\n         may lie well above these.\n",
                   gear->piece[j].name, samples_per_period(record, &gear->piece[j]), ENOUGH_SAMPLES);
}

/* One per cent is left to what reading at samples loses. */
static void print_after_end(const site_gear *gear, const site_largest *largest)
{
    for (size_t j = 0; j < gear->n; ++j)
        if (largest[j].may_reach > 1.01 * fabs(largest[j].displacement.value))
            printf("WARNING: %s: still moves when the record ends, and may then go further.\n",
                   gear->piece[j].name);
}

void site_report_caution(FILE *stream)
{
    fprintf(stream, "Results support, and never replace, the governing code and a licensed engineer's "
                    "judgement.\n");
}

void site_report_print(const site_record *record, const site_gear *gear, const site_largest *largest)
{
    site_report_record(record);
    printf("Gear     %s; each piece from rest, base acceleration straight between samples\n\n", gear->path);
    print_table(record, gear, largest);
    print_sampling(record, gear);
    print_after_end(gear, largest);
    site_report_caution(stdout);
}
