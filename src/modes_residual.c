/* Peaks of the free motion from the present sample on: modes.h and equipment.h say how. */
#include <float.h>
#include <math.h>
#include <string.h>
#include "equipment_core.h"
#include "rampwise/equipment.h"
#include "rampwise/status.h"

/* What of an object moves, in one piece of memory. */
typedef struct keeping {
    char *at;
    int back; /* into the object, or out of it */
} keeping;

static void keep(keeping *k, void *x, size_t bytes)
{
    if (k->back)
        memcpy(x, k->at, bytes);
    else
        memcpy(k->at, x, bytes);
    k->at += bytes;
}

static void keep_all(rampwise_modes *m, int back)
{
    keeping k = {m->kept, back};
    keep(&k, &m->sample, sizeof m->sample);
    keep(&k, m->input, m->inputs * sizeof *m->input);
    keep(&k, m->output, m->width * sizeof *m->output);
    for (size_t g = 0; g < m->groups; ++g) {
        keep(&k, m->group[g].lanes.u, sizeof m->group[g].lanes.u);
        keep(&k, m->group[g].lanes.v, sizeof m->group[g].lanes.v);
    }
    keep(&k, rampwise_modes_peak_(m), m->outputs * sizeof(rampwise_peak));
    for (size_t i = 0; i < rampwise_equipment_count_(m); ++i) {
        for (int velocity = 0; velocity < 2; ++velocity)
            keep(&k, rampwise_equipment_state_(m, i, velocity), sizeof(double));
        for (int q = 0; q < LOOKED_AT; ++q)
            keep(&k, rampwise_equipment_peak_(m, i, q), sizeof(rampwise_peak));
    }
}

/* z'' + damping z' + stiffness z = 0 */
typedef struct free_motion {
    double stiffness, damping, z, slope;
} free_motion;

/* sqrt(a^2 + b^2), whatever the units */
static double size_of(double a, double b)
{
    const double most = larger(fabs(a), fabs(b)), ratio = smaller(fabs(a), fabs(b)) / most;
    return most > 0 ? most * sqrt(1 + ratio * ratio) : 0;
}

/* A bound of |z| from now on: the energy z'^2 + stiffness z^2 never grows; without a spring z goes one
   way only. */
static double largest_of(const free_motion *f)
{
    if (f->z == 0 && f->slope == 0)
        return 0;
    if (f->stiffness > 0 && f->damping >= 0)
        return size_of(f->z, f->slope / sqrt(f->stiffness));
    if (f->stiffness == 0 && f->damping > 0)
        return fmax(fabs(f->z), fabs(f->z + f->slope / f->damping));
    return f->stiffness == 0 && f->damping == 0 && f->slope == 0 ? fabs(f->z) : INFINITY;
}

/* A bound of the integral of |z| from now on. With real roots -s and -S, s the smaller one,

       z = z0 exp(-s t) + (z0' + s z0) (exp(-s t) - exp(-S t))/(S - s)

   and the last factor's integral is 1/(s S). With complex ones z is below an envelope that falls as
   exp(-r t), r = damping/2, and also below (|z0| + |z0' + r z0| t) exp(-r t). */
static double integral_of(const free_motion *f)
{
    const double r = 0.5 * f->damping, square = r * r - f->stiffness;
    if (!(f->stiffness > 0 && f->damping > 0))
        return INFINITY;
    if (square >= 0) {
        const double s = f->stiffness / (r + sqrt(square));
        return fabs(f->z) / s + fabs(f->slope + s * f->z) / f->stiffness;
    }
    const double turned = f->slope + r * f->z, envelope = size_of(f->z, turned / sqrt(-square));
    return fmin(envelope / r, fabs(f->z) / r + fabs(turned) / (r * r));
}

/* What output o has of a free mode */
static free_motion seen_at(const rampwise_modes *m, size_t j, size_t o)
{
    const mode_group *const g = &m->group[j / LANES];
    const double u = g->lanes.u[j % LANES], v = g->lanes.v[j % LANES];
    const double stiffness = -g->row[0][j % LANES], damping = -g->row[1][j % LANES];
    const size_t at = j * m->width + o;
    const double on_u = m->weight_u[at], on_v = m->weight_v != NULL ? m->weight_v[at] : 0;
    return (free_motion){stiffness, damping, on_u * u + on_v * v,
                         on_u * v - on_v * (damping * v + stiffness * u)};
}

/* What no later value of output o exceeds in size. */
static double later_of_output(const rampwise_modes *m, size_t o)
{
    double later = 0;
    for (size_t j = 0; j < m->modes; ++j) {
        const free_motion z = seen_at(m, j, o);
        later += largest_of(&z);
    }
    return later;
}

/* k z + c z' of a free motion z, and its slope */
static free_motion force_of(const free_motion *z, double k, double c)
{
    const double second = -z->damping * z->slope - z->stiffness * z->z;
    return (free_motion){z->stiffness, z->damping, k * z->z + c * z->slope, k * z->slope + c * second};
}

/* The motion alpha y + beta y' in which a piece x'' + c x' + k x = -y can follow the free motion y. With the
   differences a = c - damping and b = k - stiffness that is a x' + b x = -y, and so

       beta = a/D, alpha = (a damping - b)/D, D = b^2 - a b damping + a^2 stiffness

   Infinite where the two have a root in common, or nearly, or D is out of range. */
static free_motion following(const free_motion *y, double k, double c)
{
    const double a = c - y->damping, difference = k - y->stiffness;
    const double rounding = 0x1p-51 * (k + y->stiffness);
    const double b = copysign(fmax(fabs(difference) - rounding, 0), difference);
    const double terms[3] = {b * b, -a * b * y->damping, a * a * y->stiffness};
    const double D = terms[0] + terms[1] + terms[2];
    const double lost = 1e-10 * (fabs(terms[0]) + fabs(terms[1]) + fabs(terms[2]));
    if (!(fabs(D) > lost && fabs(D) >= DBL_MIN))
        return (free_motion){y->stiffness, y->damping, INFINITY, INFINITY};
    const double alpha = (a * y->damping - b) / D, beta = a / D;
    const double second = -y->damping * y->slope - y->stiffness * y->z;
    return (free_motion){y->stiffness, y->damping, alpha * y->z + beta * y->slope,
                         alpha * y->slope + beta * second};
}

/* Whether a piece is better off following a mode than driven by it, by a motion of the mode of size 1. The
   choice does not change along the way, so that bounds fall. */
static int follows(const free_motion *y, double k, double c)
{
    const free_motion unit = {y->stiffness, y->damping, 1, sqrt(fabs(y->stiffness))},
                      x = following(&unit, k, c);
    const double followed = largest_of(&x);
    return followed < INFINITY && !(k > 0 && 2 * followed * sqrt(k) > integral_of(&unit));
}

/* What later displacements and total accelerations of piece i do not exceed in size. x is the sum of the
   motions that follow the modes, and of a free motion. Near a mode's own frequency the two are large and
   cancel; there the mode drives the piece instead: that adds to the root of its energy no more than the
   integral of |y|. */
static void later_of_piece(const rampwise_modes *m, size_t i, double later[LOOKED_AT])
{
    const equipment_core *const e = m->equipment;
    const double k = -e->steps.c[i].total[0], c = -e->steps.c[i].total[1];
    free_motion rest = {k, c, e->u[i], e->v[i]};
    double driven = 0;
    later[0] = later[1] = 0;
    for (size_t j = 0; j < m->modes; ++j) {
        const free_motion y = seen_at(m, j, e->point[i]);
        if (y.z == 0 && y.slope == 0)
            continue;
        if (!follows(&y, k, c)) {
            driven += k > 0 ? integral_of(&y) : INFINITY;
            continue;
        }
        const free_motion x = following(&y, k, c), force = force_of(&x, k, c);
        rest.z -= x.z;
        rest.slope -= x.slope;
        later[0] += largest_of(&x);
        later[1] += largest_of(&force);
    }
    const free_motion force = force_of(&rest, k, c);
    later[0] += largest_of(&rest);
    later[1] += largest_of(&force);
    if (driven > 0) {
        later[0] += k > 0 ? driven / sqrt(k) : INFINITY;
        later[1] += k > 0 ? driven * sqrt(k + c * c) : k < 0 || c != 0 ? INFINITY : 0;
    }
}

/* Undamped equipment on an undamped mode of its own frequency that moves. */
static int grows_for_ever(const rampwise_modes *m, size_t i)
{
    const equipment_core *const e = m->equipment;
    const double *const total = e->steps.c[i].total;
    for (size_t j = 0; j < m->modes && total[0] < 0 && total[1] == 0; ++j) {
        const free_motion y = seen_at(m, j, e->point[i]);
        if (y.stiffness == -total[0] && y.damping == 0 && !(y.z == 0 && y.slope == 0))
            return 1;
    }
    return 0;
}

/* What is asked for: outputs, or one quantity of the pieces. */
typedef struct asked {
    size_t count;
    int equipment, q;
} asked;

static rampwise_peak *peak_of(const rampwise_modes *m, const asked *a, size_t i)
{
    return a->equipment ? rampwise_equipment_peak_(m, i, a->q) : &rampwise_modes_peak_(m)[i];
}

static double later_of(const rampwise_modes *m, const asked *a, size_t i)
{
    double later[LOOKED_AT];
    if (!a->equipment)
        return later_of_output(m, i);
    later_of_piece(m, i, later);
    return later[a->q];
}

/* Whether nothing later exceeds the peak on either side by more than what rounding does to both, 1e-11 of the
   larger. */
static int is_final(const rampwise_peak *peak, double later)
{
    const double high = peak->high.value, low = -peak->low.value;
    return later <= fmin(high, low) + 1e-11 * fmax(high, low);
}

/* Walks on until all are final, so many samples at most. Only the first that is not is asked again after each
   segment. */
static void walk(rampwise_modes *m, const asked *a, uint64_t samples)
{
    size_t i = 0;
    while (samples > 0) {
        while (i < a->count && is_final(peak_of(m, a, i), later_of(m, a, i)))
            ++i;
        if (i == a->count)
            return;
        const size_t n = samples < SEGMENT ? (size_t)samples : SEGMENT;
        if (!rampwise_modes_go_on_(m, n))
            return;
        samples -= n;
    }
}

/* Peaks begin with the present values. */
static void begin_peaks(rampwise_modes *m)
{
    for (size_t o = 0; o < m->outputs; ++o) {
        const rampwise_instant now = {m->output[o], m->sample, 0};
        rampwise_modes_peak_(m)[o] = (rampwise_peak){now, now};
    }
    for (size_t i = 0; i < rampwise_equipment_count_(m); ++i)
        for (int q = 0; q < LOOKED_AT; ++q) {
            const equipment_core *const e = m->equipment;
            const double value = q == 0 ? e->u[i] : total_of(&e->steps.c[i], e->u[i], e->v[i]);
            const rampwise_instant now = {value, m->sample, 0};
            *rampwise_equipment_peak_(m, i, q) = (rampwise_peak){now, now};
        }
}

static void residual(rampwise_modes *m, const asked *a, uint64_t samples, rampwise_peak *peak, double *later)
{
    keep_all(m, 0);
    rampwise_modes_release_(m);
    begin_peaks(m);
    walk(m, a, samples);
    for (size_t i = 0; i < a->count; ++i) {
        peak[i] = *peak_of(m, a, i);
        if (later != NULL)
            later[i] = later_of(m, a, i);
        if (a->equipment && grows_for_ever(m, i))
            peak[i] = (rampwise_peak){{INFINITY, UINT64_MAX, 0}, {-INFINITY, UINT64_MAX, 0}};
    }
    keep_all(m, 1);
}

int rampwise_modes_residual(rampwise_modes *modes, uint64_t samples, rampwise_peak *peak, double *later)
{
    if (modes == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (modes->peaks == NULL)
        return RAMPWISE_ERROR_QUANTITY;
    const asked outputs = {modes->outputs, 0, 0};
    residual(modes, &outputs, samples, peak, later);
    return RAMPWISE_OK;
}

int rampwise_equipment_residual(rampwise_modes *modes, int quantity, uint64_t samples, rampwise_peak *peak,
                                double *later)
{
    if (modes == NULL || peak == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (modes->peaks == NULL || rampwise_equipment_count_(modes) == 0 ||
        (quantity != RAMPWISE_DISPLACEMENT && quantity != RAMPWISE_TOTAL_ACCELERATION))
        return RAMPWISE_ERROR_QUANTITY;
    const asked pieces = {rampwise_equipment_count_(modes), 1, quantity == RAMPWISE_TOTAL_ACCELERATION};
    residual(modes, &pieces, samples, peak, later);
    return RAMPWISE_OK;
}
