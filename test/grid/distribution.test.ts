import { describe, expect, it } from 'vitest';
import { normalCumulative, truncatedNormalQuantiles } from '../../src/grid/distribution.js';

describe('normal distribution', () => {
  // Abramowitz & Stegun 1964, table 26.1.
  it.each([
    [0, 0.5],
    [1, 0.8413447461],
    [1.96, 0.9750021049],
    [3, 0.998650102],
    [-1, 0.1586552539],
  ])('has probability below %f of %f', (x, p) => {
    expect(normalCumulative(x)).toBeCloseTo(p, 6);
  });

  it('uncut gives back its quartiles', () => {
    const { values, removed } = truncatedNormalQuantiles(2, 3, 100, 1000);
    // Quartile of the standard normal: 0.6744898 (Abramowitz & Stegun 1964, table 26.5).
    expect(values[749]).toBeCloseTo(2 + 3 * 0.6744898, 1);
    expect(removed).toBeLessThan(1e-6);
    expect(values.reduce((a, b) => a + b) / 1000).toBeCloseTo(2, 6);
  });

  it('cut stays inside and says how much went', () => {
    const { values, removed } = truncatedNormalQuantiles(0, 1, 1, 500);
    expect(removed).toBeCloseTo(1 - 0.6826894921, 6);
    expect(values[0]).toBeGreaterThan(-1);
    expect(values[499]).toBeLessThan(1);
    expect(values[0]).toBeCloseTo(-values[499], 9);
  });
});
