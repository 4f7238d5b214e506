import { type ErrorContext, GeometryError } from '../errors.js';
import type { FitsHeader } from '../fits/header.js';
import { numberAt } from '../fits/header.js';
import { ARCSEC_PER_DEGREE, ARCSEC_PER_RADIAN } from '../units.js';
import type { GeometryOptions, ImageGeometry } from './geometry-input.js';
import { pixelToSurface } from './image-on-sun.js';
import { angularRadiusOf, type Observer } from './observer.js';
import { type Vector3, viewFrame } from './solar-frame.js';
import { pixelToWorld, vectorToPixel } from './wcs.js';

/** A stated field centre may be off by this fraction of the field of view before a warning is due. */
const CENTRE_TOLERANCE = 0.1;
/** The limb may stick out of a full-disk picture by this fraction of the radius. */
const LIMB_TOLERANCE = 0.03;
const PROBES = 48;

/** Whether any of a grid of pixels over the picture sees the disk. */
function touchesDisk(geometry: ImageGeometry, observer: Observer, nx: number, ny: number): boolean {
  const frame = viewFrame(observer);
  const point: Vector3 = [0, 0, 0];
  for (let j = 0; j <= PROBES; j++) {
    for (let i = 0; i <= PROBES; i++) {
      const x = ((nx - 1) * i) / PROBES;
      const y = ((ny - 1) * j) / PROBES;
      if (pixelToSurface(frame, geometry, x, y, point)) return true;
    }
  }
  return false;
}

function position(geometry: ImageGeometry, nx: number, ny: number): string {
  const centre = [0, 0];
  if (!pixelToWorld(geometry.wcs, (nx - 1) / 2, (ny - 1) / 2, centre)) return 'off the projection';
  const [unit, name] =
    geometry.frame === 'helioprojective' ? [ARCSEC_PER_DEGREE, 'arcsec'] : [1, 'deg'];
  return `${(centre[0] * unit).toFixed(0)}, ${(centre[1] * unit).toFixed(0)} ${name}`;
}

/**
 * Throws GeometryError where no pixel lies on the disk; warns where XCEN and YCEN contradict the WCS, as
 * they do after a crop that left CRPIX as it was.
 */
export function checkPlacement(
  header: FitsHeader,
  geometry: ImageGeometry,
  observer: Observer,
  nx: number,
  ny: number,
  options: GeometryOptions,
  context: ErrorContext,
): string[] {
  if (!touchesDisk(geometry, observer, nx, ny))
    throw new GeometryError(
      `no pixel lies on the visible disk: by the header the picture is centred on ${position(geometry, nx, ny)}; ` +
        'a stale CRPIX or CRVAL can be overruled by --at LON,LAT',
      context,
    );
  const isStated = geometry.frame === 'helioprojective' && options.at === undefined;
  return isStated ? centreWarning(header, geometry, nx, ny) : [];
}

function centreWarning(
  header: FitsHeader,
  geometry: ImageGeometry,
  nx: number,
  ny: number,
): string[] {
  const stated = [numberAt(header, 'XCEN'), numberAt(header, 'YCEN')];
  const centre = [0, 0];
  if (!pixelToWorld(geometry.wcs, (nx - 1) / 2, (ny - 1) / 2, centre)) return [];
  const [a, b, c, d] = geometry.wcs.forward;
  const view = [Math.hypot(a * nx, b * ny), Math.hypot(c * nx, d * ny)];
  const isOff = [0, 1].some((axis) => {
    const value = stated[axis];
    if (value === undefined) return false;
    const off = Math.abs(value - centre[axis] * ARCSEC_PER_DEGREE) / ARCSEC_PER_RADIAN;
    return off > CENTRE_TOLERANCE * view[axis];
  });
  if (!isOff) return [];
  return [
    `by its WCS the picture is centred on ${position(geometry, nx, ny)}, but XCEN, YCEN say ${stated.join(', ')}: the WCS is used, it may be stale after a crop`,
  ];
}

/** Whether the limb all round lies in the picture. */
export function isFullDisk(
  geometry: ImageGeometry,
  observer: Observer,
  nx: number,
  ny: number,
): boolean {
  if (geometry.frame !== 'helioprojective') return false;
  const radius = angularRadiusOf(observer);
  const pixel = [0, 0];
  const [a, b, c, d] = geometry.wcs.forward;
  const margin = (LIMB_TOLERANCE * radius) / Math.sqrt(Math.abs(a * d - b * c));
  for (let k = 0; k < 16; k++) {
    const angle = (k * Math.PI) / 8;
    const west = Math.sin(radius) * Math.cos(angle);
    const north = Math.sin(radius) * Math.sin(angle);
    if (!vectorToPixel(geometry.wcs, Math.cos(radius), west, north, pixel)) return false;
    const [x, y] = pixel;
    if (x < -margin || y < -margin || x > nx - 1 + margin || y > ny - 1 + margin) return false;
  }
  return true;
}
