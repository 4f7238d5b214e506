// From image pixels to points on the Sun (observer frame of solar-frame.ts) and back.

import { RADIANS_PER_DEGREE } from '../units.js';
import type { ImageGeometry } from './geometry-input.js';
import { isVisible, surfaceAlongRay, type Vector3, type ViewFrame } from './solar-frame.js';
import { pixelToVector, vectorToPixel } from './wcs.js';

/**
 * World vector of the image from an observer-frame point, as an affine map: nine numbers by rows
 * (world = matrix * point + offset). Helioprojective: the line of sight (D - z, x, y). Heliographic:
 * the point itself, turned by B0 and the frame's longitude of the central meridian.
 */
export function worldFromSurface(
  frame: ViewFrame,
  geometry: ImageGeometry,
): { readonly matrix: readonly number[]; readonly offset: Vector3 } {
  if (geometry.frame === 'helioprojective')
    return { matrix: [0, 0, -1, 1, 0, 0, 0, 1, 0], offset: [frame.distanceRadii, 0, 0] };
  const meridianDeg =
    geometry.frame === 'carrington' ? frame.carringtonLongitudeDeg : frame.stonyhurstLongitudeDeg;
  const cosL = Math.cos(meridianDeg * RADIANS_PER_DEGREE);
  const sinL = Math.sin(meridianDeg * RADIANS_PER_DEGREE);
  const { sinB0, cosB0 } = frame;
  const matrix = [
    -sinL,
    -cosL * sinB0,
    cosL * cosB0,
    cosL,
    -sinL * sinB0,
    sinL * cosB0,
    0,
    cosB0,
    sinB0,
  ];
  return { matrix, offset: [0, 0, 0] };
}

const world: Vector3 = [0, 0, 0];

/** Surface point seen in a pixel (0-based), written to `out`; false off the visible disk. */
export function pixelToSurface(
  frame: ViewFrame,
  geometry: ImageGeometry,
  x: number,
  y: number,
  out: Vector3,
): boolean {
  if (!pixelToVector(geometry.wcs, x, y, world)) return false;
  if (geometry.frame === 'helioprojective')
    return surfaceAlongRay(frame, world[0], world[1], world[2], out) !== undefined;
  const { matrix: m } = worldFromSurface(frame, geometry);
  for (let i = 0; i < 3; i++) out[i] = m[i] * world[0] + m[i + 3] * world[1] + m[i + 6] * world[2];
  return isVisible(frame, out[2]);
}

/** Pixel of an observer-frame surface point, written to `out`; false behind the limb. */
export function surfaceToPixel(
  frame: ViewFrame,
  geometry: ImageGeometry,
  point: Readonly<Vector3>,
  out: number[] | Float64Array,
): boolean {
  if (!isVisible(frame, point[2])) return false;
  const { matrix: m, offset } = worldFromSurface(frame, geometry);
  const [x, y, z] = point;
  return vectorToPixel(
    geometry.wcs,
    m[0] * x + m[1] * y + m[2] * z + offset[0],
    m[3] * x + m[4] * y + m[5] * z + offset[1],
    m[6] * x + m[7] * y + m[8] * z + offset[2],
    out,
  );
}
