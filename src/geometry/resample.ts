import { worldFromSurface } from './image-on-sun.js';
import { PIXEL_GOOD, PIXEL_MISSING, PIXEL_OFF_LIMB, PIXEL_OUTSIDE_IMAGE } from './patch.js';
import type { PatchFrame } from './patch-frame.js';
import { projectNative } from './projection.js';
import { sampleBilinear, sampleCubic } from './sample.js';
import type { ViewFrame } from './solar-frame.js';
import type { SolarMap } from './solar-map.js';

/** The target: a patch plane cut into square pixels. */
export interface TargetGrid {
  readonly frame: PatchFrame;
  readonly view: ViewFrame;
  readonly nx: number;
  readonly ny: number;
  readonly pixelMm: number;
}

type Source = Pick<SolarMap, 'nx' | 'ny' | 'values' | 'geometry'>;

/**
 * Affine map from a unit vector in patch axes (west, north, up) to the image's native vector: nine
 * numbers by rows, then the offset. With it a patch pixel reaches the image without trigonometry.
 */
export function nativeFromPatch(grid: TargetGrid, source: Source): Float64Array {
  const { matrix: m, offset } = worldFromSurface(grid.view, source.geometry);
  const r = source.geometry.wcs.rotation;
  const axes = [grid.frame.west, grid.frame.north, grid.frame.up];
  const out = new Float64Array(12);
  for (let row = 0; row < 3; row++) {
    for (let k = 0; k < 3; k++) {
      const turn = r[3 * row + k];
      out[9 + row] += turn * offset[k];
      for (let axis = 0; axis < 3; axis++) {
        const [x, y, z] = axes[axis];
        out[3 * row + axis] += turn * (m[3 * k] * x + m[3 * k + 1] * y + m[3 * k + 2] * z);
      }
    }
  }
  return out;
}

const plane = new Float64Array(2);

/** Image pixel of a patch-axes unit vector, written to `out`; false where the projection has none. */
export function patchVectorToPixel(
  affine: Float64Array,
  source: Source,
  a: number,
  b: number,
  c: number,
  out: Float64Array,
): boolean {
  const { wcs } = source.geometry;
  const l = affine[0] * a + affine[1] * b + affine[2] * c + affine[9];
  const m = affine[3] * a + affine[4] * b + affine[5] * c + affine[10];
  const n = affine[6] * a + affine[7] * b + affine[8] * c + affine[11];
  if (!projectNative(wcs.projection, wcs.lambda, l, m, n, plane)) return false;
  const i = wcs.backward;
  out[0] = wcs.originX + i[0] * plane[0] + i[1] * plane[1];
  out[1] = wcs.originY + i[2] * plane[0] + i[3] * plane[1];
  return true;
}

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

function samplesFor(width: number, isCubic: boolean): number {
  if (width <= SINGLE_SAMPLE_WIDTH) return 1;
  const spacing = isCubic ? CUBIC_SPACING : BILINEAR_SPACING;
  return Math.min(MOST_SAMPLES, Math.ceil(width / spacing));
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
  const kx = samplesFor(widthX, isCubic);
  const ky = samplesFor(widthY, isCubic);
  const { nx, ny } = grid;
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

/** Sine and cosine of the longitude of every sample column, interleaved. */
function columnVectors(grid: TargetGrid, kx: number): Float64Array {
  const count = grid.nx * kx;
  const columns = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    const phi = (((i + 0.5) / kx - grid.nx / 2) * grid.pixelMm) / grid.frame.radiusMm;
    columns[2 * i] = Math.sin(phi);
    columns[2 * i + 1] = Math.cos(phi);
  }
  return columns;
}

/** A line of samples across the patch: where each meets the image, x NaN behind the limb. */
interface SampleLine {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Sine and cosine of each sample's longitude, interleaved. */
  readonly columns: Float64Array;
  /** For TAN: rows of `tangentRows`; absent for other projections. */
  readonly tangent?: Float64Array;
}

function makeLine(columns: Float64Array, source: Source, affine: Float64Array): SampleLine {
  const count = columns.length / 2;
  const line = { x: new Float64Array(count), y: new Float64Array(count), columns };
  const isTangent = source.geometry.wcs.projection === 'TAN';
  return isTangent ? { ...line, tangent: tangentRows(source, affine) } : line;
}

/**
 * Image x times n, image y times n, and the native n itself, as three affine rows (four numbers each) of
 * the sample's patch-axes vector: for TAN pixel coordinates are ratios of these.
 */
function tangentRows(source: Source, affine: Float64Array): Float64Array {
  const { originX, originY, backward: i } = source.geometry.wcs;
  const rows = new Float64Array(12);
  for (let k = 0; k < 4; k++) {
    const [l, m, n] = k < 3 ? [0, 3, 6].map((row) => affine[row + k]) : affine.subarray(9);
    rows[k] = originX * n + i[0] * m - i[1] * l;
    rows[4 + k] = originY * n + i[2] * m - i[3] * l;
    rows[8 + k] = n;
  }
  return rows;
}

/** Outside of any picture. */
const NOWHERE = -1e9;
const pixel = new Float64Array(2);

/** Finds where the samples at height `yMm` meet the image. */
function locateLine(
  grid: TargetGrid,
  source: Source,
  affine: Float64Array,
  yMm: number,
  line: SampleLine,
): void {
  const { x, y, columns } = line;
  const { frame, view } = grid;
  const sine = yMm / frame.radiusMm;
  if (Math.abs(sine) >= 1) {
    x.fill(Number.NaN);
    return;
  }
  const cosine = Math.sqrt(1 - sine * sine);
  if (line.tangent) locateTangent(line.tangent, sine, cosine, x, y, columns);
  else
    for (let i = 0; i < x.length; i++) {
      const west = cosine * columns[2 * i];
      const up = cosine * columns[2 * i + 1];
      const isReached = patchVectorToPixel(affine, source, west, sine, up, pixel);
      x[i] = isReached ? pixel[0] : NOWHERE;
      y[i] = isReached ? pixel[1] : NOWHERE;
    }
  const horizon = 1 / view.distanceRadii - sine * frame.north[2];
  hideBehindLimb(cosine * frame.west[2], cosine * frame.up[2], horizon, x, columns);
}

// The kernels below take plain arrays and numbers only: with objects to take apart, the engine was seen
// to leave them unoptimised, fifteen times slower.

function locateTangent(
  rows: Float64Array,
  sine: number,
  cosine: number,
  x: Float64Array,
  y: Float64Array,
  columns: Float64Array,
): void {
  const x0 = rows[1] * sine + rows[3];
  const x1 = rows[0] * cosine;
  const x2 = rows[2] * cosine;
  const y0 = rows[5] * sine + rows[7];
  const y1 = rows[4] * cosine;
  const y2 = rows[6] * cosine;
  const n0 = rows[9] * sine + rows[11];
  const n1 = rows[8] * cosine;
  const n2 = rows[10] * cosine;
  for (let k = 0; k < x.length; k++) {
    const sin = columns[2 * k];
    const cos = columns[2 * k + 1];
    const n = n0 + n1 * sin + n2 * cos;
    x[k] = n > 0 ? (x0 + x1 * sin + x2 * cos) / n : NOWHERE;
    y[k] = n > 0 ? (y0 + y1 * sin + y2 * cos) / n : NOWHERE;
  }
}

function hideBehindLimb(
  west: number,
  up: number,
  horizon: number,
  x: Float64Array,
  columns: Float64Array,
): void {
  for (let i = 0; i < x.length; i++)
    if (west * columns[2 * i] + up * columns[2 * i + 1] <= horizon) x[i] = Number.NaN;
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

/** Unit vectors to the observer in each pixel's own frame: x west, y north along the patch, z up. */
export function observerDirections(grid: TargetGrid): {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
} {
  const { nx, ny, frame, view } = grid;
  const x = new Float64Array(nx * ny);
  const y = new Float64Array(nx * ny);
  const z = new Float64Array(nx * ny);
  const columns = columnVectors(grid, 1);
  const d = view.distanceRadii;
  const [ow, on, ou] = [d * frame.west[2], d * frame.north[2], d * frame.up[2]];
  for (let j = 0; j < ny; j++) {
    const raw = ((j + 0.5 - ny / 2) * grid.pixelMm) / frame.radiusMm;
    const sine = Math.max(-1, Math.min(1, raw));
    const cosine = Math.sqrt(1 - sine * sine);
    for (let i = 0; i < nx; i++) {
      const sinPhi = columns[2 * i];
      const cosPhi = columns[2 * i + 1];
      // Towards the observer in patch axes, then along the axes at this pixel.
      const w = ow - cosine * sinPhi;
      const n = on - sine;
      const u = ou - cosine * cosPhi;
      const length = Math.sqrt(w * w + n * n + u * u);
      const radial = w * sinPhi + u * cosPhi;
      const p = i + nx * j;
      x[p] = (w * cosPhi - u * sinPhi) / length;
      y[p] = (n * cosine - radial * sine) / length;
      z[p] = (radial * cosine + n * sine) / length;
    }
  }
  return { x, y, z };
}
