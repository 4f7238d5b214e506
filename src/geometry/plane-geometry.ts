// Headers without a celestial WCS: linear axes in arcsec or solar radii from the disk centre, or only
// a plate scale, a disk centre and a solar radius in pixels.
import type { FitsHeader } from '../fits/header.js';
import { numberAt, stringAt } from '../fits/header.js';
import { ARCSEC_PER_RADIAN, RADIANS_PER_DEGREE } from '../units.js';
import { type Axis, radiansPerUnit } from './axis.js';
import {
  type GeometryInput,
  type GeometryReading,
  type Matrix2,
  POSITION_OPTION,
  rescaled,
  SCALE_OPTION,
} from './geometry-input.js';
import { makeWcs } from './wcs.js';
import { type LinearPart, readLinearPart } from './wcs-linear.js';

/** Plate scales in arcsec per pixel, one keyword per axis. */
const SCALE_PAIRS = [
  ['XSCALE', 'YSCALE'],
  ['IM_SCALE', 'IM_SCALE'],
  ['PIXSCALE', 'PIXSCALE'],
  ['PLATESCL', 'PLATESCL'],
] as const;
/** Position of the disk centre in pixels, with the number of the first pixel. */
const CENTRE_PAIRS = [
  ['FNDLMBXC', 'FNDLMBYC', 1],
  ['CENTER_X', 'CENTER_Y', 1],
  ['IMG_X0', 'IMG_Y0', 1],
  ['X0', 'Y0', 0],
] as const;
/** Angle of solar north in the picture, counter-clockwise from up, where there is no CROTA. */
const POSITION_ANGLES = ['SOLAR_P0', 'SOLAR_P', 'P_ANGLE', 'IMG_P'] as const;

/** Radius of the disk in pixels along both axes, where the header gives it. */
function diskRadiusPixels(header: FitsHeader): number | undefined {
  const minor = numberAt(header, 'FNDLMBMI');
  const major = numberAt(header, 'FNDLMBMA');
  const mean = minor !== undefined && major !== undefined ? 0.5 * (minor + major) : undefined;
  const radius = mean ?? numberAt(header, 'R_SUN', 'IMG_R0', 'RSUN_PIX', 'R0');
  return radius !== undefined && radius > 1 ? radius : undefined;
}

/** Radians per pixel along both axes from a plate scale, else from the disk's radius in pixels. */
function plateScale(input: GeometryInput): readonly [number, number] | undefined {
  const given = input.options?.pixelScaleArcsec;
  if (given !== undefined) return [given / ARCSEC_PER_RADIAN, given / ARCSEC_PER_RADIAN];
  for (const [x, y] of SCALE_PAIRS) {
    const scaleX = numberAt(input.header, x);
    const scaleY = numberAt(input.header, y);
    if (scaleX !== undefined && scaleY !== undefined && scaleX > 0 && scaleY > 0)
      return [scaleX / ARCSEC_PER_RADIAN, scaleY / ARCSEC_PER_RADIAN];
  }
  const radius = diskRadiusPixels(input.header);
  if (radius === undefined || input.angularRadius === undefined) return undefined;
  const scale = Math.tan(input.angularRadius) / radius;
  return [scale, scale];
}

/** Turns the plane so that solar north, at `angleDeg` counter-clockwise from up, points up. */
function turned(matrix: Matrix2, angleDeg: number): Matrix2 {
  const cos = Math.cos(angleDeg * RADIANS_PER_DEGREE);
  const sin = Math.sin(angleDeg * RADIANS_PER_DEGREE);
  const [a, b, c, d] = matrix;
  return [a * cos + c * sin, b * cos + d * sin, c * cos - a * sin, d * cos - b * sin];
}

/** Pixel of the disk centre: back from the reference value, before any turn of the whole plane. */
function sunCentre(m: Matrix2, { origin, value }: Placement): readonly [number, number] {
  const determinant = m[0] * m[3] - m[1] * m[2];
  return [
    origin[0] - (m[3] * value[0] - m[1] * value[1]) / determinant,
    origin[1] - (m[0] * value[1] - m[2] * value[0]) / determinant,
  ];
}

interface Placement {
  /** Pixel whose plane coordinates are `value` [rad]. */
  readonly origin: readonly [number, number];
  readonly value: readonly [number, number];
}

function diskCentre(header: FitsHeader): Placement | undefined {
  for (const [x, y, firstPixel] of CENTRE_PAIRS) {
    const centreX = numberAt(header, x);
    const centreY = numberAt(header, y);
    if (centreX !== undefined && centreY !== undefined)
      return { origin: [centreX - firstPixel, centreY - firstPixel], value: [0, 0] };
  }
  return undefined;
}

function fieldCentre(input: GeometryInput): Placement | undefined {
  const x = numberAt(input.header, 'XCEN');
  const y = numberAt(input.header, 'YCEN');
  if (x === undefined || y === undefined) return undefined;
  return {
    origin: [(input.nx - 1) / 2, (input.ny - 1) / 2],
    value: [x / ARCSEC_PER_RADIAN, y / ARCSEC_PER_RADIAN],
  };
}

/** Radians per unit of the linear axes; arcsec where CUNIT is missing, as these instruments mean it. */
function axisUnits(input: GeometryInput): readonly [number, number] | undefined {
  const units = ['CUNIT1', 'CUNIT2'].map((keyword) =>
    radiansPerUnit(stringAt(input.header, keyword) ?? 'arcsec', input.angularRadius),
  );
  return units[0] === undefined || units[1] === undefined ? undefined : [units[0], units[1]];
}

/**
 * A pixel of known plane coordinates: the WCS reference, a disk centre in pixels, the centre of the
 * field of view in arcsec, or the image centre where `--at` says where that lies. `units` are those of
 * the axes where the WCS has a scale.
 */
function placement(
  input: GeometryInput,
  axis: Axis | undefined,
  linear: LinearPart,
  units: readonly [number, number] | undefined,
): Placement | undefined {
  const { header } = input;
  if (linear.hasOrigin && units) {
    const value1 = (numberAt(header, 'CRVAL1') ?? 0) * units[0];
    const value2 = (numberAt(header, 'CRVAL2') ?? 0) * units[1];
    return { origin: linear.origin, value: axis?.isLatitude ? [value2, value1] : [value1, value2] };
  }
  // A reference value of zero is the disk centre even where the scale has to come from elsewhere.
  if (linear.hasOrigin && axis && isAtZero(header)) return { origin: linear.origin, value: [0, 0] };
  const imageCentre = [(input.nx - 1) / 2, (input.ny - 1) / 2] as const;
  const given = input.options?.at && ({ origin: imageCentre, value: [0, 0] } as const);
  return given ?? diskCentre(header) ?? fieldCentre(input);
}

/**
 * Geometry of an image on linear axes. `axis` is the first one where both CTYPE name such axes; without,
 * the WCS keywords are trusted only where there is no CTYPE at all. The plane is taken as tangent at
 * the disk centre, which at the limb differs from small angles by 0.01 arcsec.
 */
export function planeGeometry(input: GeometryInput, axis: Axis | undefined): GeometryReading {
  const { header } = input;
  const warnings: string[] = [];
  const given = input.options?.pixelScaleArcsec;
  const hasTypes = stringAt(header, 'CTYPE1', 'CTYPE2') !== undefined;
  const trustsWcs = axis !== undefined || !hasTypes;
  const units = trustsWcs ? axisUnits(input) : undefined;
  const linear = readLinearPart(header);
  const ownScale = trustsWcs && linear.hasScale && units !== undefined;
  const scale = ownScale ? units : plateScale(input);
  const centre = placement(input, axis, linear, ownScale ? units : undefined);
  const missing = [
    ...(scale === undefined ? [SCALE_OPTION] : []),
    ...(centre === undefined ? [POSITION_OPTION] : []),
  ];
  if (scale === undefined || centre === undefined) return { missing, warnings };
  warnings.push(...linear.warnings);
  if (!hasTypes && !input.options?.at) warnings.push('no CTYPE: axes taken as solar x and y');
  const m = ownScale ? linear.matrix : rotationOnly(header);
  const rows: Matrix2 = ownScale
    ? [m[0] * scale[0], m[1] * scale[0], m[2] * scale[1], m[3] * scale[1]]
    : [m[0] * scale[0], m[1] * scale[1], m[2] * scale[0], m[3] * scale[1]];
  const swapped: Matrix2 = axis?.isLatitude ? [rows[2], rows[3], rows[0], rows[1]] : rows;
  const scaled = given === undefined ? swapped : rescaled(swapped, given / ARCSEC_PER_RADIAN);
  const origin = sunCentre(scaled, centre);
  const angle = linear.hasRotation ? 0 : (numberAt(header, ...POSITION_ANGLES) ?? 0);
  const wcs = makeWcs({
    projection: 'TAN',
    origin,
    matrix: turned(scaled, angle),
    lonDeg: 0,
    latDeg: 0,
  });
  return wcs
    ? { geometry: { frame: 'helioprojective', wcs }, missing: [], warnings }
    : { missing: [SCALE_OPTION], warnings };
}

function isAtZero(header: FitsHeader): boolean {
  return (numberAt(header, 'CRVAL1') ?? 0) === 0 && (numberAt(header, 'CRVAL2') ?? 0) === 0;
}

function rotationOnly(header: FitsHeader): Matrix2 {
  const angle = (numberAt(header, 'CROTA2', 'CROTA1', 'CROTA') ?? 0) * RADIANS_PER_DEGREE;
  const cos = Math.cos(angle);
  const sin = Math.sin(angle);
  return [cos, -sin, sin, cos];
}
