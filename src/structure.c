#include "rampwise/structure.h"

#include <math.h>
#include <string.h>
#include "complex_number.h"
#include "modes_core.h"
#include "rampwise/status.h"
#include "twofold.h"

/* What mode j settles at under a unit of input i. */
static twofold settled_mode(const rampwise_modes_plan *plan, size_t j, size_t i)
{
    const rampwise_system *const sys = &plan->c[j].system;
    const twofold load = {plan->load[j * plan->inputs + i], 0}, stiffness = {sys->stiffness, 0};
    if (plan->c[j].input == RAMPWISE_FORCE)
        return twofold_divide(load, stiffness);
    return twofold_negative(twofold_divide(twofold_multiply_by(load, sys->mass), stiffness));
}

int rampwise_static_correction(const rampwise_modes_plan *plan, const double *settled, double *on_input)
{
    if (settled == NULL || on_input == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = rampwise_modes_check_(plan);
    if (status != RAMPWISE_OK)
        return status;
    for (size_t i = 0; i < plan->inputs; ++i)
        for (size_t o = 0; o < plan->outputs; ++o) {
            twofold sum = {settled[i * plan->outputs + o], 0};
            for (size_t j = 0; plan->on_displacement != NULL && j < plan->modes; ++j)
                if (plan->c[j].system.stiffness != 0)
                    sum = twofold_subtract(sum,
                                           twofold_multiply_by(settled_mode(plan, j, i),
                                                               plan->on_displacement[j * plan->outputs + o]));
            if (!isfinite(sum.hi))
                return RAMPWISE_ERROR_WEIGHT;
            on_input[i * plan->outputs + o] = sum.hi;
        }
    return RAMPWISE_OK;
}

int rampwise_mass_share(const rampwise_modes_plan *plan, const double *mass, double *share)
{
    if (mass == NULL || share == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = rampwise_modes_check_(plan);
    if (status != RAMPWISE_OK)
        return status;
    for (size_t i = 0; i < plan->inputs; ++i)
        if (!(mass[i] > 0 && isfinite(mass[i])))
            return RAMPWISE_ERROR_MASS;
    for (size_t i = 0; i < plan->inputs; ++i) {
        double sum = 0;
        for (size_t j = 0; j < plan->modes; ++j) {
            const double load = plan->load[j * plan->inputs + i], modal = plan->c[j].system.mass;
            sum += plan->c[j].input == RAMPWISE_FORCE ? load * load / modal : load * load * modal;
        }
        share[i] = sum / mass[i];
    }
    return RAMPWISE_OK;
}

static complex_number conjugate(complex_number a)
{
    return (complex_number){a.re, -a.im};
}

static double size_of(complex_number a)
{
    const double larger = fmax(fabs(a.re), fabs(a.im)), smaller = fmin(fabs(a.re), fabs(a.im));
    return larger > 0 ? larger * sqrt(1 + smaller / larger * (smaller / larger)) : larger;
}

static complex_number inverse_of(complex_number a)
{
    const double size = size_of(a);
    return (complex_number){a.re / size / size, -a.im / size / size};
}

static complex_number at(const double *x, size_t i)
{
    return (complex_number){x[2 * i], x[2 * i + 1]};
}

static const double *shape_of(const rampwise_roots *r, size_t k)
{
    return r->shape + 2 * k * r->bodies;
}

/* shape' (2 root M + C) shape, and the sum of the sizes of its terms. */
static complex_number norm_of(const rampwise_roots *r, size_t k, double *size)
{
    const complex_number root = at(r->root, k);
    complex_number sum = {0, 0};
    *size = 0;
    for (size_t i = 0; i < r->bodies; ++i)
        for (size_t j = 0; j < r->bodies; ++j) {
            const double mass = r->mass[i * r->bodies + j], damper = r->damper[i * r->bodies + j];
            const complex_number shapes = product_of(at(shape_of(r, k), i), at(shape_of(r, k), j));
            const complex_number term = {2 * root.re * mass + damper, 2 * root.im * mass};
            sum = sum_of(sum, product_of(shapes, term));
            *size += size_of(shapes) * (2 * size_of(root) * fabs(mass) + fabs(damper));
        }
    return sum;
}

/* The weights of output o on the shape: (on_displacement + root on_velocity) shape. */
static complex_number output_of(const rampwise_roots *r, size_t k, size_t o)
{
    complex_number sum = {0, 0};
    for (size_t i = 0; i < r->bodies; ++i) {
        complex_number weight = {0, 0};
        if (r->on_displacement != NULL)
            weight.re = r->on_displacement[o * r->bodies + i];
        if (r->on_velocity != NULL)
            weight = sum_of(weight, scaled(r->on_velocity[o * r->bodies + i], at(r->root, k)));
        sum = sum_of(sum, product_of(weight, at(shape_of(r, k), i)));
    }
    return sum;
}

/* shape' force / norm */
static complex_number load_of(const rampwise_roots *r, size_t k, size_t in)
{
    double size;
    complex_number sum = {0, 0};
    for (size_t i = 0; i < r->bodies; ++i)
        sum = sum_of(sum, scaled(r->force[in * r->bodies + i], at(shape_of(r, k), i)));
    return product_of(sum, inverse_of(norm_of(r, k, &size)));
}

/* How far the residues in the displacements, shape shape'/norm, of two real roots
   cancel: 0 all, 1 nothing. */
static double left_of(const rampwise_roots *r, size_t k, size_t l)
{
    double size, kk = 0, kl = 0, ll = 0;
    for (size_t i = 0; i < r->bodies; ++i) {
        const double a = at(shape_of(r, k), i).re, b = at(shape_of(r, l), i).re;
        kk += a * a;
        kl += a * b;
        ll += b * b;
    }
    const double k_norm = norm_of(r, k, &size).re, l_norm = norm_of(r, l, &size).re;
    const double first = kk / k_norm, second = ll / l_norm, both = kl / k_norm * (kl / l_norm);
    const double all = fabs(first) + fabs(second);
    return (first * first + second * second + 2 * both) / (all * all);
}

/* While pairs are being found, sys[n].mass and .damper hold the numbers of the two roots of pair n. */
static int is_taken(const rampwise_system *pairs, size_t found, size_t k)
{
    for (size_t n = 0; n < found; ++n)
        if (pairs[n].mass == (double)k || pairs[n].damper == (double)k)
            return 1;
    return 0;
}

static double from_conjugate(complex_number a, complex_number b)
{
    return size_of((complex_number){a.re - b.re, a.im + b.im});
}

/* The partner of root k: of those that are left the nearest to its conjugate, or the
   real one that cancels best. */
static size_t partner_of(const rampwise_roots *r, const rampwise_system *pairs, size_t found, size_t k)
{
    const complex_number root = at(r->root, k);
    size_t best = k;
    double least = INFINITY;
    for (size_t l = 0; l < 2 * r->bodies; ++l) {
        const complex_number other = at(r->root, l);
        const int opposite = root.im != 0 ? other.im * root.im < 0 : other.im == 0;
        if (l == k || !opposite || is_taken(pairs, found, l))
            continue;
        const double far = root.im != 0 ? from_conjugate(root, other) : left_of(r, k, l);
        if (best == k || far < least) {
            least = far;
            best = l;
        }
    }
    return best;
}

/* The root that is not taken, smallest first. */
static size_t next_root(const rampwise_roots *r, const rampwise_system *pairs, size_t found)
{
    size_t next = 2 * r->bodies;
    for (size_t k = 0; k < 2 * r->bodies; ++k)
        if (!is_taken(pairs, found, k) &&
            (next == 2 * r->bodies || size_of(at(r->root, k)) < size_of(at(r->root, next))))
            next = k;
    return next;
}

static void find_pairs(const rampwise_roots *r, rampwise_system *pairs)
{
    for (size_t found = 0; found < r->bodies; ++found) {
        const size_t k = next_root(r, pairs, found);
        pairs[found] = (rampwise_system){(double)k, (double)partner_of(r, pairs, found, k), 0};
    }
}

/* (R + Q) s - (R b + Q a) of one output */
static void put_weights(complex_number R, complex_number Q, complex_number a, complex_number b,
                        double *on_displacement, double *on_velocity)
{
    *on_velocity = R.re + Q.re;
    *on_displacement = -(product_of(R, b).re + product_of(Q, a).re);
}

/* Roots k and l as one oscillator, under one input. */
static void put_one(const rampwise_roots *r, size_t k, size_t l, double *load, double *on_displacement,
                    double *on_velocity)
{
    const complex_number a = at(r->root, k), b = at(r->root, l);
    const complex_number k_load = load_of(r, k, 0), l_load = a.im != 0 ? conjugate(k_load) : load_of(r, l, 0);
    *load = 1;
    for (size_t o = 0; o < r->outputs; ++o) {
        const complex_number R = product_of(output_of(r, k, o), k_load);
        const complex_number Q = a.im != 0 ? conjugate(R) : product_of(output_of(r, l, o), l_load);
        put_weights(R, Q, a, b, on_displacement + o, on_velocity + o);
    }
}

/* As two, under several: for complex roots under the real and the imaginary parts of the loads, for real ones
   under the loads of either. */
static void put_two(const rampwise_roots *r, size_t k, size_t l, double *load, double *on_displacement,
                    double *on_velocity)
{
    const complex_number a = at(r->root, k), b = at(r->root, l), none = {0, 0}, turn = {0, 1};
    const int complex_pair = a.im != 0;
    for (size_t i = 0; i < r->inputs; ++i) {
        const complex_number k_load = load_of(r, k, i);
        load[i] = k_load.re;
        load[r->inputs + i] = complex_pair ? k_load.im : load_of(r, l, i).re;
    }
    for (size_t o = 0; o < r->outputs; ++o) {
        const complex_number R = output_of(r, k, o), turned = product_of(turn, R);
        put_weights(R, complex_pair ? conjugate(R) : none, a, b, on_displacement + o, on_velocity + o);
        put_weights(complex_pair ? turned : none, complex_pair ? conjugate(turned) : output_of(r, l, o), a, b,
                    on_displacement + r->outputs + o, on_velocity + r->outputs + o);
    }
}

/* Whether the roots that are not real have their conjugates among them, as many on either side. */
static int are_paired(const rampwise_roots *r)
{
    size_t above = 0, below = 0;
    for (size_t k = 0; k < 2 * r->bodies; ++k) {
        const complex_number root = at(r->root, k);
        int met = root.im == 0;
        for (size_t l = 0; l < 2 * r->bodies && !met; ++l)
            met = from_conjugate(root, at(r->root, l)) <= 1e-6 * size_of(root) &&
                  at(r->root, l).im * root.im < 0;
        if (!isfinite(root.re) || !isfinite(root.im) || !met)
            return 0;
        above += root.im > 0;
        below += root.im < 0;
    }
    return above == below;
}

static double largest_root(const rampwise_roots *r)
{
    double largest = 1;
    for (size_t k = 0; k < 2 * r->bodies; ++k)
        largest = fmax(largest, size_of(at(r->root, k)));
    return largest;
}

/* Of two sizes; NaN where one is. */
static double larger_of(double a, double b)
{
    return b > a || isnan(b) ? b : a;
}

/* Whether all that is made of root k will be finite. */
static int stays_finite(const rampwise_roots *r, size_t k, double largest)
{
    double load = 0, output = 0;
    for (size_t i = 0; i < r->inputs; ++i)
        load = larger_of(load, size_of(load_of(r, k, i)));
    for (size_t o = 0; o < r->outputs; ++o)
        output = larger_of(output, size_of(output_of(r, k, o)));
    return isfinite(4 * load * output * largest) && isfinite(4 * output * largest) && isfinite(load) &&
           isfinite(4 * largest * largest);
}

static int check_roots(const rampwise_roots *r)
{
    if (r->size != sizeof *r || r->bodies == 0 || r->inputs == 0 || r->outputs == 0)
        return RAMPWISE_ERROR_COUNT;
    if (r->mass == NULL || r->damper == NULL || r->root == NULL || r->shape == NULL || r->force == NULL)
        return RAMPWISE_ERROR_MISSING;
    if (!are_paired(r))
        return RAMPWISE_ERROR_ROOTS;
    const double largest = largest_root(r);
    for (size_t k = 0; k < 2 * r->bodies; ++k) {
        double size;
        const complex_number norm = norm_of(r, k, &size);
        if (!isfinite(size))
            return RAMPWISE_ERROR_WEIGHT;
        if (size_of(norm) <= 1e-6 * size)
            return RAMPWISE_ERROR_DEFECTIVE;
        if (!stays_finite(r, k, largest))
            return RAMPWISE_ERROR_WEIGHT;
    }
    return RAMPWISE_OK;
}

void rampwise_roots_init(rampwise_roots *roots)
{
    memset(roots, 0, sizeof *roots);
    roots->size = sizeof *roots;
}

size_t rampwise_roots_modes(const rampwise_roots *roots)
{
    return roots == NULL ? 0 : roots->inputs == 1 ? roots->bodies : 2 * roots->bodies;
}

int rampwise_roots_to_modes(const rampwise_roots *roots, rampwise_system *sys, double *load,
                            double *on_displacement, double *on_velocity)
{
    if (roots == NULL || sys == NULL || load == NULL || on_displacement == NULL || on_velocity == NULL)
        return RAMPWISE_ERROR_MISSING;
    const int status = check_roots(roots);
    if (status != RAMPWISE_OK)
        return status;
    find_pairs(roots, sys);
    const size_t each = roots->inputs == 1 ? 1 : 2;
    /* From the last on: the pairs are kept where the first oscillators will be. */
    for (size_t n = roots->bodies; n-- > 0;) {
        const size_t k = (size_t)sys[n].mass, l = (size_t)sys[n].damper, first = n * each;
        const complex_number a = at(roots->root, k), b = a.im != 0 ? conjugate(a) : at(roots->root, l);
        (each == 1 ? put_one : put_two)(roots, k, l, load + first * roots->inputs,
                                        on_displacement + first * roots->outputs,
                                        on_velocity + first * roots->outputs);
        for (size_t i = 0; i < each; ++i)
            sys[first + i] = (rampwise_system){1, -(a.re + b.re) + 0.0, product_of(a, b).re};
    }
    return RAMPWISE_OK;
}
