import type { Grid2 } from '../grid/grid.js';
import { type CellMap, cellMeans } from '../grid/rebin.js';
import { gaussianSpread, WIDTH_PER_DEVIATION } from '../grid/smooth.js';
import { MAXWELL_PER_GAUSS_SQUARE_MEGAMETRE } from '../units.js';

/** Field that counts as strong [G], width of the weight [Mm]: Schrijver 2007, ApJ 655, L117. */
const STRONG_FIELD_G = 150;
const WEIGHT_WIDTH_MM = 15;
/**
 * The published measure is defined on 1.98 arcsec pixels, 1.44 Mm at disk centre: the touch of the two
 * polarities is within one such pixel, so finer maps are averaged to just that size first. Where the
 * pixels fall matters, so the average over four grids half a pixel apart is taken.
 */
const DEFINING_PIXEL_MM = 1.44;
const GRIDS = [
  [0, 0],
  [0.5, 0],
  [0, 0.5],
  [0.5, 0.5],
] as const;

/** Pixels of `bitmap` or with one among their eight neighbours. */
function dilate(bitmap: Uint8Array, nx: number, ny: number): Uint8Array {
  const out = new Uint8Array(bitmap.length);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      if (!bitmap[x + nx * y]) continue;
      for (let j = Math.max(0, y - 1); j <= Math.min(ny - 1, y + 1); j++) {
        for (let i = Math.max(0, x - 1); i <= Math.min(nx - 1, x + 1); i++) out[i + nx * j] = 1;
      }
    }
  }
  return out;
}

/** Flux near the line and how it scatters with the place of the pixels [Mx]. */
export interface NearLineFlux {
  readonly mean: number;
  readonly least: number;
  readonly most: number;
}

/**
 * Unsigned flux [Mx] near strong-gradient inversion lines (Schrijver 2007, ApJ 655, L117): where
 * regions above 150 G of both signs, each grown by one 1.44 Mm pixel, overlap; that map convolved with a
 * Gaussian of 15 Mm full width and unit area weights |Bz|. Missing pixels carry none. One result for each
 * of `shiftsG`, which move the 150 G, for intervals. Of maps with coarser pixels those are taken.
 */
export function nearLineFlux(radial: Grid2<'G'>, shiftsG: readonly number[] = [0]): NearLineFlux[] {
  const [ny, nx] = radial.values.shape;
  const cell = Math.max(1, DEFINING_PIXEL_MM / radial.pixelMm);
  const grids = cellMeans(radial.values.data, nx, ny, cell, GRIDS);
  const pixelMm = radial.pixelMm * cell;
  return shiftsG.map((shift) => {
    const fluxes = grids.map((grid) => fluxOnGrid(grid, pixelMm, STRONG_FIELD_G + shift));
    return {
      mean: fluxes.reduce((a, b) => a + b) / fluxes.length,
      least: Math.min(...fluxes),
      most: Math.max(...fluxes),
    };
  });
}

function fluxOnGrid(cells: CellMap, pixelMm: number, thresholdG: number): number {
  const touch = touching(cells, thresholdG);
  if (!touch) return 0;
  const deviation = WEIGHT_WIDTH_MM / WIDTH_PER_DEVIATION / pixelMm;
  const weight = gaussianSpread(touch, cells.nx, deviation);
  let sum = 0;
  for (let i = 0; i < weight.length; i++) {
    const b = cells.values[i];
    if (!Number.isNaN(b)) sum += weight[i] * Math.abs(b);
  }
  return sum * pixelMm * pixelMm * MAXWELL_PER_GAUSS_SQUARE_MEGAMETRE;
}

/** 1 where both signs above the threshold touch, else 0; undefined where they never do. */
function touching({ values, nx, ny }: CellMap, thresholdG: number): Float64Array | undefined {
  const above = new Uint8Array(values.length);
  const below = new Uint8Array(values.length);
  for (let i = 0; i < values.length; i++) {
    if (values[i] > thresholdG) above[i] = 1;
    else if (values[i] < -thresholdG) below[i] = 1;
  }
  const positive = dilate(above, nx, ny);
  const negative = dilate(below, nx, ny);
  const touch = new Float64Array(values.length);
  for (let i = 0; i < values.length; i++) touch[i] = positive[i] * negative[i];
  return touch.includes(1) ? touch : undefined;
}
