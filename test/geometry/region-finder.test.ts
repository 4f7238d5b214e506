import { describe, expect, it } from 'vitest';
import { binUnsigned } from '../../src/geometry/coarse-map.js';
import { strongestRegion } from '../../src/geometry/region-finder.js';
import { surfacePoint, type Vector3, viewFrame } from '../../src/geometry/solar-frame.js';
import { stonyhurstToMapPixel } from '../../src/geometry/solar-map.js';
import { arcsecCards, mapOf, OBSERVER } from './support.js';

const R = 695.7;
const view = viewFrame(OBSERVER);

/** Pseudo-random numbers in [-1, 1), the same on every run (Park & Miller 1988). */
function noise(seed: number) {
  let state = seed;
  return () => {
    state = (state * 16807) % 2147483647;
    return (2 * state) / 2147483647 - 1;
  };
}

/** A bipole: two Gaussian spots of radius 12 Mm, 60 Mm apart, as seen along the line of sight. */
function bipole(lonDeg: number, latDeg: number, gauss: number) {
  const spots = [-2.5, 2.5].map((d) => surfacePoint(view, lonDeg + d, latDeg, [0, 0, 0]));
  return (p: Readonly<Vector3>) => {
    const [a, b] = spots.map((c) => {
      const chord = Math.hypot(p[0] - c[0], p[1] - c[1], p[2] - c[2]);
      return Math.exp(-0.5 * ((R * chord) / 12) ** 2);
    });
    return gauss * (a - b) * p[2];
  };
}

function disk(side: number, ...sources: ((p: Readonly<Vector3>) => number)[]) {
  const random = noise(20310501);
  const scale = 2200 / side;
  return mapOf(
    arcsecCards(scale, side, side),
    side,
    side,
    (p) => 10 * random() + sources.reduce((sum, source) => sum + source(p), 0),
  );
}

describe('strongest region of a full disk', () => {
  it.each([96, 220, 512, 900])('a bipole at 35 west, 18 south on %d pixels', (side) => {
    const { center, extentMm, warnings } = strongestRegion(disk(side, bipole(35, -18, 1500)));
    expect(warnings).toEqual([]);
    expect(Math.abs(center.lonDeg - 35)).toBeLessThan(2);
    expect(Math.abs(center.latDeg + 18)).toBeLessThan(2);
    expect(extentMm.x).toBeGreaterThan(100);
    expect(extentMm.x).toBeLessThan(400);
    expect(extentMm.y).toBeGreaterThanOrEqual(80);
  });
  it('takes the greater true flux, although foreshortening hides it', () => {
    const map = disk(512, bipole(-10, 15, 1000), bipole(52, -18, 1300));
    expect(Math.abs(strongestRegion(map).center.lonDeg - 52)).toBeLessThan(3);
  });
  it('does not look beyond 60 degrees, or beyond what is asked', () => {
    const map = disk(512, bipole(20, 15, 800), bipole(-72, -18, 4000));
    expect(Math.abs(strongestRegion(map).center.lonDeg - 20)).toBeLessThan(3);
    const two = disk(512, bipole(10, 15, 500), bipole(45, -18, 1500));
    expect(Math.abs(strongestRegion(two, { withinDeg: 30 }).center.lonDeg - 10)).toBeLessThan(3);
  });
  it.each([220, 512])('is not deceived by spikes on %d pixels', (side) => {
    const map = disk(side, bipole(20, 15, 600));
    for (const [lon, lat] of [
      [-30, 0],
      [-20, 30],
      [5, -40],
    ]) {
      const [x, y] = stonyhurstToMapPixel(map, lon, lat)!;
      map.values[Math.round(x) + side * Math.round(y)] = 30_000;
    }
    expect(Math.abs(strongestRegion(map).center.lonDeg - 20)).toBeLessThan(3);
  });
  it('says when nothing stands out, and refuses a blank disk', () => {
    expect(strongestRegion(disk(128)).warnings.join()).toMatch(/no region stands out/);
    const blank = disk(128);
    blank.values.fill(Number.NaN);
    expect(() => strongestRegion(blank)).toThrow(/no values within 60 degrees/);
  });
});

describe('coarse map', () => {
  it('by hand: means of |B| without the strongest pixel of each block, limited to neighbours', () => {
    const values = new Float64Array(512 * 4).fill(Number.NaN);
    const set = (x: number, y: number, v: number) => {
      values[x + 512 * y] = v;
    };
    for (const [x, v] of [
      [0, -3],
      [2, 8],
    ])
      for (const [dx, dy] of [
        [0, 0],
        [1, 0],
        [0, 1],
        [1, 1],
      ])
        set(x + dx, dy, v);
    set(2, 1, 5000);
    const { nx, ny, factor, values: means, centreOf } = binUnsigned(values, 512, 4);
    expect([nx, ny, factor]).toEqual([256, 2, 2]);
    expect(means[0]).toBe(3);
    expect(means[1]).toBe(3); // 8 without the 5000, then no more than its neighbour
    expect(means[2]).toBeNaN();
    expect(centreOf(1)).toEqual([2.5, 0.5]);
    expect(centreOf(256)).toEqual([0.5, 2.5]);
  });
});
