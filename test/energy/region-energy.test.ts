import { describe, expect, it } from 'vitest';
import { cellPairInverseDistance } from '../../src/energy/cell-pair.js';
import {
  freeEnergyCeiling,
  linearFreeEnergy,
  potentialEnergy,
} from '../../src/energy/region-energy.js';
import { paddedSpectrum } from '../../src/field/potential.js';
import { inverseRealFft2, type Spectrum2 } from '../../src/grid/fft.js';
import { makeGrid } from '../../src/grid/grid.js';
import { columnWeight, wavenumbers } from '../../src/grid/wavenumbers.js';
import { BIPOLE, type Charge, chargeEnergy, chargeField } from '../support/charges.js';
import { normalNoise } from '../support/random.js';

const QUIET = { deviationG: 0, cellMm2: 0.25 };
const MU0 = 4e-7 * Math.PI;

/** B0 sin(k x) on n x n pixels with `waves` periods. */
function arcade(n: number, waves: number, b0: number, pixelMm: number) {
  const data = Float64Array.from(
    { length: n * n },
    (_, i) => b0 * Math.sin((2 * Math.PI * waves * (i % n)) / n),
  );
  return makeGrid(data, n, n, 'G', pixelMm);
}

describe('mean inverse distance of two pixels', () => {
  // Closed form of the self term: 4 asinh(1) + (4/3)(1 - sqrt 2), a standard integral of potential theory.
  it('has the exact self term', () => {
    expect(cellPairInverseDistance(0, 0)).toBeCloseTo(
      4 * Math.asinh(1) + (4 / 3) * (1 - Math.SQRT2),
      12,
    );
  });

  it.each([
    [1, 0],
    [1, 1],
    [3, 2],
    [8, 8],
  ])('agrees with a plain average over both pixels at %i, %i', (dx, dy) => {
    const n = 24;
    let sum = 0;
    for (let a = 0; a < n; a++)
      for (let b = 0; b < n; b++)
        for (let c = 0; c < n; c++)
          for (let d = 0; d < n; d++)
            sum += 1 / Math.hypot(dx + (a - c + 1e-9) / n, dy + (b - d) / n);
    // Adjacent pixels touch: the midpoint rule itself errs by a part in a thousand there.
    expect(cellPairInverseDistance(dx, dy) / (sum / n ** 4)).toBeCloseTo(1, dx + dy > 2 ? 4 : 2);
  });

  it('is continuous where the expansion takes over', () => {
    const r = Math.hypot(9, 3);
    expect(cellPairInverseDistance(9, 3)).toBeCloseTo(1 / r + 1 / (12 * r ** 3), 10);
    expect(cellPairInverseDistance(8, 8)).toBeCloseTo(
      1 / Math.hypot(8, 8) + 1 / (12 * Math.hypot(8, 8) ** 3),
      6,
    );
  });
});

describe('potential energy with open sides', () => {
  const cases: [string, readonly Charge[]][] = [
    ['bipole', BIPOLE],
    [
      'three charges',
      [
        { strength: 1.2e5, x: -18, y: 0, depth: 9 },
        { strength: -1.0e5, x: 16, y: 5, depth: 7 },
        { strength: -0.2e5, x: 2, y: -14, depth: 5 },
      ],
    ],
  ];
  // Exact solution: method of images (closed form in test/support/charges.ts). The issue asks for 2 %.
  it.each(cases)('of a %s is within 0.5 %% of the closed form', (_, charges) => {
    const energy = potentialEnergy(chargeField(charges, 512, 0.5), QUIET, 'open').joules;
    expect(Math.abs(energy / chargeEnergy(charges) - 1)).toBeLessThan(0.005);
  });

  it('of a vertical dipole is m^2 / 16 d^3 within 1 %', () => {
    // Exact: E = m^2 / (16 d^3) in Gaussian units, pi m^2 / (4 mu0 d^3) in SI. A dipole as two close charges.
    const [depth, gap, q] = [12, 0.5, 1e6];
    const charges = [
      { strength: q, x: 0, y: 0, depth: depth - gap / 2 },
      { strength: -q, x: 0, y: 0, depth: depth + gap / 2 },
    ];
    const moment = q * 1e8 * gap * 1e6;
    const exact = (Math.PI * moment ** 2) / (4 * MU0 * (depth * 1e6) ** 3);
    expect(chargeEnergy(charges) / exact).toBeCloseTo(1, 2);
    const energy = potentialEnergy(chargeField(charges, 512, 0.4), QUIET, 'open').joules;
    expect(Math.abs(energy / exact - 1)).toBeLessThan(0.01);
  });

  it('does not depend on the shape of the map that holds the field', () => {
    const square = chargeField(BIPOLE, 256, 1);
    const cut = square.values.hi(196, 256).lo(60, 0);
    const rows = Float64Array.from({ length: 136 * 256 }, (_, i) =>
      cut.get(Math.floor(i / 256), i % 256),
    );
    const narrow = potentialEnergy(makeGrid(rows, 256, 136, 'G', 1), QUIET, 'open').joules;
    expect(Math.abs(narrow / chargeEnergy(BIPOLE) - 1)).toBeLessThan(0.03);
  });

  it('counts missing pixels as no field', () => {
    const field = chargeField(BIPOLE, 64, 4);
    const holed = Float64Array.from(field.values.data);
    holed[5] = Number.NaN;
    const zeroed = Float64Array.from(field.values.data);
    zeroed[5] = 0;
    const of = (data: Float64Array) =>
      potentialEnergy(makeGrid(data, 64, 64, 'G', 4), QUIET, 'open').joules;
    expect(of(holed)).toBe(of(zeroed));
  });
});

describe('potential energy with periodic sides', () => {
  it('of one arcade is B0^2 / (4 mu0 k) per area (exact)', () => {
    const [n, waves, b0, pixel] = [64, 3, 800, 1.5];
    const side = n * pixel * 1e6;
    const k = (2 * Math.PI * waves) / side;
    const exact = ((b0 * 1e-4) ** 2 / (4 * MU0 * k)) * side * side;
    expect(
      potentialEnergy(arcade(n, waves, b0, pixel), QUIET, 'periodic').joules / exact,
    ).toBeCloseTo(1, 10);
  });

  it('equals the volume integral of B^2 / 2 mu0 above the map', () => {
    const field = chargeField(BIPOLE, 64, 2);
    const surface = potentialEnergy(field, QUIET, 'periodic').joules;
    const volume = volumeEnergy(paddedSpectrum(field, 'periodic'), 2);
    expect(volume / surface).toBeCloseTo(1, 3);
  });
});

/**
 * Integral over z of the energy of all three components, each transformed back to real space level by
 * level (Simpson's rule in a stretched height).
 */
function volumeEnergy(spectrum: Spectrum2, pixelMm: number): number {
  const { nx, ny, columns } = spectrum;
  const kx = wavenumbers(nx, pixelMm);
  const ky = wavenumbers(ny, pixelMm);
  const level = (z: number): number => {
    let sum = 0;
    for (const part of ['x', 'y', 'z'] as const) {
      const re = new Float64Array(columns * ny);
      const im = new Float64Array(columns * ny);
      for (let y = 0; y < ny; y++)
        for (let x = 0; x < columns; x++) {
          const i = x + columns * y;
          const k = Math.hypot(kx[x], ky[y]);
          if (k === 0) continue;
          const decay = Math.exp(-k * z);
          const gain = part === 'x' ? kx[x] / k : part === 'y' ? ky[y] / k : 1;
          re[i] = decay * gain * (part === 'z' ? spectrum.re[i] : spectrum.im[i]);
          im[i] = decay * gain * (part === 'z' ? spectrum.im[i] : -spectrum.re[i]);
        }
      for (const b of inverseRealFft2({ nx, ny, columns, re, im })) sum += b * b;
    }
    return sum;
  };
  const steps = 60;
  const top = 80;
  let integral = 0;
  for (let s = 0; s <= steps; s++) {
    const t = s / steps;
    const weight = s === 0 || s === steps ? 1 : s % 2 === 1 ? 4 : 2;
    integral += weight * level(top * t * t) * 2 * top * t;
  }
  integral /= 3 * steps;
  return (integral * 1e6 * 1e-8 * (pixelMm * 1e6) ** 2) / (2 * MU0);
}

describe('linear force-free energy', () => {
  // Exact: E / E_pot = 1 / sqrt(1 - (alpha / k)^2) for one mode (Nakagawa & Raadu 1972).
  it.each([
    [0.6, 1.25],
    [0.8, 5 / 3],
    [0.9, 2.2942],
  ])('of an arcade with alpha = %f k is %f times the potential one', (share, ratio) => {
    const field = arcade(64, 1, 500, 2);
    const k = (2 * Math.PI) / 128;
    const potential = potentialEnergy(field, QUIET, 'periodic').joules;
    const free = linearFreeEnergy(field, QUIET).at(share * k).joules;
    expect((potential + free) / potential).toBeCloseTo(ratio, 4);
  });

  it('vanishes with alpha, is even in it and grows with it', () => {
    const linear = linearFreeEnergy(chargeField(BIPOLE, 128, 1), QUIET);
    expect(linear.at(0).joules).toBe(0);
    expect(linear.at(-0.02).joules).toBeCloseTo(linear.at(0.02).joules, 6);
    expect(linear.at(0.03).joules).toBeGreaterThan(linear.at(0.02).joules);
  });

  it('refuses alpha at or beyond the smallest wavenumber', () => {
    const linear = linearFreeEnergy(chargeField(BIPOLE, 64, 2), QUIET);
    expect(linear.largestAlphaPerMm).toBeCloseTo((2 * Math.PI) / 128, 12);
    expect(() => linear.at(linear.largestAlphaPerMm)).toThrow(RangeError);
  });
});

describe('ceiling on free energy', () => {
  it('of a bipole is the energy of like charges less that of unlike ones', () => {
    // |Bz| of two far charges is the field of two positive ones, up to the line between them.
    const far = [
      { strength: 2e4, x: -60, y: 0, depth: 4 },
      { strength: -2e4, x: 60, y: 0, depth: 4 },
    ];
    const like = far.map((charge) => ({ ...charge, strength: Math.abs(charge.strength) }));
    const ceiling = freeEnergyCeiling(chargeField(far, 512, 0.5), QUIET).joules;
    const exact = chargeEnergy(like) - chargeEnergy(far);
    expect(ceiling).toBeGreaterThan(0);
    // The mirror image that |Bz| has between the charges takes 4 q^2/(2d) (1 - ...) of second order away.
    expect(Math.abs(ceiling / exact - 1)).toBeLessThan(0.12);
  });

  it('of one polarity is zero: nothing can be opened', () => {
    const field = chargeField([{ strength: 1e5, x: 0, y: 0, depth: 8 }], 128, 1);
    expect(Math.abs(freeEnergyCeiling(field, QUIET).joules)).toBeLessThan(
      1e-9 * chargeEnergy([{ strength: 1e5, x: 0, y: 0, depth: 8 }]),
    );
  });
});

describe('noise', () => {
  it('of its own is taken out of the potential energy, and sigma covers the scatter', () => {
    const clean = chargeField(BIPOLE, 128, 1);
    const exact = potentialEnergy(clean, { deviationG: 0, cellMm2: 1 }, 'open').joules;
    const noise = { deviationG: 60, cellMm2: 1 };
    const deviations: number[] = [];
    let sigma = 0;
    for (let seed = 1; seed <= 24; seed++) {
      const random = normalNoise(seed);
      const data = clean.values.data.map((b) => b + 60 * random());
      const energy = potentialEnergy(makeGrid(data, 128, 128, 'G', 1), noise, 'open');
      deviations.push(energy.joules - exact);
      sigma = energy.sigma;
    }
    const mean = deviations.reduce((a, b) => a + b) / deviations.length;
    const scatter = Math.sqrt(deviations.reduce((a, b) => a + b * b, 0) / deviations.length);
    expect(Math.abs(mean)).toBeLessThan((3 * sigma) / Math.sqrt(24));
    expect(scatter / sigma).toBeGreaterThan(0.6);
    expect(scatter / sigma).toBeLessThan(1.5);
  });
});

describe('weights of a half spectrum', () => {
  it('count each mode of the whole spectrum once', () => {
    for (const nx of [1, 2, 7, 8]) {
      let sum = 0;
      for (let x = 0; x <= nx >> 1; x++) sum += columnWeight(x, nx);
      expect(sum).toBe(nx);
    }
  });
});
