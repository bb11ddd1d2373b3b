#include "saved.h"

#include <string.h>
#include "rampwise/status.h"
#include "rampwise/version.h"

static const unsigned char letters[8] = {'R', 'A', 'M', 'P', 'W', 'I', 'S', 'E'};

enum { HEAD = 32, TAIL = 4 };

/* What stands in the bytes after it: what was read, else x, which is written. */
static uint64_t number(saved *s, uint64_t x, size_t bytes)
{
    uint64_t read = 0;
    for (size_t i = 0; i < bytes; ++i) {
        if (s->to != NULL)
            s->to[s->at + i] = (unsigned char)(x >> 8 * i);
        if (s->from != NULL)
            read |= (uint64_t)s->from[s->at + i] << 8 * i;
    }
    s->at += bytes;
    return s->from != NULL ? read : x;
}

uint32_t rampwise_saved_uint32_(saved *s, uint32_t *x)
{
    const uint32_t passed = (uint32_t)number(s, *x, 4);
    if (saved_changes(s))
        *x = passed;
    return passed;
}

uint64_t rampwise_saved_uint64_(saved *s, uint64_t *x)
{
    const uint64_t passed = number(s, *x, 8);
    if (saved_changes(s))
        *x = passed;
    return passed;
}

double rampwise_saved_double_(saved *s, double *x)
{
    uint64_t bits;
    double passed;
    memcpy(&bits, x, sizeof bits);
    bits = number(s, bits, sizeof bits);
    memcpy(&passed, &bits, sizeof bits);
    if (saved_changes(s))
        memcpy(x, &bits, sizeof bits);
    return passed;
}

void rampwise_saved_float_(saved *s, float *x)
{
    uint32_t bits;
    memcpy(&bits, x, sizeof bits);
    rampwise_saved_uint32_(s, &bits);
    if (saved_changes(s))
        memcpy(x, &bits, sizeof bits);
}

/* Half bytes divided by x^32 + x^26 + x^23 + x^22 + x^16 + x^12 + x^11 + x^10 + x^8 + x^7 +
   x^5 + x^4 + x^2 + x + 1, the lowest bit first. */
static const uint32_t remainders[16] = {
    0x00000000u, 0x1db71064u, 0x3b6e20c8u, 0x26d930acu, 0x76dc4190u, 0x6b6b51f4u, 0x4db26158u, 0x5005713cu,
    0xedb88320u, 0xf00f9344u, 0xd6d6a3e8u, 0xcb61b38cu, 0x9b64c2b0u, 0x86d3d2d4u, 0xa00ae278u, 0xbdbdf21cu,
};

/* Begun with ones and ended with their complement. */
uint32_t rampwise_saved_checksum_(const unsigned char *bytes, size_t count)
{
    uint32_t rest = 0xffffffffu;
    for (size_t i = 0; i < count; ++i) {
        rest ^= bytes[i];
        rest = rest >> 4 ^ remainders[rest & 15];
        rest = rest >> 4 ^ remainders[rest & 15];
    }
    return ~rest;
}

static void head(saved *s, uint32_t *kind, uint32_t *version, uint32_t *edition, uint64_t *length)
{
    uint32_t zero = 0;
    if (s->to != NULL)
        memcpy(s->to, letters, sizeof letters);
    s->at = sizeof letters;
    rampwise_saved_uint32_(s, kind);
    rampwise_saved_uint32_(s, version);
    rampwise_saved_uint32_(s, edition);
    rampwise_saved_uint32_(s, &zero);
    rampwise_saved_uint64_(s, length);
}

size_t rampwise_saved_size_(const saved_kind *k, const void *object)
{
    saved s = {.at = HEAD};
    if (object == NULL)
        return 0;
    k->pass(&s, (void *)object);
    return s.at + TAIL;
}

int rampwise_saved_write_(const saved_kind *k, const void *object, void *bytes, size_t count)
{
    uint32_t kind = k->kind, version = k->version, edition = RAMPWISE_ARITHMETIC_EDITION;
    uint64_t length = rampwise_saved_size_(k, object);
    if (object == NULL || bytes == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (count < length)
        return RAMPWISE_ERROR_MEMORY;
    saved s = {.to = bytes};
    head(&s, &kind, &version, &edition, &length);
    k->pass(&s, (void *)object);
    uint32_t checksum = rampwise_saved_checksum_(bytes, s.at);
    rampwise_saved_uint32_(&s, &checksum);
    return RAMPWISE_OK;
}

int rampwise_saved_open_(const saved_kind *k, const void *object, const void *bytes, size_t count, saved *s)
{
    uint32_t kind = 0, version = 0, edition = 0, checksum = 0;
    uint64_t length = 0;
    if (object == NULL || bytes == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (count < HEAD + TAIL || memcmp(bytes, letters, sizeof letters) != 0)
        return RAMPWISE_ERROR_DAMAGED;
    saved from = {.from = bytes};
    head(&from, &kind, &version, &edition, &length);
    saved tail = {.from = bytes, .at = count - TAIL};
    rampwise_saved_uint32_(&tail, &checksum);
    if (length != count || checksum != rampwise_saved_checksum_(bytes, count - TAIL))
        return RAMPWISE_ERROR_DAMAGED;
    if (kind != k->kind)
        return RAMPWISE_ERROR_KIND;
    if (version != k->version || edition != RAMPWISE_ARITHMETIC_EDITION)
        return RAMPWISE_ERROR_EDITION;
    if (rampwise_saved_size_(k, object) != count)
        return RAMPWISE_ERROR_DIFFERENT;
    *s = from;
    return RAMPWISE_OK;
}

int rampwise_saved_resume_(const saved_kind *k, void *object, const void *bytes, size_t count)
{
    saved s;
    const int status = rampwise_saved_open_(k, object, bytes, count, &s);
    if (status != RAMPWISE_OK)
        return status;
    saved first = s;
    first.looks = 1;
    k->pass(&first, object);
    if (first.different || first.damaged)
        return first.different ? RAMPWISE_ERROR_DIFFERENT : RAMPWISE_ERROR_DAMAGED;
    k->pass(&s, object);
    return RAMPWISE_OK;
}
