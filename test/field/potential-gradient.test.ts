import { expect, it } from 'vitest';
import { potentialVerticalGradient } from '../../src/field/potential-gradient.js';
import { makeGrid } from '../../src/grid/grid.js';

// Exact: one mode of the current-free field falls as exp(-k z).
it('the vertical derivative of one mode is -k Bz', () => {
  const n = 32;
  const data = Float64Array.from(
    { length: n * n },
    (_, i) => 100 * Math.sin((2 * Math.PI * 3 * (i % n)) / n),
  );
  const k = (2 * Math.PI * 3) / (n * 0.5);
  const slope = potentialVerticalGradient(makeGrid(data, n, n, 'G', 0.5), 'periodic');
  slope.forEach((value, i) => {
    expect(value).toBeCloseTo(-k * data[i], 9);
  });
});
