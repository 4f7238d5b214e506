import { describe, expect, it } from 'vitest';
import { seededNormalFill, seededUniform } from '../../src/grid/random.js';

const moments = (values: Float64Array) =>
  [1, 2, 3, 4].map((p) => values.reduce((sum, value) => sum + value ** p, 0) / values.length);

describe('seeded numbers', () => {
  it('are the same for a seed, others for another, and inside (0, 1)', () => {
    const draw = (seed: number) => Float64Array.from({ length: 1000 }, seededUniform(seed));
    expect(draw(7)).toEqual(draw(7));
    expect(draw(7)).not.toEqual(draw(8));
    for (const value of draw(0)) expect(value > 0 && value < 1).toBe(true);
    // Moments of the uniform distribution: 1/2, 1/3.
    expect(moments(draw(3))[0]).toBeCloseTo(0.5, 1);
    expect(moments(draw(3))[1]).toBeCloseTo(1 / 3, 1);
  });

  it('are normal and independent', () => {
    const values = new Float64Array(200_000);
    const fill = seededNormalFill(5);
    fill(values);
    const [mean, square, cube, fourth] = moments(values);
    expect(mean).toBeCloseTo(0, 1.9);
    expect(square).toBeCloseTo(1, 1.7);
    expect(cube).toBeCloseTo(0, 1.2);
    expect(fourth / 3).toBeCloseTo(1, 1);
    let product = 0;
    for (let i = 0; i + 1 < values.length; i++) product += values[i] * values[i + 1];
    expect(product / values.length).toBeCloseTo(0, 1.9);
    const again = new Float64Array(10);
    fill(again);
    expect(again).not.toEqual(values.slice(0, 10));
  });
});
