/* What a single oscillator waits for, with fused multiply-add in hardware.

   From u and v to the next: the longest way leads from v over two fused multiply-adds and a sum. What the loads
   add is prepared, in registers or in memory nearby. An oscillator of w h = 0.5, 5 % damped. The order of the
   operations is the compiler's, or as written: processors hand results from unit to unit at uneven cost, and
   the best order of 280 tried on one of them is "u between". */
#include "machine_limits.h"

#if defined(__x86_64__)
#define KEEP(x) __asm__ volatile("" : "+x"(x))
#else
#define KEEP(x) __asm__ volatile("" : "+w"(x))
#endif

enum { LOADED = 512 }; /* samples */

#define CHAIN(name, loaded_u, loaded_v, step)                                                                \
    static void name(size_t turns)                                                                           \
    {                                                                                                        \
        static double loaded[2 * LOADED];                                                                    \
        const volatile double *const from = loaded;                                                          \
        double a = -0.12, b = 0.47, c = -0.47, d = -0.16, u = 1, v = 0, at_u = 0.1, at_v = 0.1, x, y;        \
        KEEP(a);                                                                                             \
        KEEP(b);                                                                                             \
        KEEP(c);                                                                                             \
        KEEP(d);                                                                                             \
        KEEP(at_u);                                                                                          \
        KEEP(at_v);                                                                                          \
        for (size_t i = 0; i < turns; ++i) {                                                                 \
            step(loaded_u, loaded_v);                                                                        \
            step(loaded_u, loaded_v);                                                                        \
        }                                                                                                    \
        (void)from;                                                                                          \
    }

/* One operation that stays where it is written. */
#define NOW(to, value)                                                                                       \
    to = (value);                                                                                            \
    KEEP(to)

#define AS_COMPILED(loaded_u, loaded_v)                                                                      \
    x = __builtin_fma(a, u, __builtin_fma(b, v, loaded_u));                                                  \
    y = __builtin_fma(c, u, __builtin_fma(d, v, loaded_v));                                                  \
    NOW(u, u + x);                                                                                           \
    NOW(v, v + y)

#define U_FIRST(loaded_u, loaded_v)                                                                          \
    NOW(x, __builtin_fma(b, v, loaded_u));                                                                   \
    NOW(y, __builtin_fma(d, v, loaded_v));                                                                   \
    NOW(x, __builtin_fma(a, u, x));                                                                          \
    NOW(x, u + x);                                                                                           \
    NOW(y, __builtin_fma(c, u, y));                                                                          \
    NOW(v, v + y);                                                                                           \
    u = x

#define U_BETWEEN(loaded_u, loaded_v)                                                                        \
    NOW(y, loaded_v);                                                                                        \
    NOW(y, __builtin_fma(d, v, y));                                                                          \
    NOW(x, loaded_u);                                                                                        \
    NOW(x, __builtin_fma(b, v, x));                                                                          \
    NOW(x, __builtin_fma(a, u, x));                                                                          \
    NOW(x, u + x);                                                                                           \
    NOW(y, __builtin_fma(c, u, y));                                                                          \
    NOW(v, v + y);                                                                                           \
    u = x

CHAIN(chain_compiled, at_u, at_v, AS_COMPILED)
CHAIN(chain_u_first, at_u, at_v, U_FIRST)
CHAIN(chain_u_first_near, from[i % LOADED], from[LOADED + i % LOADED], U_FIRST)
CHAIN(chain_u_between, at_u, at_v, U_BETWEEN)
CHAIN(chain_u_between_near, from[i % LOADED], from[LOADED + i % LOADED], U_BETWEEN)

const limit_loop limits_chain[LIMIT_LOOPS] = {
    {chain_compiled, 2},  {chain_u_first, 2},        {chain_u_first_near, 2},
    {chain_u_between, 2}, {chain_u_between_near, 2},
};
