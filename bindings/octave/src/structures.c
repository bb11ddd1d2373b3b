/* Whole structures by their modes, and the combination of modes' peaks. */
#include <math.h>
#include "gateway.h"

static const double *of_size(const mxArray *a, size_t rows, size_t columns)
{
    if (mxGetM(real_double(a)) != rows || mxGetN(a) != columns)
        refuse("a matrix has the wrong size");
    return mxGetPr(a);
}

/* bodies x bodies: mass, damper; roots as columns {real; imaginary}, their shapes as columns of such pairs, forces for a
   unit of each input (bodies x inputs), weights of each output on displacement and on velocity (bodies x outputs)
   -> systems, load (inputs x modes), weights of outputs on displacement, on velocity (outputs x modes) */
void roots_to_modes(mxArray **out, const mxArray **in)
{
    rampwise_roots roots;
    rampwise_roots_init(&roots);
    const size_t n = mxGetM(real_double(in[0]));
    roots.bodies = n;
    roots.inputs = mxGetN(real_double(in[4]));
    roots.outputs = mxGetN(real_double(in[5]));
    roots.mass = of_size(in[0], n, n);
    roots.damper = of_size(in[1], n, n);
    roots.root = of_size(in[2], 2, 2 * n);
    roots.shape = of_size(in[3], 2 * n, 2 * n);
    roots.force = of_size(in[4], n, roots.inputs);
    roots.on_displacement = of_size(in[5], n, roots.outputs);
    roots.on_velocity = of_size(in[6], n, roots.outputs);
    const size_t modes = rampwise_roots_modes(&roots);
    rampwise_system *const system = mxCalloc(modes + 1, sizeof *system);
    mxArray *const load = matrix(roots.inputs, modes);
    mxArray *const on_displacement = matrix(roots.outputs, modes), *const on_velocity =
                                                                       matrix(roots.outputs, modes);
    if (answer(out,
               rampwise_roots_to_modes(&roots, system, mxGetPr(load), mxGetPr(on_displacement),
                                       mxGetPr(on_velocity)),
               0) != RAMPWISE_OK)
        return;
    out[2] = matrix(3, modes);
    for (size_t j = 0; j < modes; ++j) {
        double *const three = mxGetPr(out[2]) + 3 * j;
        three[0] = system[j].mass;
        three[1] = system[j].damper;
        three[2] = system[j].stiffness;
    }
    out[3] = load;
    out[4] = on_displacement;
    out[5] = on_velocity;
}

/* Sample 0 at rest under it, and the others; the outputs of all. */
static int run_modes(rampwise_modes *modes, size_t n, size_t inputs, const double *input, double *output,
                     size_t outputs, size_t *bad)
{
    *bad = 0;
    int status = rampwise_modes_start(modes, input);
    if (status == RAMPWISE_OK)
        status = rampwise_modes_read(modes, output);
    if (status == RAMPWISE_OK) {
        status = rampwise_modes_run(modes, n - 1, input + inputs, output + outputs, bad);
        *bad += status != RAMPWISE_OK;
    }
    return status;
}

/* systems, dt, input, between; load (inputs x modes); weights of outputs on displacement, velocity and acceleration
   (outputs x modes) and on inputs (outputs x inputs); samples (inputs x samples); whether peaks are wanted
   -> outputs (outputs x samples), peaks (6 x outputs, or empty) */
void structure(mxArray **out, const mxArray **in)
{
    rampwise_modes_plan plan;
    rampwise_modes_plan_init(&plan);
    plan.modes = count_systems(in[0]);
    plan.inputs = mxGetM(real_double(in[9]));
    plan.outputs = mxGetM(real_double(in[5]));
    plan.load = of_size(in[4], plan.inputs, plan.modes);
    plan.on_displacement = of_size(in[5], plan.outputs, plan.modes);
    plan.on_velocity = of_size(in[6], plan.outputs, plan.modes);
    plan.on_acceleration = of_size(in[7], plan.outputs, plan.modes);
    plan.on_input = of_size(in[8], plan.outputs, plan.inputs);
    plan.peaks = integer(in[10]) != 0;
    const size_t n = mxGetN(in[9]);
    if (n == 0 || plan.inputs == 0)
        refuse("there are no samples");
    plan.c = make_coefficients(out, in);
    if (plan.c == NULL)
        return;
    const size_t bytes = rampwise_modes_size(&plan);
    mxArray *const output = matrix(plan.outputs, n);
    rampwise_modes *modes = NULL;
    size_t bad = 0;
    int status = rampwise_modes_init(memory(bytes + 1, rampwise_modes_alignment()), bytes, &plan, &modes);
    if (status == RAMPWISE_OK)
        status = run_modes(modes, n, plan.inputs, mxGetPr(in[9]), mxGetPr(output), plan.outputs, &bad);
    if (answer(out, status, bad + 1) != RAMPWISE_OK)
        return;
    out[2] = output;
    if (!plan.peaks)
        return;
    rampwise_peak *const peak = mxCalloc(plan.outputs, sizeof *peak);
    out[3] = matrix(6, plan.outputs);
    if (rampwise_modes_peaks(modes, peak) != RAMPWISE_OK)
        refuse("peaks cannot be read");
    for (size_t i = 0; i < plan.outputs; ++i)
        put_peak(mxGetPr(out[3]) + 6 * i, &peak[i], scalar(in[1]));
}

/* rule, peaks of modes (a column), omegas, damping ratios (as many), share -> their combination */
void combine(mxArray **out, const mxArray **in)
{
    const char *const rule = text(in[0]);
    const size_t n = mxGetNumberOfElements(real_double(in[1]));
    const double *const peak = mxGetPr(in[1]), *const omega = doubles(in[2], n),
                        *const zeta = doubles(in[3], n);
    const double share = scalar(in[4]);
    switch (rule[0]) {
    case 'a':
        out[0] = number(rampwise_combine_absolute_sum(n, peak));
        break;
    case 'r':
        out[0] = number(rampwise_combine_root_of_squares(n, peak));
        break;
    case 'c':
        out[0] = number(rampwise_combine_complete_quadratic(n, peak, omega, zeta));
        break;
    case 's':
        out[0] = number(rampwise_combine_with_share(n, peak, share));
        break;
    default:
        refuse("the rule is absolute sum, root of squares, complete quadratic or share");
    }
}
