#!/usr/bin/python3
"""Writes fixtures/grid/fft.json: transforms by SciPy of numbers that the tests make again.

Run with Debian's Python (python3-scipy): /usr/bin/python3 scripts/reference/make-fft-fixtures.py
"""

import json
import pathlib

import numpy
import scipy
import scipy.fft

# Small maps are kept whole, of the others SAMPLES modes or pixels.
FORWARD = [
    (1, 1), (2, 1), (1, 2), (3, 2), (7, 5), (8, 8), (12, 10), (13, 1), (1, 13), (9, 25), (97, 3),
    (3, 101), (30, 18), (64, 48), (128, 127), (134, 61), (509, 512), (720, 600), (1024, 512),
]
INVERSE = [(1, 1), (4, 3), (7, 6), (10, 8), (15, 1), (1, 15), (101, 2), (96, 97), (512, 509)]
WHOLE = 128
SAMPLES = 32


def numbers(seed, count):
    """Park and Miller's generator with the factor 48271, as exact binary fractions in -1 .. 1."""
    values = numpy.empty(count)
    state = seed
    for i in range(count):
        state = state * 48271 % 2147483647
        values[i] = state / 2**30 - 1
    return values


def sample(count):
    """Indices kept of `count`: all, or some spread over them."""
    return list(range(count)) if count <= WHOLE else [i * (count - 1) // (SAMPLES - 1) for i in range(SAMPLES)]


def forward(nx, ny):
    values = numbers(1 + nx + 4096 * ny, nx * ny).reshape(ny, nx)
    spectrum = scipy.fft.rfft2(values).ravel()
    kept = sample(spectrum.size)
    return {
        'nx': nx,
        'ny': ny,
        'norm': float(numpy.abs(spectrum).max()),
        'indices': kept,
        're': [float(spectrum[i].real) for i in kept],
        'im': [float(spectrum[i].imag) for i in kept],
    }


def inverse(nx, ny):
    columns = nx // 2 + 1
    parts = numbers(1 + nx + 4096 * ny, 2 * columns * ny).reshape(ny, columns, 2)
    values = scipy.fft.irfft2(parts[..., 0] + 1j * parts[..., 1], s=(ny, nx)).ravel()
    kept = sample(values.size)
    return {
        'nx': nx,
        'ny': ny,
        'norm': float(numpy.abs(values).max()),
        'indices': kept,
        'values': [float(values[i]) for i in kept],
    }


def main():
    target = pathlib.Path(__file__).resolve().parents[2] / 'fixtures' / 'grid' / 'fft.json'
    result = {
        'madeBy': f'SciPy {scipy.__version__}, NumPy {numpy.__version__}',
        'forward': [forward(*size) for size in FORWARD],
        'inverse': [inverse(*size) for size in INVERSE],
    }
    lines = [json.dumps(case) for case in result['forward']], [json.dumps(case) for case in result['inverse']]
    text = '{\n"madeBy": %s,\n"forward": [\n%s\n],\n"inverse": [\n%s\n]\n}\n'
    target.parent.mkdir(parents=True, exist_ok=True)
    target.write_text(text % (json.dumps(result['madeBy']), ',\n'.join(lines[0]), ',\n'.join(lines[1])))


if __name__ == '__main__':
    main()
