/* The body of the limits for one set of instructions. The including file has defined VECTOR, LANES, KEEP, the
   functions vector_*, and LIMITS, INSTRUCTIONS, SET_NAME.

   KEEP(x) lets the compiler know nothing about x any more, and keeps it in a register: nothing is computed
   ahead, left out or put together with something else. */
#include <stddef.h>
#include "machine_limits.h"

#ifdef __clang__
#define UNROLLED _Pragma("clang loop unroll(full)")
#else
#define UNROLLED _Pragma("GCC unroll 32")
#endif

#define ALWAYS static inline __attribute__((always_inline))

ALWAYS void fused(size_t turns, int vectors)
{
    VECTOR x[32], a = vector_all(0.75), b = vector_all(0.25);
    KEEP(a);
    KEEP(b);
    UNROLLED for (int j = 0; j < vectors; ++j) x[j] = vector_all(j);
    for (size_t i = 0; i < turns; ++i)
        UNROLLED for (int j = 0; j < vectors; ++j)
        {
            x[j] = vector_fma(x[j], a, b);
            KEEP(x[j]);
        }
    UNROLLED for (int j = 0; j < vectors; ++j) KEEP(x[j]);
}

/* A step of one vector after the other. They wait for nothing: no result is the input of a later step. Few
   registers hold all, so that none has to come from memory. */
ALWAYS void mix_in_turn(size_t turns, int vectors)
{
    VECTOR top[8], a = vector_all(0.75), b = vector_all(0.25), c = vector_all(0.125), d = vector_all(0.5);
    VECTOR u = vector_all(0.375), v = vector_all(0.625);
    KEEP(a);
    KEEP(b);
    KEEP(c);
    KEEP(d);
    UNROLLED for (int j = 0; j < vectors; ++j) top[j] = vector_all(0);
    for (size_t i = 0; i < turns; ++i)
        UNROLLED for (int j = 0; j < vectors; ++j)
        {
            KEEP(u);
            KEEP(v);
            VECTOR s = vector_product(a, u), t = vector_product(b, v);
            s = vector_fma(c, u, s);
            t = vector_fma(c, v, t);
            s = vector_fma(d, u, s);
            t = vector_fma(d, v, t);
            s = vector_fma(a, u, s);
            t = vector_fma(b, v, t);
            s = vector_sum(s, u);
            t = vector_sum(t, v);
            KEEP(t);
            top[j] = vector_larger(vector_size(s), top[j]);
        }
    UNROLLED for (int j = 0; j < vectors; ++j) KEEP(top[j]);
}

/* The same, all vectors abreast through each operation. */
ALWAYS void mix_abreast(size_t turns, int vectors)
{
    VECTOR top[8], s[8], t[8], a = vector_all(0.75), b = vector_all(0.25), c = vector_all(0.125);
    VECTOR u = vector_all(0.375);
    KEEP(a);
    KEEP(b);
    KEEP(c);
    UNROLLED for (int j = 0; j < vectors; ++j) top[j] = vector_all(0);
    for (size_t i = 0; i < turns; ++i) {
        UNROLLED for (int j = 0; j < vectors; ++j)
        {
            KEEP(u);
            s[j] = vector_product(a, u);
            t[j] = vector_product(b, u);
        }
        UNROLLED for (int k = 0; k < 3; ++k) UNROLLED for (int j = 0; j < vectors; ++j)
        {
            s[j] = vector_fma(c, u, s[j]);
            t[j] = vector_fma(b, u, t[j]);
            KEEP(s[j]);
            KEEP(t[j]);
        }
        UNROLLED for (int j = 0; j < vectors; ++j)
        {
            s[j] = vector_sum(s[j], u);
            t[j] = vector_sum(t[j], u);
            KEEP(t[j]);
        }
        UNROLLED for (int j = 0; j < vectors; ++j) top[j] = vector_larger(vector_size(s[j]), top[j]);
    }
    UNROLLED for (int j = 0; j < vectors; ++j) KEEP(top[j]);
}

static double read(const double *x, size_t n)
{
    VECTOR sum[8];
    double total = 0, part[LANES];
    UNROLLED for (int j = 0; j < 8; ++j) sum[j] = vector_all(0);
    for (size_t i = 0; i + 8 * LANES <= n; i += 8 * LANES)
        UNROLLED for (int j = 0; j < 8; ++j) sum[j] = vector_sum(sum[j], vector_load(x + i + j * LANES));
    UNROLLED for (int j = 1; j < 8; ++j) sum[0] = vector_sum(sum[0], sum[j]);
    vector_store(part, sum[0]);
    for (int j = 0; j < LANES; ++j)
        total += part[j];
    return total;
}

#define LOOP(what, shape, vectors)                                                                           \
    static void what##_##vectors(size_t turns)                                                               \
    {                                                                                                        \
        shape(turns, vectors);                                                                               \
    }
LOOP(fused, fused, 8)
LOOP(fused, fused, 10)
LOOP(fused, fused, 12)
LOOP(fused, fused, 14)
LOOP(fused, fused, 24)
LOOP(in_turn, mix_in_turn, 1)
LOOP(in_turn, mix_in_turn, 4)
LOOP(in_turn, mix_in_turn, 8)
LOOP(abreast, mix_abreast, 2)
LOOP(abreast, mix_abreast, 4)

const limit_set LIMITS = {
    INSTRUCTIONS,
    LANES,
    SET_NAME,
    {{fused_8, 8}, {fused_10, 10}, {fused_12, 12}, {fused_14, 14}, {fused_24, 24}},
    {{in_turn_1, 1}, {in_turn_4, 4}, {in_turn_8, 8}, {abreast_2, 2}, {abreast_4, 4}},
    read,
};
