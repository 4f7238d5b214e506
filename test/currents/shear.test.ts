import { describe, expect, it } from 'vitest';
import { measureShear, shearAngleDeg } from '../../src/currents/shear.js';
import type { InversionLine } from '../../src/field/inversion-line.js';
import { potentialHorizontalField } from '../../src/field/potential.js';
import { makeVectorField } from '../../src/field/vector-field.js';
import { makeGrid } from '../../src/grid/grid.js';

/** The linear force-free arcade B0 sin kx of `waves` periods (Priest 1982, ch. 3) over n x n pixels of 1 Mm. */
function arcade(n: number, waves: number, ratio: number) {
  const k = (2 * Math.PI * waves) / n;
  const part = (of: (angle: number) => number) =>
    Float64Array.from({ length: n * n }, (_, i) => 1000 * of(k * ((i % n) + 0.5)));
  const l = Math.sqrt(1 - ratio * ratio);
  return makeVectorField(
    part((angle) => -l * Math.cos(angle)),
    part((angle) => -ratio * Math.cos(angle)),
    part(Math.sin),
    n,
    n,
    1,
  );
}

function shearOf(ratio: number, noise: number) {
  const field = arcade(64, 2, ratio);
  const potential = potentialHorizontalField(field.z, 'periodic');
  // sin kx with x from the western edge is zero at every 16th pixel edge.
  const lines = [15.5, 31.5, 47.5].map(
    (at): InversionLine => ({
      x: new Float64Array(64).fill(at),
      y: Float64Array.from({ length: 64 }, (_, i) => i),
      strong: new Array(63).fill(true),
    }),
  );
  return measureShear(lines, field, potential, { x: noise, y: noise, z: 1 });
}

describe('shear along the inversion line', () => {
  // Exact: tan(shear) = alpha / l for the arcade: 0.6 k gives 36.87 degrees, 0.8 k 53.13.
  it('of the arcade is arctan(alpha / l)', () => {
    const mild = shearOf(0.6, 0);
    expect(mild.meanDeg.value).toBeCloseTo(36.87, 1);
    expect(mild.weightedDeg.value).toBeCloseTo(36.87, 1);
    expect(mild.shearedMm.value).toBe(0);
    const strong = shearOf(0.8, 0);
    expect(strong.meanDeg.value).toBeCloseTo(53.13, 1);
    expect(strong.shearedMm.value).toBeCloseTo(strong.knownMm, 9);
    expect(strong.knownMm).toBeCloseTo(3 * 63, 9);
  });

  it('has intervals that grow with noise and leaves out what noise hides', () => {
    const noisy = shearOf(0.71, 100);
    expect(noisy.shearedMm.low).toBeLessThan(noisy.shearedMm.value);
    expect(noisy.meanDeg.high - noisy.meanDeg.low).toBeGreaterThan(0.2);
    expect(shearOf(0.6, 400).knownMm).toBe(0);
  });

  it('angles by hand', () => {
    expect(shearAngleDeg(1, 0, 0, 2)).toBeCloseTo(90, 12);
    expect(shearAngleDeg(-1, 0, 2, 0)).toBeCloseTo(180, 12);
    expect(shearAngleDeg(0, 0, 2, 0)).toBeNaN();
  });

  it('without a line there is nothing', () => {
    const field = arcade(8, 1, 0.5);
    const zero = makeGrid(new Float64Array(64), 8, 8, 'G', 1);
    const shear = measureShear([], field, { x: zero, y: zero }, { x: 1, y: 1, z: 1 });
    expect(shear.knownMm).toBe(0);
    expect(shear.meanDeg.value).toBeNaN();
  });
});
