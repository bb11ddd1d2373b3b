#include "site_histories.h"

#include <stdio.h>
#include <rampwise.h>
#include "whole_file.h"

typedef struct histories {
    const site_record *record;
    const site_gear *gear;
    const site_motion *motion;
} histories;

static void write_heading(FILE *stream, const site_gear *gear)
{
    fprintf(stream, "# response from rest to base acceleration, straight lines between samples\n");
    fprintf(stream, "# displacement against the base, acceleration against a fixed frame\n");
    fprintf(stream, "# rampwise %s, arithmetic edition %d\n", rampwise_version(),
            rampwise_arithmetic_edition());
    fprintf(stream, "time (s),base acceleration (m/s^2)");
    for (size_t j = 0; j < gear->n; ++j)
        fprintf(stream, ",%s: displacement (m),%s: total acceleration (m/s^2)", gear->piece[j].name,
                gear->piece[j].name);
    fputc('\n', stream);
}

static void write_samples(FILE *stream, const site_record *record, size_t n_gear, const site_motion *motion)
{
    for (size_t i = 0; i < record->n && !ferror(stream); ++i) {
        whole_file_number(stream, record->time[i]);
        fputc(',', stream);
        whole_file_number(stream, record->acceleration[i]);
        for (size_t j = 0; j < n_gear; ++j) {
            fputc(',', stream);
            whole_file_number(stream, motion[j].displacement[i]);
            fputc(',', stream);
            whole_file_number(stream, motion[j].acceleration[i]);
        }
        fputc('\n', stream);
    }
}

static void write_histories(FILE *stream, const void *content)
{
    const histories *const all = content;
    write_heading(stream, all->gear);
    write_samples(stream, all->record, all->gear->n, all->motion);
}

int site_histories_write(const char *path, const site_record *record, const site_gear *gear,
                         const site_motion *motion)
{
    const char *const inputs[] = {record->path, gear->path};
    const histories all = {record, gear, motion};
    return whole_file_write(path, 2, inputs, write_histories, &all);
}
