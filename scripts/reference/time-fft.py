#!/usr/bin/python3
"""Times SciPy's real two-dimensional transform with one worker, for scripts/bench-fft.mjs.

/usr/bin/python3 time-fft.py REPEATS N... prints one line for each N: N, then forward and inverse
times in milliseconds, one pair for each repeat. The results are new arrays each time, as usual.
"""

import sys
import time

import numpy
import scipy
import scipy.fft


def run(n, repeats):
    values = numpy.random.default_rng(n).standard_normal((n, n))
    scipy.fft.irfft2(scipy.fft.rfft2(values, workers=1), s=(n, n), workers=1)
    times = []
    for _ in range(repeats):
        start = time.perf_counter()
        spectrum = scipy.fft.rfft2(values, workers=1)
        middle = time.perf_counter()
        scipy.fft.irfft2(spectrum, s=(n, n), workers=1)
        times += [middle - start, time.perf_counter() - middle]
    print(n, *(f'{1e3 * t:.4f}' for t in times))


if __name__ == '__main__':
    print('SciPy', scipy.__version__)
    for size in sys.argv[2:]:
        run(int(size), int(sys.argv[1]))
