import { describe, expect, it } from 'vitest';
import { type FieldLine, traceFieldLines } from '../../src/field/field-lines.js';
import { fieldSampler } from '../../src/field/field-sampler.js';
import { geometricHeights, uniformHeights } from '../../src/field/heights.js';
import { seedsByFlux } from '../../src/field/line-seeds.js';
import { type FieldVolume, potentialVolume } from '../../src/field/volume.js';
import { BIPOLE, chargeField } from '../support/charges.js';

/** A volume of a field given by a function of x, y [Mm from the first sample] and height [Mm]. */
function volumeOf(
  n: number,
  stepMm: number,
  heightsMm: Float64Array,
  field: (x: number, y: number, z: number) => readonly number[],
): FieldVolume<Float64Array> {
  const count = n * n * heightsMm.length;
  const [x, y, z] = [0, 1, 2].map(() => new Float64Array(count));
  for (let i = 0; i < count; i++) {
    const height = heightsMm[Math.floor(i / (n * n))];
    const b = field((i % n) * stepMm, (Math.floor(i / n) % n) * stepMm, height);
    [x[i], y[i], z[i]] = b;
  }
  return { nx: n, ny: n, stepMm, heightsMm, x, y, z };
}

/** A dipole along x, `depth` below the middle of the surface. */
function dipole(middle: number, depth: number) {
  return (x: number, y: number, z: number) => {
    const r = [x - middle, y - middle, z + depth];
    const square = r[0] ** 2 + r[1] ** 2 + r[2] ** 2;
    const dot = 3 * r[0];
    return r.map((c, i) => (1e6 * ((dot * c) / square - (i === 0 ? 1 : 0))) / square ** 1.5);
  };
}

/** Length of a dipole's line r = L sin^2 t between colatitudes a and b. */
function dipoleLength(l: number, a: number, b: number): number {
  const arc = (t: number) => {
    const u = Math.cos(t);
    const root = Math.sqrt(1 + 3 * u * u);
    return (u * root) / 2 + Math.asinh(Math.sqrt(3) * u) / (2 * Math.sqrt(3));
  };
  return l * (arc(a) - arc(b));
}

function pointsOf({ points }: FieldLine): [number, number, number][] {
  return Array.from({ length: points.length / 3 }, (_, i) => [
    points[3 * i],
    points[3 * i + 1],
    points[3 * i + 2],
  ]);
}

describe('field lines', () => {
  const [n, step, depth] = [121, 0.5, 8];
  const middle = ((n - 1) * step) / 2;

  it.each([
    ['uniform', uniformHeights(61, 30)],
    ['geometric', geometricHeights(61, 30, 0.2)],
  ])('of a dipole keep r / sin^2 theta (exact), %s heights', (_, heights) => {
    const volume = volumeOf(n, step, heights, dipole(middle, depth));
    const shape = ([x, y, z]: readonly [number, number, number]) => {
      const r = Math.hypot(x - middle, y - middle, z + depth);
      return r / (1 - ((x - middle) / r) ** 2);
    };
    for (const seed of [
      [middle - 6, middle, 0],
      [middle - 10, middle + 4, 0],
      [middle + 3, middle - 2, 5],
    ] as const) {
      const [line] = traceFieldLines(volume, [seed]);
      expect(line.closed).toBe(true);
      expect(line.ends).toEqual(['surface', 'surface']);
      const l = shape(seed);
      for (const point of pointsOf(line)) {
        // The trilinear field between samples 0.5 Mm apart is good to (h / r)^2 = 0.4 %.
        expect(Math.abs(shape(point) / l - 1)).toBeLessThan(0.004);
      }
      // Highest where the line is farthest from the dipole: straight above it in the line's plane.
      const [y0, z0] = [seed[1] - middle, seed[2] + depth];
      const tilt = z0 / Math.hypot(y0, z0);
      expect(line.apexMm).toBeCloseTo(l * tilt - depth, 1);
      // Both feet, at colatitudes where r cos-tilt = depth.
      const feet = [pointsOf(line)[0], pointsOf(line).at(-1)!];
      const angles = feet.map(([x, y, z]) =>
        Math.acos((x - middle) / Math.hypot(x - middle, y - middle, z + depth)),
      );
      const [a, b] = [Math.min(...angles), Math.max(...angles)];
      expect(Math.abs(line.lengthMm / dipoleLength(l, a, b) - 1)).toBeLessThan(0.002);
    }
  });

  it('run from positive to negative flux, and meet themselves from the other foot', () => {
    const volume = volumeOf(n, step, uniformHeights(61, 30), dipole(middle, depth));
    const [there] = traceFieldLines(volume, [[middle - 7, middle + 1, 0]]);
    const sample = fieldSampler(volume);
    const b = new Float64Array(3);
    const feet = [pointsOf(there)[0], pointsOf(there).at(-1)!];
    sample(...feet[0], b);
    expect(b[2]).toBeGreaterThan(0);
    sample(...feet[1], b);
    expect(b[2]).toBeLessThan(0);
    const [back] = traceFieldLines(volume, [feet[0]]);
    const far = pointsOf(back).at(-1)!;
    expect(Math.hypot(far[0] - feet[1][0], far[1] - feet[1][1])).toBeLessThan(0.005);
    expect(Math.abs(back.lengthMm - there.lengthMm)).toBeLessThan(0.03);
  });

  it('end at the side they leave by, and say the mean field', () => {
    const uniform = (b: readonly number[]) => volumeOf(8, 1, uniformHeights(6, 5), () => b);
    for (const [b, ends, length] of [
      [[0, 0, 3], ['surface', 'top'], 5],
      [[0, 0, -3], ['top', 'surface'], 5],
      [[4, 0, 0], ['east', 'west'], 7],
      [[0, -4, 0], ['north', 'south'], 7],
      [[3, 0, 4], ['surface', 'top'], 6.25],
    ] as const) {
      const [line] = traceFieldLines(uniform(b), [[3, 3, b[2] === 4 ? 0 : 2]]);
      expect(line.ends).toEqual(ends);
      expect(line.closed).toBe(false);
      expect(line.lengthMm).toBeCloseTo(length, 9);
      expect(line.meanFieldG).toBeCloseTo(Math.hypot(...b), 9);
    }
    const [none] = traceFieldLines(uniform([0, 0, 0]), [[3, 3, 2]]);
    expect(none).toMatchObject({ ends: ['inside', 'inside'], lengthMm: 0, meanFieldG: 0 });
    expect([...none.points]).toEqual([3, 3, 2]);
  });

  it('average the field of a field that grows along them', () => {
    // Bz = z / 2 + 1 along straight vertical lines: mean over 0 .. 5 is 2.25.
    const volume = volumeOf(4, 1, uniformHeights(6, 5), (_x, _y, z) => [0, 0, z / 2 + 1]);
    const [line] = traceFieldLines(volume, [[1.5, 1.5, 0]]);
    expect(line.meanFieldG).toBeCloseTo(2.25, 6);
  });

  it('carry the same flux at both feet of a thin tube', () => {
    const map = chargeField(BIPOLE, 160, 0.75);
    const volume = potentialVolume(map, geometricHeights(72, 60, 0.5));
    const sample = fieldSampler(volume);
    const b = new Float64Array(3);
    const flux = (feet: readonly (readonly [number, number, number])[]) => {
      // Area of the quadrangle of feet, times the field in its middle.
      const [p, q, r, s] = feet;
      const area = 0.5 * ((r[0] - p[0]) * (s[1] - q[1]) - (s[0] - q[0]) * (r[1] - p[1]));
      const mean = (c: number) => (p[c] + q[c] + r[c] + s[c]) / 4;
      sample(mean(0), mean(1), 0, b);
      return Math.abs(area * b[2]);
    };
    const centre = (159 * 0.75) / 2;
    for (const [x, y] of [
      [-16, 3],
      [-22, -5],
      [-12, 0],
    ]) {
      const d = 0.4;
      const corners = [
        [-d, -d],
        [d, -d],
        [d, d],
        [-d, d],
      ].map(([u, v]) => [centre + x + u, centre + y + v, 0] as [number, number, number]);
      const lines = traceFieldLines(volume, corners, { errorMm: 1e-4 });
      for (const line of lines) expect(line.closed).toBe(true);
      const far = lines.map((line) => pointsOf(line).at(-1)!);
      expect(flux(far) / flux(corners)).toBeGreaterThan(0.98);
      expect(flux(far) / flux(corners)).toBeLessThan(1.02);
    }
  });

  it('trace 500 lines through 256 x 256 x 128 samples within a second', () => {
    const map = chargeField(BIPOLE, 256, 0.75);
    const volume = potentialVolume(map, geometricHeights(128, 150, 0.5));
    const seeds = seedsByFlux(volume, 500);
    const start = performance.now();
    const lines = traceFieldLines(volume, seeds);
    const seconds = (performance.now() - start) / 1000;
    expect(lines.filter(({ closed }) => closed).length).toBeGreaterThan(250);
    expect(lines.every(({ ends }) => !ends.includes('inside'))).toBe(true);
    // Measured 0.1 s on an idle machine; the bench holds it to 1 s, here others may be running.
    expect(seconds).toBeLessThan(5);
  });
});

describe('seeds of lines', () => {
  const map = chargeField(BIPOLE, 64, 2);
  const volume = potentialVolume(map, uniformHeights(2, 2));

  it('are as many as asked, reproducible, and others with another seed', () => {
    const seeds = seedsByFlux(volume, 200, 5);
    expect(seeds).toHaveLength(200);
    expect(seedsByFlux(volume, 200, 5)).toEqual(seeds);
    expect(seedsByFlux(volume, 200, 6)).not.toEqual(seeds);
    for (const [x, y, z] of seeds) {
      expect(Math.min(x, y)).toBeGreaterThanOrEqual(0);
      expect(Math.max(x, y)).toBeLessThanOrEqual(126);
      expect(z).toBe(0);
    }
  });

  it('fall in a part of the map as often as its share of the flux says', () => {
    const share = (inside: (x: number, y: number) => boolean) => {
      let [sum, all] = [0, 0];
      volume.z.slice(0, 64 * 64).forEach((b, i) => {
        all += Math.abs(b);
        if (inside(2 * (i % 64), 2 * Math.floor(i / 64))) sum += Math.abs(b);
      });
      const seeds = seedsByFlux(volume, 4000);
      return seeds.filter(([x, y]) => inside(x, y)).length / 4000 / (sum / all);
    };
    expect(share((x) => x < 63)).toBeCloseTo(1, 1);
    expect(share((x, y) => x < 63 && y < 55)).toBeCloseTo(1, 1);
    expect(share((x, y) => Math.hypot(x - 43, y - 63) < 8)).toBeCloseTo(1, 1);
  });

  it('are none where there is no flux', () => {
    const empty = volumeOf(4, 1, uniformHeights(2, 1), () => [0, 0, 0]);
    expect(seedsByFlux(empty, 10)).toEqual([]);
    expect(() =>
      traceFieldLines(
        volumeOf(1, 1, uniformHeights(2, 1), () => [0, 0, 1]),
        [],
      ),
    ).toThrow(RangeError);
  });
});
