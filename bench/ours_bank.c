/* This library's banks: of several sizes, on each set of instructions, over several lengths of record. */
#include <stdio.h>
#include "methods.h"

typedef struct banked {
    const bench_case *in;
    rampwise_bank *bank;
    size_t count, samples;
    double *largest; /* NULL where not gathered */
} banked;

enum { TEN_THOUSAND = 10 * CASE_OSCILLATORS };

/* Member k of a bank: spread over the oscillators, or all of them over and over. */
static size_t member(size_t k, size_t count)
{
    return count <= CASE_OSCILLATORS ? case_spread(k, count) : k % CASE_OSCILLATORS;
}

static void run(const banked *b)
{
    rampwise_bank_wanted wanted;
    rampwise_bank_wanted_init(&wanted);
    wanted.largest = b->largest;
    (void)rampwise_bank_run(b->bank, b->samples, b->in->p, &wanted, NULL);
}

static void once(void *self)
{
    run(self);
}

static int same_bits(void *self, const outcome *from_run)
{
    const banked *const b = self;
    rampwise_state *const s = case_memory(b->count * sizeof *s);
    int same = rampwise_bank_start(b->bank, 0) == RAMPWISE_OK;
    for (size_t k = 0; k < b->count && b->largest != NULL; ++k)
        b->largest[k] = 0;
    run(b);
    same = same && rampwise_bank_get(b->bank, s) == RAMPWISE_OK;
    for (size_t k = 0; k < b->count && same; ++k) {
        const outcome *const o = &from_run[member(k, b->count)];
        same = s[k].u == o->u && s[k].v == o->v && (b->largest == NULL || b->largest[k] == o->largest);
    }
    return same;
}

static banked *make(const bench_case *in, size_t count, size_t samples, int instructions, int gathering)
{
    banked *const b = case_memory(sizeof *b);
    rampwise_coeffs *const c = case_memory(count * sizeof *c);
    for (size_t k = 0; k < count; ++k)
        c[k] = in->c[member(k, count)];
    b->in = in;
    b->count = count;
    b->samples = samples;
    b->largest = gathering ? case_memory(count * sizeof *b->largest) : NULL;
    if (rampwise_bank_create(count, c, instructions, &b->bank) != RAMPWISE_OK)
        fprintf(stderr, "bench: no bank of %zu\n", count);
    return b;
}

static void add(task_list *list, const bench_case *in, const char *id, const char *name, size_t count,
                size_t samples, int instructions, int gathering)
{
    const int whole = samples == CASE_SAMPLES;
    task_add(list, (task){.kind = whole ? TASK_METHOD : TASK_PART,
                          .id = id,
                          .name = name,
                          .gives = gathering ? "largest |u|" : "last state",
                          .units = (double)count * (double)samples,
                          .self = make(in, count, samples, instructions, gathering),
                          .once = once,
                          .slow = count == TEN_THOUSAND || instructions == RAMPWISE_BASELINE,
                          .same_bits = whole ? same_bits : NULL});
}

static void add_sizes(task_list *list, const bench_case *in)
{
    static const struct {
        size_t count;
        const char *name, *id, *id_largest;
    } sizes[] = {
        {1, "bank of 1", "bank_1", "bank_1_largest"},
        {8, "bank of 8", "bank_8", "bank_8_largest"},
        {64, "bank of 64", "bank_64", "bank_64_largest"},
        {CASE_OSCILLATORS, "bank of 1,000", "bank_1000", "bank_1000_largest"},
        {TEN_THOUSAND, "bank of 10,000", "bank_10000", "bank_10000_largest"},
    };
    for (size_t i = 0; i < sizeof sizes / sizeof *sizes; ++i) {
        add(list, in, sizes[i].id, sizes[i].name, sizes[i].count, CASE_SAMPLES, RAMPWISE_FASTEST, 0);
        add(list, in, sizes[i].id_largest, sizes[i].name, sizes[i].count, CASE_SAMPLES, RAMPWISE_FASTEST, 1);
    }
}

static void add_instructions(task_list *list, const bench_case *in)
{
    static const struct {
        int instructions;
        const char *name, *id, *id_largest;
    } sets[] = {
        {RAMPWISE_BASELINE, "bank of 1,000, baseline", "bank_1000_baseline", "bank_1000_baseline_largest"},
        {RAMPWISE_AVX2, "bank of 1,000, AVX2", "bank_1000_avx2", "bank_1000_avx2_largest"},
        {RAMPWISE_AVX512, "bank of 1,000, AVX-512", "bank_1000_avx512", "bank_1000_avx512_largest"},
        {RAMPWISE_NEON, "bank of 1,000, NEON", "bank_1000_neon", "bank_1000_neon_largest"},
    };
    for (size_t i = 0; i < sizeof sets / sizeof *sets; ++i) {
        if (rampwise_instructions(sets[i].instructions) != sets[i].instructions)
            continue;
        add(list, in, sets[i].id, sets[i].name, CASE_OSCILLATORS, CASE_SAMPLES, sets[i].instructions, 0);
        add(list, in, sets[i].id_largest, sets[i].name, CASE_OSCILLATORS, CASE_SAMPLES, sets[i].instructions,
            1);
    }
}

void ours_bank_tasks(task_list *list, const bench_case *in)
{
    add_sizes(list, in);
    add_instructions(list, in);
    add(list, in, "bank_1000_largest_n200", "bank of 1,000 over 200 samples", CASE_OSCILLATORS, 200,
        RAMPWISE_FASTEST, 1);
    add(list, in, "bank_1000_largest_n2000", "bank of 1,000 over 2,000 samples", CASE_OSCILLATORS, 2000,
        RAMPWISE_FASTEST, 1);
}
