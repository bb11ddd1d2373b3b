/* The one body of all kernels. The including file has defined a thin layer over its vectors:
   VECTOR, MASK, WIDTH and the functions vector_*, mask_*; and KERNELS, the table's name, and
   KERNELS_NAME. The arithmetic is that of step.h, operation by operation. */

#include <stdint.h>
#include <string.h>
#include "../entry.h"
#include "kernels.h"

#define SILENT 1.1830521861667747e-271 /* 2^-900 */
#define SPENT 1.0261342003245941e-289  /* 2^-960 */

/* Vectors in flight: enough to hide the latency of a step, few enough for the registers. */
enum { FLIGHT = 4 };

static inline VECTOR next_u(const lane_block *b, size_t at, VECTOR u, VECTOR v, VECTOR p, VECTOR p1)
{
    const VECTOR loaded = vector_fma(vector_load(b->C + at), p, vector_product(vector_load(b->D + at), p1));
    const VECTOR gain = vector_fma(vector_load(b->B + at), v, loaded);
    return vector_sum(u, vector_fma(vector_load(b->A_minus_1 + at), u, gain));
}

static inline VECTOR next_v(const lane_block *b, size_t at, VECTOR u, VECTOR v, VECTOR p, VECTOR p1)
{
    const VECTOR loaded = vector_fma(vector_load(b->Cp + at), p, vector_product(vector_load(b->Dp + at), p1));
    const VECTOR gain = vector_fma(vector_load(b->Bp_minus_1 + at), v, loaded);
    return vector_sum(v, vector_fma(vector_load(b->Ap + at), u, gain));
}

/* |p| < 2^-900 by its bits, away from the vector units */
static inline int is_silent(double p)
{
    uint64_t bits;
    memcpy(&bits, &p, sizeof bits);
    return bits << 1 < (uint64_t)(1023 - 900) << 53;
}

static size_t first_not_finite(size_t n, const double *x)
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

/* GCC would pack u and v of one oscillator into a vector and unpack it again in every step; and it would fetch
   all coefficients of a block before the loop, only to put most of them on the stack. */
#if defined(__GNUC__) && !defined(__clang__)
#pragma GCC push_options
#pragma GCC optimize("no-tree-slp-vectorize", "no-tree-loop-im", "no-move-loop-invariants")
#endif

/* The step from u, v under `before` to `now`, and its entry in the outputs; 0 where it overflows. */
static inline __attribute__((always_inline)) int take(const rampwise_coeffs *c, const rampwise_history *out,
                                                      size_t i, double u, double v, double before, double now,
                                                      double *u_next, double *v_next)
{
    double u1 = rampwise_next_u_(c, u, v, before, now);
    double v1 = rampwise_next_v_(c, u, v, before, now);
    if (__builtin_expect(is_silent(before) & is_silent(now), 0)) {
        u1 = rampwise_unless_spent_(u1);
        v1 = rampwise_unless_spent_(v1);
    }
    *u_next = u1;
    *v_next = v1;
    const rampwise_state next = {u1, v1, now, before};
    return put_state(c, &next, out, i);
}

/* Coefficients and outputs are copied, so that none can be taken for another, and two samples go by in a
   turn, so that no state has to be moved to make room for the next: a step waits for nothing but the one
   before. `accelerations` is a constant where this is inlined. */
static inline __attribute__((always_inline)) size_t
advance_with(int accelerations, const rampwise_coeffs *coeffs, rampwise_state *s, size_t first, size_t end,
             size_t stride, const double *p, const rampwise_history *outputs)
{
    const rampwise_coeffs c = *coeffs;
    const rampwise_history out = {outputs->u, outputs->v, accelerations ? outputs->a : NULL,
                                  accelerations ? outputs->total : NULL};
    double u = s->u, v = s->v, before = s->p, p_before = s->p_before;
    size_t i = first;
    while (i < end) {
        double u1, v1, u2, v2;
        const double now = p[i];
        if (!take(&c, &out, i, u, v, before, now, &u1, &v1))
            break;
        i += stride;
        const double next = i < end ? p[i] : 0;
        if (i >= end || !take(&c, &out, i, u1, v1, now, next, &u2, &v2)) {
            u = u1;
            v = v1;
            p_before = before;
            before = now;
            break;
        }
        i += stride;
        u = u2;
        v = v2;
        p_before = now;
        before = next;
    }
    *s = (rampwise_state){u, v, before, p_before};
    return i < end ? i : end;
}

static size_t advance(const rampwise_coeffs *c, rampwise_state *s, size_t first, size_t end, size_t stride,
                      const double *p, const rampwise_history *out)
{
    if (out->a != NULL || out->total != NULL)
        return advance_with(1, c, s, first, end, stride, p, out);
    return advance_with(0, c, s, first, end, stride, p, out);
}

/* `flight` vectors from lane `at` on over one step of their one input. */
static inline __attribute__((always_inline)) void step_together(const lane_block *block, size_t at,
                                                                int flight, VECTOR *u, VECTOR *v,
                                                                VECTOR before, VECTOR now, int silent)
{
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        const VECTOR old = u[j];
        u[j] = next_u(block, lane, old, v[j], before, now);
        v[j] = next_v(block, lane, old, v[j], before, now);
    }
    if (__builtin_expect(silent, 0))
        for (int j = 0; j < flight; ++j) {
            u[j] = vector_unless_below(u[j], SPENT, mask_all());
            v[j] = vector_unless_below(v[j], SPENT, mask_all());
        }
}

/* Answers whether one of the vectors is not finite any more. flight and gathering are constants where this is
   inlined. */
static inline __attribute__((always_inline)) int one_input(lane_block *block, size_t at, int flight,
                                                           int gathering, double p_last, size_t n,
                                                           const double *p, double *largest)
{
    VECTOR u[FLIGHT], v[FLIGHT], top[FLIGHT];
    for (int j = 0; j < flight; ++j) {
        u[j] = vector_load(block->u + at + (size_t)j * WIDTH);
        v[j] = vector_load(block->v + at + (size_t)j * WIDTH);
        if (gathering)
            top[j] = vector_load(largest + at + (size_t)j * WIDTH);
    }
    int was_silent = is_silent(p_last);
    VECTOR before = vector_all(p_last);
    for (size_t i = 0; i < n; ++i) {
        const VECTOR now = vector_all(p[i]);
        const int silent = is_silent(p[i]);
        step_together(block, at, flight, u, v, before, now, silent & was_silent);
        if (gathering)
            for (int j = 0; j < flight; ++j)
                top[j] = vector_larger_size(u[j], top[j]);
        was_silent = silent;
        before = now;
    }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        vector_store(block->u + at + (size_t)j * WIDTH, u[j]);
        vector_store(block->v + at + (size_t)j * WIDTH, v[j]);
        if (gathering)
            vector_store(largest + at + (size_t)j * WIDTH, top[j]);
        zero = vector_fma(u[j], vector_all(0), vector_fma(v[j], vector_all(0), zero));
    }
    return vector_any_nan(zero);
}

/* As many vectors in flight as there are left, each number with code of its own. */
static int under_one_input(lane_block *block, size_t lanes, double p_last, size_t n, const double *p,
                           double *largest)
{
#define FLY(flight)                                                                                          \
    (largest != NULL ? one_input(block, at, flight, 1, p_last, n, p, largest)                                \
                     : one_input(block, at, flight, 0, p_last, n, p, NULL))
    int lost = 0;
    for (size_t at = 0; at < lanes; at += FLIGHT * WIDTH) {
        const size_t left = (lanes - at + WIDTH - 1) / WIDTH;
        lost |= left == 1 ? FLY(1) : left == 2 ? FLY(2) : left == 3 ? FLY(3) : FLY(4);
    }
#undef FLY
    return lost;
}

/* Quantity q of stretch(): u, v, or the row over {u, v, p}. */
static inline VECTOR looked_at(int q, double (*row)[LANES], size_t lane, VECTOR u, VECTOR v, VECTOR p)
{
    if (q < 2)
        return q == 0 ? u : v;
    return vector_fma(
        vector_load(row[0] + lane), u,
        vector_fma(vector_load(row[1] + lane), v, vector_product(vector_load(row[2] + lane), p)));
}

static inline __attribute__((always_inline)) int one_stretch(lane_block *block, size_t at, int flight,
                                                             unsigned looked, double (*row)[LANES],
                                                             double p_last, size_t n, const double *p,
                                                             double (*high)[LANES], double (*low)[LANES])
{
    VECTOR u[FLIGHT], v[FLIGHT], top[3][FLIGHT], bottom[3][FLIGHT];
    for (int j = 0; j < flight; ++j) {
        u[j] = vector_load(block->u + at + (size_t)j * WIDTH);
        v[j] = vector_load(block->v + at + (size_t)j * WIDTH);
    }
    int was_silent = is_silent(p_last);
    VECTOR before = vector_all(p_last);
    for (int q = 0; q < 3; ++q)
        for (int j = 0; (looked >> q & 1) && j < flight; ++j)
            top[q][j] = bottom[q][j] = looked_at(q, row, at + (size_t)j * WIDTH, u[j], v[j], before);
    for (size_t i = 0; i < n; ++i) {
        const VECTOR now = vector_all(p[i]);
        const int silent = is_silent(p[i]);
        step_together(block, at, flight, u, v, before, now, silent & was_silent);
        for (int q = 0; q < 3; ++q)
            for (int j = 0; (looked >> q & 1) && j < flight; ++j) {
                const VECTOR z = looked_at(q, row, at + (size_t)j * WIDTH, u[j], v[j], now);
                top[q][j] = vector_larger(z, top[q][j]);
                bottom[q][j] = vector_smaller(z, bottom[q][j]);
            }
        was_silent = silent;
        before = now;
    }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        vector_store(block->u + lane, u[j]);
        vector_store(block->v + lane, v[j]);
        zero = vector_fma(u[j], vector_all(0), vector_fma(v[j], vector_all(0), zero));
        for (int q = 0; q < 3; ++q)
            if (looked >> q & 1) {
                vector_store(high[q] + lane, top[q][j]);
                vector_store(low[q] + lane, bottom[q][j]);
            }
    }
    return vector_any_nan(zero);
}

/* Each choice of quantities has code of its own. */
static int stretch(lane_block *block, size_t lanes, unsigned looked, double (*row)[LANES], double p_last,
                   size_t n, const double *p, double (*high)[LANES], double (*low)[LANES])
{
#define LOOK(which)                                                                                          \
    case which:                                                                                              \
        lost |= one_stretch(block, at, FLIGHT, which, row, p_last, n, p, high, low);                         \
        break
    int lost = 0;
    for (size_t at = 0; at < lanes; at += FLIGHT * WIDTH)
        switch (looked) {
            LOOK(1);
            LOOK(2);
            LOOK(3);
            LOOK(4);
            LOOK(5);
            LOOK(6);
            LOOK(7);
        }
#undef LOOK
    return lost;
}

#if defined(__GNUC__) && !defined(__clang__)
#pragma GCC pop_options
#endif

static void may_exceed(size_t lanes, size_t count, const double *high, const double *low, size_t stride,
                       const double *floor_high, const double *floor_low, double (*excess)[LANES],
                       const double *largest_p, const double *largest_change, uint32_t *flags)
{
    for (size_t i = 0; i < 2 * count; ++i)
        flags[i] = 0;
    for (size_t lane = 0; lane < lanes; lane += WIDTH) {
        const VECTOR constant = vector_load(excess[0] + lane), from_p = vector_load(excess[1] + lane);
        const VECTOR from_change = vector_load(excess[2] + lane), from_size = vector_load(excess[3] + lane);
        const VECTOR floor_above = vector_load(floor_high + lane),
                     floor_below = vector_load(floor_low + lane);
        for (size_t i = 0; i < count; ++i) {
            const VECTOR top = vector_load(high + i * stride + lane),
                         bottom = vector_load(low + i * stride + lane);
            const VECTOR size = vector_larger(vector_size(top), vector_size(bottom));
            const VECTOR more =
                vector_fma(from_size, size,
                           vector_fma(from_change, vector_all(largest_change[i]),
                                      vector_fma(from_p, vector_all(largest_p[i]), constant)));
            const VECTOR above = vector_difference(vector_sum(top, more), floor_above);
            const VECTOR below = vector_difference(floor_below, vector_difference(bottom, more));
            flags[2 * i] |= (uint32_t)mask_bits(vector_positive(above)) << lane;
            flags[2 * i + 1] |= (uint32_t)mask_bits(vector_positive(below)) << lane;
        }
    }
}

static inline __attribute__((always_inline)) int own_inputs(lane_block *block, size_t at, int flight,
                                                            size_t n, double (*p)[LANES], lane_tile u_out,
                                                            lane_tile v_out)
{
    VECTOR u[FLIGHT], v[FLIGHT], before[FLIGHT];
    MASK was_silent[FLIGHT];
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        u[j] = vector_load(block->u + lane);
        v[j] = vector_load(block->v + lane);
        before[j] = vector_load(p[0] + lane);
        was_silent[j] = mask_below(before[j], SILENT);
    }
    for (size_t i = 0; i < n; ++i)
        for (int j = 0; j < flight; ++j) {
            const size_t lane = at + (size_t)j * WIDTH;
            const VECTOR old = u[j], now = vector_load(p[i + 1] + lane);
            const MASK silent = mask_below(now, SILENT), flush = mask_both(silent, was_silent[j]);
            u[j] = next_u(block, lane, old, v[j], before[j], now);
            v[j] = next_v(block, lane, old, v[j], before[j], now);
            if (mask_any(flush)) {
                u[j] = vector_unless_below(u[j], SPENT, flush);
                v[j] = vector_unless_below(v[j], SPENT, flush);
            }
            vector_store(u_out[i] + lane, u[j]);
            vector_store(v_out[i] + lane, v[j]);
            before[j] = now;
            was_silent[j] = silent;
        }
    VECTOR zero = vector_all(0);
    for (int j = 0; j < flight; ++j) {
        const size_t lane = at + (size_t)j * WIDTH;
        vector_store(block->u + lane, u[j]);
        vector_store(block->v + lane, v[j]);
        zero = vector_fma(u[j], vector_all(0), vector_fma(v[j], vector_all(0), zero));
    }
    return vector_any_nan(zero);
}

static int under_own_inputs(lane_block *block, size_t lanes, size_t n, double (*p)[LANES], lane_tile u,
                            lane_tile v)
{
    int lost = 0;
    for (size_t at = 0; at < lanes; at += FLIGHT * WIDTH)
        lost |= own_inputs(block, at, FLIGHT, n, p, u, v);
    return lost;
}

/* fma(row[0], u, fma(row[1], v, fma(row[2], p, row[3] (p - p_before)))), as row_value of row.h:
   where a lane's last entry is zero, its change is not asked. */
static int rows(double (*row)[LANES], size_t lanes, size_t n, double (*p)[LANES], lane_tile u, lane_tile v,
                lane_tile out, double *finite)
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

/* `samples` rows of y, `vectors` vectors wide: enough sums in flight to hide their latency, each weight fetched
   once for all of them. Both are constants where this is inlined. */
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

/* As next_u and next_v, with what the load gives made before. A spent state whose gains are silent becomes +0. */
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
                at = vector_unless_below(at, SPENT, silent);
                slope = vector_unless_below(slope, SPENT, silent);
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

static void gather(const double *from, size_t stride, size_t count, size_t n, double (*tile)[LANES])
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

static void scatter(double *to, size_t stride, size_t count, size_t n, double (*tile)[LANES])
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

extern const kernels KERNELS;
const kernels KERNELS = {KERNELS_NAME, first_not_finite, advance, under_one_input, stretch,
                         may_exceed,   under_own_inputs, rows,    accumulate,      free_motion_bounds,
                         under_gains,  gather,           scatter};
