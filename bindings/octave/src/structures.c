/* From a structure to its modes, what modes left out still do, and the combination of modes' peaks. */
#include "gateway.h"

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

/* load (inputs x modes) of systems, dt, input, between, from in[0] to in[4], in a plan of so many outputs. Its
   coefficients are NULL, with the answer given, where they cannot be made. */
static rampwise_modes_plan plan_of(mxArray **out, const mxArray **in, size_t outputs)
{
    rampwise_modes_plan plan;
    rampwise_modes_plan_init(&plan);
    plan.modes = count_systems(in[0]);
    plan.inputs = mxGetM(real_double(in[4]));
    plan.outputs = outputs;
    plan.load = of_size(in[4], plan.inputs, plan.modes);
    plan.c = make_coefficients(out, in);
    return plan;
}

/* systems, dt, input, between; load; weights of outputs on displacement (outputs x modes); outputs settled under a
   unit of each input (outputs x inputs) -> weights of outputs on inputs (outputs x inputs) */
void static_correction(mxArray **out, const mxArray **in)
{
    const size_t outputs = mxGetM(real_double(in[5]));
    rampwise_modes_plan plan = plan_of(out, in, outputs);
    if (plan.c == NULL)
        return;
    plan.on_displacement = of_size(in[5], outputs, plan.modes);
    const double *const settled = of_size(in[6], outputs, plan.inputs);
    mxArray *const on_input = matrix(outputs, plan.inputs);
    if (answer(out, rampwise_static_correction(&plan, settled, mxGetPr(on_input)), 0) == RAMPWISE_OK)
        out[2] = on_input;
}

/* systems, dt, input, between; load; mass that moves under each input -> the share of it that the first 1, 2, .. modes
   take (inputs x modes) */
void mass_share(mxArray **out, const mxArray **in)
{
    rampwise_modes_plan plan = plan_of(out, in, 1);
    if (plan.c == NULL)
        return;
    const size_t modes = plan.modes;
    const double *const mass = doubles(in[5], plan.inputs);
    mxArray *const share = matrix(plan.inputs, modes);
    int status = RAMPWISE_OK;
    for (plan.modes = 1; status == RAMPWISE_OK && plan.modes <= modes; ++plan.modes)
        status = rampwise_mass_share(&plan, mass, mxGetPr(share) + (plan.modes - 1) * plan.inputs);
    if (answer(out, status, 0) == RAMPWISE_OK)
        out[2] = share;
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
