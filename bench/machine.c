#define _POSIX_C_SOURCE 200809L
#include "machine.h"

#include <stdio.h>
#include <string.h>
#include <unistd.h>
#include "rampwise.h"

/* The rest of a line "name<blanks>: value", or NULL where it is another line. */
static const char *value_of(const char *line, const char *name)
{
    const size_t length = strlen(name);
    const char *const colon = strchr(line, ':');
    if (strncmp(line, name, length) != 0 || colon == NULL)
        return NULL;
    if (strspn(line + length, " \t") != (size_t)(colon - line) - length)
        return NULL;
    return colon + 1 + strspn(colon + 1, " \t");
}

static void take(char *to, const char *value)
{
    snprintf(to, MACHINE_TEXT, "%s", value);
    to[strcspn(to, "\n")] = '\0';
}

/* Whether one of the words of a line is this one. */
static int has_word(const char *line, const char *word)
{
    const size_t length = strlen(word);
    for (const char *at = strstr(line, word); at != NULL; at = strstr(at + 1, word))
        if (at[-1] == ' ' && (at[length] == ' ' || at[length] == '\n'))
            return 1;
    return 0;
}

static void take_sets(machine *m, const char *flags)
{
    static const char *const known[] = {"sse2",    "avx",      "fma",      "avx2",
                                        "avx512f", "avx512vl", "avx512dq", "asimd"};
    m->sets[0] = '\0';
    for (size_t i = 0; i < sizeof known / sizeof *known; ++i)
        if (has_word(flags, known[i])) {
            strcat(m->sets, m->sets[0] != '\0' ? " " : "");
            strcat(m->sets, known[i]);
        }
    m->is_virtual = has_word(flags, "hypervisor");
}

static void read_processor(machine *m)
{
    char line[8192]; /* flags are many */
    FILE *const f = fopen("/proc/cpuinfo", "r");
    if (f == NULL)
        return;
    while (fgets(line, sizeof line, f) != NULL && line[0] != '\n') {
        const char *const name = value_of(line, "model name");
        if (name != NULL)
            take(m->processor, name);
        if (value_of(line, "flags") != NULL || value_of(line, "Features") != NULL)
            take_sets(m, line);
    }
    fclose(f);
}

const char *machine_best_set(void)
{
    switch (rampwise_instructions(RAMPWISE_FASTEST)) {
    case RAMPWISE_AVX512:
        return "AVX-512";
    case RAMPWISE_AVX2:
        return "AVX2";
    case RAMPWISE_NEON:
        return "NEON";
    default:
        return "baseline";
    }
}

void machine_describe(machine *m, int core)
{
    *m = (machine){.processor = "unknown", .sets = "unknown", .core = core};
    read_processor(m);
    m->processors = (int)sysconf(_SC_NPROCESSORS_ONLN);
    m->best_set = machine_best_set();
}
