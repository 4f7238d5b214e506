import { describe, expect, it } from 'vitest';
import { bilinear, gradientSize } from '../../src/grid/gradient.js';
import { blockMean, cellMeans } from '../../src/grid/rebin.js';
import { gaussianBlur, gaussianSpread, WIDTH_PER_DEVIATION } from '../../src/grid/smooth.js';

describe('Gaussian blur', () => {
  it('spreads a point to a Gaussian of the asked width and keeps its sum', () => {
    const point = new Float64Array(41 * 41);
    point[20 + 41 * 20] = 1;
    const out = gaussianSpread(point, 41, 3);
    expect(out.reduce((a, b) => a + b)).toBeCloseTo(1, 10);
    const half = (WIDTH_PER_DEVIATION * 3) / 2;
    expect(bilinear(out, 41, 41, 20 + half, 20) / out[20 + 41 * 20]).toBeCloseTo(0.5, 1.7);
    expect(out[20 + 3 + 41 * 20] / out[20 + 41 * 20]).toBeCloseTo(Math.exp(-0.5), 6);
  });

  it('leaves a constant constant, to the edges and around holes', () => {
    const flat = new Float64Array(30 * 20).fill(7);
    flat[65] = Number.NaN;
    const out = gaussianBlur(flat, 30, 20, 2);
    expect(out[65]).toBeNaN();
    for (let i = 0; i < out.length; i++) if (i !== 65) expect(out[i]).toBeCloseTo(7, 12);
  });

  it('loses over the edge where nothing is renormalised', () => {
    const flat = new Float64Array(20 * 20).fill(1);
    expect(gaussianSpread(flat, 20, 2)[0]).toBeLessThan(0.5);
  });
});

describe('block mean', () => {
  it('averages what is known and drops an incomplete last block', () => {
    const values = Float64Array.of(1, 3, 9, 5, 7, 9, Number.NaN, 2, 9, Number.NaN, Number.NaN, 9);
    const out = blockMean(values, 3, 4, 2);
    expect([out.nx, out.ny]).toEqual([1, 2]);
    expect(out.values[0]).toBe(4);
    expect(out.values[1]).toBeNaN();
  });
});

describe('mean over cells that are no whole number of pixels', () => {
  it('takes each pixel by its share, leaves out what is missing', () => {
    // Cells of 1.5 pixels: the first holds one pixel and half of the next, in both directions.
    const values = Float64Array.from({ length: 9 }, (_, i) => i);
    const [{ values: out, nx, ny }] = cellMeans(values, 3, 3, 1.5, [[0, 0]]);
    expect([nx, ny]).toEqual([2, 2]);
    expect(out[0]).toBeCloseTo((0 + 0.5 * 1 + 0.5 * 3 + 0.25 * 4) / 2.25, 12);
    expect(out[3]).toBeCloseTo((0.25 * 4 + 0.5 * 5 + 0.5 * 7 + 8) / 2.25, 12);
    values[0] = Number.NaN;
    expect(cellMeans(values, 3, 3, 1.5, [[0, 0]])[0].values[0]).toBeCloseTo(
      (0.5 + 1.5 + 1) / 1.25,
      12,
    );
    values[1] = Number.NaN;
    expect(cellMeans(values, 3, 3, 1.5, [[0, 0]])[0].values[0]).toBeNaN();
  });
});

describe('gradient', () => {
  it('of a plane is its slope, also at edges and beside holes', () => {
    const plane = Float64Array.from({ length: 48 }, (_, i) => 3 * (i % 8) + 4 * Math.floor(i / 8));
    plane[20] = Number.NaN;
    const out = gradientSize(plane, 8, 6, 0.5);
    for (let i = 0; i < 48; i++) if (i !== 20) expect(out[i]).toBeCloseTo(10, 12);
  });

  it('bilinear values are exact for planes and NaN outside', () => {
    const plane = Float64Array.from({ length: 12 }, (_, i) => 2 * (i % 4) - Math.floor(i / 4));
    expect(bilinear(plane, 4, 3, 1.25, 0.5)).toBeCloseTo(2, 12);
    expect(bilinear(plane, 4, 3, 3, 2)).toBeCloseTo(4, 12);
    expect(bilinear(plane, 4, 3, 3.01, 2)).toBeNaN();
  });
});
