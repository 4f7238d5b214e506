// Which modes of a surface field still count at a height.
import type { Spectrum2 } from './spectrum.js';
import { columnWeight, wavenumbers } from './wavenumbers.js';

/** A harmonic field above a map, to be evaluated at heights; see `modeVolume`. */
export interface ModeVolumeJob {
  /** Spectrum of the vertical field at height 0, nx x ny points `pixel` apart. */
  readonly spectrum: Spectrum2;
  readonly pixel: number;
  /** Constant of the linear force-free field; 0 for the current-free one. Below every wavenumber. */
  readonly alpha: number;
  /** Uniform vertical field at all heights: the mode k = 0. */
  readonly mean: number;
  readonly heights: Float64Array;
  /** Points wanted, from the first on, and transform points from one to the next. */
  readonly nx: number;
  readonly ny: number;
  readonly stride: number;
  /** Modes are left out as long as all of them together stay below this, in the field's unit. */
  readonly tolerance: number;
}

/** Rings of wavenumbers that the sums of amplitudes are kept in. */
const RINGS = 2048;

/**
 * For each height the largest wavenumber k that counts: the amplitudes of all modes beyond it, damped
 * as exp(-l z) with l = sqrt(k^2 - alpha^2), sum to at most the tolerance, so that no component is off
 * by more (its gain |l kx + alpha ky| / k^2 is at most 1).
 */
export function largestWavenumbers(job: ModeVolumeJob): Float64Array {
  const { spectrum, pixel, alpha, heights, tolerance } = job;
  const { nx, ny, columns, re, im } = spectrum;
  const kx = wavenumbers(nx, pixel);
  const ky = wavenumbers(ny, pixel);
  const top = Math.hypot(Math.PI / pixel, Math.PI / pixel);
  const sums = new Float64Array(RINGS + 1);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < columns; x++) {
      const i = x + columns * y;
      const ring = Math.floor((RINGS / top) * Math.hypot(kx[x], ky[y]));
      const size = Math.sqrt(re[i] * re[i] + im[i] * im[i]);
      sums[ring] += (columnWeight(x, nx) * size) / (nx * ny);
    }
  }
  return heights.map((height) => {
    let tail = 0;
    for (let ring = RINGS; ring >= 0; ring--) {
      const least = (top / RINGS) * ring;
      const l = Math.sqrt(Math.max(0, least * least - alpha * alpha));
      tail += sums[ring] * Math.exp(-l * height);
      // The upper edge of this ring, the last that is left in, and a little for rounding.
      if (tail > tolerance) return (top / RINGS) * (ring + 1) * (1 + 1e-9);
    }
    return 0;
  });
}
