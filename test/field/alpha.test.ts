import { describe, expect, it } from 'vitest';
import { alphaPrior, assumedAlpha, beliefQuantile } from '../../src/field/alpha.js';

describe('prior on alpha', () => {
  it('follows the hemispheric rule: negative in the north, positive in the south', () => {
    // Pevtsov, Canfield & Metcalf 1995, ApJ 440, L109 (about 70 to 76 % of regions; from memory).
    expect(beliefQuantile(alphaPrior(20, 0.1).perMm, 0.5)).toBeLessThan(0);
    expect(beliefQuantile(alphaPrior(-20, 0.1).perMm, 0.5)).toBeGreaterThan(0);
    expect(beliefQuantile(alphaPrior(0, 0.1).perMm, 0.5)).toBeCloseTo(0, 9);
  });

  it('has a scatter of 0.013 per Mm and a mean of -0.00027 per Mm and degree', () => {
    const { perMm } = alphaPrior(10, 1);
    const [low, middle, high] = [0.16, 0.5, 0.84].map((p) => beliefQuantile(perMm, p));
    expect(middle).toBeCloseTo(-0.0027, 4);
    expect((high - low) / 2).toBeCloseTo(0.0129, 3);
  });

  it('stays below 0.9 of the largest alpha and says how much was cut', () => {
    const { perMm, removed } = alphaPrior(0, 0.01);
    expect(Math.max(...perMm.map(Math.abs))).toBeLessThan(0.009);
    expect(removed).toBeGreaterThan(0.4);
    expect(alphaPrior(0, 1).removed).toBeLessThan(1e-6);
  });

  it('is one value when assumed', () => {
    expect(assumedAlpha(-0.02)).toEqual({
      basis: 'assumed',
      perMm: Float64Array.of(-0.02),
      removed: 0,
    });
    expect(beliefQuantile(Float64Array.of(-0.02), 0.84)).toBe(-0.02);
  });
});
