import { DataError, GeometryError } from '../errors.js';
import { makeGrid } from '../grid/grid.js';
import { METRES_PER_MEGAMETRE, RADIANS_PER_DEGREE } from '../units.js';
import { cutOutExtent } from './cut-out.js';
import { observerDirections } from './observer-directions.js';
import { type LocalPatch, PIXEL_GOOD, PIXEL_MISSING, PIXEL_OFF_LIMB } from './patch.js';
import { patchFrame } from './patch-frame.js';
import { nativeFromPatch, patchVectorToPixel } from './patch-to-image.js';
import { strongestRegion } from './region-finder.js';
import { resample } from './resample.js';
import {
  carringtonOf,
  cosineMu,
  isVisible,
  surfacePoint,
  type ViewFrame,
  viewFrame,
} from './solar-frame.js';
import type { SolarMap } from './solar-map.js';

/** Which patch of a map; what is left out is chosen. */
export interface PatchOptions {
  /** Stonyhurst position. */
  readonly center?: { readonly lonDeg: number; readonly latDeg: number };
  /** Side, or both sides, along the patch's x and y. */
  readonly extentMm?: number | { readonly x: number; readonly y: number };
  readonly pixelMm?: number;
  /** Accept centres more than 70 degrees from disk centre. */
  readonly allowLimb?: boolean;
  /** Most pixels a side; 2048 by default. */
  readonly maxPixels?: number;
}

export interface PatchResult {
  readonly patch: LocalPatch;
  readonly warnings: readonly string[];
}

/** Beyond this angle from disk centre foreshortening spoils field and area. */
const LIMB_DEG = 70;
const DEFAULT_MAX_PIXELS = 2048;
/** Smaller patches carry no transform or gradient worth the name. */
const LEAST_PIXELS = 8;
/** Side of a patch around a named centre when no extent is given; a large active region fits [Mm]. */
const DEFAULT_EXTENT_MM = 240;
/** A plane of this side still lies within 60 degrees of its centre, north and south. */
const LARGEST_EXTENT_MM = 1200;

interface Choice {
  readonly lonDeg: number;
  readonly latDeg: number;
  readonly extentMm: { readonly x: number; readonly y: number };
}

function sides(extent: PatchOptions['extentMm']): { x: number; y: number } | undefined {
  if (extent === undefined) return undefined;
  const both = typeof extent === 'number' ? { x: extent, y: extent } : { ...extent };
  for (const side of [both.x, both.y]) {
    if (!(side > 0 && side <= LARGEST_EXTENT_MM))
      throw new GeometryError(
        `a patch of ${side} Mm was asked for; wanted more than 0 and at most ${LARGEST_EXTENT_MM} Mm`,
      );
  }
  return both;
}

/** Centre and extent: as asked, else the strongest region of a full disk, else the whole cut-out. */
function choose(map: SolarMap, options: PatchOptions, warnings: string[]): Choice {
  const asked = sides(options.extentMm);
  if (options.center) {
    const extentMm = asked ?? { x: DEFAULT_EXTENT_MM, y: DEFAULT_EXTENT_MM };
    return { ...options.center, extentMm };
  }
  if (map.fullDisk) {
    const region = strongestRegion(map);
    warnings.push(...region.warnings);
    return { ...region.center, extentMm: asked ?? region.extentMm };
  }
  const whole = cutOutExtent(map);
  const extentMm = {
    x: Math.min(LARGEST_EXTENT_MM, whole.extentMm.x),
    y: Math.min(LARGEST_EXTENT_MM, whole.extentMm.y),
  };
  const isCut = extentMm.x < whole.extentMm.x || extentMm.y < whole.extentMm.y;
  if (isCut && !asked)
    warnings.push(`the picture is larger than a patch may be: cut to ${LARGEST_EXTENT_MM} Mm`);
  return { ...whole.center, extentMm: asked ?? extentMm };
}

function checkCentre(
  view: ViewFrame,
  choice: Choice,
  allowLimb: boolean,
  warnings: string[],
): number {
  const where = `${choice.lonDeg.toFixed(1)}, ${choice.latDeg.toFixed(1)} deg`;
  if (!(Math.abs(choice.latDeg) <= 90) || !Number.isFinite(choice.lonDeg))
    throw new GeometryError(
      `the centre ${where} is no position; wanted LON,LAT with LAT within 90 degrees`,
    );
  const z = surfacePoint(view, choice.lonDeg, choice.latDeg, [0, 0, 0])[2];
  if (!isVisible(view, z))
    throw new GeometryError(`the centre ${where} is behind the limb; wanted a point on the disk`);
  const angle = Math.acos(Math.min(1, z)) / RADIANS_PER_DEGREE;
  if (angle > LIMB_DEG) {
    const found = `the centre ${where} is ${angle.toFixed(0)} degrees from disk centre`;
    if (!allowLimb)
      throw new GeometryError(`${found}, wanted at most ${LIMB_DEG} (--allow-limb accepts it)`);
    warnings.push(`${found}: foreshortening makes field and area unsure`);
  }
  return z;
}

/**
 * Side of a pixel that keeps what the map has at the patch centre: the finest spacing of source pixels
 * there, over all directions. Away from disk centre that is the spacing along the limb, which
 * foreshortening leaves alone; across it the patch is then finer than the source.
 */
function nativePixelMm(map: SolarMap, view: ViewFrame, choice: Choice, radiusMm: number): number {
  const frame = patchFrame(view, choice.lonDeg, choice.latDeg, radiusMm);
  const affine = nativeFromPatch({ frame, view, nx: 1, ny: 1, pixelMm: 1 }, map);
  const step = 1e-5;
  const at = (a: number, b: number) => {
    const out = new Float64Array(2);
    const c = Math.sqrt(1 - a * a - b * b);
    return patchVectorToPixel(affine, map, a, b, c, out) ? out : [Number.NaN, Number.NaN];
  };
  const [here, east, north] = [at(0, 0), at(step, 0), at(0, step)];
  const [a, c] = [(east[0] - here[0]) / step, (east[1] - here[1]) / step];
  const [b, d] = [(north[0] - here[0]) / step, (north[1] - here[1]) / step];
  // Largest singular value of [[a, b], [c, d]]: source pixels per solar radius.
  const half = (a * a + b * b + c * c + d * d) / 2;
  const determinant = a * d - b * c;
  const largest = Math.sqrt(half + Math.sqrt(Math.max(0, half * half - determinant * determinant)));
  return radiusMm / largest;
}

function pixelSize(
  map: SolarMap,
  view: ViewFrame,
  choice: Choice,
  radiusMm: number,
  options: PatchOptions,
  warnings: string[],
): number {
  const wanted = options.pixelMm ?? nativePixelMm(map, view, choice, radiusMm);
  if (!(wanted > 0) || !Number.isFinite(wanted))
    throw new GeometryError(`a pixel of ${wanted} Mm was asked for; wanted more than 0`);
  const longest = Math.max(choice.extentMm.x, choice.extentMm.y);
  const most = options.maxPixels ?? DEFAULT_MAX_PIXELS;
  if (longest / wanted <= most + 0.5) return wanted;
  const coarser = longest / most;
  warnings.push(
    `patch pixels coarsened from ${wanted.toPrecision(3)} to ${coarser.toPrecision(3)} Mm to stay within ${most} a side`,
  );
  return coarser;
}

function pixelCount(extentMm: number, pixelMm: number): number {
  const count = Math.round(extentMm / pixelMm);
  if (count < LEAST_PIXELS)
    throw new GeometryError(
      `the patch is ${extentMm.toPrecision(3)} Mm and ${count} pixels wide; wanted at least ${LEAST_PIXELS} pixels`,
    );
  return count;
}

/** Refuses a patch without a single value, naming the reason. */
function checkValues(mask: Uint8Array): void {
  if (mask.includes(PIXEL_GOOD)) return;
  if (mask.includes(PIXEL_MISSING))
    throw new DataError('the patch has no values: all of its pixels are blank in the map');
  const where = mask.includes(PIXEL_OFF_LIMB) ? 'on the disk and in' : 'in';
  throw new GeometryError(`no pixel of the patch lies ${where} the picture; wanted another centre`);
}

/**
 * Cuts a local patch out of a map and resamples it flux-conservingly on an equal-area grid of square
 * pixels. Defaults: of a full disk the region of greatest unsigned flux within 60 degrees of disk
 * centre, of a cut-out the whole picture; around a named centre 240 Mm; pixels of the map's own finest
 * spacing at the patch centre. Throws GeometryError for a centre more than 70 degrees from disk centre
 * (unless `allowLimb`, then a warning), behind the limb or outside the picture; DataError where the map
 * is blank.
 */
export function makePatch(map: SolarMap, options: PatchOptions = {}): PatchResult {
  const warnings: string[] = [];
  const view = viewFrame(map.observer);
  const radiusMm = map.observer.solarRadiusM / METRES_PER_MEGAMETRE;
  const choice = choose(map, options, warnings);
  const z = checkCentre(view, choice, options.allowLimb ?? false, warnings);
  const pixelMm = pixelSize(map, view, choice, radiusMm, options, warnings);
  const nx = pixelCount(choice.extentMm.x, pixelMm);
  const ny = pixelCount(choice.extentMm.y, pixelMm);
  const frame = patchFrame(view, choice.lonDeg, choice.latDeg, radiusMm);
  const grid = { frame, view, nx, ny, pixelMm };
  const { field, mask } = resample(grid, map);
  checkValues(mask);
  const patch: LocalPatch = {
    nx,
    ny,
    pixelMm,
    sphereRadiusMm: radiusMm,
    center: {
      stonyhurstLongitudeDeg: choice.lonDeg,
      stonyhurstLatitudeDeg: choice.latDeg,
      carringtonLongitudeDeg: carringtonOf(view, choice.lonDeg),
      mu: cosineMu(view, z),
    },
    component: map.component,
    field: makeGrid(field, nx, ny, 'G', pixelMm),
    mask,
    toObserver: observerDirections(grid),
  };
  return { patch, warnings };
}
