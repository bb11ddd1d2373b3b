/* The one body of all kernels. The including file has defined a thin layer over its vectors:
   VECTOR, MASK, WIDTH and the functions vector_*, mask_*; and KERNELS, the table's name, and
   KERNELS_NAME; all in one precision (../precision.h). The arithmetic is that of step.h, operation by
   operation. */

#include <stdint.h>
#include <string.h>
#ifndef SINGLE_PRECISION
#include "../energy_steps.h"
#endif
#include "../entry.h"
#include "kernels.h"

#ifdef SINGLE_PRECISION
#define SILENT 0x1p-90f
#define SPENT 0x1p-100f
#else
#define SILENT 0x1p-900
#define SPENT 0x1p-960
#endif

/* Vectors in flight: enough to hide the latency of a step, few enough for the
   registers; a block may have fewer. */
enum { MOST_IN_FLIGHT = 4, FLIGHT = LANES / WIDTH < MOST_IN_FLIGHT ? LANES / WIDTH : MOST_IN_FLIGHT };

/* The same under two inputs, which are as much work each. */
enum { PAIRS = FLIGHT < 2 ? FLIGHT : 2 };

/* Oscillators on their way, one a lane. */
typedef struct moving {
    VECTOR u, v;
#ifdef SINGLE_PRECISION
    VECTOR u_low, v_low;
#endif
} moving;

static inline VECTOR change_of_u(const lane_block *b, size_t at, VECTOR u, VECTOR v, VECTOR p, VECTOR p1)
{
    const VECTOR loaded = vector_fma(vector_load(b->C + at), p, vector_product(vector_load(b->D + at), p1));
    const VECTOR gain = vector_fma(vector_load(b->B + at), v, loaded);
    return vector_fma(vector_load(b->A_minus_1 + at), u, gain);
}

static inline VECTOR change_of_v(const lane_block *b, size_t at, VECTOR u, VECTOR v, VECTOR p, VECTOR p1)
{
    const VECTOR loaded = vector_fma(vector_load(b->Cp + at), p, vector_product(vector_load(b->Dp + at), p1));
    const VECTOR gain = vector_fma(vector_load(b->Bp_minus_1 + at), v, loaded);
    return vector_fma(vector_load(b->Ap + at), u, gain);
}

static inline moving load_moving(const lane_block *b, size_t at)
{
    moving m;
    m.u = vector_load(b->u + at);
    m.v = vector_load(b->v + at);
#ifdef SINGLE_PRECISION
    m.u_low = vector_load(b->u_low + at);
    m.v_low = vector_load(b->v_low + at);
#endif
    return m;
}

static inline void store_moving(lane_block *b, size_t at, const moving *m)
{
    vector_store(b->u + at, m->u);
    vector_store(b->v + at, m->v);
#ifdef SINGLE_PRECISION
    vector_store(b->u_low + at, m->u_low);
    vector_store(b->v_low + at, m->v_low);
#endif
}

#ifdef SINGLE_PRECISION
static inline void carry(VECTOR *x, VECTOR *x_low, VECTOR change)
{
    const VECTOR sum = vector_sum(*x, change);
    *x_low = vector_difference(change, vector_difference(sum, *x));
    *x = sum;
}
#endif

static inline void step_moving(const lane_block *b, size_t at, moving *m, VECTOR p, VECTOR p1)
{
    const VECTOR du = change_of_u(b, at, m->u, m->v, p, p1), dv = change_of_v(b, at, m->u, m->v, p, p1);
#ifdef SINGLE_PRECISION
    carry(&m->u, &m->u_low, vector_sum(du, m->u_low));
    carry(&m->v, &m->v_low, vector_sum(dv, m->v_low));
#else
    m->u = vector_sum(m->u, du);
    m->v = vector_sum(m->v, dv);
#endif
}

/* The rule of silence for lanes under a silent input. */
static inline void still_moving(moving *m, MASK silent)
{
#ifdef SINGLE_PRECISION
    const MASK u_spent = mask_both(silent, mask_below(m->u, SPENT));
    const MASK v_spent = mask_both(silent, mask_below(m->v, SPENT));
    m->u = vector_unless(m->u, u_spent);
    m->v = vector_unless(m->v, v_spent);
    m->u_low = vector_unless(m->u_low, u_spent);
    m->v_low = vector_unless(m->v_low, v_spent);
#else
    m->u = vector_unless(m->u, mask_both(silent, mask_below(m->u, SPENT)));
    m->v = vector_unless(m->v, mask_both(silent, mask_below(m->v, SPENT)));
#endif
}

/* zero, or NaN where the motion is not finite */
static inline VECTOR zero_if_finite(const moving *m, VECTOR zero)
{
    return vector_fma(m->u, vector_all(0), vector_fma(m->v, vector_all(0), zero));
}

/* |p| < SILENT by its bits, away from the vector units */
static inline int is_silent(real p)
{
#ifdef SINGLE_PRECISION
    uint32_t bits;
    memcpy(&bits, &p, sizeof bits);
    return bits << 1 < (uint32_t)(127 - 90) << 24;
#else
    uint64_t bits;
    memcpy(&bits, &p, sizeof bits);
    return bits << 1 < (uint64_t)(1023 - 900) << 53;
#endif
}

static size_t first_not_finite(size_t n, const real *x)
{
    size_t i = 0;
    for (; i + FLIGHT * WIDTH <= n; i += FLIGHT * WIDTH) {
        VECTOR zero = vector_all(0);
        for (size_t j = 0; j < FLIGHT; ++j)
            zero = vector_sum(zero, vector_product(vector_load(x + i + j * WIDTH), vector_all(0)));
        if (vector_any_nan(zero))
            break;
    }
    while (i < n && isfinite(x[i]))
        ++i;
    return i;
}

/* GCC would pack u and v of one oscillator into a vector and unpack it again in every step; and it would
   fetch all coefficients of a block before the loop, only to put most of them on the stack. */
#if defined(__GNUC__) && !defined(__clang__)
#pragma GCC push_options
#pragma GCC optimize("no-tree-slp-vectorize", "no-tree-loop-im", "no-move-loop-invariants")
#endif

/* The step from *s to the sample `now`, and its entry in the outputs; 0 where it overflows. */
static inline __attribute__((always_inline)) int take(const real_coeffs *c, const real_history *out, size_t i,
                                                      const real_state *s, real now, real_state *next)
{
    const int silent = is_silent(s->p) & is_silent(now);
#ifdef SINGLE_PRECISION
    *next = *s;
    rampwise_next_f32_(c, next, now);
    if (__builtin_expect(silent, 0))
        rampwise_unless_spent_f32_(next, 1);
#else
    real u = rampwise_next_u_(c, s->u, s->v, s->p, now);
    real v = rampwise_next_v_(c, s->u, s->v, s->p, now);
    if (__builtin_expect(silent, 0)) {
        u = rampwise_unless_spent_(u);
        v = rampwise_unless_spent_(v);
    }
    *next = (real_state){u, v, now, s->p};
#endif
    return put_state(c, next, out, i);
}

/* Coefficients and outputs are copied, so that none can be taken for another, and two samples go by in a
   turn, so that no state has to be moved to make room for the next: a step waits for nothing but the one
   before. `accelerations` is a constant where this is inlined. */
static inline __attribute__((always_inline)) size_t advance_with(int accelerations, const real_coeffs *coeffs,
                                                                 real_state *s, size_t first, size_t end,
                                                                 size_t stride, const real *p,
                                                                 const real_history *outputs)
{
    const real_coeffs c = *coeffs;
    const real_history out = {outputs->u, outputs->v, accelerations ? outputs->a : NULL,
                              accelerations ? outputs->total : NULL};
    real_state at = *s;
    size_t i = first;
    while (i < end) {
        real_state next, after;
        if (!take(&c, &out, i, &at, p[i], &next))
            break;
        i += stride;
        if (i >= end || !take(&c, &out, i, &next, p[i], &after)) {
            at = next;
            break;
        }
        i += stride;
        at = after;
    }
    *s = at;
    return i < end ? i : end;
}

static size_t advance(const real_coeffs *c, real_state *s, size_t first, size_t end, size_t stride,
                      const real *p, const real_history *out)
{
    if (out->a != NULL || out->total != NULL)
        return advance_with(1, c, s, first, end, stride, p, out);
    return advance_with(0, c, s, first, end, stride, p, out);
}

/* `flight` vectors from lane `at` on over one step of their one input. */
static inline __attribute__((always_inline)) void step_together(const lane_block *block, size_t at,
                                                                int flight, moving *m, VECTOR before,
                                                                VECTOR now, int silent)
{
    for (int j = 0; j < flight; ++j)
        step_moving(block, at + (size_t)j * WIDTH, &m[j], before, now);
    if (__builtin_expect(silent, 0))
        for (int j = 0; j < flight; ++j)
            still_moving(&m[j], mask_all());
}

/* Answers whether one of the vectors is not finite any more. flight and gathering are constants where this is
   inlined. */
static inline __attribute__((always_inline)) int one_input(lane_block *block, size_t at, int flight,
                                                           int gathering, real p_last, size_t n,
                                                           const real *p, real *largest)
{
    moving m[MOST_IN_FLIGHT];
    VECTOR top[MOST_IN_FLIGHT];
    for (int j = 0; j < flight; ++j) {
        m[j] = load_moving(block, at + (size_t)j * WIDTH);
        if (gathering)
            top[j] = vector_load(largest + at + (size_t)j * WIDTH);
    }
    int was_silent = is_silent(p_last);
    VECTOR before = vector_all(p_last);
    for (size_t i = 0; i < n; ++i) {
        const VECTOR now = vector_all(p[i]);
        const int silent = is_silent(p[i]);
        step_together(block, at, flight, m, before, now, silent & was_silent);
        if (gathering)
            for (int j = 0; j < flight; ++j)
                top[j] = vector_larger_size(m[j].u, top[j]);
        was_silent = silent;
        before = now;
    }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        store_moving(block, at + (size_t)j * WIDTH, &m[j]);
        if (gathering)
            vector_store(largest + at + (size_t)j * WIDTH, top[j]);
        zero = zero_if_finite(&m[j], zero);
    }
    return vector_any_nan(zero);
}

/* Vectors in flight next, where the lanes from `at` on are left: so that the last ones are not few. */
static inline size_t next_flight(size_t lanes, size_t at)
{
    const size_t left = (lanes - at + WIDTH - 1) / WIDTH, passes = (left + FLIGHT - 1) / FLIGHT;
    return (left + passes - 1) / passes;
}

/* Each number of vectors in flight has code of its own. */
static int under_one_input(lane_block *block, size_t lanes, real p_last, size_t n, const real *p,
                           real *largest)
{
#define FLY(flight)                                                                                          \
    (largest != NULL ? one_input(block, at, flight, 1, p_last, n, p, largest)                                \
                     : one_input(block, at, flight, 0, p_last, n, p, NULL))
    int lost = 0;
    for (size_t at = 0, flight = 0; at < lanes; at += flight * WIDTH) {
        flight = next_flight(lanes, at);
        lost |= flight == 1 ? FLY(1) : flight == 2 ? FLY(2) : flight == 3 ? FLY(3) : FLY(4);
    }
#undef FLY
    return lost;
}

#ifndef SINGLE_PRECISION

/* Quantity q of stretch(): u, v, or the row over {u, v, p}. */
static inline VECTOR looked_at(int q, real (*row)[LANES], size_t lane, VECTOR u, VECTOR v, VECTOR p)
{
    if (q < 2)
        return q == 0 ? u : v;
    return vector_fma(
        vector_load(row[0] + lane), u,
        vector_fma(vector_load(row[1] + lane), v, vector_product(vector_load(row[2] + lane), p)));
}

/* The greatest and least of what is looked at, so far. A NaN does not count. */
typedef struct range {
    VECTOR top[3][FLIGHT], bottom[3][FLIGHT];
} range;

static inline __attribute__((always_inline)) void widen(range *r, unsigned looked, real (*row)[LANES],
                                                        size_t lane, int j, const moving *m, VECTOR p)
{
    for (int q = 0; q < 3; ++q)
        if (looked >> q & 1) {
            const VECTOR z = looked_at(q, row, lane, m->u, m->v, p);
            r->top[q][j] = vector_larger(z, r->top[q][j]);
            r->bottom[q][j] = vector_smaller(z, r->bottom[q][j]);
        }
}

/* Two steps of one vector after the other, so that its coefficients are fetched once for both. */
static inline __attribute__((always_inline)) int one_stretch(lane_block *block, size_t at, int flight,
                                                             unsigned looked, real (*row)[LANES], real p_last,
                                                             size_t n, const real *p, real (*high)[LANES],
                                                             real (*low)[LANES])
{
    moving m[FLIGHT];
    range r;
    for (int j = 0; j < flight; ++j)
        m[j] = load_moving(block, at + (size_t)j * WIDTH);
    int was_silent = is_silent(p_last);
    VECTOR before = vector_all(p_last);
    for (int q = 0; q < 3; ++q)
        for (int j = 0; (looked >> q & 1) && j < flight; ++j)
            r.top[q][j] = r.bottom[q][j] = looked_at(q, row, at + (size_t)j * WIDTH, m[j].u, m[j].v, before);
    size_t i = 0;
    for (; i + 2 <= n; i += 2) {
        const VECTOR now = vector_all(p[i]), next = vector_all(p[i + 1]);
        const int silent = is_silent(p[i]), silent_next = is_silent(p[i + 1]);
        if (__builtin_expect(silent & (was_silent | silent_next), 0))
            break;
        for (int j = 0; j < flight; ++j) {
            const size_t lane = at + (size_t)j * WIDTH;
            step_moving(block, lane, &m[j], before, now);
            widen(&r, looked, row, lane, j, &m[j], now);
            step_moving(block, lane, &m[j], now, next);
            widen(&r, looked, row, lane, j, &m[j], next);
        }
        was_silent = silent_next;
        before = next;
    }
    for (; i < n; ++i) {
        const VECTOR now = vector_all(p[i]);
        const int silent = is_silent(p[i]);
        step_together(block, at, flight, m, before, now, silent & was_silent);
        for (int j = 0; j < flight; ++j)
            widen(&r, looked, row, at + (size_t)j * WIDTH, j, &m[j], now);
        was_silent = silent;
        before = now;
    }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        store_moving(block, lane, &m[j]);
        zero = zero_if_finite(&m[j], zero);
        for (int q = 0; q < 3; ++q)
            if (looked >> q & 1) {
                vector_store(high[q] + lane, r.top[q][j]);
                vector_store(low[q] + lane, r.bottom[q][j]);
            }
    }
    return vector_any_nan(zero);
}

/* Each choice of quantities has code of its own, and for a single one each number of vectors in flight. */
static int stretch(lane_block *block, size_t lanes, unsigned looked, real (*row)[LANES], real p_last,
                   size_t n, const real *p, real (*high)[LANES], real (*low)[LANES])
{
#define FLY(which, flight) one_stretch(block, at, flight, which, row, p_last, n, p, high, low)
#define LOOK(which)                                                                                          \
    case which:                                                                                              \
        lost |= flight == 1   ? FLY(which, 1)                                                                \
                : flight == 2 ? FLY(which, 2)                                                                \
                : flight == 3 ? FLY(which, 3)                                                                \
                              : FLY(which, 4);                                                               \
        break
#define LOOK_AT_MORE(which)                                                                                  \
    case which:                                                                                              \
        lost |= FLY(which, FLIGHT);                                                                          \
        flight = FLIGHT;                                                                                     \
        break
    int lost = 0;
    for (size_t at = 0, flight = 0; at < lanes; at += flight * WIDTH) {
        flight = next_flight(lanes, at);
        switch (looked) {
            LOOK(1);
            LOOK(2);
            LOOK(4);
            LOOK_AT_MORE(3);
            LOOK_AT_MORE(5);
            LOOK_AT_MORE(6);
            LOOK_AT_MORE(7);
        }
    }
#undef LOOK_AT_MORE
#undef LOOK
#undef FLY
    return lost;
}

/* One oscillator under either input, and the largest q of the two quantities so far. */
typedef struct moving_pair {
    moving m[2];
    VECTOR top;
} moving_pair;

static inline __attribute__((always_inline)) void reach(moving_pair *m, int quantity, real (*row)[LANES],
                                                        real (*form)[LANES], size_t lane, VECTOR p1,
                                                        VECTOR p2)
{
    const VECTOR x = looked_at(quantity, row, lane, m->m[0].u, m->m[0].v, p1);
    const VECTOR y = looked_at(quantity, row, lane, m->m[1].u, m->m[1].v, p2);
    const VECTOR along =
        vector_fma(vector_load(form[1] + lane), y, vector_product(vector_load(form[0] + lane), x));
    const VECTOR across =
        vector_fma(vector_load(form[3] + lane), y, vector_product(vector_load(form[2] + lane), x));
    m->top = vector_larger(vector_fma(across, across, vector_product(along, along)), m->top);
}

/* Each step is taken under both inputs, one after the other, so that its coefficients are fetched once.
   flight and quantity are constants where this is inlined. */
static inline __attribute__((always_inline)) int
two_inputs_at(lane_block *first, lane_block *second, size_t at, int flight, int quantity, real (*row)[LANES],
              real (*form)[LANES], const real *p_last, size_t n, const real *const *p, real *largest)
{
    moving_pair m[MOST_IN_FLIGHT];
    const real *const p1 = p[0], *const p2 = p[1];
    VECTOR before1 = vector_all(p_last[0]), before2 = vector_all(p_last[1]);
    int was_silent1 = is_silent(p_last[0]), was_silent2 = is_silent(p_last[1]);
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        m[j] = (moving_pair){{load_moving(first, lane), load_moving(second, lane)}, vector_all(0)};
        reach(&m[j], quantity, row, form, lane, before1, before2);
    }
    for (size_t i = 0; i < n; ++i) {
        const VECTOR now1 = vector_all(p1[i]), now2 = vector_all(p2[i]);
        const int silent1 = is_silent(p1[i]), silent2 = is_silent(p2[i]);
        for (int j = 0; j < flight; ++j) {
            const size_t lane = at + (size_t)j * WIDTH;
            step_together(first, lane, 1, &m[j].m[0], before1, now1, silent1 & was_silent1);
            step_together(first, lane, 1, &m[j].m[1], before2, now2, silent2 & was_silent2);
            reach(&m[j], quantity, row, form, lane, now1, now2);
        }
        was_silent1 = silent1;
        was_silent2 = silent2;
        before1 = now1;
        before2 = now2;
    }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        store_moving(first, lane, &m[j].m[0]);
        store_moving(second, lane, &m[j].m[1]);
        vector_store(largest + lane, m[j].top);
        zero = zero_if_finite(&m[j].m[0], zero_if_finite(&m[j].m[1], zero));
    }
    return vector_any_nan(zero);
}

/* Two vectors in flight, four states, fill the registers. */
static int under_two_inputs(lane_block *first, lane_block *second, size_t lanes, int quantity,
                            real (*row)[LANES], real (*form)[LANES], const real *p_last, size_t n,
                            const real *const *p, real *largest)
{
#define UNDER(which) two_inputs_at(first, second, at, PAIRS, which, row, form, p_last, n, p, largest)
    int lost = 0;
    for (size_t at = 0; at < lanes; at += PAIRS * WIDTH)
        lost |= quantity == 0 ? UNDER(0) : quantity == 1 ? UNDER(1) : UNDER(2);
#undef UNDER
    return lost;
}
#endif

#if defined(__GNUC__) && !defined(__clang__)
#pragma GCC pop_options
#endif

#ifndef SINGLE_PRECISION

/* The largest of `count` values, or of their negatives, that are `stride` apart. */
static inline VECTOR largest_of(size_t count, const real *x, size_t stride, VECTOR sign)
{
    VECTOR largest = vector_product(vector_load(x), sign);
    for (size_t i = 1; i < count; ++i)
        largest = vector_larger(vector_product(vector_load(x + i * stride), sign), largest);
    return largest;
}

static void may_exceed(size_t lanes, size_t count, const real *high, const real *low, size_t stride,
                       const real *floor_high, const real *floor_low, real (*excess)[LANES],
                       const real *largest_p, const real *largest_change, uint32_t *flags)
{
    const VECTOR plus = vector_all(1), minus = vector_all(-1);
    for (size_t i = 0; i < 2 * count; ++i)
        flags[i] = 0;
    for (size_t lane = 0; lane < lanes; lane += WIDTH) {
        const VECTOR constant = vector_load(excess[0] + lane), from_p = vector_load(excess[1] + lane);
        const VECTOR from_change = vector_load(excess[2] + lane), from_size = vector_load(excess[3] + lane);
        const VECTOR floor_above = vector_load(floor_high + lane);
        const VECTOR floor_below = vector_product(vector_load(floor_low + lane), minus);
        const VECTOR best_above = largest_of(count, high + lane, stride, plus);
        const VECTOR best_below = largest_of(count, low + lane, stride, minus);
        for (size_t i = 0; i < count; ++i) {
            const VECTOR top = vector_load(high + i * stride + lane);
            const VECTOR bottom = vector_product(vector_load(low + i * stride + lane), minus);
            const VECTOR size = vector_larger(vector_size(top), vector_size(bottom));
            const VECTOR more =
                vector_fma(from_size, size,
                           vector_fma(from_change, vector_all(largest_change[i]),
                                      vector_fma(from_p, vector_all(largest_p[i]), constant)));
            const VECTOR above = vector_sum(top, more), below = vector_sum(bottom, more);
            const uint32_t beaten_above =
                (uint32_t)mask_bits(vector_positive(vector_difference(best_above, above)));
            const uint32_t beaten_below =
                (uint32_t)mask_bits(vector_positive(vector_difference(best_below, below)));
            flags[2 * i] |=
                ((uint32_t)mask_bits(vector_positive(vector_difference(above, floor_above))) & ~beaten_above)
                << lane;
            flags[2 * i + 1] |=
                ((uint32_t)mask_bits(vector_positive(vector_difference(below, floor_below))) & ~beaten_below)
                << lane;
        }
    }
}

#endif

static inline __attribute__((always_inline)) int own_inputs(lane_block *block, size_t at, int flight,
                                                            size_t n, real (*p)[LANES], lane_tile u_out,
                                                            lane_tile v_out)
{
    moving m[FLIGHT];
    VECTOR before[FLIGHT];
    MASK was_silent[FLIGHT];
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        m[j] = load_moving(block, lane);
        before[j] = vector_load(p[0] + lane);
        was_silent[j] = mask_below(before[j], SILENT);
    }
    for (size_t i = 0; i < n; ++i)
        for (int j = 0; j < flight; ++j) {
            const size_t lane = at + (size_t)j * WIDTH;
            const VECTOR now = vector_load(p[i + 1] + lane);
            const MASK silent = mask_below(now, SILENT), flush = mask_both(silent, was_silent[j]);
            step_moving(block, lane, &m[j], before[j], now);
            if (mask_any(flush))
                still_moving(&m[j], flush);
            vector_store(u_out[i] + lane, m[j].u);
            vector_store(v_out[i] + lane, m[j].v);
            before[j] = now;
            was_silent[j] = silent;
        }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        store_moving(block, at + (size_t)j * WIDTH, &m[j]);
        zero = zero_if_finite(&m[j], zero);
    }
    return vector_any_nan(zero);
}

static int under_own_inputs(lane_block *block, size_t lanes, size_t n, real (*p)[LANES], lane_tile u,
                            lane_tile v)
{
    int lost = 0;
    for (size_t at = 0; at < lanes; at += FLIGHT * WIDTH)
        lost |= own_inputs(block, at, FLIGHT, n, p, u, v);
    return lost;
}

/* fma(row[0], u, fma(row[1], v, fma(row[2], p, row[3] (p - p_before)))), as row_value of row.h:
   where a lane's last entry is zero, its change is not asked. */
static int rows(real (*row)[LANES], size_t lanes, size_t n, real (*p)[LANES], lane_tile u, lane_tile v,
                lane_tile out, real *finite)
{
    int lost = 0;
    for (size_t lane = 0; lane < lanes; lane += WIDTH) {
        VECTOR zero = vector_all(0);
        const VECTOR from_u = vector_load(row[0] + lane), from_v = vector_load(row[1] + lane);
        const VECTOR from_p = vector_load(row[2] + lane), from_change = vector_load(row[3] + lane);
        for (size_t i = 0; i < n; ++i) {
            const VECTOR now = vector_load(p[i + 1] + lane);
            const VECTOR change =
                vector_product_unless_zero(from_change, vector_difference(now, vector_load(p[i] + lane)));
            const VECTOR value =
                vector_fma(from_u, vector_load(u[i] + lane),
                           vector_fma(from_v, vector_load(v[i] + lane), vector_fma(from_p, now, change)));
            vector_store(out[i] + lane, value);
            zero = vector_fma(value, vector_all(0), zero);
        }
        vector_store(finite + lane, zero);
        lost |= vector_any_nan(zero);
    }
    return lost;
}

#ifndef SINGLE_PRECISION

/* `samples` rows of y, `vectors` vectors wide: enough sums in flight to hide their latency, each weight
   fetched once for all of them. Both are constants where this is inlined. */
static inline __attribute__((always_inline)) void sums(int samples, int vectors, size_t count,
                                                       const double *x, size_t stride, const double *weight,
                                                       size_t width, double *y)
{
    VECTOR sum[4][2];
    for (int i = 0; i < samples; ++i)
        for (int j = 0; j < vectors; ++j)
            sum[i][j] = vector_load(y + (size_t)i * width + (size_t)j * WIDTH);
    for (size_t k = 0; k < count; ++k)
        for (int j = 0; j < vectors; ++j) {
            const VECTOR w = vector_load(weight + k * width + (size_t)j * WIDTH);
            for (int i = 0; i < samples; ++i)
                sum[i][j] = vector_fma(vector_all(x[(size_t)i * stride + k]), w, sum[i][j]);
        }
    for (int i = 0; i < samples; ++i)
        for (int j = 0; j < vectors; ++j)
            vector_store(y + (size_t)i * width + (size_t)j * WIDTH, sum[i][j]);
}

static void accumulate(size_t count, size_t n, const double *x, size_t stride, const double *weight,
                       size_t width, double *y)
{
    for (size_t o = 0; o < width;) {
        const int two = width - o >= 2 * WIDTH;
        size_t i = 0;
        for (; i + 4 <= n; i += 4)
            if (two)
                sums(4, 2, count, x + i * stride, stride, weight + o, width, y + i * width + o);
            else
                sums(4, 1, count, x + i * stride, stride, weight + o, width, y + i * width + o);
        for (; i < n; ++i)
            if (two)
                sums(1, 2, count, x + i * stride, stride, weight + o, width, y + i * width + o);
            else
                sums(1, 1, count, x + i * stride, stride, weight + o, width, y + i * width + o);
        o += two ? 2 * WIDTH : WIDTH;
    }
}

/* As change_of_u and change_of_v, with what the load gives made before. A spent state whose
   gains are silent becomes +0. */
static void under_gains(size_t width, size_t n, const double *own, double *u, double *v, double *gain)
{
    for (size_t lane = 0; lane < width; lane += WIDTH) {
        const VECTOR A_minus_1 = vector_load(own + lane), B = vector_load(own + width + lane);
        const VECTOR Ap = vector_load(own + 2 * width + lane),
                     Bp_minus_1 = vector_load(own + 3 * width + lane);
        VECTOR at = vector_load(u + lane), slope = vector_load(v + lane);
        for (size_t i = 0; i < n; ++i) {
            double *const for_u = gain + 2 * i * width + lane, *const for_v = for_u + width;
            const VECTOR old = at, u_gain = vector_load(for_u), v_gain = vector_load(for_v);
            const MASK silent = mask_both(mask_below(u_gain, SILENT), mask_below(v_gain, SILENT));
            at = vector_sum(old, vector_fma(A_minus_1, old, vector_fma(B, slope, u_gain)));
            slope = vector_sum(slope, vector_fma(Ap, old, vector_fma(Bp_minus_1, slope, v_gain)));
            if (mask_any(silent)) {
                at = vector_unless(at, mask_both(silent, mask_below(at, SPENT)));
                slope = vector_unless(slope, mask_both(silent, mask_below(slope, SPENT)));
            }
            vector_store(for_u, at);
            vector_store(for_v, slope);
        }
        vector_store(u + lane, at);
        vector_store(v + lane, slope);
    }
}

/* sqrt(a^2 + b^2) <= larger + 0.4143 smaller */
static void free_motion_bounds(size_t lanes, size_t n, double (*row)[LANES], double per_step,
                               double (*p)[LANES], double (*u)[LANES], double (*v)[LANES],
                               const double *growth, const double *per_slope, double (*most)[LANES])
{
    for (size_t lane = 0; lane < lanes; lane += WIDTH) {
        const VECTOR on_u = vector_load(row[0] + lane), on_v = vector_load(row[1] + lane);
        const VECTOR on_p = vector_load(row[2] + lane), grown = vector_load(growth + lane);
        const VECTOR for_slope = vector_load(per_slope + lane);
        for (size_t i = 0; i < n; ++i) {
            const VECTOR now = vector_load(p[i] + lane), speed = vector_load(v[i] + lane);
            const VECTOR change = vector_difference(vector_load(p[i + 1] + lane), now);
            const VECTOR z = vector_fma(on_u, vector_load(u[i] + lane),
                                        vector_fma(on_v, speed, vector_product(on_p, now)));
            const VECTOR loaded = vector_product(on_p, vector_product(change, vector_all(per_step)));
            const VECTOR slope = vector_fma(on_u, speed, vector_fma(on_v, z, loaded));
            const VECTOR a = vector_size(z), b = vector_product(vector_size(slope), for_slope);
            const VECTOR sum = vector_fma(vector_all(0.4143), vector_smaller(a, b), vector_larger(a, b));
            vector_store(most[i] + lane, vector_product(grown, sum));
        }
    }
}

#endif

static void gather(const real *from, size_t stride, size_t count, size_t n, real (*tile)[LANES])
{
    size_t j = 0;
    for (; j + 4 <= count; j += 4) {
        size_t i = 0;
        for (; i + 4 <= n; i += 4)
            transpose_4_by_4(from + j * stride + i, stride, tile[i] + j, LANES);
        for (; i < n; ++i)
            for (size_t k = j; k < j + 4; ++k)
                tile[i][k] = from[k * stride + i];
    }
    for (; j < count; ++j)
        for (size_t i = 0; i < n; ++i)
            tile[i][j] = from[j * stride + i];
}

static void scatter(real *to, size_t stride, size_t count, size_t n, real (*tile)[LANES])
{
    size_t j = 0;
    for (; j + 4 <= count; j += 4) {
        size_t i = 0;
        for (; i + 4 <= n; i += 4)
            transpose_4_by_4(tile[i] + j, LANES, to + j * stride + i, stride);
        for (; i < n; ++i)
            for (size_t k = j; k < j + 4; ++k)
                to[k * stride + i] = tile[i][k];
    }
    for (; j < count; ++j)
        for (size_t i = 0; i < n; ++i)
            to[j * stride + i] = tile[i][j];
}

#ifndef SINGLE_PRECISION
static size_t energies(const rampwise_meter *meter, rampwise_state *s, energy_sums *so_far, size_t n,
                       const double *p, rampwise_energy *energy)
{
    const rampwise_meter m = *meter;
    size_t i = 0;
    while (i < n && take_step(&m, s, so_far, p[i], &energy[i]))
        ++i;
    return i;
}
#endif

extern const kernels KERNELS;
const kernels KERNELS = {.name = KERNELS_NAME,
                         .first_not_finite = first_not_finite,
                         .advance = advance,
                         .under_one_input = under_one_input,
#ifndef SINGLE_PRECISION
                         .stretch = stretch,
                         .may_exceed = may_exceed,
                         .under_two_inputs = under_two_inputs,
                         .accumulate = accumulate,
                         .free_motion_bounds = free_motion_bounds,
                         .under_gains = under_gains,
                         .energies = energies,
#endif
                         .under_own_inputs = under_own_inputs,
                         .rows = rows,
                         .gather = gather,
                         .scatter = scatter};
