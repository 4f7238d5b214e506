import { describe, expect, it } from 'vitest';
import {
  AMPERE_PER_CURRENT_DENSITY,
  contourCurrent,
  currentNoise,
  quietCurrentNoise,
  verticalCurrent,
} from '../../src/currents/vertical-current.js';
import { makeVectorField } from '../../src/field/vector-field.js';
import { linearForceFree } from '../support/linear-force-free.js';
import { CASE_ONE, lowLouAt, lowLouPlane, solveLowLou } from '../support/low-lou.js';
import { normalNoise } from '../support/random.js';

const MU0 = 4e-7 * Math.PI;
const METHODS = ['central', 'circulation'] as const;

/** Field [G] at (x, y) in Mm on n x n pixels. */
function sample(n: number, h: number, at: (x: number, y: number) => [number, number, number]) {
  const [x, y, z] = [0, 1, 2].map(() => new Float64Array(n * n));
  for (let i = 0; i < n * n; i++) {
    [x[i], y[i], z[i]] = at(((i % n) - 3) * h, (Math.floor(i / n) - 5) * h);
  }
  return makeVectorField(x, y, z, n, n, h);
}

describe.each(METHODS)('vertical current by %s', (method) => {
  it('of a uniform current is exact', () => {
    // Bx = -mu0 J y / 2, By = mu0 J x / 2 with J = 20 mA/m^2 (1 G/Mm is 1e-10 T/m).
    const slope = (0.5 * MU0 * 0.02) / 1e-10;
    const current = verticalCurrent(
      sample(12, 0.7, (x, y) => [-slope * y, slope * x, 0]),
      method,
    );
    for (let y = 1; y < 11; y++)
      for (let x = 1; x < 11; x++) expect(current.values.get(y, x)).toBeCloseTo(20, 9);
    expect(current.values.get(0, 5)).toBeNaN();
  });

  it('of quadratic fields is exact for central differences', () => {
    const current = verticalCurrent(
      sample(12, 0.5, (x, y) => [3 * y * y - x * y, 2 * x * x + x * y, 0]),
      method,
    );
    // dBy/dx - dBx/dy = 4 x + y - 6 y + x at (5 - 3, 7 - 5) pixels of 0.5 Mm.
    const [x, y] = [1, 1];
    const exact = ((5 * x - 5 * y) * 1e-10 * 1e3) / MU0;
    expect(current.values.get(7, 5)).toBeCloseTo(exact, 9);
  });

  it('of a linear force-free field is alpha Bz / mu0 within 1 %', () => {
    const field = linearForceFree(64, 1, 0.03);
    const current = verticalCurrent(field, method);
    let [product, square] = [0, 0];
    current.values.data.forEach((density, i) => {
      const bz = field.z.values.data[i];
      if (Number.isNaN(density)) return;
      product += density * bz;
      square += bz * bz;
    });
    const alpha = ((product / square) * 1e-3 * MU0) / 1e-4 / 1e-6;
    expect(alpha / 0.03).toBeCloseTo(1, 2);
  });

  it('of Low & Lou (1990) follows the exact alpha Bz / mu0, fourfold better on half the pixel', () => {
    const solution = solveLowLou(1);
    const errors = [64, 128].map((n) => {
      const field = lowLouPlane(solution, CASE_ONE, n, 1, 50);
      let [error, size] = [0, 0];
      verticalCurrent(field, method).values.data.forEach((density, i) => {
        if (Number.isNaN(density)) return;
        const at = (pixel: number) => ((pixel + 0.5) * 2) / n - 1;
        const { alpha } = lowLouAt(solution, CASE_ONE, at(i % n), at(Math.floor(i / n)), 0);
        const exact = ((alpha / 50e6) * field.z.values.data[i] * 1e-4 * 1e3) / MU0;
        error += (density - exact) ** 2;
        size += exact ** 2;
      });
      return Math.sqrt(error / size);
    });
    expect(errors[1]).toBeLessThan(0.04);
    expect(errors[0] / errors[1]).toBeGreaterThan(3);
  });

  it('skips missing pixels and no others', () => {
    const field = sample(9, 1, (x, y) => [y, x, 0]);
    field.x.values.data[4 + 9 * 4] = Number.NaN;
    field.y.values.data[4 + 9 * 4] = Number.NaN;
    const lost = Array.from(verticalCurrent(field, method).values.data).filter(
      (value, i) => Number.isNaN(value) && i % 9 > 0 && i % 9 < 8 && i > 8 && i < 72,
    ).length;
    // The stencils leave out their own middle, so the missing pixel itself has a current.
    expect(lost).toBe(method === 'central' ? 4 : 8);
  });

  it('has the noise that repeated draws show', () => {
    const n = 24;
    const normal = normalNoise(4);
    const sigmaX = new Float64Array(n * n).fill(60);
    const sigmaY = Float64Array.from({ length: n * n }, (_, i) => 40 + (i % n));
    const draws: number[] = [];
    const empty = makeVectorField(
      new Float64Array(n * n),
      new Float64Array(n * n),
      new Float64Array(n * n),
      n,
      n,
      0.5,
    );
    const predicted = currentNoise(empty, { x: sigmaX, y: sigmaY, z: 0 }, method);
    for (let k = 0; k < 20; k++) {
      const field = makeVectorField(
        sigmaX.map((s) => s * normal()),
        sigmaY.map((s) => s * normal()),
        new Float64Array(n * n),
        n,
        n,
        0.5,
      );
      verticalCurrent(field, method).values.data.forEach((density, i) => {
        if (!Number.isNaN(density)) draws.push(density / predicted.values.data[i]);
      });
    }
    const variance = draws.reduce((sum, value) => sum + value * value, 0) / draws.length;
    expect(variance).toBeGreaterThan(0.95);
    expect(variance).toBeLessThan(1.05);
  });
});

describe('current noise', () => {
  it('of 100 G and 0.5 arcsec pixels is 22 mA/m^2', () => {
    // sigma / (mu0 h) by hand: 0.01 T / (4 pi 1e-7 x 0.3626e6 m) = 21.9 mA/m^2.
    const zero = () => new Float64Array(9);
    const field = makeVectorField(zero(), zero(), zero(), 3, 3, 0.3626);
    expect(currentNoise(field, { x: 100, y: 100, z: 10 }).values.get(1, 1)).toBeCloseTo(21.9, 1);
    expect(
      currentNoise(field, { x: 100, y: 100, z: 10 }, 'circulation').values.get(1, 1) / 21.95,
    ).toBeCloseTo(Math.sqrt(3 / 8), 3);
  });

  it('from quiet pixels is what was put in', () => {
    const n = 96;
    const normal = normalNoise(8);
    const draw = (s: number) => Float64Array.from({ length: n * n }, () => s * normal());
    const field = makeVectorField(draw(80), draw(80), draw(8), n, n, 0.5);
    const exact = (0.008 * 1e3) / (MU0 * 0.5e6);
    expect(quietCurrentNoise(verticalCurrent(field), field, 500) / exact).toBeCloseTo(1, 1);
    expect(quietCurrentNoise(verticalCurrent(field), field, 0)).toBeNaN();
  });
});

it('total current is the contour integral', () => {
  // Stokes' theorem for compatible stencils: each pixel's circulation is the mean of four cells.
  const normal = normalNoise(3);
  const field = sample(16, 0.8, () => [500 * normal(), 500 * normal(), 0]);
  const current = verticalCurrent(field, 'circulation');
  const [x0, y0, x1, y1] = [3, 4, 11, 9];
  let total = 0;
  for (let y = y0; y <= y1; y++) for (let x = x0; x <= x1; x++) total += current.values.get(y, x);
  total *= 0.8 ** 2 * AMPERE_PER_CURRENT_DENSITY;
  let contours = 0;
  for (const dx of [0, 1])
    for (const dy of [0, 1])
      contours +=
        0.25 *
        contourCurrent(field, { x0: x0 - dx, y0: y0 - dy, x1: x1 + 1 - dx, y1: y1 + 1 - dy });
  expect(total / contours).toBeCloseTo(1, 10);
});
