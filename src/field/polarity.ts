import type { Grid2 } from '../grid/grid.js';
import { gaussianBlur } from '../grid/smooth.js';

/** Field above this many noise deviations counts as signal. */
export const SIGNAL_DEVIATIONS = 3;
/** Standard deviation [pixels] of the average that tells the polarity of weak pixels. */
const BLUR_PIXELS = 3;

/**
 * Polarity of every pixel: 1, -1, or 0 where nothing tells. A pixel of three deviations of its noise has
 * its own sign; a weaker one that of its surroundings, a Gaussian average over some hundred pixels,
 * where that stands three deviations above its own noise. Summing the field itself, with its noise, over
 * the pixels of one polarity then gives the diffuse flux too, and no rectified noise.
 * `cellMm2` is the area over which noise is shared (see FieldNoise). Missing pixels are 0.
 */
export function polarityMap(
  radial: Grid2<'G'>,
  noise: { readonly pixelDeviationG: number; readonly cellMm2: number },
): Int8Array {
  const [ny, nx] = radial.values.shape;
  const b = radial.values.data;
  const least = SIGNAL_DEVIATIONS * noise.pixelDeviationG;
  const averaged = 4 * Math.PI * BLUR_PIXELS ** 2 * radial.pixelMm ** 2;
  const share = Math.sqrt(Math.max(noise.cellMm2, radial.pixelMm ** 2) / averaged);
  const around = gaussianBlur(b, nx, ny, BLUR_PIXELS);
  const leastAround = least * Math.min(1, share);
  const out = new Int8Array(nx * ny);
  for (let i = 0; i < out.length; i++) {
    if (Number.isNaN(b[i])) continue;
    const judge = Math.abs(b[i]) >= least ? b[i] : around[i];
    if (Math.abs(judge) >= leastAround) out[i] = Math.sign(judge);
  }
  return out;
}
