import { describe, expect, it } from 'vitest';
import {
  inversionLines,
  measureInversionLine,
  traceZeroLine,
} from '../../src/field/inversion-line.js';
import { nearLineFlux } from '../../src/field/near-line-flux.js';
import { potentialHorizontalField } from '../../src/field/potential.js';
import { makeGrid } from '../../src/grid/grid.js';
import { BIPOLE, chargeField } from '../support/charges.js';
import { normalNoise } from '../support/random.js';

/** Bz = Bm tanh(x / w), the same along y: an inversion line as long as the map is high. */
function wall(n: number, pixelMm: number, peak: number, width: number) {
  const data = Float64Array.from(
    { length: n * n },
    (_, i) => peak * Math.tanh((((i % n) + 0.5 - n / 2) * pixelMm) / width),
  );
  return makeGrid(data, n, n, 'G', pixelMm);
}

function measure(field: ReturnType<typeof wall>, leastHorizontal = 50) {
  const zero = traceZeroLine(field, potentialHorizontalField(field, 'open'), leastHorizontal);
  return {
    lines: inversionLines(zero, leastHorizontal),
    ...measureInversionLine(zero, leastHorizontal),
  };
}

describe('inversion line', () => {
  it('between two walls of field has its length and Bm / w times it as gradient-weighted length', () => {
    // Exact: the gradient of Bm tanh(x / w) on the line is Bm / w everywhere.
    const [n, pixel, peak, width] = [128, 0.5, 1000, 6];
    const { lengthMm, strongLengthMm, gradientWeightedG } = measure(wall(n, pixel, peak, width));
    const length = (n - 1) * pixel;
    expect(lengthMm / length).toBeCloseTo(1, 2);
    expect(strongLengthMm / length).toBeCloseTo(1, 2);
    // The 1.5 Mm smoothing takes 1 % off the gradient of a wall 6 Mm wide.
    expect(gradientWeightedG / ((peak / width) * length)).toBeGreaterThan(0.97);
    expect(gradientWeightedG / ((peak / width) * length)).toBeLessThan(1.005);
  });

  it('counts a gentle line as not strong', () => {
    const { strongLengthMm, lengthMm } = measure(wall(128, 0.5, 400, 16));
    expect(lengthMm).toBeGreaterThan(50);
    expect(strongLengthMm).toBe(0);
  });

  it('of a bipole is the straight line between the charges', () => {
    const { lines } = measure(chargeField(BIPOLE, 256, 0.5));
    expect(lines.length).toBeGreaterThan(0);
    for (const { x } of lines) for (const at of x) expect(Math.abs(at - 127.5)).toBeLessThan(0.3);
  });

  it('does not grow hair in noise', () => {
    const random = normalNoise(11);
    const quiet = makeGrid(
      Float64Array.from({ length: 128 * 128 }, () => 12 * random()),
      128,
      128,
      'G',
      0.5,
    );
    expect(measure(quiet).lengthMm).toBe(0);
  });

  it('stops at missing pixels instead of drawing their outline', () => {
    const field = wall(96, 1, 1000, 6);
    for (let y = 30; y < 60; y++) for (let x = 20; x < 70; x++) field.values.set(y, x, Number.NaN);
    const { lengthMm } = measure(field);
    expect(lengthMm).toBeGreaterThan(55);
    expect(lengthMm).toBeLessThan(66);
  });
});

describe('flux near the strong-gradient line', () => {
  it('is that of the two walls within the weight, by direct sum', () => {
    // Sharp line between +-1000 G at 1.44 Mm pixels: two columns on either side overlap after growth by one
    // pixel, so the touching strip is 2 pixels wide; a strip of unit weight convolved with a
    // unit-area Gaussian integrates back to its area, so R = 1000 G x strip area (edges aside).
    const n = 96;
    const pixel = 1.44;
    const data = Float64Array.from({ length: n * n }, (_, i) => (i % n < n / 2 ? 1000 : -1000));
    const [{ most: flux, mean }] = nearLineFlux(makeGrid(data, n, n, 'G', pixel));
    const strip = 1000 * 2 * pixel * n * pixel * 1e16;
    expect(flux / strip).toBeGreaterThan(0.9);
    expect(flux / strip).toBeLessThan(1);
    // On grids half a pixel off, one pixel straddles the line and the strip is that pixel alone.
    expect(mean / flux).toBeCloseTo(0.75, 1);
  });

  it('hardly depends on the pixel size of the map', () => {
    const of = (n: number, pixel: number) => nearLineFlux(wall(n, pixel, 1500, 3))[0].mean;
    expect(of(288, 0.48) / of(96, 1.44)).toBeGreaterThan(0.85);
    expect(of(288, 0.48) / of(96, 1.44)).toBeLessThan(1.15);
  });

  it('is zero where the polarities do not touch', () => {
    const apart = [
      { strength: 2e4, x: -40, y: 0, depth: 4 },
      { strength: -2e4, x: 40, y: 0, depth: 4 },
    ];
    expect(nearLineFlux(chargeField(apart, 128, 1))[0].most).toBe(0);
  });
});
