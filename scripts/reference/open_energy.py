#!/usr/bin/env python3
"""Energy of the current-free field above a map with nothing beyond its sides, with NumPy and SciPy: a
yardstick of speed and an independent check of values.

    /usr/bin/python3 open_energy.py N [REPEATS] [WORKERS]

E = 1/(4 pi mu0) sum of Bz Bz' <1/|r - r'|>, averaged over both pixels, by a circular convolution of
twice the side. Near pairs by second differences of the fourth antiderivative of 1/r, others by
1/r + 1/(12 r^3). Map: N x N pixels of 0.5 Mm above three buried charges. Prints the energy in J, then
milliseconds of the whole job, and of the job with the kernel's transform at hand, of each repeat.
Needs Debian's python3-scipy.
"""
import sys
import time

import numpy as np
import scipy.fft as sf

MU0 = 4e-7 * np.pi
REACH = 8
CHARGES = ((1.2e5, -18, 0, 9), (-1.0e5, 16, 5, 7), (-0.2e5, 2, -14, 5))


def charge_map(n, h):
    g = (np.arange(n) + 0.5 - n / 2) * h
    x, y = np.meshgrid(g, g)
    return sum(q * d / ((x - cx) ** 2 + (y - cy) ** 2 + d * d) ** 1.5 for q, cx, cy, d in CHARGES)


def antiderivative(x, y):
    with np.errstate(divide='ignore', invalid='ignore'):
        a = np.where(x != 0, 0.5 * x * x * y * np.arcsinh(y / np.abs(x)), 0.0)
        b = np.where(y != 0, 0.5 * y * y * x * np.arcsinh(x / np.abs(y)), 0.0)
    return a + b - np.hypot(x, y) ** 3 / 6


def kernel_transform(n, workers):
    """Real transform of the pair means, n x n points of which n/2 in each direction count."""
    i = np.minimum(np.arange(n), n - np.arange(n)).astype(float)
    square = i[:, None] ** 2 + i[None, :] ** 2
    square[0, 0] = 1
    inverse = 1 / np.sqrt(square)
    kernel = inverse + inverse / (12 * square)
    near = np.arange(-1, REACH + 2.0)
    f = antiderivative(near[None, :], near[:, None])
    pairs = np.diff(np.diff(f, 2, axis=0), 2, axis=1)
    kernel[: REACH + 1, : REACH + 1] = pairs
    kernel[-REACH:, : REACH + 1] = pairs[:0:-1]
    kernel[: REACH + 1, -REACH:] = pairs[:, :0:-1]
    kernel[-REACH:, -REACH:] = pairs[:0:-1, :0:-1]
    return sf.rfft2(kernel, workers=workers, overwrite_x=True).real


def energy(bz, h, gain, workers):
    n = bz.shape[0]
    f = sf.rfft2(bz, s=(2 * n, 2 * n), workers=workers)
    power = (f.real**2 + f.imag**2) * gain
    total = 2 * power.sum() - power[:, 0].sum() - power[:, -1].sum()
    return total * (h * 1e6) ** 3 * 1e-8 / (4 * np.pi * MU0 * (2 * n) ** 2)


if __name__ == '__main__':
    n = int(sys.argv[1])
    repeats = int(sys.argv[2]) if len(sys.argv) > 2 else 5
    workers = int(sys.argv[3]) if len(sys.argv) > 3 else 1
    bz = charge_map(n, 0.5)
    whole, known = [], []
    for i in range(repeats + 1):
        start = time.perf_counter()
        gain = kernel_transform(2 * n, workers)
        middle = time.perf_counter()
        found = energy(bz, 0.5, gain, workers)
        end = time.perf_counter()
        if i > 0:
            whole.append(1e3 * (end - start))
            known.append(1e3 * (end - middle))
    print(f'{found:.12e}')
    print(*(f'{t:.3f}' for t in whole))
    print(*(f'{t:.3f}' for t in known))
