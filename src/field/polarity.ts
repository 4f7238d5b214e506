import type { Grid2 } from '../grid/grid.js';
import { blockMean } from '../grid/rebin.js';
import { gaussianBlur } from '../grid/smooth.js';

/** Field above this many noise deviations counts as signal. */
export const SIGNAL_DEVIATIONS = 3;
/** Standard deviation [pixels] of the average that tells the polarity of weak pixels. */
const BLUR_PIXELS = 3;
/** From this many pixels a side that average is taken of pairs of pixels, which costs an eighth. */
const COARSENED_SIDE = 64;

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
  const factor = Math.min(nx, ny) >= COARSENED_SIDE ? 2 : 1;
  const blocks = blockMean(b, nx, ny, factor);
  const around = gaussianBlur(blocks.values, blocks.nx, blocks.ny, BLUR_PIXELS / factor);
  const leastAround = least * Math.min(1, share);
  const out = new Int8Array(nx * ny);
  for (let y = 0, i = 0; y < ny; y++) {
    const row = blocks.nx * Math.min(blocks.ny - 1, Math.floor(y / factor));
    for (let x = 0; x < nx; x++, i++) {
      if (Number.isNaN(b[i])) continue;
      const column = Math.min(blocks.nx - 1, Math.floor(x / factor));
      const judge = Math.abs(b[i]) >= least ? b[i] : around[row + column];
      if (Math.abs(judge) >= leastAround) out[i] = Math.sign(judge);
    }
  }
  return out;
}
