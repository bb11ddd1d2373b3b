// A client outside the tree, in C++.
#include <rampwise.h>
#include <cmath>
#include <cstdio>
#include <vector>

int main()
{
    rampwise_system sys;
    rampwise_coeffs c;
    if (rampwise_system_period(&sys, 0.5, 0.1) != RAMPWISE_OK ||
        rampwise_coeffs_make(&c, &sys, 0.01, RAMPWISE_BASE_ACCELERATION, RAMPWISE_RAMP) != RAMPWISE_OK)
        return 1;
    const std::vector<double> p(10000, -1.0);
    std::vector<double> u(p.size());
    rampwise_history out = {u.data(), nullptr, nullptr, nullptr};
    if (rampwise_solve(&c, 0, 0, p.size(), p.data(), &out, nullptr) != RAMPWISE_OK)
        return 1;
    const double settled = 1 / sys.stiffness;
    std::printf("%.12f %s\n", u.back(), rampwise_version());
    return std::fabs(u.back() - settled) > 1e-12 * settled;
}
