import { GeometryError } from '../errors.js';
import type { FitsHeader } from '../fits/header.js';
import { numberAt, stringAt } from '../fits/header.js';
import { ARCSEC_PER_RADIAN, RADIANS_PER_DEGREE } from '../units.js';
import { type Axis, type Frame, radiansPerUnit, readAxis } from './axis.js';
import {
  type GeometryInput,
  type GeometryReading,
  type Matrix2,
  rescaled,
  SCALE_OPTION,
} from './geometry-input.js';
import { planeGeometry } from './plane-geometry.js';
import type { ProjectionName } from './projection.js';
import { helioprojectiveOf, isVisible, surfacePoint, viewFrame } from './solar-frame.js';
import { makeWcs } from './wcs.js';
import { type LinearPart, readLinearPart } from './wcs-linear.js';

const PROJECTIONS: readonly string[] = ['TAN', 'SIN', 'ARC', 'CEA', 'CAR'];
/** A helioprojective image without CUNIT spans less than this in degrees, so more means arcsec. */
const WIDEST_VIEW_DEG = 20;

/** Places an image on the Sun from its header and the options; options win. */
export function readGeometry(input: GeometryInput): GeometryReading {
  const { header, options = {} } = input;
  const axes = [readAxis(stringAt(header, 'CTYPE1')), readAxis(stringAt(header, 'CTYPE2'))];
  const [first, second] = axes;
  const isPair =
    first !== undefined &&
    second !== undefined &&
    first.frame === second.frame &&
    first.isLatitude !== second.isLatitude;
  const fromHeader =
    isPair && first.algorithm !== undefined
      ? celestialGeometry(input, first, first.algorithm)
      : planeGeometry(input, isPair ? first : undefined);
  return options.at === undefined ? fromHeader : movedTo(input, options.at, fromHeader);
}

/** Geometry by a full celestial WCS. */
function celestialGeometry(input: GeometryInput, first: Axis, algorithm: string): GeometryReading {
  const { header } = input;
  if (!PROJECTIONS.includes(algorithm))
    throw new GeometryError(
      `projection ${algorithm} in CTYPE1, wanted one of ${PROJECTIONS.join(', ')}`,
      { keyword: 'CTYPE1' },
    );
  const projection = algorithm as ProjectionName;
  const linear = readLinearPart(header);
  const warnings = [...linear.warnings];
  const scaleArcsec = input.options?.pixelScaleArcsec;
  if (!linear.hasScale && scaleArcsec === undefined) return { missing: [SCALE_OPTION], warnings };
  const unit1 = celestialUnit(input, 1, linear, first.frame, warnings);
  const unit2 = celestialUnit(input, 2, linear, first.frame, warnings);
  const [m11, m12, m21, m22] = linear.matrix;
  const row1 = [m11 * unit1, m12 * unit1] as const;
  const row2 = [m21 * unit2, m22 * unit2] as const;
  const value1 = ((numberAt(header, 'CRVAL1') ?? 0) * unit1) / RADIANS_PER_DEGREE;
  const value2 = ((numberAt(header, 'CRVAL2') ?? 0) * unit2) / RADIANS_PER_DEGREE;
  const [lonAxis, latAxis] = first.isLatitude ? [2, 1] : [1, 2];
  const [lonRow, latRow] = first.isLatitude ? [row2, row1] : [row1, row2];
  const [lonDeg, latDeg] = first.isLatitude ? [value2, value1] : [value1, value2];
  refuseUnusualParameters(header, projection, lonAxis, latAxis);
  const wcs = makeWcs({
    projection,
    origin: linear.origin,
    matrix: withScale([...lonRow, ...latRow], scaleArcsec),
    lonDeg,
    latDeg,
    lambda: projection === 'CEA' ? numberAt(header, `PV${latAxis}_1`) : 1,
    lonPoleDeg: numberAt(header, `PV${lonAxis}_3`, 'LONPOLE'),
    latPoleDeg: numberAt(header, `PV${lonAxis}_4`, 'LATPOLE'),
  });
  if (!wcs)
    throw new GeometryError(
      'the WCS cannot be inverted (zero scale, or LONPOLE, LATPOLE and CRVAL without a solution)',
      { keyword: 'CDELT1' },
    );
  return { geometry: { frame: first.frame, wcs }, missing: [], warnings };
}

function refuseUnusualParameters(
  header: FitsHeader,
  projection: ProjectionName,
  lonAxis: number,
  latAxis: number,
): void {
  const names = [`PV${lonAxis}_0`, `PV${lonAxis}_1`, `PV${lonAxis}_2`];
  if (projection === 'SIN') names.push(`PV${latAxis}_1`, `PV${latAxis}_2`);
  const usual = [0, 0, projection === 'CEA' || projection === 'CAR' ? 0 : 90, 0, 0];
  names.forEach((keyword, i) => {
    const value = numberAt(header, keyword) ?? usual[i];
    if (value !== usual[i])
      throw new GeometryError(`${keyword} is ${value}, only ${usual[i]} is understood`, {
        keyword,
      });
  });
}

/** Radians per unit of an axis; degrees where the header names none, as the standard says. */
function celestialUnit(
  input: GeometryInput,
  axis: 1 | 2,
  linear: LinearPart,
  frame: Frame,
  warnings: string[],
): number {
  const keyword = `CUNIT${axis}`;
  const cunit = stringAt(input.header, keyword);
  if (cunit !== undefined) {
    const unit = radiansPerUnit(cunit, input.angularRadius);
    if (unit !== undefined) return unit;
    throw new GeometryError(`${keyword} is '${cunit}', wanted deg, arcsec, rad or solar radii`, {
      keyword,
    });
  }
  const [a, b] = axis === 1 ? linear.matrix : linear.matrix.slice(2);
  const span = Math.hypot(a * input.nx, b * input.ny);
  if (frame !== 'helioprojective' || span <= WIDEST_VIEW_DEG) return RADIANS_PER_DEGREE;
  warnings.push(`no ${keyword}, and degrees would span ${span.toFixed(0)}: taken as arcsec`);
  return 1 / ARCSEC_PER_RADIAN;
}

function withScale(matrix: Matrix2, scaleArcsec: number | undefined): Matrix2 {
  return scaleArcsec === undefined ? matrix : rescaled(matrix, scaleArcsec / ARCSEC_PER_RADIAN);
}

/** Puts the image centre at the Stonyhurst position of `--at`, keeping scale and rotation. */
function movedTo(
  input: GeometryInput,
  at: { readonly lonDeg: number; readonly latDeg: number },
  found: GeometryReading,
): GeometryReading {
  if (!found.geometry || !input.observer) return found;
  if (found.geometry.frame !== 'helioprojective')
    throw new GeometryError('--at is for pictures of the disk, this map is on a heliographic grid');
  const frame = viewFrame(input.observer);
  const point = surfacePoint(frame, at.lonDeg, at.latDeg, [0, 0, 0]);
  if (!(Math.abs(at.latDeg) <= 90) || !isVisible(frame, point[2]))
    throw new GeometryError(
      `position ${at.lonDeg},${at.latDeg} of --at is not on the visible disk; wanted LON,LAT in degrees, west and north positive`,
    );
  const [thetaX, thetaY] = helioprojectiveOf(frame, point);
  const [a, b, c, d] = found.geometry.wcs.forward;
  const wcs = makeWcs({
    projection: 'TAN',
    origin: [(input.nx - 1) / 2, (input.ny - 1) / 2],
    matrix: [a, b, c, d],
    lonDeg: thetaX / RADIANS_PER_DEGREE,
    latDeg: thetaY / RADIANS_PER_DEGREE,
  });
  return wcs ? { ...found, geometry: { frame: 'helioprojective', wcs } } : found;
}
