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

/** Samples per cell side keep this spacing or less, in source pixels. */
const SAMPLE_SPACING = 0.75;
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

function samplesFor(width: number): number {
  if (width <= SINGLE_SAMPLE_WIDTH) return 1;
  return Math.min(MOST_SAMPLES, Math.ceil(width / SAMPLE_SPACING));
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
  const kx = samplesFor(widthX);
  const ky = samplesFor(widthY);
  const isCubic = Math.max(widthX, widthY) < CUBIC_WIDTH;
  const { nx, ny } = grid;
  const field = new Float64Array(nx * ny);
  const mask = new Uint8Array(nx * ny);
  const sums = new Float64Array(nx);
  const counts = new Uint16Array(4 * nx);
  const columns = columnVectors(grid, kx);
  for (let j = 0; j < ny; j++) {
    sums.fill(0);
    counts.fill(0);
    for (let s = 0; s < ky; s++) {
      const yMm = (j + (s + 0.5) / ky - ny / 2) * grid.pixelMm;
      sampleRow(grid, source, affine, yMm, columns, kx, isCubic, sums, counts);
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

const pixel = new Float64Array(2);

/** Adds one line of samples at height `yMm` to the sums and to the four mask counts of each cell. */
function sampleRow(
  grid: TargetGrid,
  source: Source,
  affine: Float64Array,
  yMm: number,
  columns: Float64Array,
  kx: number,
  isCubic: boolean,
  sums: Float64Array,
  counts: Uint16Array,
): void {
  const { frame, view, nx } = grid;
  const { values, nx: width, ny: height } = source;
  const sine = yMm / frame.radiusMm;
  const isOnSphere = Math.abs(sine) < 1;
  const cosine = isOnSphere ? Math.sqrt(1 - sine * sine) : 0;
  const seenFrom = 1 / view.distanceRadii;
  const west = cosine * frame.west[2];
  const north = sine * frame.north[2];
  const up = cosine * frame.up[2];
  let column = 0;
  for (let i = 0; i < nx; i++) {
    for (let s = 0; s < kx; s++) {
      const sinPhi = columns[column++];
      const cosPhi = columns[column++];
      if (!isOnSphere || west * sinPhi + north + up * cosPhi <= seenFrom) {
        counts[4 * i + PIXEL_OFF_LIMB]++;
        continue;
      }
      const isReached = patchVectorToPixel(
        affine,
        source,
        cosine * sinPhi,
        sine,
        cosine * cosPhi,
        pixel,
      );
      const x = pixel[0];
      const y = pixel[1];
      if (!isReached || !(x >= -0.5 && y >= -0.5 && x <= width - 0.5 && y <= height - 0.5)) {
        counts[4 * i + PIXEL_OUTSIDE_IMAGE]++;
        continue;
      }
      const value = isCubic
        ? sampleCubic(values, width, height, x, y)
        : sampleBilinear(values, width, height, x, y);
      if (!Number.isNaN(value)) {
        sums[i] += value;
        counts[4 * i]++;
      } else {
        counts[4 * i + PIXEL_MISSING]++;
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
