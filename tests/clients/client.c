/* A client outside the tree, in C99: checks a static deflection and prints it. */
#include <rampwise.h>
#include <stdio.h>

int main(void)
{
    const rampwise_system sys = {2.0, 1.0, 50.0};
    rampwise_coeffs c;
    rampwise_state s;
    int i, status;
    status = rampwise_coeffs_make(&c, &sys, 0.01, RAMPWISE_FORCE, RAMPWISE_RAMP);
    if (status != RAMPWISE_OK || rampwise_self_test() != RAMPWISE_OK) {
        fprintf(stderr, "client: %s\n", rampwise_status_text(status));
        return 1;
    }
    rampwise_start(&s, 0, 0, 10);
    for (i = 0; i < 100000; ++i)
        rampwise_step(&c, &s, 10);
    printf("%.12f %s\n", s.u, rampwise_version());
    return s.u < 0.2 - 1e-12 || s.u > 0.2 + 1e-12;
}
