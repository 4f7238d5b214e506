import { GeometryError } from '../errors.js';
import { METRES_PER_MEGAMETRE } from '../units.js';
import { pixelToSurface } from './image-on-sun.js';
import { type PatchFrame, patchFrame, planeToSurface, surfaceToPlane } from './patch-frame.js';
import { cosineMu, stonyhurstOf, type Vector3, type ViewFrame, viewFrame } from './solar-frame.js';
import type { SolarMap } from './solar-map.js';

/** Where a patch lies and how large it is; the position is Stonyhurst. */
export interface PatchExtent {
  readonly center: { readonly lonDeg: number; readonly latDeg: number };
  readonly extentMm: { readonly x: number; readonly y: number };
}

/**
 * Probes over the picture, each side. The outline of the picture itself is found exactly, that of blank
 * parts within a fortieth; more cost more than the resampling does.
 */
const PROBES = 40;
/** Pixels nearer to the limb than this do not stretch the outline. */
const LEAST_MU = 0.17;
const PASSES = 3;

interface Box {
  readonly low: [number, number];
  readonly high: [number, number];
}

/** Box of surface points in patch coordinates [Mm]. */
function boundingBox(points: readonly Readonly<Vector3>[], frame: PatchFrame): Box {
  const low: [number, number] = [Number.POSITIVE_INFINITY, Number.POSITIVE_INFINITY];
  const high: [number, number] = [Number.NEGATIVE_INFINITY, Number.NEGATIVE_INFINITY];
  const at: [number, number] = [0, 0];
  for (const point of points) {
    surfaceToPlane(frame, point, at);
    low[0] = Math.min(low[0], at[0]);
    low[1] = Math.min(low[1], at[1]);
    high[0] = Math.max(high[0], at[0]);
    high[1] = Math.max(high[1], at[1]);
  }
  return { low, high };
}

/**
 * Smallest patch that holds surface points (observer frame), centred on itself: starts at their mean
 * and moves to the middle of their box a few times. Throws GeometryError without points.
 */
export function extentOfPoints(
  view: ViewFrame,
  points: readonly Readonly<Vector3>[],
  radiusMm: number,
): PatchExtent {
  if (points.length === 0)
    throw new GeometryError('no pixel of the picture lies on the disk, at least one was wanted');
  const centre: Vector3 = [0, 0, 0];
  for (const point of points) for (let i = 0; i < 3; i++) centre[i] += point[i];
  let box: Box = { low: [0, 0], high: [0, 0] };
  for (let pass = 0; pass < PASSES; pass++) {
    const [lonDeg, latDeg] = stonyhurstOf(view, centre);
    const frame = patchFrame(view, lonDeg, latDeg, radiusMm);
    box = boundingBox(points, frame);
    if (pass === PASSES - 1) break;
    const middle = [0, 1].map((axis) => (box.low[axis] + box.high[axis]) / 2);
    planeToSurface(frame, middle[0], middle[1], centre);
  }
  const [lonDeg, latDeg] = stonyhurstOf(view, centre);
  return {
    center: { lonDeg, latDeg },
    extentMm: { x: box.high[0] - box.low[0], y: box.high[1] - box.low[1] },
  };
}

/**
 * The whole of a picture as a patch: the box, in patch coordinates, of the outlines of those pixels
 * that lie on the disk (mu of 0.17 or more, where there are such) and have a value.
 */
export function cutOutExtent(map: SolarMap): PatchExtent {
  const view = viewFrame(map.observer);
  const { nx, ny } = map;
  const found: { point: Vector3; isKnown: boolean; mu: number }[] = [];
  for (let j = 0; j <= PROBES; j++) {
    for (let i = 0; i <= PROBES; i++) {
      const x = (nx * i) / PROBES - 0.5;
      const y = (ny * j) / PROBES - 0.5;
      const point: Vector3 = [0, 0, 0];
      if (!pixelToSurface(view, map.geometry, x, y, point)) continue;
      const column = Math.min(nx - 1, Math.max(0, Math.round(x)));
      const row = Math.min(ny - 1, Math.max(0, Math.round(y)));
      const isKnown = !Number.isNaN(map.values[column + nx * row]);
      found.push({ point, isKnown, mu: cosineMu(view, point[2]) });
    }
  }
  const known = found.filter(({ isKnown }) => isKnown);
  const kept = known.length > 0 ? known : found;
  const inner = kept.filter(({ mu }) => mu >= LEAST_MU);
  const points = (inner.length > 0 ? inner : kept).map(({ point }) => point);
  return extentOfPoints(view, points, map.observer.solarRadiusM / METRES_PER_MEGAMETRE);
}
