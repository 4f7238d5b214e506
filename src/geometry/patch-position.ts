import { SOLAR_RADIUS_M } from '../constants.js';
import { METRES_PER_MEGAMETRE } from '../units.js';
import type { LocalPatch } from './patch.js';
import { type PatchFrame, patchFrame, planeToSurface, surfaceToPlane } from './patch-frame.js';
import { stonyhurstOf, surfacePoint, type Vector3, type ViewFrame } from './solar-frame.js';

/** The part of a patch that fixes where its pixels lie. */
export type PatchGrid = Pick<LocalPatch, 'nx' | 'ny' | 'pixelMm' | 'center' | 'sphereRadiusMm'>;

/** A view along the Stonyhurst axes: positions on the sphere alone need no observer. */
const STONYHURST_VIEW: ViewFrame = {
  distanceRadii: Number.POSITIVE_INFINITY,
  sinB0: 0,
  cosB0: 1,
  stonyhurstLongitudeDeg: 0,
  carringtonLongitudeDeg: 0,
};

/** Radius of the sphere that a patch lies on [Mm]; the nominal solar radius where it does not say. */
export function sphereRadiusMm(patch: Pick<LocalPatch, 'sphereRadiusMm'>): number {
  return patch.sphereRadiusMm ?? SOLAR_RADIUS_M / METRES_PER_MEGAMETRE;
}

function frameOf(patch: PatchGrid): PatchFrame {
  const { stonyhurstLongitudeDeg, stonyhurstLatitudeDeg } = patch.center;
  const radiusMm = sphereRadiusMm(patch);
  return patchFrame(STONYHURST_VIEW, stonyhurstLongitudeDeg, stonyhurstLatitudeDeg, radiusMm);
}

/**
 * Stonyhurst [longitude, latitude] in degrees at patch pixel (x, y), 0-based with centres on integers,
 * fractions and pixels beyond the edge allowed. NaN beyond the sphere.
 */
export function patchToStonyhurst(patch: PatchGrid, x: number, y: number): [number, number] {
  const xMm = (x - (patch.nx - 1) / 2) * patch.pixelMm;
  const yMm = (y - (patch.ny - 1) / 2) * patch.pixelMm;
  const point: Vector3 = [0, 0, 0];
  if (!planeToSurface(frameOf(patch), xMm, yMm, point)) return [Number.NaN, Number.NaN];
  return stonyhurstOf(STONYHURST_VIEW, point);
}

/**
 * Patch pixel of a Stonyhurst position [deg]; `undefined` more than 90 degrees from the centre. May lie
 * beyond the patch's edge.
 */
export function stonyhurstToPatch(
  patch: PatchGrid,
  lonDeg: number,
  latDeg: number,
): [number, number] | undefined {
  const frame = frameOf(patch);
  const point = surfacePoint(STONYHURST_VIEW, lonDeg, latDeg, [0, 0, 0]);
  const [ux, uy, uz] = frame.up;
  if (point[0] * ux + point[1] * uy + point[2] * uz <= 0) return undefined;
  const out = surfaceToPlane(frame, point, [0, 0]);
  out[0] = out[0] / patch.pixelMm + (patch.nx - 1) / 2;
  out[1] = out[1] / patch.pixelMm + (patch.ny - 1) / 2;
  return out;
}
