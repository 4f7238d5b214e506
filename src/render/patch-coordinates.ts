import { SOLAR_RADIUS_M } from '../constants.js';
import type { LocalPatch } from '../geometry/patch.js';
import { METRES_PER_MEGAMETRE, RADIANS_PER_DEGREE } from '../units.js';

const RADIUS_MM = SOLAR_RADIUS_M / METRES_PER_MEGAMETRE;

/** Stonyhurst place of a patch pixel; NaN where the equal-area frame ends. */
export function patchToStonyhurst(patch: LocalPatch, x: number, y: number) {
  const lon = ((x - (patch.nx - 1) / 2) * patch.pixelMm) / RADIUS_MM;
  const sinLat = ((y - (patch.ny - 1) / 2) * patch.pixelMm) / RADIUS_MM;
  const lat = Math.asin(sinLat);
  const lat0 = patch.center.stonyhurstLatitudeDeg * RADIANS_PER_DEGREE;
  const [east, north, out] = [Math.cos(lat) * Math.sin(lon), sinLat, Math.cos(lat) * Math.cos(lon)];
  const up = north * Math.cos(lat0) + out * Math.sin(lat0);
  const front = out * Math.cos(lat0) - north * Math.sin(lat0);
  return {
    lonDeg: patch.center.stonyhurstLongitudeDeg + Math.atan2(east, front) / RADIANS_PER_DEGREE,
    latDeg: Math.asin(Math.max(-1, Math.min(1, up))) / RADIANS_PER_DEGREE,
  };
}

/** Patch pixel of a Stonyhurst place; NaN on the far side. */
export function stonyhurstToPatch(patch: LocalPatch, lonDeg: number, latDeg: number) {
  const lat0 = patch.center.stonyhurstLatitudeDeg * RADIANS_PER_DEGREE;
  const lon = (lonDeg - patch.center.stonyhurstLongitudeDeg) * RADIANS_PER_DEGREE;
  const lat = latDeg * RADIANS_PER_DEGREE;
  const [east, up, front] = [
    Math.cos(lat) * Math.sin(lon),
    Math.sin(lat),
    Math.cos(lat) * Math.cos(lon),
  ];
  const north = up * Math.cos(lat0) - front * Math.sin(lat0);
  const out = front * Math.cos(lat0) + up * Math.sin(lat0);
  if (out <= 0) return { x: Number.NaN, y: Number.NaN };
  const perMm = RADIUS_MM / patch.pixelMm;
  return {
    x: (patch.nx - 1) / 2 + Math.atan2(east, out) * perMm,
    y: (patch.ny - 1) / 2 + north * perMm,
  };
}
