#include "rampwise/bank.h"

#include <math.h>
#include <stdint.h>
#include <stdlib.h>
#include <string.h>
#include "entry.h"
#include "lanes.h"
#include "precision.h"
#include "rampwise/motion.h"
#include "rampwise/status.h"
#include "samples.h"
#include "saved.h"
#include "valid.h"

typedef PUBLIC(bank) real_bank;
typedef PUBLIC(bank_wanted) real_bank_wanted;

/* Followed in its memory by the blocks, each with its coefficients and marks. */
struct PUBLIC(bank) {
    const kernels *k;
    size_t n, stopped;
    real p, p_before;
    struct block *blocks;
};

typedef struct block {
    lane_block lanes;
    real_coeffs c[LANES];
    unsigned char stopped[LANES];
} block;

_Static_assert(sizeof(block) % LANE_ALIGNMENT == 0, "blocks follow each other aligned");

/* Samples a block takes at a time: few enough to stay near the processor while all blocks pass. */
enum { SEGMENT = 2048 };

static const size_t header_size =
    (sizeof(struct PUBLIC(bank)) + LANE_ALIGNMENT - 1) / LANE_ALIGNMENT * LANE_ALIGNMENT;

static size_t lanes_in(const real_bank *bank, size_t b)
{
    return bank->n - b * LANES < LANES ? bank->n - b * LANES : LANES;
}

static const real_coeffs *coeffs_of(const real_bank *bank, size_t i)
{
    return &bank->blocks[i / LANES].c[i % LANES];
}

static real_state state_of(const real_bank *bank, size_t i)
{
    return lane_state(&bank->blocks[i / LANES].lanes, i % LANES, bank->p, bank->p_before);
}

static int is_stopped(const real_bank *bank, size_t i)
{
    return bank->blocks[i / LANES].stopped[i % LANES];
}

/* Puts oscillator i into its lane and lets it go. */
static void release(real_bank *bank, size_t i)
{
    block *const b = &bank->blocks[i / LANES];
    PRIVATE(lane_set)(&b->lanes, i % LANES, &b->c[i % LANES]);
    bank->stopped -= b->stopped[i % LANES];
    b->stopped[i % LANES] = 0;
}

size_t PUBLIC(bank_size)(size_t n)
{
    return lane_groups_size(n, header_size, sizeof(block));
}

size_t PUBLIC(bank_alignment)(void)
{
    return LANE_ALIGNMENT;
}

static int check_bank(size_t n, const real_coeffs *c, int instructions)
{
    if (PUBLIC(bank_size)(n) == 0)
        return RAMPWISE_ERROR_COUNT;
    const int status = check_alike(n, c);
    if (status != RAMPWISE_OK)
        return status;
    return PRIVATE(kernels)(instructions) != NULL ? RAMPWISE_OK : RAMPWISE_ERROR_INSTRUCTIONS;
}

int PUBLIC(bank_init)(void *memory, size_t bytes, size_t n, const real_coeffs *c, int instructions,
                      real_bank **bank)
{
    if (memory == NULL || c == NULL || bank == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_bank(n, c, instructions);
    if (status != RAMPWISE_OK)
        return status;
    if (bytes < PUBLIC(bank_size)(n) || (uintptr_t)memory % LANE_ALIGNMENT != 0)
        return RAMPWISE_ERROR_MEMORY;
    real_bank *const made = memory;
    memset(memory, 0, PUBLIC(bank_size)(n));
    made->k = PRIVATE(kernels)(instructions);
    made->n = n;
    made->blocks = (block *)((char *)memory + header_size);
    for (size_t i = 0; i < n; ++i) {
        made->blocks[i / LANES].c[i % LANES] = c[i];
        release(made, i);
    }
    *bank = made;
    return RAMPWISE_OK;
}

int PUBLIC(bank_create)(size_t n, const real_coeffs *c, int instructions, real_bank **bank)
{
    if (c == NULL || bank == NULL)
        return RAMPWISE_ERROR_MISSING;
    int status = check_bank(n, c, instructions);
    if (status != RAMPWISE_OK)
        return status;
    void *const memory = aligned_alloc(LANE_ALIGNMENT, PUBLIC(bank_size)(n));
    if (memory == NULL)
        return RAMPWISE_ERROR_MEMORY;
    return PUBLIC(bank_init)(memory, PUBLIC(bank_size)(n), n, c, instructions, bank);
}

void PUBLIC(bank_free)(real_bank *bank)
{
    free(bank);
}

size_t PUBLIC(bank_count)(const real_bank *bank)
{
    return bank != NULL ? bank->n : 0;
}

int PUBLIC(bank_instructions)(const real_bank *bank)
{
    return bank != NULL ? bank->k->name : RAMPWISE_ERROR_MISSING;
}

int PUBLIC(bank_start)(real_bank *bank, real p0)
{
    if (bank == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!isfinite(p0))
        return RAMPWISE_ERROR_SAMPLE;
    bank->p = bank->p_before = p0;
    for (size_t i = 0; i < bank->n; ++i) {
        lane_put(&bank->blocks[i / LANES].lanes, i % LANES, &(const real_state){0});
        release(bank, i);
    }
    return RAMPWISE_OK;
}

int PUBLIC(bank_set)(real_bank *bank, const real_state *s)
{
    if (bank == NULL || s == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_shared_input(bank->n, s);
    if (status != RAMPWISE_OK)
        return status;
    bank->p = s[0].p;
    bank->p_before = s[0].p_before;
    for (size_t i = 0; i < bank->n; ++i) {
        lane_put(&bank->blocks[i / LANES].lanes, i % LANES, &s[i]);
        release(bank, i);
    }
    return RAMPWISE_OK;
}

int PUBLIC(bank_get)(const real_bank *bank, real_state *s)
{
    if (bank == NULL || s == NULL)
        return RAMPWISE_ERROR_MISSING;
    for (size_t i = 0; i < bank->n; ++i)
        s[i] = state_of(bank, i);
    return RAMPWISE_OK;
}

int PUBLIC(bank_retune)(real_bank *bank, size_t i, const real_coeffs *c)
{
    if (bank == NULL || c == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (i >= bank->n)
        return RAMPWISE_ERROR_COUNT;
    const real_coeffs both[2] = {*coeffs_of(bank, 0), *c};
    const int status = check_alike(2, both);
    if (status != RAMPWISE_OK)
        return status;
    bank->blocks[i / LANES].c[i % LANES] = *c;
    release(bank, i);
    return RAMPWISE_OK;
}

void PUBLIC(bank_wanted_init)(real_bank_wanted *wanted)
{
    memset(wanted, 0, sizeof *wanted);
    wanted->size = sizeof *wanted;
}

static int check_wanted(const real_bank *bank, const real_bank_wanted *wanted)
{
    if (wanted->size != sizeof *wanted)
        return RAMPWISE_ERROR_COUNT;
    if (wanted->chosen_count > 0 && wanted->chosen == NULL)
        return RAMPWISE_ERROR_MISSING;
    for (size_t i = 0; i < wanted->chosen_count; ++i)
        if (wanted->chosen[i] >= bank->n)
            return RAMPWISE_ERROR_COUNT;
    return RAMPWISE_OK;
}

/* Histories of up to LANES chosen ones, from copies of their states; returns how many, and lowers
   the earliest sample that overflows in one. The first that is stopped ends the group, and is
   passed over where it is alone. */
static size_t histories_of_group(const real_bank *bank, size_t n, const real *p, const size_t *chosen,
                                 size_t left, const real_history *out, size_t *earliest)
{
    const real_coeffs *c[LANES];
    real_state s[LANES];
    size_t count = 0, reached[LANES];
    for (; count < left && count < LANES && !is_stopped(bank, chosen[count]); ++count) {
        c[count] = coeffs_of(bank, chosen[count]);
        s[count] = state_of(bank, chosen[count]);
    }
    if (count == 0)
        return 1;
    PRIVATE(lanes_run)(bank->k, count, c, s, n, p, (layout){0, 1}, out, (layout){n, 1}, reached);
    for (size_t j = 0; j < count; ++j)
        *earliest = reached[j] < *earliest ? reached[j] : *earliest;
    return count;
}

/* Returns the earliest sample that overflows in a history, or n. */
static size_t histories(const real_bank *bank, size_t n, const real *p, const real_bank_wanted *wanted)
{
    size_t earliest = n;
    for (size_t first = 0; first < wanted->chosen_count;) {
        const real_history there = wanted_from(&wanted->history, first * n);
        first += histories_of_group(bank, n, p, wanted->chosen + first, wanted->chosen_count - first, &there,
                                    &earliest);
    }
    return earliest;
}

/* Lane j met an overflow in this segment: taken again by itself, from where the segment began, to
   its last finite state; returns the sample at fault. */
static size_t stop_lane(real_bank *bank, block *b, size_t j, real_state s, size_t n, const real *p,
                        real *largest)
{
    size_t i = 0;
    const real_history one = {NULL, NULL, NULL, NULL};
    while (i < n && bank->k->advance(&b->c[j], &s, i, i + 1, 1, p, &one) > i) {
        if (largest != NULL && REAL_SIZE(s.u) > *largest)
            *largest = REAL_SIZE(s.u);
        ++i;
    }
    PRIVATE(lane_still)(&b->lanes, j);
    lane_put(&b->lanes, j, &s);
    b->stopped[j] = 1;
    ++bank->stopped;
    return i;
}

/* One block over one segment; returns the earliest sample at which a lane stops, or n. */
static size_t step_block(real_bank *bank, block *b, size_t lanes, size_t n, const real *p, real *largest)
{
    real top[LANES] = {0}, *const gathered = largest != NULL ? top : NULL;
    lane_block before;
    lanes_copy_motion(&before, &b->lanes);
    if (largest != NULL)
        memcpy(top, largest, lanes * sizeof *top);
    const int lost = bank->k->under_one_input(&b->lanes, lanes, bank->p, n, p, gathered);
    size_t earliest = n;
    for (size_t j = 0; lost && j < lanes; ++j) {
        if (isfinite(b->lanes.u[j]) && isfinite(b->lanes.v[j]))
            continue;
        if (largest != NULL)
            top[j] = largest[j];
        const real_state s = lane_state(&before, j, bank->p, bank->p_before);
        const size_t i = stop_lane(bank, b, j, s, n, p, largest != NULL ? &top[j] : NULL);
        earliest = i < earliest ? i : earliest;
    }
    if (largest != NULL)
        memcpy(largest, top, lanes * sizeof *top);
    return earliest;
}

static size_t step_blocks(real_bank *bank, size_t n, const real *p, real *largest)
{
    size_t earliest = n;
    for (size_t done = 0, part = 0; done < n; done += part) {
        part = n - done < SEGMENT ? n - done : SEGMENT;
        for (size_t b = 0; b < lane_groups(bank->n); ++b) {
            const size_t stop = step_block(bank, &bank->blocks[b], lanes_in(bank, b), part, p + done,
                                           largest != NULL ? largest + b * LANES : NULL);
            if (stop < part && done + stop < earliest)
                earliest = done + stop;
        }
        bank->p_before = part > 1 ? p[done + part - 2] : bank->p;
        bank->p = p[done + part - 1];
    }
    return earliest;
}

int PUBLIC(bank_run)(real_bank *bank, size_t n, const real *p, const real_bank_wanted *wanted, size_t *bad)
{
    if (bank == NULL || (p == NULL && n > 0))
        return RAMPWISE_ERROR_MISSING;
    int status = wanted != NULL ? check_wanted(bank, wanted) : RAMPWISE_OK;
    if (status == RAMPWISE_OK)
        status = check_samples(n, p, bad);
    if (status != RAMPWISE_OK)
        return status;
    const size_t in_histories = wanted != NULL ? histories(bank, n, p, wanted) : n;
    const size_t in_lanes = step_blocks(bank, n, p, wanted != NULL ? wanted->largest : NULL);
    const size_t earliest = in_lanes < in_histories ? in_lanes : in_histories;
    return earliest < n ? blame(RAMPWISE_ERROR_OVERFLOW, earliest, bad) : RAMPWISE_OK;
}

size_t PUBLIC(bank_stopped)(const real_bank *bank, size_t *first)
{
    size_t i = 0;
    if (bank == NULL || bank->stopped == 0)
        return 0;
    while (!is_stopped(bank, i))
        ++i;
    if (first != NULL)
        *first = i;
    return bank->stopped;
}

int PUBLIC(bank_read)(const real_bank *bank, const real_history *now)
{
    if (bank == NULL || now == NULL)
        return RAMPWISE_ERROR_MISSING;
    for (size_t i = 0; i < bank->n; ++i) {
        const real_state s = state_of(bank, i);
        if (now->u != NULL)
            now->u[i] = s.u;
        if (now->v != NULL)
            now->v[i] = s.v;
        if (now->a != NULL)
            now->a[i] = is_stopped(bank, i) ? NAN : PUBLIC(acceleration)(coeffs_of(bank, i), &s);
        if (now->total != NULL)
            now->total[i] = is_stopped(bank, i) ? NAN : PUBLIC(total_acceleration)(coeffs_of(bank, i), &s);
    }
    return RAMPWISE_OK;
}

/* ---- saving ---- */

/* One oscillator as it is saved. */
typedef struct one {
    real_coeffs c;
    real_state s;
    int32_t stopped;
} one;

static void pass_one(saved *s, one *x)
{
    saved_coeffs(s, &x->c);
    saved_state(s, &x->s);
    saved_int(s, &x->stopped);
}

static void pass_bank(saved *s, void *object)
{
    const real_bank *const bank = object;
    for (size_t i = 0; i < bank->n; ++i) {
        one x = {*coeffs_of(bank, i), state_of(bank, i), is_stopped(bank, i)};
        pass_one(s, &x);
    }
}

#ifdef SINGLE_PRECISION
static const saved_kind kind = {SAVED_BANK_F32, 1, pass_bank};
#else
static const saved_kind kind = {SAVED_BANK, 1, pass_bank};
#endif

size_t PUBLIC(bank_saved_size)(const real_bank *bank)
{
    return rampwise_saved_size_(&kind, bank);
}

int PUBLIC(bank_save)(const real_bank *bank, void *bytes, size_t count)
{
    return rampwise_saved_write_(&kind, bank, bytes, count);
}

/* Whether n saved oscillators share what those of a bank do. */
static int check_saved(saved s, size_t n)
{
    one first, x;
    memset(&x, 0, sizeof x);
    first = x;
    for (size_t i = 0; i < n; ++i) {
        pass_one(&s, &x);
        first = i == 0 ? x : first;
        if (!coeffs_are_made(&x.c) || !same_dt(&x.c, &first.c) || x.c.input != first.c.input ||
            x.c.between != first.c.between || !state_is_finite(&x.s) || x.s.p != first.s.p ||
            x.s.p_before != first.s.p_before)
            return RAMPWISE_ERROR_DAMAGED;
    }
    return RAMPWISE_OK;
}

static void put_one(real_bank *bank, size_t i, const one *x)
{
    block *const b = &bank->blocks[i / LANES];
    b->c[i % LANES] = x->c;
    lane_put(&b->lanes, i % LANES, &x->s);
    release(bank, i);
    bank->p = x->s.p;
    bank->p_before = x->s.p_before;
    if (x->stopped == 0)
        return;
    PRIVATE(lane_still)(&b->lanes, i % LANES);
    b->stopped[i % LANES] = 1;
    ++bank->stopped;
}

int PUBLIC(bank_resume)(real_bank *bank, const void *bytes, size_t count)
{
    saved s;
    one x;
    int status = rampwise_saved_open_(&kind, bank, bytes, count, &s);
    if (status == RAMPWISE_OK)
        status = check_saved(s, bank->n);
    memset(&x, 0, sizeof x);
    for (size_t i = 0; status == RAMPWISE_OK && i < bank->n; ++i) {
        pass_one(&s, &x);
        put_one(bank, i, &x);
    }
    return status;
}
