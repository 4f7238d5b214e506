import { DataError } from '../errors.js';
import { gaussianBlur } from '../grid/smooth.js';
import { METRES_PER_MEGAMETRE, RADIANS_PER_DEGREE } from '../units.js';
import { binUnsigned, type CoarseMap } from './coarse-map.js';
import { extentOfPoints, type PatchExtent } from './cut-out.js';
import { pixelToSurface } from './image-on-sun.js';
import { cosineMu, type Vector3, viewFrame } from './solar-frame.js';
import type { SolarMap } from './solar-map.js';

/** The region found, with its patch extent and what the user should know. */
export interface FoundRegion extends PatchExtent {
  readonly warnings: readonly string[];
}

/** Blur before the threshold [Mm]: joins the polarities of a region, less than the gap to the next. */
const BLUR_MM = 8;
/** Robust deviations above the quiet median that a region's blurred unsigned field must reach. */
const THRESHOLD_DEVIATIONS = 6;
const DEVIATION_PER_MEDIAN = 1.4826;
/** Free border around the region: this part of its box on every side, so that the field can close. */
const MARGIN = 0.25;
const SMALLEST_MM = 80;
/** A patch has at least this many pixels of the map a side, so that a coarse map still gives one. */
const LEAST_MAP_PIXELS = 16;
const LARGEST_MM = 500;
/** Regions that join to more than LARGEST_MM are parted by raising the threshold this much at a time. */
const THRESHOLD_STEP = 1.3;
const MOST_STEPS = 16;

/** Coarse cells on the searched part of the disk. */
interface Cells {
  readonly coarse: CoarseMap;
  /** Blurred unsigned field; NaN outside the search. */
  readonly field: Float64Array;
  readonly mu: Float64Array;
}

function median(sorted: Float64Array): number {
  return sorted[sorted.length >> 1];
}

function searchCells(map: SolarMap, withinDeg: number): Cells {
  const coarse = binUnsigned(map.values, map.nx, map.ny);
  const view = viewFrame(map.observer);
  const mu = new Float64Array(coarse.nx * coarse.ny);
  const leastZ = Math.cos(withinDeg * RADIANS_PER_DEGREE);
  const deviation = Math.max(0.7, BLUR_MM / (map.pixelMm * coarse.factor));
  const blurred = gaussianBlur(coarse.values, coarse.nx, coarse.ny, deviation);
  const point: Vector3 = [0, 0, 0];
  for (let i = 0; i < mu.length; i++) {
    const [x, y] = coarse.centreOf(i);
    const isInside =
      pixelToSurface(view, map.geometry, x, y, point) && point[2] >= Math.max(0, leastZ);
    mu[i] = isInside ? cosineMu(view, point[2]) : Number.NaN;
    if (!isInside) blurred[i] = Number.NaN;
  }
  return { coarse, field: blurred, mu };
}

/** Connected cells (over corners too) above the threshold, each list with its flux excess. */
function regionsAbove(cells: Cells, threshold: number, quiet: number) {
  const { coarse, field, mu } = cells;
  const { nx, ny } = coarse;
  const seen = new Uint8Array(nx * ny);
  const regions: { readonly members: number[]; readonly flux: number }[] = [];
  for (let start = 0; start < field.length; start++) {
    if (seen[start] || !(field[start] > threshold)) continue;
    const members = [start];
    seen[start] = 1;
    let flux = 0;
    for (let head = 0; head < members.length; head++) {
      const at = members[head];
      // Radial field and true area both grow by 1 / mu.
      flux += (field[at] - quiet) / mu[at] ** 2;
      const x = at % nx;
      const y = (at - x) / nx;
      for (let v = Math.max(0, y - 1); v <= Math.min(ny - 1, y + 1); v++) {
        for (let u = Math.max(0, x - 1); u <= Math.min(nx - 1, x + 1); u++) {
          const next = u + nx * v;
          if (seen[next] || !(field[next] > threshold)) continue;
          seen[next] = 1;
          members.push(next);
        }
      }
    }
    regions.push({ members, flux });
  }
  return regions;
}

function extentOf(map: SolarMap, coarse: CoarseMap, members: readonly number[]): PatchExtent {
  const view = viewFrame(map.observer);
  const half = coarse.factor / 2;
  const points: Vector3[] = [];
  for (const member of members) {
    const [x, y] = coarse.centreOf(member);
    for (const [dx, dy] of [
      [-half, -half],
      [half, -half],
      [-half, half],
      [half, half],
    ]) {
      const point: Vector3 = [0, 0, 0];
      if (pixelToSurface(view, map.geometry, x + dx, y + dy, point)) points.push(point);
    }
  }
  return extentOfPoints(view, points, map.observer.solarRadiusM / METRES_PER_MEGAMETRE);
}

function withMargin(sideMm: number, pixelMm: number): number {
  const least = Math.max(SMALLEST_MM, LEAST_MAP_PIXELS * pixelMm);
  return Math.min(LARGEST_MM, Math.max(least, sideMm * (1 + 2 * MARGIN)));
}

/**
 * The region of greatest unsigned flux within `withinDeg` (60) degrees of disk centre: the field's size
 * on a coarse grid, each cell without its strongest pixel so that a lone spike does not count, blurred
 * by 8 Mm; cells 6 robust deviations above the quiet median, joined to areas; flux with field and area
 * corrected by mu. The extent is the area's box with a quarter added on every side, 80 Mm and 16 map pixels at least, 500 Mm at most. Where
 * nothing stands out, the strongest cell with a warning. Throws DataError where there is no value.
 */
export function strongestRegion(
  map: SolarMap,
  options: { readonly withinDeg?: number } = {},
): FoundRegion {
  const withinDeg = options.withinDeg ?? 60;
  const cells = searchCells(map, withinDeg);
  const { field, coarse } = cells;
  const known = field.filter((value) => !Number.isNaN(value)).sort();
  if (known.length === 0)
    throw new DataError(
      `has no values within ${withinDeg} degrees of disk centre; name a place with --center LON,LAT`,
    );
  const quiet = median(known);
  const deviation =
    DEVIATION_PER_MEDIAN * median(known.map((value) => Math.abs(value - quiet)).sort());
  let threshold = quiet + THRESHOLD_DEVIATIONS * deviation;
  let best: PatchExtent | undefined;
  for (let step = 0; step < MOST_STEPS; step++) {
    const regions = regionsAbove(cells, threshold, quiet);
    if (regions.length === 0) break;
    const strongest = regions.reduce((a, b) => (b.flux > a.flux ? b : a));
    best = extentOf(map, coarse, strongest.members);
    if (Math.max(best.extentMm.x, best.extentMm.y) * (1 + 2 * MARGIN) <= LARGEST_MM) break;
    threshold = quiet + (threshold - quiet) * THRESHOLD_STEP;
  }
  const warnings: string[] = [];
  if (!best) {
    const peak = field.indexOf(known[known.length - 1]);
    best = extentOf(map, coarse, [peak]);
    warnings.push('no region stands out from the quiet Sun: the strongest place is taken');
  }
  const { x, y } = best.extentMm;
  const extentMm = { x: withMargin(x, map.pixelMm), y: withMargin(y, map.pixelMm) };
  return { center: best.center, extentMm, warnings };
}
