#include "newmark.h"

void newmark_make(newmark *x, const rampwise_system *sys, double h)
{
    const double m = sys->mass, c = sys->damper, k = sys->stiffness;
    const double moved = 4 * m / (h * h) + 2 * c / h, flexibility = 1 / (k + moved);
    x->of_p = flexibility;
    x->of_u = flexibility * moved;
    x->of_v = flexibility * (4 * m / h + c);
    x->of_a = flexibility * m;
    x->twice_rate = 2 / h;
    x->acceleration = 4 / (h * h);
}

void newmark_run(const newmark *given, size_t n, const double *p, double *u_out)
{
    const newmark x = *given;
    double u = 0, v = 0, a = 0;
    for (size_t i = 0; i < n; ++i) {
        const double next = x.of_p * p[i] + x.of_u * u + (x.of_v * v + x.of_a * a);
        const double moved = next - u;
        a = x.acceleration * moved - 2 * x.twice_rate * v - a;
        v = x.twice_rate * moved - v;
        u = next;
        u_out[i] = u;
    }
}
