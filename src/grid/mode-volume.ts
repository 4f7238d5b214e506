// Volumes of a harmonic field above a map, by the compiled kernels or the portable transform.
import { emptySpectrum, inverseRealFft2, type Spectrum2 } from './fft.js';
import { kernelVolume, type ModeVolume, volumeKernelPresent } from './volume-kernel.js';
import { largestWavenumbers, type ModeVolumeJob } from './volume-modes.js';
import type { Precision } from './volume-plan.js';
import { derivativeWavenumbers, wavenumbers } from './wavenumbers.js';

export type { ModeVolume } from './volume-kernel.js';
export type { ModeVolumeJob } from './volume-modes.js';
export type { Precision } from './volume-plan.js';

/**
 * Evaluates the (linear) force-free field above a map at the heights of a job: for each mode b of the
 * vertical field, with l = sqrt(k^2 - alpha^2),
 *   Bz = b exp(-l z), Bx = i (-kx l + ky alpha) / k^2 Bz, By = i (-ky l - kx alpha) / k^2 Bz
 * (Nakagawa & Raadu 1972, Sol. Phys. 25, 127; Alissandrakis 1981, A&A 100, 197). Sample (i, j) of level
 * n is element i + nx (j + ny n), taken at transform point (stride i, stride j). Modes that are damped
 * below the tolerance are left out and cost nothing. The result does not depend on `threads`; it may
 * lie in shared memory.
 */
export function modeVolume(
  job: ModeVolumeJob,
  precision: Precision,
  threads?: number,
): ModeVolume<Float32Array> | ModeVolume<Float64Array> {
  if (!(fits(job.nx, job.stride, job.spectrum.nx) && fits(job.ny, job.stride, job.spectrum.ny))) {
    throw new RangeError(`${job.nx} x ${job.ny} samples are more than the transform has`);
  }
  if (volumeKernelPresent()) return kernelVolume(job, precision, threads);
  return precision === 'single'
    ? portableVolume(job, (length) => new Float32Array(length))
    : portableVolume(job, (length) => new Float64Array(length));
}

/** The same with the transforms of fft.ts, whole ones at every height: slower, and independent. */
export function portableVolume<A extends Float32Array | Float64Array>(
  job: ModeVolumeJob,
  make: (length: number) => A,
): ModeVolume<A> {
  const { nx, ny, heights, spectrum } = job;
  const samples = nx * ny * heights.length;
  const out = { x: make(samples), y: make(samples), z: make(samples) };
  const damped = [0, 1, 2].map(() => emptySpectrum(spectrum.nx, spectrum.ny));
  const plane = new Float64Array(spectrum.nx * spectrum.ny);
  largestWavenumbers(job).forEach((largest, level) => {
    dampModes(job, heights[level], largest, damped);
    [out.x, out.y, out.z].forEach((component, part) => {
      inverseRealFft2(damped[part], plane);
      const first = nx * ny * level;
      for (let y = 0; y < ny; y++) {
        const row = spectrum.nx * job.stride * y;
        for (let x = 0; x < nx; x++) component[first + x + nx * y] = plane[row + job.stride * x];
      }
    });
  });
  return out;
}

/** Spectra of the three components at one height. */
function dampModes(
  { spectrum, pixel, alpha, mean }: ModeVolumeJob,
  height: number,
  largest: number,
  [bx, by, bz]: readonly Spectrum2[],
): void {
  const { nx, ny, columns, re, im } = spectrum;
  const [kx, ky] = [wavenumbers(nx, pixel), wavenumbers(ny, pixel)];
  const [oddX, oddY] = [derivativeWavenumbers(nx, pixel), derivativeWavenumbers(ny, pixel)];
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < columns; x++) {
      const i = x + columns * y;
      const square = kx[x] * kx[x] + ky[y] * ky[y];
      const counts = square > 0 && square <= largest * largest;
      const l = counts ? Math.sqrt(square - alpha * alpha) : 0;
      const damping = counts ? Math.exp(-l * height) : 0;
      const gx = counts ? (oddY[y] * alpha - oddX[x] * l) / square : 0;
      const gy = counts ? -(oddX[x] * alpha + oddY[y] * l) / square : 0;
      bz.re[i] = damping * re[i];
      bz.im[i] = damping * im[i];
      bx.re[i] = -gx * bz.im[i];
      bx.im[i] = gx * bz.re[i];
      by.re[i] = -gy * bz.im[i];
      by.im[i] = gy * bz.re[i];
    }
  }
  bz.re[0] = mean * nx * ny;
}

function fits(samples: number, stride: number, points: number): boolean {
  return samples >= 1 && (samples - 1) * stride < points;
}
