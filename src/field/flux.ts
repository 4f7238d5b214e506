import type { Grid2 } from '../grid/grid.js';
import { MAXWELL_PER_GAUSS_SQUARE_MEGAMETRE } from '../units.js';

/** Field from which a pixel belongs to spot or strong plage [G]: common practice, no source. */
export const STRONG_AREA_FIELD_G = 500;

/** Fluxes [Mx] of both signs (negative as a positive number), their pixel counts, peaks [G] and centroids [pixels]. */
export interface FluxSums {
  readonly positiveMx: number;
  readonly negativeMx: number;
  readonly positivePixels: number;
  readonly negativePixels: number;
  readonly peakPositiveG: number;
  readonly peakNegativeG: number;
  /** Flux-weighted centres of the two polarities; NaN where one is empty. */
  readonly positiveCenter: readonly [number, number];
  readonly negativeCenter: readonly [number, number];
}

/** Sums a radial field [G] by the polarity of its pixels (`polarityMap`); NaN is left out. */
export function sumFlux(radial: Grid2<'G'>, polarity: Int8Array): FluxSums {
  const [ny, nx] = radial.values.shape;
  const b = radial.values.data;
  const sums = { up: 0, upX: 0, upY: 0, upN: 0, down: 0, downX: 0, downY: 0, downN: 0 };
  let peakPositiveG = 0;
  let peakNegativeG = 0;
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const value = b[x + nx * y];
      if (Number.isNaN(value)) continue;
      if (value > peakPositiveG) peakPositiveG = value;
      if (value < peakNegativeG) peakNegativeG = value;
      const sign = polarity[x + nx * y];
      if (sign > 0) {
        sums.up += value;
        sums.upX += value * x;
        sums.upY += value * y;
        sums.upN++;
      } else if (sign < 0) {
        sums.down -= value;
        sums.downX -= value * x;
        sums.downY -= value * y;
        sums.downN++;
      }
    }
  }
  const scale = radial.pixelMm * radial.pixelMm * MAXWELL_PER_GAUSS_SQUARE_MEGAMETRE;
  return {
    positiveMx: sums.up * scale,
    negativeMx: sums.down * scale,
    positivePixels: sums.upN,
    negativePixels: sums.downN,
    peakPositiveG,
    peakNegativeG,
    positiveCenter: [sums.upX / sums.up, sums.upY / sums.up],
    negativeCenter: [sums.downX / sums.down, sums.downY / sums.down],
  };
}

/** Areas [Mm^2] where the field reaches each threshold [G]. */
export function areasAbove(radial: Grid2<'G'>, thresholdsG: readonly number[]): number[] {
  const counts = thresholdsG.map(() => 0);
  const least = Math.min(...thresholdsG);
  for (const b of radial.values.data) {
    const size = Math.abs(b);
    // Most pixels reach none of them.
    if (!(size >= least)) continue;
    for (let t = 0; t < counts.length; t++) if (size >= thresholdsG[t]) counts[t]++;
  }
  return counts.map((count) => count * radial.pixelMm * radial.pixelMm);
}
