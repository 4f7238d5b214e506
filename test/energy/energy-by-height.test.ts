import { describe, expect, it } from 'vitest';
import { cellPairInverseDistance } from '../../src/energy/cell-pair.js';
import { cellPairAtHeight } from '../../src/energy/cell-pair-height.js';
import {
  type EnergyProfile,
  freeEnergyByHeight,
  potentialEnergyByHeight,
} from '../../src/energy/energy-by-height.js';
import { linearFreeEnergy, potentialEnergy } from '../../src/energy/region-energy.js';
import { geometricHeights, uniformHeights } from '../../src/field/heights.js';
import { potentialVolumeDouble } from '../../src/field/volume.js';
import { type Grid2, makeGrid } from '../../src/grid/grid.js';
import { BIPOLE, type Charge, chargeEnergy, chargeField } from '../support/charges.js';
import { uniform } from '../support/random.js';

const QUIET = { deviationG: 0, cellMm2: 1 };
const MU0 = 4e-7 * Math.PI;

function randomMap(nx: number, ny: number, pixelMm: number): Grid2<'G'> {
  const next = uniform(11);
  const data = Float64Array.from({ length: nx * ny }, () => 800 * (next() - 0.5));
  return makeGrid(data, nx, ny, 'G', pixelMm);
}

/** Largest relative difference between what lies below and the trapezoid sums of the density. */
function integralError({ heightsMm, density, below, total }: EnergyProfile): number {
  let [sum, worst] = [0, 0];
  for (let i = 1; i < heightsMm.length; i++) {
    const step = heightsMm[i] - heightsMm[i - 1];
    sum += (step / 2) * (density[i].joules + density[i - 1].joules);
    worst = Math.max(worst, Math.abs(sum - below[i].joules) / total.joules);
  }
  return worst;
}

describe('energy by height', () => {
  it('of a single mode is its closed form', () => {
    const [n, h, b0] = [64, 0.75, 400];
    const k = (2 * Math.PI * 3) / (n * h);
    const data = Float64Array.from({ length: n * n }, (_, i) => b0 * Math.sin(k * h * (i % n)));
    const map = makeGrid(data, n, n, 'G', h);
    const heights = Float64Array.of(0, 1, 4);
    const { density, below } = potentialEnergyByHeight(map, QUIET, 'periodic', heights);
    // |B|^2 = b0^2 exp(-2 k z) everywhere: area b0^2 exp(-2 k z) / 2 mu0.
    const surface = ((n * h * 1e6) ** 2 * (b0 * 1e-4) ** 2) / (2 * MU0);
    heights.forEach((z, i) => {
      expect(density[i].joules / (surface * 1e6 * Math.exp(-2 * k * z))).toBeCloseTo(1, 9);
      const wanted = ((surface * 1e6) / (2 * k)) * (1 - Math.exp(-2 * k * z));
      expect(Math.abs(below[i].joules - wanted)).toBeLessThan(1e-9 * surface * 1e6);
    });
  });

  it.each(['open', 'periodic'] as const)(
    'of random maps adds up to the surface energy (%s)',
    (sides) => {
      const map = randomMap(40, 32, 0.5);
      const heights = geometricHeights(260, 300, 0.002);
      const found = potentialEnergyByHeight(map, QUIET, sides, heights);
      expect(found.total.joules / potentialEnergy(map, QUIET, sides).joules).toBeCloseTo(1, 11);
      expect(integralError(found)).toBeLessThan(5e-4);
      expect(found.below[0].joules).toBe(0);
      expect(found.below.at(-1)!.joules / found.total.joules).toBeCloseTo(1, 3);
      for (const each of found.density) expect(each.joules).toBeGreaterThanOrEqual(0);
    },
  );

  it('of the free energy adds up to that of the surface formula, and is nowhere negative', () => {
    const map = randomMap(48, 40, 1);
    const heights = geometricHeights(300, 400, 0.005);
    const surface = linearFreeEnergy(map, QUIET);
    const alpha = 0.8 * surface.largestAlphaPerMm;
    const found = freeEnergyByHeight(map, QUIET, alpha, heights);
    expect(found.total.joules / surface.at(alpha).joules).toBeCloseTo(1, 12);
    expect(integralError(found)).toBeLessThan(5e-4);
    expect(found.below.at(-1)!.joules / found.total.joules).toBeCloseTo(1, 4);
    for (const each of found.density)
      expect(each.joules).toBeGreaterThan(-1e-12 * found.total.joules);
    expect(() => freeEnergyByHeight(map, QUIET, 1, heights)).toThrow(RangeError);
  });

  it('of buried charges is that of the charges as much deeper (exact)', () => {
    // Above height z the field is that of the same charges z deeper below a plane at z.
    const map = chargeField(BIPOLE, 160, 1);
    const heights = Float64Array.of(0, 1, 4, 10, 30);
    const { below } = potentialEnergyByHeight(map, QUIET, 'open', heights);
    const deeper = (z: number): Charge[] => BIPOLE.map((q) => ({ ...q, depth: q.depth + z }));
    const whole = chargeEnergy(BIPOLE);
    heights.forEach((z, i) => {
      const wanted = whole - chargeEnergy(deeper(z));
      // Pixel means, and the flux beyond the map's sides.
      expect(Math.abs(below[i].joules - wanted) / whole).toBeLessThan(0.005);
    });
  });

  it('is that of the field in the volume, level by level', () => {
    const map = randomMap(36, 30, 1);
    const heights = uniformHeights(4, 3);
    for (const alpha of [0, 0.1]) {
      const options = { sides: 'periodic', alphaPerMm: alpha, withoutMean: true } as const;
      const { x, y, z } = potentialVolumeDouble(map, heights, options);
      const potential = potentialEnergyByHeight(map, QUIET, 'periodic', heights).density;
      const free = alpha > 0 ? freeEnergyByHeight(map, QUIET, alpha, heights).density : undefined;
      // Levels above the surface: there the Nyquist modes, which have no derivative, are damped.
      for (let level = 2; level < 4; level++) {
        let sum = 0;
        for (let i = 1080 * level; i < 1080 * (level + 1); i++) {
          sum += x[i] ** 2 + y[i] ** 2 + z[i] ** 2;
        }
        const joules = (sum * 1e-8 * 1e12 * 1e6) / (2 * MU0);
        const wanted = potential[level].joules + (free?.[level].joules ?? 0);
        expect(Math.abs(joules / wanted - 1)).toBeLessThan(1e-3);
      }
    }
  });
});

describe('mean inverse distance of two squares apart in height', () => {
  it('equals the sum over many pairs of points', () => {
    const m = 40;
    for (const [dx, dy, c] of [
      [0, 0, 1],
      [1, 0, 0.7],
      [3, 2, 5],
      [9, 4, 3],
      [2, 1, 20],
    ]) {
      let [value, slope] = [0, 0];
      // The difference of two uniform numbers has a triangular density.
      for (let j = 0; j < 2 * m; j++) {
        for (let i = 0; i < 2 * m; i++) {
          const [u, v] = [(i + 0.5) / m - 1, (j + 0.5) / m - 1];
          const weight = ((1 - Math.abs(u)) * (1 - Math.abs(v))) / (m * m);
          const r = Math.hypot(dx + u, dy + v, c);
          value += weight / r;
          slope -= (weight * c) / r ** 3;
        }
      }
      const found = cellPairAtHeight(dx, dy, c);
      expect(found.value / value).toBeCloseTo(1, 3);
      expect(found.slope / slope).toBeCloseTo(1, 2.5);
    }
  });

  it('tends to the mean inverse distance in the plane, and has the slope of its values', () => {
    for (const [dx, dy] of [
      [0, 0],
      [2, 1],
      [8, 8],
      [11, 3],
    ]) {
      expect(cellPairAtHeight(dx, dy, 1e-7).value).toBeCloseTo(cellPairInverseDistance(dx, dy), 5);
      for (const c of [0.3, 2, 17]) {
        const difference =
          (cellPairAtHeight(dx, dy, c * 1.001).value - cellPairAtHeight(dx, dy, c * 0.999).value) /
          (0.002 * c);
        expect(cellPairAtHeight(dx, dy, c).slope / difference).toBeCloseTo(1, 4);
      }
    }
  });
});
