import { describe, expect, it } from 'vitest';
import { findSpikes } from '../../src/grid/spikes.js';

const map = (put: Record<number, number>) =>
  Float64Array.from({ length: 25 }, (_, i) => put[i] ?? 5);

describe('spikes', () => {
  it('are lone strong pixels', () => {
    expect(findSpikes(map({ 12: 3027 }), 5, 5, 13)).toEqual([12]);
    expect(findSpikes(map({ 12: -3027 }), 5, 5, 13)).toEqual([12]);
  });

  it('are not spots, which are wider than one pixel', () => {
    expect(findSpikes(map({ 12: 3000, 13: 1500 }), 5, 5, 13)).toEqual([]);
    expect(findSpikes(map({ 12: 3000, 18: -900 }), 5, 5, 13)).toEqual([]);
  });

  it('are not weak or merely noisy pixels, nor judged by missing neighbours', () => {
    expect(findSpikes(map({ 12: 400 }), 5, 5, 13)).toEqual([]);
    expect(findSpikes(map({ 12: 900 }), 5, 5, 60)).toEqual([]);
    expect(findSpikes(map({ 12: 3000, 11: Number.NaN }), 5, 5, 13)).toEqual([12]);
  });
});
