"""What the Python binding costs beside C, and what threads bring. Needs the package, and a C compiler for the loop in C.

    PYTHONPATH=bindings/python RAMPWISE_LIBRARY=build/librampwise.so python3 bench/python_costs.py build

The argument is the directory of the build. C and Python make the same four histories of one oscillator; the C loop
calls rampwise_coeffs_make and rampwise_solve as often as Python calls respond, into arrays made once; Python makes new
ones each time. Times of one thread are of its processor, so that a busy machine changes little.
"""

import os
import pathlib
import subprocess
import sys
import tempfile
import time

import numpy as np

import rampwise

LENGTHS = (1, 1_000, 1_000_000)
ROUNDS = 7

PROGRAM = r"""
#include <rampwise.h>
#include <stdio.h>
#include <stdlib.h>
#include <time.h>

static double now(void)
{
    struct timespec t;
    clock_gettime(CLOCK_PROCESS_CPUTIME_ID, &t);
    return (double)t.tv_sec + 1e-9 * (double)t.tv_nsec;
}

int main(int argc, char **argv)
{
    const size_t n = strtoul(argv[argc - 2], NULL, 10), calls = strtoul(argv[argc - 1], NULL, 10);
    double *const p = malloc(n * sizeof *p), *h[4], best = 1e9, sum = 0;
    for (size_t i = 0; i < n; ++i)
        p[i] = (double)(i * 7919 % 2000) / 1000 - 1;
    for (int j = 0; j < 4; ++j)
        h[j] = malloc(n * sizeof *p);
    for (int round = 0; round < 7; ++round) {
        const double start = now();
        for (size_t k = 0; k < calls; ++k) {
            rampwise_system sys;
            rampwise_coeffs c;
            const rampwise_history out = {h[0], h[1], h[2], h[3]};
            if (rampwise_system_period(&sys, 0.7, 0.05) || rampwise_coeffs_make(&c, &sys, 0.01, RAMPWISE_FORCE, RAMPWISE_RAMP) ||
                rampwise_solve(&c, 0, 0, n, p, &out, NULL))
                return 1;
            sum += h[0][n - 1];
        }
        const double each = (now() - start) / (double)calls;
        best = each < best ? each : best;
    }
    printf("%.9e %g\n", best, sum);
    free(p);
    return 0;
}
"""


def calls_for(n):
    return max(3, 2_000 // n) if n > 1 else 2_000


def c_seconds(program, n):
    return float(subprocess.check_output([program, str(n), str(calls_for(n))], text=True).split()[0])


def best_of(work, calls=1, clock=time.perf_counter):
    best = float("inf")
    for _ in range(ROUNDS):
        start = clock()
        for _ in range(calls):
            work()
        best = min(best, (clock() - start) / calls)
    return best


def python_seconds(n):
    record = (np.arange(n) * 7919 % 2000) / 1000 - 1
    return best_of(lambda: rampwise.respond(record, 0.01, input="force", period=0.7, damping=0.05), calls_for(n),
                   time.process_time)


def compiled(build, directory):
    source, program = pathlib.Path(directory, "loop.c"), pathlib.Path(directory, "loop")
    source.write_text(PROGRAM)
    include = pathlib.Path(__file__).resolve().parents[1] / "include"
    subprocess.check_call([os.environ.get("CC", "cc"), "-O2", "-ffp-contract=off", f"-I{include}", source, "-o", program,
                           f"-L{build}", "-lrampwise", f"-Wl,-rpath,{build}", "-lm"])  # fmt: skip
    return program


def main():
    build = pathlib.Path(sys.argv[1]).resolve()
    with tempfile.TemporaryDirectory() as directory:
        program = compiled(build, directory)
        print(f"{'samples':>9} {'C, s':>11} {'Python, s':>11} {'ratio':>8} {'more, µs':>10}")
        for n in LENGTHS:
            c, python = c_seconds(program, n), python_seconds(n)
            print(f"{n:9d} {c:11.3e} {python:11.3e} {python / c:8.3f} {1e6 * (python - c):10.1f}")
    records = np.random.default_rng(1).uniform(-1, 1, (40, 20_000))
    periods = rampwise.equal_ratios(200, 0.05, 5)
    tasks = {
        "spectra of 40 records": lambda t: rampwise.response_spectrum(records, 0.01, period=periods, threads=t),
        "40 records, one call each": lambda t: rampwise.for_each(
            rampwise.response_spectrum, list(records), 0.01, period=periods, threads=t
        ),
    }
    for name, work in tasks.items():
        one, two = best_of(lambda: work(1)), best_of(lambda: work(2))
        print(f"{name}: {one:.3f} s on one thread, {two:.3f} s on two: {one / two:.2f} times as fast")


if __name__ == "__main__":
    main()
