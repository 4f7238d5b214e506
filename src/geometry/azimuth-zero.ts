import { UsageError } from '../errors.js';
import { RADIANS_PER_DEGREE } from '../units.js';
import type { ImageGeometry } from './geometry-input.js';
import { pixelToVector } from './wcs.js';

const IMAGE_AXES = ['+x', '-x', '+y', '-y'] as const;
/** Position angles of the solar directions on the sky, counter-clockwise from north [deg]. */
const SKY_ANGLES = { north: 0, east: 90, south: 180, west: 270 } as const;

/** Which direction has azimuth zero, and which way azimuth counts as the image is drawn, row 0 below. */
export interface AzimuthZero {
  /** An axis of the image, or a solar direction on the sky. */
  readonly from: (typeof IMAGE_AXES)[number] | keyof typeof SKY_ANGLES;
  readonly clockwise: boolean;
}

export const DEFAULT_AZIMUTH_ZERO: AzimuthZero = { from: '+y', clockwise: false };

/** Reads "+y", "-x,cw", "west,ccw". Throws UsageError for anything else. */
export function parseAzimuthZero(text: string): AzimuthZero {
  const match = /^([+-]?[xy]|north|east|south|west)(?:,(cw|ccw))?$/.exec(text.trim().toLowerCase());
  if (!match)
    throw new UsageError(
      `'${text}' is no azimuth zero; wanted +x, -x, +y, -y, north, east, south or west, with ,cw or ,ccw after it or not`,
    );
  const from = match[1].length === 1 ? `+${match[1]}` : match[1];
  return { from: from as AzimuthZero['from'], clockwise: match[2] === 'cw' };
}

/** Whether the zero is an axis of the image rather than a direction on the sky. */
export function countsFromImage(zero: AzimuthZero): boolean {
  return (IMAGE_AXES as readonly string[]).includes(zero.from);
}

/** The choice in words. */
export function azimuthZeroText(zero: AzimuthZero): string {
  const sense = zero.clockwise ? 'clockwise' : 'counter-clockwise';
  return countsFromImage(zero)
    ? `${sense} from the image's ${zero.from} axis`
    : `${sense} from solar ${zero.from} on the sky`;
}

/**
 * Position angle on the sky, counter-clockwise from solar north [rad], of a step by (dx, dy) pixels from
 * (x, y) of a helioprojective image.
 */
function positionAngle(geometry: ImageGeometry, x: number, y: number, dx: number, dy: number) {
  const here = [0, 0, 0];
  const there = [0, 0, 0];
  pixelToVector(geometry.wcs, x, y, here);
  pixelToVector(geometry.wcs, x + dx, y + dy, there);
  const across = Math.hypot(here[0], here[1]);
  const step = there.map((value, i) => value - here[i]);
  const west = (here[0] * step[1] - here[1] * step[0]) / across;
  const north = across * step[2] - (here[2] * (here[0] * step[0] + here[1] * step[1])) / across;
  return Math.atan2(-west, north);
}

/**
 * Azimuth counter-clockwise from solar north on the sky is `offsetRad` + `sign` times the map's own. Image axes
 * are taken where they lie on the sky at the picture's centre (over a field of view of a degree the
 * direction of north turns by less than 0.01 degrees); they carry the angles, so that pixels need
 * not be square, and in a mirrored image the sense of counting turns with them.
 */
export function azimuthOnSky(
  zero: AzimuthZero,
  geometry: ImageGeometry,
  nx: number,
  ny: number,
): { readonly offsetRad: number; readonly sign: 1 | -1 } {
  const sense = zero.clockwise ? -1 : 1;
  if (!countsFromImage(zero)) {
    const angle = SKY_ANGLES[zero.from as keyof typeof SKY_ANGLES];
    return { offsetRad: angle * RADIANS_PER_DEGREE, sign: sense };
  }
  const [x, y] = [(nx - 1) / 2, (ny - 1) / 2];
  const alongX = positionAngle(geometry, x, y, 1, 0);
  const alongY = positionAngle(geometry, x, y, 0, 1);
  const isMirrored = Math.sin(alongY - alongX) < 0;
  const axis = zero.from.endsWith('x') ? alongX : alongY;
  return {
    offsetRad: zero.from.startsWith('-') ? axis + Math.PI : axis,
    sign: isMirrored ? (-sense as 1 | -1) : sense,
  };
}
