import { describe, expect, it } from 'vitest';
import { potentialHorizontalField, potentialStrengthAbove } from '../../src/field/potential.js';
import { makeGrid } from '../../src/grid/grid.js';
import { BIPOLE, chargeField, chargeVector } from '../support/charges.js';

describe('horizontal field of the potential field', () => {
  it('is that of the charges below (exact solution)', () => {
    const n = 256;
    const h = 0.75;
    const { x, y } = potentialHorizontalField(chargeField(BIPOLE, n, h), 'open');
    for (const [i, j] of [
      [128, 128],
      [100, 140],
      [150, 90],
      [128, 60],
    ]) {
      const exact = chargeVector(BIPOLE, (i + 0.5 - n / 2) * h, (j + 0.5 - n / 2) * h, 0);
      expect(Math.abs(x.values.get(j, i) - exact[0])).toBeLessThan(12);
      expect(Math.abs(y.values.get(j, i) - exact[1])).toBeLessThan(12);
    }
  });

  it('of one mode lags it by a quarter period (sign of Nakagawa & Raadu 1972)', () => {
    const n = 48;
    const k = (2 * Math.PI * 2) / n;
    const bz = makeGrid(
      Float64Array.from({ length: n * n }, (_, i) => Math.sin(k * (i % n))),
      n,
      n,
      'G',
      1,
    );
    const { x, y } = potentialHorizontalField(bz, 'periodic');
    // Potential phi = sin(kx) e^(-kz) / k, B = -grad phi: Bx = -cos(kx), Bz = sin(kx).
    for (let i = 0; i < n; i++) expect(x.values.get(5, i)).toBeCloseTo(-Math.cos(k * i), 10);
    expect(Math.max(...y.values.data.map(Math.abs))).toBeLessThan(1e-12);
  });
});

describe('strength of the potential field at a point above', () => {
  it('is that of the charges below within 1 %', () => {
    const n = 512;
    const strength = potentialStrengthAbove(
      chargeField(BIPOLE, n, 0.5),
      n / 2 - 0.5,
      n / 2 - 0.5,
      15,
    );
    expect(strength / Math.hypot(...chargeVector(BIPOLE, 0, 0, 15))).toBeCloseTo(1, 1.8);
  });
});
