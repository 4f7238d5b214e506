import { describe, expect, it } from 'vitest';
import { geometricHeights, uniformHeights } from '../../src/field/heights.js';
import {
  type FieldVolume,
  potentialVolume,
  potentialVolumeDouble,
  type VolumeOptions,
} from '../../src/field/volume.js';
import { realFft2, transformKernel } from '../../src/grid/fft.js';
import { type Grid2, makeGrid } from '../../src/grid/grid.js';
import { type ModeVolumeJob, modeVolume, portableVolume } from '../../src/grid/mode-volume.js';
import { passLengths, volumeKernelPresent } from '../../src/grid/volume-kernel.js';
import { bandLength } from '../../src/grid/volume-plan.js';
import { BIPOLE, chargeField, chargeVector } from '../support/charges.js';

const PERIODIC: VolumeOptions = { sides: 'periodic' };

function mapOf(nx: number, ny: number, pixelMm: number, at: (x: number, y: number) => number) {
  const data = Float64Array.from({ length: nx * ny }, (_, i) => at(i % nx, Math.floor(i / nx)));
  return makeGrid(data, nx, ny, 'G', pixelMm);
}

/** White noise: every mode counts at the surface. */
function noiseMap(nx: number, ny: number, pixelMm = 0.5): Grid2<'G'> {
  let state = 7;
  return mapOf(nx, ny, pixelMm, () => {
    state = (state * 48271) % 2147483647;
    return 1000 * (state / 2 ** 30 - 1);
  });
}

function largestDifference(a: ArrayLike<number>, b: ArrayLike<number>): number {
  expect(a.length).toBe(b.length);
  let largest = 0;
  for (let i = 0; i < a.length; i++) {
    const difference = Math.abs(a[i] - b[i]);
    if (!(difference <= largest)) largest = difference;
  }
  return largest;
}

/** The sums themselves, mode by mode; the Nyquist mode of an even side has no odd derivative. */
function directField(map: Grid2<'G'>, heights: Float64Array, alpha: number) {
  const [ny, nx] = map.values.shape;
  const { re, im, columns } = realFft2(map.values.data, nx, ny);
  const signed = (i: number, n: number) => (2 * i <= n ? i : i - n);
  const volume = { x: [] as number[], y: [] as number[], z: [] as number[] };
  for (const z of heights) {
    for (let j = 0; j < ny; j++) {
      for (let i = 0; i < nx; i++) {
        const b = [0, 0, 0];
        for (let q = 0; q < ny; q++) {
          for (let p = 0; p < nx; p++) {
            const whole = p < columns;
            const at = whole ? p + columns * q : nx - p + columns * ((ny - q) % ny);
            const [cr, ci] = [re[at] / (nx * ny), (whole ? 1 : -1) * (im[at] / (nx * ny))];
            const kx = (2 * Math.PI * signed(p, nx)) / (nx * map.pixelMm);
            const ky = (2 * Math.PI * signed(q, ny)) / (ny * map.pixelMm);
            const [ox, oy] = [2 * p === nx ? 0 : kx, 2 * q === ny ? 0 : ky];
            const k2 = kx * kx + ky * ky;
            const l = Math.sqrt(Math.max(0, k2 - alpha * alpha));
            const angle = 2 * Math.PI * ((p * i) / nx + (q * j) / ny);
            const damping = k2 > 0 ? Math.exp(-l * z) : 1;
            const real = damping * (cr * Math.cos(angle) - ci * Math.sin(angle));
            const imaginary = damping * (cr * Math.sin(angle) + ci * Math.cos(angle));
            b[2] += real;
            if (k2 === 0) continue;
            b[0] += ((ox * l - oy * alpha) / k2) * imaginary;
            b[1] += ((oy * l + ox * alpha) / k2) * imaginary;
          }
        }
        volume.x.push(b[0]);
        volume.y.push(b[1]);
        volume.z.push(b[2]);
      }
    }
  }
  return volume;
}

function jobOf(map: Grid2<'G'>, heights: Float64Array, more: Partial<ModeVolumeJob> = {}) {
  const [ny, nx] = map.values.shape;
  const spectrum = realFft2(map.values.data, nx, ny);
  const mean = spectrum.re[0] / (nx * ny);
  const job: ModeVolumeJob = {
    ...{ spectrum, pixel: map.pixelMm, alpha: 0, mean, heights, nx, ny, stride: 1 },
    tolerance: 0.003,
    ...more,
  };
  return job;
}

describe('field volumes', () => {
  it('use the compiled kernels where the transforms do', () => {
    expect(volumeKernelPresent()).toBe(transformKernel() === 'compiled');
  });

  it.each([
    [12, 10, 0],
    [15, 9, 0.2],
    [8, 25, 0.2],
    [1, 6, 0],
    [5, 1, 0.4],
    [16, 2, 0],
  ])('%i x %i with alpha %f equal the sums of all modes', (nx, ny, alpha) => {
    const map = noiseMap(nx, ny);
    const heights = Float64Array.of(0, 0.3, 1.1, 4);
    const want = directField(map, heights, alpha);
    const options = { ...PERIODIC, alphaPerMm: alpha };
    const double = potentialVolumeDouble(map, heights, options);
    const single = potentialVolume(map, heights, options);
    for (const part of ['x', 'y', 'z'] as const) {
      expect(largestDifference(double[part], want[part])).toBeLessThan(1e-9 * 1000);
      expect(largestDifference(single[part], want[part])).toBeLessThan(1e-5 * 1000);
    }
  });

  it('are exact for a single mode, at any height', () => {
    const [nx, ny, h] = [90, 64, 0.5];
    const [kx, ky] = [(2 * Math.PI * 4) / (nx * h), (2 * Math.PI * 3) / (ny * h)];
    const k = Math.hypot(kx, ky);
    const map = mapOf(nx, ny, h, (x, y) => 800 * Math.cos(kx * h * x + ky * h * y));
    const heights = geometricHeights(9, 12, 0.3);
    const volume = potentialVolumeDouble(map, heights, PERIODIC);
    volume.z.forEach((bz, i) => {
      const phase = kx * h * (i % nx) + ky * h * (Math.floor(i / nx) % ny);
      const size = 800 * Math.exp(-k * heights[Math.floor(i / (nx * ny))]);
      const off = Math.max(
        Math.abs(bz - size * Math.cos(phase)),
        Math.abs(volume.x[i] - size * (kx / k) * Math.sin(phase)),
        Math.abs(volume.y[i] - size * (ky / k) * Math.sin(phase)),
      );
      if (off > 800e-9) expect(off, `sample ${i}`).toBeLessThan(800e-9);
    });
  });

  it('give the linear force-free arcade (Nakagawa & Raadu 1972)', () => {
    const [nx, ny, h, b0] = [48, 40, 1, 500];
    const k = (2 * Math.PI * 2) / (nx * h);
    const alpha = 0.9 * ((2 * Math.PI) / (nx * h));
    const l = Math.sqrt(k * k - alpha * alpha);
    const map = mapOf(nx, ny, h, (x) => b0 * Math.sin(k * x * h));
    const heights = uniformHeights(5, 20);
    const volume = potentialVolumeDouble(map, heights, { ...PERIODIC, alphaPerMm: alpha });
    for (let i = 0; i < volume.x.length; i++) {
      const x = (i % nx) * h;
      const damping = b0 * Math.exp(-l * heights[Math.floor(i / (nx * ny))]);
      const off = Math.max(
        Math.abs(volume.x[i] + (l / k) * damping * Math.cos(k * x)),
        Math.abs(volume.y[i] + (alpha / k) * damping * Math.cos(k * x)),
        Math.abs(volume.z[i] - damping * Math.sin(k * x)),
      );
      if (off > b0 * 1e-9) expect(off, `sample ${i}`).toBeLessThan(b0 * 1e-9);
    }
  });

  it.each([0, 0.05])(
    'agree between kernels and portable transform, single and double (alpha %f)',
    (alpha) => {
      const map = noiseMap(120, 96);
      const heights = geometricHeights(14, 40, 0.2);
      const job = jobOf(map, heights, { alpha });
      const slow = portableVolume({ ...job, tolerance: 1e-12 }, (n) => new Float64Array(n));
      const double = modeVolume({ ...job, tolerance: 3e-7 }, 'double');
      const single = modeVolume(job, 'single');
      for (const part of ['x', 'y', 'z'] as const) {
        expect(largestDifference(double[part], slow[part])).toBeLessThan(1e-9 * 1000);
        expect(largestDifference(single[part], slow[part])).toBeLessThan(1e-5 * 1000);
      }
    },
  );

  it('spend small transforms on upper levels', () => {
    const heights = uniformHeights(33, 32);
    const lengths = passLengths(jobOf(noiseMap(240, 240), heights));
    expect(lengths[0]).toBe(240);
    expect(lengths[8]).toBeLessThan(120);
    expect(lengths[32]).toBeLessThan(24);
    expect(lengths).toEqual([...lengths].sort((a, b) => b - a));
    expect(bandLength(512, 10)).toBe(32);
    expect(bandLength(480, 256 - 16)).toBe(480);
    expect(() => bandLength(10, 6)).toThrow(RangeError);
  });

  it('do not depend on the number of threads', () => {
    const map = noiseMap(80, 72);
    const heights = uniformHeights(7, 5);
    const one = potentialVolume(map, heights, { threads: 1 });
    for (const threads of [2, 3]) {
      const more = potentialVolume(map, heights, { threads });
      for (const part of ['x', 'y', 'z'] as const) {
        expect(largestDifference(more[part], one[part])).toBe(0);
      }
    }
  });

  it('take every n-th sample of the full volume', () => {
    const map = noiseMap(50, 45);
    const heights = Float64Array.of(0, 2);
    const full = potentialVolume(map, heights, PERIODIC);
    const some = potentialVolume(map, heights, { ...PERIODIC, every: 4 });
    expect([some.nx, some.ny, some.stepMm]).toEqual([13, 12, 2]);
    for (let n = 0; n < 2; n++) {
      for (let j = 0; j < some.ny; j++) {
        for (let i = 0; i < some.nx; i++) {
          const at = i + some.nx * (j + some.ny * n);
          const same = full.y[4 * i + full.nx * (4 * j + full.ny * n)];
          // Other rows share its transform: the last digits may differ.
          expect(Math.abs(some.y[at] - same)).toBeLessThan(0.001);
        }
      }
    }
  });

  it('give the field of buried charges with open sides (exact)', () => {
    const [n, h] = [192, 1];
    // The field of a balanced bipole: what the images of the padded map add is small in the middle.
    const map = chargeField(BIPOLE, n, h);
    const heights = Float64Array.of(0, 2, 5, 10, 20);
    const volume = potentialVolume(map, heights);
    for (let level = 0; level < heights.length; level++) {
      let [worst, peak] = [0, 0];
      for (let j = 56; j < 136; j += 3) {
        for (let i = 56; i < 136; i += 3) {
          const at = i + n * (j + n * level);
          const [x, y] = [(i + 0.5 - n / 2) * h, (j + 0.5 - n / 2) * h];
          const want = chargeVector(BIPOLE, x, y, heights[level]);
          const got = [volume.x[at], volume.y[at], volume.z[at]];
          got.forEach((b, c) => {
            worst = Math.max(worst, Math.abs(b - want[c]));
          });
          peak = Math.max(peak, Math.hypot(...want));
        }
      }
      // Pixel means instead of point values (1/24 of the second derivative), and the images.
      expect(worst / peak, `at ${heights[level]} Mm`).toBeLessThan(0.005);
    }
  });

  it('are free of divergence: differences vanish as the square of their step', () => {
    const n = 128;
    const h = 0.75;
    const volume = potentialVolumeDouble(chargeField(BIPOLE, n, h), uniformHeights(9, 8 * h));
    const slope = (part: Float64Array, at: number, stride: number, step: number) =>
      (part[at + stride * step] - part[at - stride * step]) / (2 * h * step);
    const divergence = (step: number) => {
      let [worst, largest] = [0, 0];
      for (let k = 2; k < 7; k++) {
        for (let j = 8; j < n - 8; j++) {
          for (let i = 8; i < n - 8; i++) {
            const at = i + n * (j + n * k);
            const dz = slope(volume.z, at, n * n, step);
            const sum = slope(volume.x, at, 1, step) + slope(volume.y, at, n, step) + dz;
            worst = Math.max(worst, Math.abs(sum));
            largest = Math.max(largest, Math.abs(dz));
          }
        }
      }
      return worst / largest;
    };
    expect(divergence(1)).toBeLessThan(0.02);
    expect(divergence(2) / divergence(1)).toBeGreaterThan(3.6);
    expect(divergence(2) / divergence(1)).toBeLessThan(4.2);
  });

  it('agree with SciPy: energy and top-level peak of a 64 x 64 x 24 volume of three charges', () => {
    const [n, h, levels] = [64, 0.5, 24];
    const charges = [
      [1.2e5, -18, 0, 9],
      [-1.0e5, 16, 5, 7],
      [-0.2e5, 2, -14, 5],
    ];
    const map = mapOf(n, n, h, (i, j) => {
      const [x, y] = [(i + 0.5 - n / 2) * h, (j + 0.5 - n / 2) * h];
      return charges.reduce(
        (sum, [q, cx, cy, d]) => sum + (q * d) / ((x - cx) ** 2 + (y - cy) ** 2 + d * d) ** 1.5,
        0,
      );
    });
    const heights = uniformHeights(levels, h * (levels - 1));
    const volume = potentialVolume(map, heights, { ...PERIODIC, withoutMean: true });
    const plane = n * n;
    let energy = 0;
    for (let i = 0; i < volume.x.length; i++) {
      const level = Math.floor(i / plane);
      const weight = level === 0 || level === levels - 1 ? 0.5 : 1;
      energy += weight * (volume.x[i] ** 2 + volume.y[i] ** 2 + volume.z[i] ** 2);
    }
    const joules = (energy * 1e-8 * (h * 1e6) ** 3) / (8e-7 * Math.PI);
    const top = [volume.x, volume.y, volume.z].map((part) => part.slice(-plane).map(Math.abs));
    // numpy 1.24.2, scipy 1.10.1, scipy.fft: irfft2 of the damped spectrum at every level, float32 out.
    expect(joules / 2.926138e24).toBeCloseTo(1, 5);
    expect(Math.max(...top.map((part) => Math.max(...part)))).toBeCloseTo(57.30764, 3);
  });

  it('refuse what cannot be', () => {
    const map = noiseMap(16, 16);
    const at =
      (heights: number[], options: VolumeOptions = {}) =>
      () =>
        potentialVolume(map, Float64Array.from(heights), options);
    expect(at([-1])).toThrow(RangeError);
    expect(at([Number.NaN])).toThrow(RangeError);
    expect(at([1], { alphaPerMm: 1 })).toThrow(/smallest wavenumber/);
    expect(at([1], { every: 0 })).toThrow(RangeError);
    const many: FieldVolume[] = [];
    expect(() => {
      many.push(potentialVolume(noiseMap(512, 512), new Float64Array(3000)));
    }).toThrow(/GiB/);
    expect(many).toEqual([]);
  });
});

describe('heights', () => {
  it('are uniform or grow by one factor, and end at the top', () => {
    expect([...uniformHeights(5, 8)]).toEqual([0, 2, 4, 6, 8]);
    const heights = geometricHeights(20, 100, 0.5);
    expect(heights[1]).toBe(0.5);
    expect(heights[19]).toBe(100);
    const steps = Array.from({ length: 19 }, (_, i) => heights[i + 1] - heights[i]);
    for (let i = 1; i < 19; i++)
      expect(steps[i] / steps[i - 1]).toBeCloseTo(steps[1] / steps[0], 9);
    expect([...geometricHeights(3, 2, 1)]).toEqual([0, 1, 2]);
    expect(() => geometricHeights(10, 3, 1)).toThrow(RangeError);
    expect(() => uniformHeights(0, 3)).toThrow(RangeError);
  });
});
