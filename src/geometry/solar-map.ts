import { DataError, GeometryError, UsageError } from '../errors.js';
import type { FitsFile } from '../fits/file.js';
import { readImage } from '../fits/image.js';
import { METRES_PER_MEGAMETRE } from '../units.js';
import type { GeometryOptions, ImageGeometry } from './geometry-input.js';
import { readGeometry } from './image-geometry.js';
import { pixelToSurface, surfaceToPixel } from './image-on-sun.js';
import { chooseMagnetogramHdu, type QuantityOptions, readQuantity } from './magnetogram.js';
import { checkPlacement, isFullDisk } from './map-checks.js';
import { type Observer, readObserver } from './observer.js';
import { stonyhurstOf, surfacePoint, type Vector3, viewFrame } from './solar-frame.js';
import { isoFromText, observationTime } from './time.js';

export { chooseMagnetogramHdu } from './magnetogram.js';

/** A magnetogram placed on the Sun; plain data. */
export interface SolarMap {
  readonly nx: number;
  readonly ny: number;
  /** Field in G, NaN missing, row 0 first in the file: `values[x + nx * y]`. */
  readonly values: Float32Array | Float64Array;
  readonly component: 'line-of-sight' | 'radial';
  /** Unit of the values in the file, before they became G; by the header or the user. */
  readonly unit: string;
  /** World and projection in words. */
  readonly geometryName: string;
  /** Opaque outside this folder. */
  readonly geometry: ImageGeometry;
  readonly observer: Observer;
  /** ISO UTC; `undefined` where neither header nor options have a date. */
  readonly observed: string | undefined;
  /** Side of a pixel on the surface at disk centre (at the reference point of a heliographic map). */
  readonly pixelMm: number;
  readonly hdu: number;
  readonly sourceName: string;
  /** Whether the whole disk lies in the picture. */
  readonly fullDisk: boolean;
  readonly warnings: readonly string[];
}

/** What the user says about a map; every item wins over the header. */
export interface MapOptions extends GeometryOptions, QuantityOptions {
  /** Plane of a cube, from 0. */
  readonly plane?: number | undefined;
  readonly dateIso?: string | undefined;
}

/** Observer, date and geometry of an image, as far as header and options give them. */
export interface MapPlacement {
  readonly observer?: Observer;
  readonly observed: string | undefined;
  readonly geometry?: ImageGeometry;
  /** Options that would supply what is missing. */
  readonly missing: readonly string[];
  readonly warnings: readonly string[];
}

function optionDate(text: string | undefined): string | undefined {
  if (text === undefined) return undefined;
  const iso = isoFromText(text);
  if (iso === undefined)
    throw new UsageError(`'${text}' is no date; wanted like 2031-05-01T12:00:00 in UTC`);
  return iso;
}

/** Works out who saw what from where, without reading pixels. */
export function readPlacement(
  header: Parameters<typeof readObserver>[0],
  nx: number,
  ny: number,
  options: MapOptions = {},
): MapPlacement {
  const optionIso = optionDate(options.dateIso);
  const observed = optionIso ?? observationTime(header);
  const seen = readObserver(header, observed, optionIso !== undefined);
  const place = readGeometry({
    header,
    nx,
    ny,
    observer: seen.observer,
    angularRadius: seen.angularRadius ?? (seen.observer && angularRadius(seen.observer)),
    options,
  });
  const missing = [...(seen.observer ? [] : ['--date DATE']), ...place.missing];
  const needsCarrington = place.geometry?.frame === 'carrington';
  if (needsCarrington && Number.isNaN(seen.observer?.carringtonLongitudeDeg))
    missing.push('--date DATE');
  return {
    ...(seen.observer && { observer: seen.observer }),
    observed,
    ...(place.geometry && { geometry: place.geometry }),
    missing,
    warnings: [...seen.warnings, ...place.warnings],
  };
}

function angularRadius(observer: Observer): number {
  return Math.asin(observer.solarRadiusM / observer.distanceM);
}

function joined(items: readonly string[]): string {
  return items.length < 2
    ? items.join('')
    : `${items.slice(0, -1).join(', ')} and ${items[items.length - 1]}`;
}

/** No telescope resolves 10 km on the Sun: a smaller pixel is a wrong scale. */
const SMALLEST_PIXEL_MM = 0.01;

/** A map but for its values and what they are. */
export type PlacedMap = Omit<SolarMap, 'values' | 'component' | 'unit'>;

/**
 * Places the image of an HDU on the Sun. Throws GeometryError where it cannot be placed (the message names
 * the options that would help, `--unit` among them if `needsUnit`) or lies off the disk.
 */
export function placeMap(
  file: FitsFile,
  hdu: number,
  options: MapOptions = {},
  needsUnit = false,
): PlacedMap {
  const { header, shape } = file.hdus[hdu];
  const context = { file: file.name, hdu };
  const [nx, ny] = shape;
  const place = readPlacement(header, nx, ny, options);
  const { observer, geometry } = place;
  if (!observer || !geometry || place.missing.length > 0)
    throw new GeometryError(
      `the header does not say enough to place the picture on the Sun; give ${joined([
        ...place.missing,
        ...(needsUnit ? ['--unit G'] : []),
      ])}`,
      context,
    );
  const pictureWarnings = checkPlacement(header, geometry, observer, nx, ny, options, context);
  const pixelMm = pixelSide(geometry, observer);
  if (!(pixelMm >= SMALLEST_PIXEL_MM))
    throw new GeometryError(
      `by its header a pixel is ${pixelMm.toPrecision(2)} Mm on the Sun; wanted at least ${SMALLEST_PIXEL_MM}: --pixel-scale ARCSEC overrules it`,
      context,
    );
  const undated = place.observed === undefined ? ['the map does not say when it was taken'] : [];
  return {
    nx,
    ny,
    geometryName: `${geometry.frame}, ${geometry.wcs.projection}`,
    geometry,
    observer,
    observed: place.observed,
    pixelMm,
    hdu,
    sourceName: file.name,
    fullDisk: isFullDisk(geometry, observer, nx, ny),
    warnings: [...undated, ...place.warnings, ...pictureWarnings],
  };
}

/**
 * Reads the magnetogram of a file, converts it to G and places it on the Sun. Throws DataError where
 * the file shows something else or its unit is not known, GeometryError where it cannot be placed (the
 * message names the options that would help) or lies off the disk, FitsError for damaged data.
 */
export function readSolarMap(file: FitsFile, options: MapOptions = {}): SolarMap {
  const hdu = chooseMagnetogramHdu(file, options);
  const { header } = file.hdus[hdu];
  const context = { file: file.name, hdu };
  const quantity = readQuantity(header, options.unit);
  if (options.unit !== undefined && quantity.kind === 'unknown')
    throw new UsageError(`'${options.unit}' is no magnetic unit; wanted G, kG, mT, T or Mx/cm^2`);
  const needsUnit = quantity.kind !== 'magnetic';
  const placed = placeMap(file, hdu, options, needsUnit);
  if (needsUnit)
    throw new DataError(
      `${quantity.found}, so the unit of the values is not known; give --unit (G, Mx/cm^2 or T) if they are a calibrated field`,
      context,
    );
  const plane = options.plane === undefined ? {} : { plane: options.plane };
  const image = readImage(file, hdu, plane);
  if (image.missing === image.values.length)
    throw new DataError('the image has no values, all of its pixels are blank', context);
  scale(image.values, quantity.gaussPerUnit ?? 1);
  return {
    ...placed,
    values: image.values,
    component: options.component ?? quantity.component,
    unit: options.unit ?? quantity.unit ?? 'G',
    warnings: [...image.warnings, ...placed.warnings],
  };
}

function scale(values: Float32Array | Float64Array, factor: number): void {
  if (factor === 1) return;
  for (let i = 0; i < values.length; i++) values[i] *= factor;
}

function pixelSide(geometry: ImageGeometry, observer: Observer): number {
  const [a, b, c, d] = geometry.wcs.forward;
  const side = Math.sqrt(Math.abs(a * d - b * c));
  const distance =
    geometry.frame === 'helioprojective'
      ? observer.distanceM - observer.solarRadiusM
      : observer.solarRadiusM;
  return (side * distance) / METRES_PER_MEGAMETRE;
}

/** Stonyhurst [longitude, latitude] in degrees of a map pixel (0-based); `undefined` off the disk. */
export function mapPixelToStonyhurst(
  map: Pick<SolarMap, 'geometry' | 'observer'>,
  x: number,
  y: number,
): [number, number] | undefined {
  const frame = viewFrame(map.observer);
  const point: Vector3 = [0, 0, 0];
  return pixelToSurface(frame, map.geometry, x, y, point) ? stonyhurstOf(frame, point) : undefined;
}

/** Map pixel of a Stonyhurst position [deg]; `undefined` behind the limb. May lie outside the picture. */
export function stonyhurstToMapPixel(
  map: Pick<SolarMap, 'geometry' | 'observer'>,
  lonDeg: number,
  latDeg: number,
): [number, number] | undefined {
  const frame = viewFrame(map.observer);
  const point = surfacePoint(frame, lonDeg, latDeg, [0, 0, 0]);
  const pixel: [number, number] = [0, 0];
  return surfaceToPixel(frame, map.geometry, point, pixel) ? pixel : undefined;
}
