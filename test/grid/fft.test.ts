import { describe, expect, test } from 'vitest';
import {
  emptySpectrum,
  inverseRealFft2,
  realFft2,
  type Spectrum2,
  transformKernel,
} from '../../src/grid/fft.js';
import { randomNumbers } from './random-numbers.js';

// Errors relative to the largest value of the result. Achieved is the worst over the sizes below.
const TOLERANCE = {
  // Against sums in double precision whose own rounding errors are of this order: achieved 2.8e-15.
  direct: 5e-15,
  // There and back: achieved 1.4e-15.
  roundTrip: 3e-15,
  // Sums over all modes: achieved 1.7e-15.
  parseval: 4e-15,
  // Two transforms added, and a shift: achieved 1.7e-15.
  linear: 4e-15,
};

const SIZES: readonly [number, number][] = [
  [1, 1],
  [2, 1],
  [1, 2],
  [2, 2],
  [3, 3],
  [4, 7],
  [7, 4],
  [5, 25],
  [13, 8],
  [8, 13],
  [16, 16],
  [1, 17],
  [17, 1],
  [30, 18],
  [22, 9],
  [97, 3],
  [6, 101],
  [134, 5],
  [64, 32],
  [15, 40],
];

/** F by its definition, one mode at a time. */
function direct(values: Float64Array, nx: number, ny: number): Spectrum2 {
  const out = emptySpectrum(nx, ny);
  for (let ky = 0; ky < ny; ky++) {
    for (let kx = 0; kx < out.columns; kx++) {
      let re = 0;
      let im = 0;
      for (let y = 0; y < ny; y++) {
        for (let x = 0; x < nx; x++) {
          const turns = ((kx * x) % nx) / nx + ((ky * y) % ny) / ny;
          re += values[x + nx * y] * Math.cos(2 * Math.PI * turns);
          im -= values[x + nx * y] * Math.sin(2 * Math.PI * turns);
        }
      }
      out.re[kx + out.columns * ky] = re;
      out.im[kx + out.columns * ky] = im;
    }
  }
  return out;
}

function largest(...arrays: Float64Array[]): number {
  return Math.max(...arrays.map((a) => a.reduce((m, v) => Math.max(m, Math.abs(v)), 0)));
}

function distance(a: Float64Array, b: Float64Array): number {
  return a.reduce((m, v, i) => Math.max(m, Math.abs(v - b[i])), 0);
}

/** Largest difference of two spectra, over the largest part of the second. */
function error(a: Spectrum2, b: Spectrum2): number {
  return Math.max(distance(a.re, b.re), distance(a.im, b.im)) / largest(b.re, b.im);
}

/** Sum of |F|^2 over all modes, those not stored being mirrors of those that are. */
function power({ nx, ny, columns, re, im }: Spectrum2): number {
  let sum = 0;
  for (let i = 0; i < columns * ny; i++) {
    const kx = i % columns;
    sum += (kx === 0 || 2 * kx === nx ? 1 : 2) * (re[i] ** 2 + im[i] ** 2);
  }
  return sum;
}

test('the compiled transforms are the ones tested here (if not: npm run build)', () => {
  expect(transformKernel()).toBe('compiled');
});

describe.each(SIZES)('%i x %i', (nx, ny) => {
  const values = randomNumbers(nx + 1000 * ny, nx * ny);
  const spectrum = realFft2(values, nx, ny);

  test('is the sum of its definition', () => {
    expect(error(spectrum, direct(values, nx, ny))).toBeLessThan(TOLERANCE.direct);
  });

  test('comes back', () => {
    expect(distance(inverseRealFft2(spectrum), values)).toBeLessThan(TOLERANCE.roundTrip);
  });

  test('keeps the power (Parseval)', () => {
    const expected = nx * ny * values.reduce((sum, v) => sum + v * v, 0);
    expect(Math.abs(power(spectrum) / expected - 1)).toBeLessThan(TOLERANCE.parseval);
  });

  test('is linear', () => {
    const other = randomNumbers(7 + nx + 1000 * ny, nx * ny);
    const second = realFft2(other, nx, ny);
    const sum = realFft2(
      values.map((v, i) => 2 * v - 3 * other[i]),
      nx,
      ny,
    );
    const expected = emptySpectrum(nx, ny);
    for (let i = 0; i < sum.re.length; i++) {
      expected.re[i] = 2 * spectrum.re[i] - 3 * second.re[i];
      expected.im[i] = 2 * spectrum.im[i] - 3 * second.im[i];
    }
    expect(error(sum, expected)).toBeLessThan(TOLERANCE.linear);
  });

  test('turns the phase with a shift', () => {
    const [sx, sy] = [2 % nx, 3 % ny];
    const moved = values.map((_, i) => {
      const x = (i % nx) - sx + nx;
      const y = Math.floor(i / nx) - sy + ny;
      return values[(x % nx) + nx * (y % ny)];
    });
    const expected = emptySpectrum(nx, ny);
    for (let i = 0; i < expected.re.length; i++) {
      const kx = i % expected.columns;
      const ky = Math.floor(i / expected.columns);
      const angle = -2 * Math.PI * (((kx * sx) % nx) / nx + ((ky * sy) % ny) / ny);
      const [c, s] = [Math.cos(angle), Math.sin(angle)];
      expected.re[i] = c * spectrum.re[i] - s * spectrum.im[i];
      expected.im[i] = c * spectrum.im[i] + s * spectrum.re[i];
    }
    expect(error(realFft2(moved, nx, ny), expected)).toBeLessThan(TOLERANCE.linear);
  });
});

describe('known modes', () => {
  test.each([
    [24, 20, 3, 5],
    [24, 20, 3, -5],
    [15, 14, 7, 2],
    [16, 9, 1, 0],
  ])('a wave in %i x %i with wavenumbers %i, %i is one mode', (nx, ny, kx, ky) => {
    const phase = 0.7;
    const values = new Float64Array(nx * ny).map((_, i) => {
      const [x, y] = [i % nx, Math.floor(i / nx)];
      return Math.cos(2 * Math.PI * ((kx * x) / nx + (ky * y) / ny) + phase);
    });
    const found = realFft2(values, nx, ny);
    const expected = emptySpectrum(nx, ny);
    const at = kx + expected.columns * ((ky + ny) % ny);
    expected.re[at] = (nx * ny * Math.cos(phase)) / 2;
    expected.im[at] = (nx * ny * Math.sin(phase)) / 2;
    expect(error(found, expected)).toBeLessThan(TOLERANCE.direct);
  });

  test('a single pixel has all modes, a constant has one', () => {
    const pixel = new Float64Array(12 * 10);
    pixel[0] = 3;
    const spectrum = realFft2(pixel, 12, 10);
    expect(distance(spectrum.re, new Float64Array(70).fill(3))).toBe(0);
    expect(largest(spectrum.im)).toBe(0);
    const level = realFft2(new Float64Array(120).fill(2), 12, 10);
    expect(level.re[0]).toBe(240);
    expect(largest(level.re.subarray(1), level.im)).toBeLessThan(1e-12);
  });
});

describe('arguments', () => {
  test('results go to the arrays given and are the same', () => {
    const values = randomNumbers(5, 40 * 24);
    const out = emptySpectrum(40, 24);
    const room = new Float64Array(40 * 24);
    expect(realFft2(values, 40, 24, out)).toBe(out);
    expect(out).toEqual(realFft2(values, 40, 24));
    expect(inverseRealFft2(out, room)).toBe(room);
    expect(room).toEqual(inverseRealFft2(out));
  });

  test('input stays as it is', () => {
    const values = randomNumbers(6, 15 * 11);
    const before = values.slice();
    const spectrum = realFft2(values, 15, 11);
    const [re, im] = [spectrum.re.slice(), spectrum.im.slice()];
    inverseRealFft2(spectrum);
    expect(values).toEqual(before);
    expect(spectrum.re).toEqual(re);
    expect(spectrum.im).toEqual(im);
  });

  test('sizes that do not fit are refused', () => {
    const values = new Float64Array(12);
    expect(() => realFft2(values, 4, 4)).toThrow(RangeError);
    expect(() => realFft2(values, 0, 0)).toThrow(RangeError);
    expect(() => realFft2(values, 1.5, 8)).toThrow(RangeError);
    expect(() => realFft2(values, 4, 3, emptySpectrum(3, 4))).toThrow(RangeError);
    expect(() => inverseRealFft2(emptySpectrum(4, 3), new Float64Array(16))).toThrow(RangeError);
  });
});
