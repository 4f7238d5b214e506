import { describe, expect, it } from 'vitest';
import { fittedAlpha, fluxWeightedAlpha, medianAlpha } from '../../src/currents/alpha-estimates.js';
import { currentBudget, sumCurrents } from '../../src/currents/current-budget.js';
import { currentHelicity } from '../../src/currents/current-helicity.js';
import { measureCurrents } from '../../src/currents/measured-currents.js';
import { contourCurrent } from '../../src/currents/vertical-current.js';
import { makeVectorField } from '../../src/field/vector-field.js';
import type { Interval } from '../../src/grid/interval.js';
import { linearForceFree } from '../support/linear-force-free.js';
import { CASE_ONE, CASE_TWO, lowLouPlane, solveLowLou } from '../support/low-lou.js';
import { NOISE, withNoise } from '../support/noisy-field.js';
import { ropePlane } from '../support/twisted-rope.js';

const MU0 = 4e-7 * Math.PI;
const holdsZero = ({ low, high }: Interval) => (low <= 0 && high >= 0 ? 1 : 0);

describe('alpha of linear force-free data', () => {
  const field = linearForceFree(96, 0.7, 0.03);
  const bz = field.z.values.data;
  // mu0 Jz = alpha Bz by definition: 0.03 1/Mm in mA/m^2 per G.
  const density = bz.map((b) => (0.03e-6 * b * 1e-4 * 1e3) / MU0);

  it('comes back exactly from exact currents', () => {
    expect(fluxWeightedAlpha(density, bz, 100)).toBeCloseTo(0.03, 12);
    expect(medianAlpha(density, bz, 100)).toBeCloseTo(0.03, 12);
    expect(fluxWeightedAlpha(density, bz, 1e9)).toBeNaN();
    expect(medianAlpha(density, bz, 1e9)).toBeNaN();
  });

  it.each([0.03, -0.05, 0])('comes back exactly from the horizontal field (%f)', (alpha) => {
    const fit = fittedAlpha(linearForceFree(96, 0.7, alpha), { x: 0, y: 0, z: 0 });
    expect(fit.perMm).toBeCloseTo(alpha, 7);
    expect(fit.sigmaPerMm).toBeLessThan(1e-4);
    expect(fit.atLimit).toBe(false);
  });

  it('comes back within 1 % from differences, and inside the intervals under noise', () => {
    const quiet = measureCurrents(field, { x: 0, y: 0, z: 0 }, { leastG: 100, draws: 2 });
    expect(quiet.alpha.fluxWeighted.value / 0.03).toBeCloseTo(1, 2);
    expect(quiet.alpha.median.value / 0.03).toBeCloseTo(1, 2);
    const inside = { fluxWeighted: 0, fitted: 0, median: 0 };
    for (let seed = 1; seed <= 20; seed++) {
      const { alpha } = measureCurrents(withNoise(field, seed), NOISE, { leastG: 100, seed });
      for (const name of ['fluxWeighted', 'fitted', 'median'] as const)
        if (alpha[name].low <= 0.03 && alpha[name].high >= 0.03) inside[name]++;
    }
    // 68 % of 20 is 13.6; 50 to 90 % allows for the chance of 20 draws.
    for (const count of Object.values(inside)) {
      expect(count).toBeGreaterThanOrEqual(9);
      expect(count).toBeLessThanOrEqual(18);
    }
  });

  it('has the error that repeated draws show (fit)', () => {
    const fits = Array.from({ length: 20 }, (_, seed) =>
      fittedAlpha(withNoise(field, seed + 50), NOISE),
    );
    const mean = fits.reduce((sum, { perMm }) => sum + perMm, 0) / 20;
    const scatter = Math.sqrt(fits.reduce((sum, { perMm }) => sum + (perMm - mean) ** 2, 0) / 19);
    expect(fits[0].sigmaPerMm / scatter).toBeGreaterThan(0.6);
    expect(fits[0].sigmaPerMm / scatter).toBeLessThan(1.6);
  });
});

describe('current helicity', () => {
  it('of a linear force-free field is alpha mean Bz^2', () => {
    const field = linearForceFree(64, 1, 0.03);
    const bz = field.z.values.data;
    const density = bz.map((b) => (0.03e-6 * b * 1e-4 * 1e3) / MU0);
    const square = bz.reduce((sum, b) => sum + b * b, 0) / bz.length;
    const helicity = currentHelicity(density, bz, 100, 1);
    expect(helicity.mean / (0.03e-6 * square)).toBeCloseTo(1, 12);
    expect(helicity.total / (0.03e-6 * square * 64 * 64 * 1e12)).toBeCloseTo(1, 12);
    expect(helicity.positive).toBeGreaterThan(0);
    expect(helicity.negative).toBeGreaterThan(0);
  });
});

describe('the current budget', () => {
  it('by hand', () => {
    const density = Float64Array.of(10, -4, 20, -30, Number.NaN, 1);
    const bz = Float64Array.of(200, 300, -200, -300, 500, 200);
    const sigma = new Float64Array(6).fill(1e-9);
    const sums = sumCurrents(density, sigma, bz, 100, 2);
    // 1 mA/m^2 over 4 Mm^2 is 4e9 A.
    expect(sums.positive.up / 4e9).toBeCloseTo(11, 6);
    expect(sums.positive.down / 4e9).toBeCloseTo(-4, 6);
    expect(sums.negative.net / 4e9).toBeCloseTo(-10, 6);
    expect(sums.unsigned / 4e9).toBeCloseTo(65, 6);
    const budget = currentBudget(sums, [sums, sums]);
    // Sum Jz Bz = 2000 - 1200 - 4000 + 9000 + 200 > 0: up is direct in the positive polarity.
    expect(budget.handedness).toBe(1);
    expect(budget.positive.neutralization.value).toBeCloseTo(11 / 4, 6);
    expect(budget.negative.neutralization.value).toBeCloseTo(30 / 20, 6);
  });

  it('of pure noise is zero within its interval', () => {
    const n = 96;
    const zero = makeVectorField(
      new Float64Array(n * n),
      new Float64Array(n * n),
      new Float64Array(n * n),
      n,
      n,
      0.5,
    );
    let inside = 0;
    let sum = 0;
    let naive = 0;
    for (let seed = 1; seed <= 20; seed++) {
      const field = withNoise(zero, seed);
      const { budget, density } = measureCurrents(field, NOISE, { leastG: 30, seed });
      inside += holdsZero(budget.unsignedA);
      sum += budget.unsignedA.value;
      for (const value of density.values.data)
        if (!Number.isNaN(value)) naive += Math.abs(value) * 0.25e9;
    }
    expect(inside).toBeGreaterThanOrEqual(10);
    expect(inside).toBeLessThanOrEqual(17);
    // What noise adds to a plain unsigned sum is taken off to a part in a thousand.
    expect(Math.abs(sum / naive)).toBeLessThan(1e-3);
  });

  it('of point charges has zero net current inside its interval under 100 G of noise', () => {
    const charges = [
      { strength: 1.2e5, x: -18, y: 0, depth: 9 },
      { strength: -1.0e5, x: 16, y: 5, depth: 7 },
      { strength: -0.2e5, x: 2, y: -14, depth: 5 },
    ];
    const field = ropePlane([], charges, 96, 1);
    const inside = { positive: 0, negative: 0, unsigned: 0 };
    for (let seed = 1; seed <= 20; seed++) {
      const { budget } = measureCurrents(withNoise(field, seed), NOISE, { leastG: 50, seed });
      inside.positive += holdsZero(budget.positive.netA);
      inside.negative += holdsZero(budget.negative.netA);
      inside.unsigned += holdsZero(budget.unsignedA);
    }
    for (const count of Object.values(inside)) {
      expect(count).toBeGreaterThanOrEqual(10);
      expect(count).toBeLessThanOrEqual(17);
    }
  });

  // Low & Lou (1990), planes of 128 x 128 pixels: net over unsigned current inside Bz > 0 is -0.887
  // (case I) and +0.385 (case II), by an independent calculation; the sign of a is a convention.
  it.each([
    [1, CASE_ONE, 0.887],
    [3, CASE_TWO, 0.385],
  ] as const)('of Low & Lou n = %i', (n, box, ratio) => {
    const field = lowLouPlane(solveLowLou(n), box, 128);
    const { budget } = measureCurrents(field, { x: 0, y: 0, z: 0 }, { leastG: 1e-9, draws: 1 });
    const { upwardA, downwardA, netA } = budget.positive;
    expect(Math.abs(netA.value) / (upwardA.value - downwardA.value) / ratio).toBeCloseTo(1, 1);
    // All current that goes up comes down: what is left crosses the rim.
    const contour = contourCurrent(field, { x0: 0, y0: 0, x1: 127, y1: 127 });
    const net = netA.value + budget.negative.netA.value;
    expect(Math.abs(net - contour) / budget.unsignedA.value).toBeLessThan(0.02);
  });
});
