import { PIXEL_GOOD, PIXEL_MISSING, PIXEL_OFF_LIMB, PIXEL_OUTSIDE_IMAGE } from './patch.js';
import {
  columnVectors,
  locateLine,
  makeLine,
  nativeFromPatch,
  patchVectorToPixel,
  type Source,
  type TargetGrid,
} from './patch-to-image.js';
import { sampleBilinear, sampleCubic } from './sample.js';

/**
 * Samples per cell side keep this spacing or less, in source pixels. At a half every source pixel gets
 * its share of the bilinear samples within 1 %; the cubic costs more and is used in nearly native cells.
 */
const BILINEAR_SPACING = 0.5;
const CUBIC_SPACING = 0.75;
/** A cell this wide in source pixels or less needs one sample: no finer detail is in the source. */
const SINGLE_SAMPLE_WIDTH = 1.05;
/** Below this width the interpolation's own blur would matter, so the cubic is used. */
const CUBIC_WIDTH = 2;
const MOST_SAMPLES = 128;
/**
 * No more samples than this in all, some seconds: a header that claims minute pixels must not hang the
 * program. A picture of 4096 pixels a side on a patch of 2048 needs a third of it.
 */
const MOST_SAMPLES_IN_ALL = 1.2e8;
const PROBES = 9;

/** Widest extent of a target cell along its two sides, in source pixels, over a grid of probes. */
function cellWidths(grid: TargetGrid, source: Source, affine: Float64Array): [number, number] {
  const { nx, ny, pixelMm, frame } = grid;
  const widths: [number, number] = [0, 0];
  const at = (xMm: number, yMm: number): Float64Array | undefined => {
    const sine = yMm / frame.radiusMm;
    const phi = xMm / frame.radiusMm;
    if (Math.abs(sine) >= 1) return undefined;
    const cosine = Math.sqrt(1 - sine * sine);
    const pixel = new Float64Array(2);
    const [a, b, c] = [cosine * Math.sin(phi), sine, cosine * Math.cos(phi)];
    const z = a * frame.west[2] + b * frame.north[2] + c * frame.up[2];
    const isSeen = z * grid.view.distanceRadii > 1;
    return isSeen && patchVectorToPixel(affine, source, a, b, c, pixel) ? pixel : undefined;
  };
  for (let j = 0; j < PROBES; j++) {
    for (let i = 0; i < PROBES; i++) {
      const xMm = (i / (PROBES - 1) - 0.5) * (nx - 1) * pixelMm;
      const yMm = (j / (PROBES - 1) - 0.5) * (ny - 1) * pixelMm;
      const here = at(xMm, yMm);
      [at(xMm + 0.01 * pixelMm, yMm), at(xMm, yMm + 0.01 * pixelMm)].forEach((there, axis) => {
        if (!here || !there) return;
        const width = 100 * Math.hypot(there[0] - here[0], there[1] - here[1]);
        widths[axis] = Math.max(widths[axis], width);
      });
    }
  }
  return widths;
}

/** Samples along a cell side of `width` source pixels, in a grid of `cells`. */
function samplesFor(width: number, isCubic: boolean, cells: number): number {
  if (width <= SINGLE_SAMPLE_WIDTH) return 1;
  const spacing = isCubic ? CUBIC_SPACING : BILINEAR_SPACING;
  const most = Math.max(1, Math.floor(Math.sqrt(MOST_SAMPLES_IN_ALL / cells)));
  return Math.min(MOST_SAMPLES, most, Math.ceil(width / spacing));
}

/** Result of `resample`: mean field per cell, NaN exactly where the mask is not PIXEL_GOOD. */
export interface Resampled {
  readonly field: Float64Array;
  readonly mask: Uint8Array;
}

/**
 * Mean of the source field over every cell of an equal-area grid. A cell is covered by samples that
 * stand for equal areas on the sphere, close enough that no source pixel is passed over, so the sum
 * of field times cell area equals the source's integral with each of its pixels at its true area.
 * Between source pixels the field is cubic where the grid is about as fine as the source, bilinear in
 * coarser cells; NaN is left out of both. A cell keeps its value when at least half of its samples
 * have one; otherwise the mask names the commonest reason.
 */
export function resample(grid: TargetGrid, source: Source): Resampled {
  const affine = nativeFromPatch(grid, source);
  const [widthX, widthY] = cellWidths(grid, source, affine);
  const isCubic = Math.max(widthX, widthY) < CUBIC_WIDTH;
  const { nx, ny } = grid;
  const kx = samplesFor(widthX, isCubic, nx * ny);
  const ky = samplesFor(widthY, isCubic, nx * ny);
  const field = new Float64Array(nx * ny);
  const mask = new Uint8Array(nx * ny);
  const sums = new Float64Array(nx);
  const counts = new Uint16Array(4 * nx);
  const line = makeLine(columnVectors(grid, kx), source, affine);
  const samples = new Float64Array(line.x.length);
  for (let j = 0; j < ny; j++) {
    sums.fill(0);
    counts.fill(0);
    for (let s = 0; s < ky; s++) {
      const yMm = (j + (s + 0.5) / ky - ny / 2) * grid.pixelMm;
      locateLine(grid, source, affine, yMm, line);
      (isCubic ? sampleCubic : sampleBilinear)(source, line.x, line.y, samples);
      addLine(samples, line.x, line.y, source.nx, source.ny, kx, sums, counts);
    }
    for (let i = 0; i < nx; i++) {
      const code = settle(counts, 4 * i, kx * ky);
      mask[i + nx * j] = code;
      field[i + nx * j] = code === PIXEL_GOOD ? sums[i] / counts[4 * i] : Number.NaN;
    }
  }
  return { field, mask };
}

/**
 * Adds a line of samples to the sums and to the four mask counts of each cell. A sample without a value is
 * behind the limb where its x is NaN, else off the picture or missing in it.
 */
function addLine(
  samples: Float64Array,
  x: Float64Array,
  y: Float64Array,
  width: number,
  height: number,
  kx: number,
  sums: Float64Array,
  counts: Uint16Array,
): void {
  let at = 0;
  for (let i = 0; i < sums.length; i++) {
    for (let s = 0; s < kx; s++, at++) {
      const value = samples[at];
      if (!Number.isNaN(value)) {
        sums[i] += value;
        counts[4 * i + PIXEL_GOOD]++;
      } else if (Number.isNaN(x[at])) {
        counts[4 * i + PIXEL_OFF_LIMB]++;
      } else {
        const isOutside =
          x[at] < -0.5 || y[at] < -0.5 || x[at] > width - 0.5 || y[at] > height - 0.5;
        counts[4 * i + (isOutside ? PIXEL_OUTSIDE_IMAGE : PIXEL_MISSING)]++;
      }
    }
  }
}

/** Mask code of a cell from its four counts, starting at `at`. */
function settle(counts: Uint16Array, at: number, total: number): number {
  if (2 * counts[at] >= total) return PIXEL_GOOD;
  let code = PIXEL_MISSING;
  for (const other of [PIXEL_OFF_LIMB, PIXEL_OUTSIDE_IMAGE])
    if (counts[at + other] > counts[at + code]) code = other;
  return code;
}
