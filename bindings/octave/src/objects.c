/* Objects that stay from call to call. An object's number is its place in a table, and above that how often the place
   was given away: numbers never come again. The gateway stays loaded while Octave runs; what is left over then is freed
   at the end. */
#include <stdlib.h>
#include <string.h>
#include "gateway.h"

typedef struct place {
    const object_kind *kind; /* NULL where the place is free */
    void *object;
    uint32_t times;
} place;

static place *table;
static size_t places;

static void clear_place(place *at)
{
    at->kind->release(at->object);
    at->kind = NULL;
    at->object = NULL;
}

void objects_clear(void)
{
    for (size_t i = 0; i < places; ++i)
        if (table[i].kind != NULL)
            clear_place(&table[i]);
    free(table);
    table = NULL;
    places = 0;
}

/* NULL where there is no memory for more. */
static place *free_place(void)
{
    for (size_t i = 0; i < places; ++i)
        if (table[i].kind == NULL)
            return &table[i];
    const size_t more = places > 0 ? 2 * places : 16;
    place *const grown = more <= UINT32_MAX ? realloc(table, more * sizeof *table) : NULL;
    if (grown == NULL)
        return NULL;
    place *const first = grown + places;
    memset(first, 0, (more - places) * sizeof *grown);
    table = grown;
    places = more;
    return first;
}

mxArray *object_keep(const object_kind *kind, void *object)
{
    place *const at = free_place();
    if (at == NULL) {
        kind->release(object);
        refuse("no memory for one more object");
    }
    *at = (place){kind, object, at->times + 1};
    mxArray *const a = mxCreateNumericMatrix(1, 1, mxUINT64_CLASS, mxREAL);
    *(uint64_t *)mxGetData(a) = (uint64_t)at->times << 32 | (uint64_t)(at - table);
    return a;
}

/* NULL where there is no such object any more. */
static place *find(const mxArray *a)
{
    if (!mxIsUint64(a) || mxIsComplex(a) || mxGetNumberOfElements(a) != 1)
        refuse("an object is a scalar of class uint64");
    const uint64_t number = *(const uint64_t *)mxGetData(a);
    const size_t i = number & UINT32_MAX;
    return i < places && table[i].kind != NULL && table[i].times == number >> 32 ? &table[i] : NULL;
}

void *object_find(const mxArray *a, const object_kind *kind)
{
    const place *const at = find(a);
    if (at == NULL || at->kind != kind) {
        mexErrMsgIdAndTxt("rampwise:freed",
                          "rampwise: there is no such %s, or not any more in this run of Octave", kind->name);
        return NULL;
    }
    return at->object;
}

/* object: gone, if it is still there */
void object_free(mxArray **out, const mxArray **in)
{
    place *const at = find(in[0]);
    out[0] = number(at != NULL);
    if (at != NULL)
        clear_place(at);
}

/* -> how many there are */
void objects(mxArray **out, const mxArray **in)
{
    (void)in;
    size_t count = 0;
    for (size_t i = 0; i < places; ++i)
        count += table[i].kind != NULL;
    out[0] = number((double)count);
}
