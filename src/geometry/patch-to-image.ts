// From points of a patch to pixels of the image it is cut from.
import { worldFromSurface } from './image-on-sun.js';
import type { PatchFrame } from './patch-frame.js';
import { projectNative } from './projection.js';
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

/** The part of a map that resampling reads. */
export type Source = Pick<SolarMap, 'nx' | 'ny' | 'values' | 'geometry'>;

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

/** Sine and cosine of the longitude of every sample column, interleaved. */
export function columnVectors(grid: TargetGrid, kx: number): Float64Array {
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
export interface SampleLine {
  readonly x: Float64Array;
  readonly y: Float64Array;
  /** Sine and cosine of each sample's longitude, interleaved. */
  readonly columns: Float64Array;
  /** For TAN: rows of `tangentRows`; absent for other projections. */
  readonly tangent?: Float64Array;
}

/** Makes room for a line of samples at the given columns. */
export function makeLine(columns: Float64Array, source: Source, affine: Float64Array): SampleLine {
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
export function locateLine(
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
