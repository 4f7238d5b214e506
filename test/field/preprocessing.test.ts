import { describe, expect, it } from 'vitest';
import { preprocessField } from '../../src/field/preprocessing.js';
import { makeVectorField, type VectorField } from '../../src/field/vector-field.js';
import { CASE_ONE, lowLouPlane, solveLowLou } from '../support/low-lou.js';
import { normalNoise } from '../support/random.js';

const plane = lowLouPlane(solveLowLou(1), CASE_ONE, 64);

/** The plane pushed out of balance: horizontal field too strong, a tilt, and noise. */
function forced(noise: number): VectorField {
  const normal = normalNoise(9);
  const n = 64;
  const [x, y, z] = (['x', 'y', 'z'] as const).map((axis) => plane[axis].values.data);
  return makeVectorField(
    x.map((value, i) => 1.25 * value + 0.15 * z[i] + noise * normal()),
    y.map((value, i) => 1.25 * value - 0.1 * z[i] + noise * normal()),
    z.map((value) => value + 0.1 * noise * normal()),
    n,
    n,
    plane.z.pixelMm,
  );
}

describe('preprocessing', () => {
  it.each([0, 50])('takes force and torque away with little change (noise %f G)', (noise) => {
    const result = preprocessField(forced(noise));
    expect(result.forceBefore).toBeGreaterThan(0.1);
    expect(result.forceAfter).toBeLessThan(result.forceBefore / 100);
    expect(result.torqueAfter).toBeLessThan(result.torqueBefore / 50);
    expect(result.change).toBeLessThan(0.25);
  });

  it('leaves a force-free smooth field nearly alone', () => {
    const result = preprocessField(plane);
    expect(result.forceBefore).toBeLessThan(0.01);
    expect(result.change).toBeLessThan(0.05);
  });

  it('takes noise off', () => {
    const noisy = preprocessField(forced(50)).field;
    const clean = preprocessField(forced(0)).field;
    let [left, all] = [0, 0];
    const raw = forced(50);
    const exact = forced(0);
    for (let i = 0; i < 64 * 64; i++) {
      left += (noisy.x.values.data[i] - clean.x.values.data[i]) ** 2;
      all += (raw.x.values.data[i] - exact.x.values.data[i]) ** 2;
    }
    expect(left / all).toBeLessThan(0.8);
  });

  it('keeps missing pixels missing', () => {
    const field = forced(0);
    field.x.values.data[100] = Number.NaN;
    const result = preprocessField(field, { iterations: 5 });
    expect(result.field.z.values.data[100]).toBeNaN();
    expect(result.field.z.values.data[101]).not.toBeNaN();
    expect(result.iterations).toBeLessThanOrEqual(5);
  });
});
