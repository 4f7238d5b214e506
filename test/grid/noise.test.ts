import { describe, expect, it } from 'vitest';
import { estimateNoise } from '../../src/grid/noise.js';
import { BIPOLE, chargeField } from '../support/charges.js';
import { normalNoise } from '../support/random.js';

describe('noise estimate', () => {
  it.each([5, 20, 60])('finds %i G of white noise under a strong region within 4 %%', (sigma) => {
    const random = normalNoise(7);
    const map = chargeField(BIPOLE, 256, 0.5).values.data.map((b) => b + sigma * random());
    expect(Math.abs(estimateNoise(map, 256, 256) / sigma - 1)).toBeLessThan(0.04);
  });

  it('is next to nothing on a noise-free region', () => {
    expect(estimateNoise(chargeField(BIPOLE, 256, 0.5).values.data, 256, 256)).toBeLessThan(0.2);
  });

  it('skips missing pixels and outliers', () => {
    const random = normalNoise(3);
    const map = Float32Array.from({ length: 200 * 150 }, (_, i) =>
      i % 7 === 0 ? Number.NaN : i % 101 === 0 ? 4000 : 10 * random(),
    );
    expect(estimateNoise(map, 200, 150)).toBeGreaterThan(9);
    expect(estimateNoise(map, 200, 150)).toBeLessThan(11);
  });

  it('is NaN where there is too little to go by', () => {
    expect(estimateNoise(new Float64Array(16), 4, 4)).toBeNaN();
    expect(estimateNoise(new Float64Array(400).fill(Number.NaN), 20, 20)).toBeNaN();
  });
});
