import { describe, expect, it } from 'vitest';
import { CASE_ONE, CASE_TWO, lowLouAt, lowLouPlane, solveLowLou } from '../support/low-lou.js';

const one = solveLowLou(1);
const three = solveLowLou(3);

describe('the Low & Lou test field', () => {
  // Low & Lou 1990, ApJ 352, 343 print 0.425; 0.4274083769 and 8.03592 by an independent
  // full-interval Chebyshev collocation of the same equation.
  it('has the eigenvalues of the equation', () => {
    expect(one.a2).toBeCloseTo(0.42740838, 8);
    expect(three.a2 / 8.03592).toBeCloseTo(1, 6);
  });

  // Largest |Bz| on the plane at P'(-1) = 10, from an independent solution: 293.3 and 2450.1.
  it.each([
    [one, CASE_ONE, 293.3],
    [three, CASE_TWO, 2450.1],
  ])('has the peak field of the plane (case %#)', (solution, box, peak) => {
    let largest = 0;
    for (let i = -100; i <= 100; i++)
      for (let j = -50; j <= 50; j++) {
        const { b } = lowLouAt(solution, box, i / 100, j / 100, 0);
        largest = Math.max(largest, Math.abs(b[2]));
      }
    expect(largest / peak).toBeGreaterThan(0.995);
    expect(largest / peak).toBeLessThan(1.001);
  });

  it.each([
    [one, CASE_ONE],
    [three, CASE_TWO],
  ])('is free of divergence and obeys curl B = alpha B (case %#)', (solution, box) => {
    const e = 1e-4;
    for (const [x, y, z] of [
      [0.2, 0.1, 0],
      [-0.4, 0.3, 0.1],
      [0.5, -0.6, 0.4],
    ]) {
      const at = (dx: number, dy: number, dz: number) =>
        lowLouAt(solution, box, x + dx * e, y + dy * e, z + dz * e).b;
      const [px, mx] = [at(1, 0, 0), at(-1, 0, 0)];
      const [py, my] = [at(0, 1, 0), at(0, -1, 0)];
      const [pz, mz] = [at(0, 0, 1), at(0, 0, -1)];
      const d = (p: readonly number[], m: readonly number[], i: number) => (p[i] - m[i]) / (2 * e);
      const { b, alpha } = lowLouAt(solution, box, x, y, z);
      const size = Math.hypot(...b);
      expect((d(px, mx, 0) + d(py, my, 1) + d(pz, mz, 2)) / size).toBeCloseTo(0, 4);
      const curl = [
        d(py, my, 2) - d(pz, mz, 1),
        d(pz, mz, 0) - d(px, mx, 2),
        d(px, mx, 1) - d(py, my, 0),
      ];
      for (let i = 0; i < 3; i++) expect((curl[i] - alpha * b[i]) / size).toBeCloseTo(0, 4);
    }
  });

  it('fills a plane of the size and strength asked for', () => {
    const plane = lowLouPlane(one, CASE_ONE, 32, 1, 50, 1500);
    expect(plane.z.pixelMm).toBeCloseTo(100 / 32, 12);
    expect(Math.max(...plane.z.values.data.map(Math.abs))).toBeCloseTo(1500, 8);
  });
});
