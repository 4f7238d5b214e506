import { describe, expect, it } from 'vitest';
import { makeGrid } from '../../src/grid/grid.js';
import { resampleMap } from '../../src/render/resample.js';

function grid(rows: readonly (readonly number[])[]) {
  return makeGrid(Float64Array.from(rows.flat()), rows[0].length, rows.length, 'G', 1);
}

describe('resampleMap', () => {
  it('averages by area where it shrinks', () => {
    const map = grid([
      [1, 3, 10, 10],
      [5, 7, 10, 30],
    ]);
    expect([...resampleMap(map, 2, 1, false)]).toEqual([4, 15]);
  });

  it('weighs pixels that an output pixel covers in part', () => {
    // Three pixels onto two: each output takes one whole pixel and half of the middle one.
    expect([...resampleMap(grid([[0, 3, 9]]), 2, 1, false)]).toEqual([1, 7]);
  });

  it('averages what is there and gives NaN where less than half is', () => {
    const [, half, none] = resampleMap(
      grid([
        [1, 1, 4, Number.NaN, Number.NaN, Number.NaN],
        [1, 1, 6, Number.NaN, Number.NaN, 8],
      ]),
      3,
      1,
      false,
    );
    expect(half).toBe(5);
    expect(none).toBeNaN();
  });

  it('keeps the mean of a map without gaps, at any ratio', () => {
    const data = Float64Array.from({ length: 37 * 23 }, (_, i) => Math.sin(i) * 100);
    const mean = (values: Float64Array) => values.reduce((a, b) => a + b) / values.length;
    const out = resampleMap(makeGrid(data, 37, 23, 'G', 1), 10, 7, false);
    expect(mean(out)).toBeCloseTo(mean(data), 9);
  });

  it('repeats pixels when blocky and interpolates linearly when not', () => {
    expect([...resampleMap(grid([[2, 6]]), 4, 1, true)]).toEqual([2, 2, 6, 6]);
    expect([...resampleMap(grid([[2, 6]]), 4, 1, false)]).toEqual([2, 3, 5, 6]);
  });

  it('does not spread a gap when it grows', () => {
    const out = resampleMap(grid([[2, Number.NaN]]), 4, 1, false);
    expect([...out.subarray(0, 2)]).toEqual([2, 2]);
    expect(out[2]).toBeNaN();
    expect(out[3]).toBeNaN();
  });
});
