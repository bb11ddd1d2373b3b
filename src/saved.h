/* Objects as bytes: the same on every machine, and refused where they are damaged.

   One function an object goes through its members, whether they are counted, written, looked at or read:
   saved_kind.pass.
   Bytes: the eight letters RAMPWISE; four numbers of four bytes: kind of object, version of its format,
   edition of the arithmetic, zero; the length of all in eight bytes; the members; a CRC-32 of everything
   before it (ISO/IEC/IEEE 8802-3, the check sequence of ISO 3309 and ITU-T V.42). Numbers are little-endian,
   floating point as the bits of IEEE 754. */
#ifndef RAMPWISE_SAVED_H
#define RAMPWISE_SAVED_H

#include <stddef.h>
#include <stdint.h>
#include "precision.h"
#include "rampwise/watch.h"

/* One way through the members of an object: written where `to` is set, read where `from` is, else counted.
   Where it only looks, members stay as they are, and it is noted what is not as it must be. */
typedef struct saved {
    unsigned char *to;
    const unsigned char *from;
    size_t at;
    int looks, different, damaged;
} saved;

/* Each kind of object has a number of its own here, for ever. */
enum {
    SAVED_STREAM = 1,
    SAVED_STREAM_F32 = 2,
    SAVED_WATCH = 3,
    SAVED_WATCH_F32 = 4,
    SAVED_BANK = 5,
    SAVED_PEAKS = 6,
    SAVED_MODES = 7,
    SAVED_BANK_F32 = 8,
    SAVED_DIRECTIONS = 9
};

typedef struct saved_kind {
    uint32_t kind, version;
    /* Goes through the members. How many there are must follow from what reading does not change. */
    void (*pass)(saved *s, void *object);
} saved_kind;

/* Whether members take what is read. */
static inline int saved_changes(const saved *s)
{
    return s->from != NULL && !s->looks;
}

/* These and those below answer what stands in the bytes, whether or not *x takes it. */
uint32_t rampwise_saved_uint32_(saved *s, uint32_t *x);
uint64_t rampwise_saved_uint64_(saved *s, uint64_t *x);
double rampwise_saved_double_(saved *s, double *x);
void rampwise_saved_float_(saved *s, float *x);

/* The length in bytes of the object as it is; 0 for NULL. */
size_t rampwise_saved_size_(const saved_kind *k, const void *object);

/* Writes it. RAMPWISE_ERROR_MISSING; _MEMORY where there are fewer bytes than that. */
int rampwise_saved_write_(const saved_kind *k, const void *object, void *bytes, size_t count);

/* Whether the bytes are one whole object of this kind, as long as *object; then *s reads its members from the
   first on. RAMPWISE_ERROR_MISSING, _DAMAGED, _KIND, _EDITION, _DIFFERENT (another length). What the members
   may hold is for the caller to check, before they become an object. */
int rampwise_saved_open_(const saved_kind *k, const void *object, const void *bytes, size_t count, saved *s);

/* Opens them and reads *object: goes through them twice, first to look, then to change. Besides the errors of
   opening, RAMPWISE_ERROR_DIFFERENT or _DAMAGED, as was noted on the way; nothing has changed then. */
int rampwise_saved_resume_(const saved_kind *k, void *object, const void *bytes, size_t count);

uint32_t rampwise_saved_checksum_(const unsigned char *bytes, size_t count);

static inline void saved_doubles(saved *s, double *x, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        rampwise_saved_double_(s, &x[i]);
}

static inline int32_t saved_int(saved *s, int32_t *x)
{
    uint32_t bits = (uint32_t)*x;
    const int32_t passed = (int32_t)rampwise_saved_uint32_(s, &bits);
    if (saved_changes(s))
        *x = passed;
    return passed;
}

static inline size_t saved_size(saved *s, size_t *x)
{
    uint64_t wide = *x;
    const size_t passed = (size_t)rampwise_saved_uint64_(s, &wide);
    if (saved_changes(s))
        *x = passed;
    return passed;
}

/* What must be the same where it is resumed. */
static inline void saved_equal(saved *s, uint64_t mine)
{
    uint64_t value = mine;
    s->different |= rampwise_saved_uint64_(s, &value) != mine;
}

static inline void saved_real(saved *s, real *x)
{
#ifdef SINGLE_PRECISION
    rampwise_saved_float_(s, x);
#else
    rampwise_saved_double_(s, x);
#endif
}

static inline void saved_reals(saved *s, real *x, size_t n)
{
    for (size_t i = 0; i < n; ++i)
        saved_real(s, &x[i]);
}

static inline void saved_instant(saved *s, PUBLIC(instant) * x)
{
    saved_real(s, &x->value);
    rampwise_saved_uint64_(s, &x->sample);
    saved_real(s, &x->fraction);
}

static inline void saved_peak(saved *s, PUBLIC(peak) * x)
{
    saved_instant(s, &x->high);
    saved_instant(s, &x->low);
}

static inline void saved_coeffs(saved *s, real_coeffs *c)
{
    real *const numbers[] = {&c->A,  &c->B,  &c->C,  &c->D,         &c->Ap,
                             &c->Bp, &c->Cp, &c->Dp, &c->A_minus_1, &c->Bp_minus_1};
    for (size_t i = 0; i < sizeof numbers / sizeof *numbers; ++i)
        saved_real(s, numbers[i]);
    saved_reals(s, c->acceleration, 4);
    saved_reals(s, c->total, 4);
#ifdef SINGLE_PRECISION
    saved_real(s, &c->mass);
    saved_real(s, &c->damper);
    saved_real(s, &c->stiffness);
    saved_real(s, &c->rate);
#else
    saved_real(s, &c->system.mass);
    saved_real(s, &c->system.damper);
    saved_real(s, &c->system.stiffness);
#endif
    rampwise_saved_double_(s, &c->dt);
    saved_int(s, &c->input);
    saved_int(s, &c->between);
    saved_reals(s, c->reserve, sizeof c->reserve / sizeof *c->reserve);
}

static inline void saved_state(saved *s, real_state *x)
{
    saved_real(s, &x->u);
    saved_real(s, &x->v);
    saved_real(s, &x->p);
    saved_real(s, &x->p_before);
#ifdef SINGLE_PRECISION
    saved_real(s, &x->u_low);
    saved_real(s, &x->v_low);
#endif
}

#endif
