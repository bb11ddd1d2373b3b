"""SciPy's methods, timed here and asked for by the benchmark over standard input and output.

The benchmark sends one line "SAMPLES STRETCH OSCILLATORS FEW DT", then doubles: the record, the stiffnesses and
the dampers (of unit masses). It then asks, a line at a time:

    time lfilter       seconds that lfilter takes over FEW records of the full length
    time lsim          the same for lsim, over the first STRETCH samples
    lfilter J          all displacements of oscillator J as doubles
    lsim J             those of the stretch

The record rises from zero over one interval before its first sample, as for every other method.
"""

import sys
import time

try:
    import numpy
    import scipy
    from scipy import signal
except ImportError:
    sys.exit(1)  # the benchmark says so


def read_doubles(count):
    return numpy.frombuffer(sys.stdin.buffer.read(8 * count), dtype=float)


def state_space(stiffness, damper):
    return (
        numpy.array([[0.0, 1.0], [-stiffness, -damper]]),
        numpy.array([[0.0], [1.0]]),
        numpy.array([[1.0, 0.0]]),
        numpy.array([[0.0]]),
    )


class Methods:
    def __init__(self):
        header = sys.stdin.buffer.readline().split()
        samples, self.stretch, count, few = (int(word) for word in header[:4])
        self.dt = float(header[4])
        self.record = read_doubles(samples)
        self.stiffness = read_doubles(count)
        self.damper = read_doubles(count)
        self.few = [k * (count - 1) // (few - 1) for k in range(few)]
        self.filters = {j: self.filter_of(j) for j in self.few}

    def system(self, j):
        return state_space(self.stiffness[j], self.damper[j])

    def filter_of(self, j):
        """The second-order section whose output is exact for straight lines between samples."""
        a, b, c, d, _ = signal.cont2discrete(self.system(j), self.dt, method="foh")
        numerator, denominator = signal.ss2tf(a, b, c, d)
        return numerator[0], denominator

    def lfilter(self, j):
        numerator, denominator = self.filters.get(j) or self.filter_of(j)
        return signal.lfilter(numerator, denominator, self.record)

    def lsim(self, j):
        load = numpy.concatenate(([0.0], self.record[: self.stretch]))
        _, displacement, _ = signal.lsim(self.system(j), load, self.dt * numpy.arange(load.size))
        return displacement[1:]

    def time(self, method):
        start = time.perf_counter()
        for j in self.few:
            method(j)
        return time.perf_counter() - start


def main():
    methods = Methods()
    by_name = {b"lfilter": methods.lfilter, b"lsim": methods.lsim}
    out = sys.stdout.buffer
    out.write(f"SciPy {scipy.__version__}, NumPy {numpy.__version__}\n".encode())
    out.flush()
    for line in sys.stdin.buffer:
        words = line.split()
        if words[0] == b"time":
            out.write(b"%.9e\n" % methods.time(by_name[words[1]]))
        else:
            out.write(numpy.ascontiguousarray(by_name[words[0]](int(words[1])), dtype=float).tobytes())
        out.flush()


main()
