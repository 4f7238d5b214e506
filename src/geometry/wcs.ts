import { RADIANS_PER_DEGREE } from '../units.js';
import { worldToNative } from './native-pole.js';
import {
  deprojectNative,
  type ProjectionName,
  projectNative,
  referenceLatitudeDeg,
} from './projection.js';

/**
 * A celestial WCS as plain numbers: pixel (0-based, centres on integers) -> plane [rad] -> native
 * sphere -> world sphere. World vectors are (cos lat cos lon, cos lat sin lon, sin lat).
 */
export interface Wcs {
  readonly projection: ProjectionName;
  /** CEA's PVi_1; 1 elsewhere. */
  readonly lambda: number;
  readonly originX: number;
  readonly originY: number;
  /** Plane from pixel offset, by rows [rad]. */
  readonly forward: readonly number[];
  /** Pixel offset from plane, by rows. */
  readonly backward: readonly number[];
  /** World to native vectors, nine numbers by rows; its transpose goes back. */
  readonly rotation: readonly number[];
}

export interface WcsParameters {
  readonly projection: ProjectionName;
  readonly origin: readonly [number, number];
  /** Plane from pixel offset [rad per pixel]: longitude row, then latitude row. */
  readonly matrix: readonly [number, number, number, number];
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly lambda?: number | undefined;
  readonly lonPoleDeg?: number | undefined;
  readonly latPoleDeg?: number | undefined;
}

/** Builds a Wcs; `undefined` where the matrix is singular or the pole has no solution. */
export function makeWcs(parameters: WcsParameters): Wcs | undefined {
  const [a, b, c, d] = parameters.matrix;
  const determinant = a * d - b * c;
  const rotation = worldToNative({
    lonDeg: parameters.lonDeg,
    latDeg: parameters.latDeg,
    theta0Deg: referenceLatitudeDeg(parameters.projection),
    lonPoleDeg: parameters.lonPoleDeg,
    latPoleDeg: parameters.latPoleDeg,
  });
  const lambda = parameters.lambda ?? 1;
  const numbers = [...rotation, ...parameters.origin, determinant, 1 / determinant, lambda];
  if (!numbers.every(Number.isFinite) || !(lambda > 0)) return undefined;
  return {
    projection: parameters.projection,
    lambda,
    originX: parameters.origin[0],
    originY: parameters.origin[1],
    forward: [a, b, c, d],
    backward: [d / determinant, -b / determinant, -c / determinant, a / determinant],
    rotation,
  };
}

const native = new Float64Array(3);
const plane = new Float64Array(2);

/** World unit vector of a pixel, written to `out[0..2]`; false where the pixel is off the projection. */
export function pixelToVector(
  wcs: Wcs,
  x: number,
  y: number,
  out: Float64Array | number[],
): boolean {
  const dx = x - wcs.originX;
  const dy = y - wcs.originY;
  const f = wcs.forward;
  const u = f[0] * dx + f[1] * dy;
  const v = f[2] * dx + f[3] * dy;
  if (!deprojectNative(wcs.projection, wcs.lambda, u, v, native)) return false;
  const r = wcs.rotation;
  out[0] = r[0] * native[0] + r[3] * native[1] + r[6] * native[2];
  out[1] = r[1] * native[0] + r[4] * native[1] + r[7] * native[2];
  out[2] = r[2] * native[0] + r[5] * native[1] + r[8] * native[2];
  return true;
}

/** Pixel of a world vector (any length), written to `out[0..1]`; false where it has none. */
export function vectorToPixel(
  wcs: Wcs,
  a: number,
  b: number,
  c: number,
  out: Float64Array | number[],
): boolean {
  const r = wcs.rotation;
  const l = r[0] * a + r[1] * b + r[2] * c;
  const m = r[3] * a + r[4] * b + r[5] * c;
  const n = r[6] * a + r[7] * b + r[8] * c;
  if (!projectNative(wcs.projection, wcs.lambda, l, m, n, plane)) return false;
  const i = wcs.backward;
  out[0] = wcs.originX + i[0] * plane[0] + i[1] * plane[1];
  out[1] = wcs.originY + i[2] * plane[0] + i[3] * plane[1];
  return true;
}

const world = new Float64Array(3);

/** World longitude (-180..180) and latitude [deg] of a pixel, written to `out`; false off the projection. */
export function pixelToWorld(
  wcs: Wcs,
  x: number,
  y: number,
  out: Float64Array | number[],
): boolean {
  if (!pixelToVector(wcs, x, y, world)) return false;
  out[0] = Math.atan2(world[1], world[0]) / RADIANS_PER_DEGREE;
  out[1] = Math.atan2(world[2], Math.hypot(world[0], world[1])) / RADIANS_PER_DEGREE;
  return true;
}

/** Pixel of a world longitude and latitude [deg], written to `out`; false where it has none. */
export function worldToPixel(
  wcs: Wcs,
  lonDeg: number,
  latDeg: number,
  out: Float64Array | number[],
): boolean {
  const lon = lonDeg * RADIANS_PER_DEGREE;
  const lat = latDeg * RADIANS_PER_DEGREE;
  const across = Math.cos(lat);
  return vectorToPixel(wcs, across * Math.cos(lon), across * Math.sin(lon), Math.sin(lat), out);
}
