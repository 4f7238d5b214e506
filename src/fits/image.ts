import { type ErrorContext, FitsError } from '../errors.js';
import { readTiles } from './compressed-image.js';
import { describeShortage, type FitsFile } from './file.js';
import type { FitsHdu } from './hdu.js';
import { type FitsHeader, stringAt } from './header.js';
import { scalePixels } from './pixels.js';
import { type ImageValues, makeValues, scalingOf } from './scaling.js';

/** One picture, or one plane of a cube. Row 0 is the first in the file: `values[x + nx * y]`. */
export interface FitsImage {
  readonly nx: number;
  readonly ny: number;
  /** Physical values (BSCALE and BZERO applied); NaN is missing, no value is infinite. */
  readonly values: ImageValues;
  /** BUNIT as it stands. */
  readonly bunit: string | undefined;
  /** For a compressed image the picture's own view, without keywords of table and compression. */
  readonly header: FitsHeader;
  readonly hdu: number;
  /** How many values are NaN. */
  readonly missing: number;
  readonly warnings: readonly string[];
}

/**
 * Reads the image in HDU `hduIndex`, plain or tile-compressed. Of a cube plane `plane` is read,
 * counted from 0 over all axes beyond the second; it may be left out when there is just one.
 * Values are float32 for float32, and 8 and 16-bit integers, else float64 (see makeValues).
 * Throws FitsError when the HDU is no such image, is cut short, corrupt, or beyond the limits.
 */
export function readImage(
  file: FitsFile,
  hduIndex: number,
  options: { readonly plane?: number } = {},
): FitsImage {
  const context = { file: file.name, hdu: hduIndex };
  const hdu = file.hdus[hduIndex];
  if (hdu === undefined) {
    throw new FitsError(`no HDU ${hduIndex}, the file has ${file.hdus.length} (from 0)`, context);
  }
  const [nx, ny] = checkShape(hdu, file, context);
  const plane = choosePlane(hdu, options.plane, context);
  const shortage = describeShortage(hdu, file.bytes.length);
  if (shortage !== undefined) throw new FitsError(shortage, context);

  const warnings: string[] = [];
  const scaling = scalingOf(hdu.header, hdu.bitpix, warnings);
  const values = makeValues(nx * ny, hdu.bitpix, scaling);
  const start = hdu.dataOffset + plane * nx * ny * (Math.abs(hdu.bitpix) / 8);
  const missing =
    hdu.kind === 'image'
      ? scalePixels(file.bytes, start, nx * ny, hdu.bitpix, scaling, values, 0)
      : readTiles(file, hdu, plane, scaling, values, warnings);
  return {
    nx,
    ny,
    values,
    bunit: stringAt(hdu.header, 'BUNIT'),
    header: hdu.header,
    hdu: hduIndex,
    missing,
    warnings,
  };
}

function checkShape(hdu: FitsHdu, file: FitsFile, context: ErrorContext): [number, number] {
  if (hdu.kind !== 'image' && hdu.kind !== 'compressed-image') {
    throw new FitsError(`HDU ${hdu.index} is no image (${hdu.kind})`, context);
  }
  const [nx, ny] = hdu.shape;
  const size = hdu.shape.join(' x ');
  if (nx === undefined || ny === undefined || nx < 1 || ny < 1) {
    throw new FitsError(
      `HDU ${hdu.index} has ${size || 'no'} pixels, a picture of two axes wanted`,
      context,
    );
  }
  const limit = file.limits.maxPixels;
  if (nx * ny > limit) {
    throw new FitsError(`the image claims ${size} pixels, at most ${limit} are read`, context);
  }
  return [nx, ny];
}

function choosePlane(hdu: FitsHdu, asked: number | undefined, context: ErrorContext): number {
  const planes = hdu.shape.slice(2).reduce((product, length) => product * length, 1);
  const size = hdu.shape.join(' x ');
  if (asked === undefined && planes > 1) {
    throw new FitsError(
      `the image is a cube of ${size}, one of its planes must be chosen`,
      context,
    );
  }
  const plane = asked ?? 0;
  if (!Number.isInteger(plane) || plane < 0 || plane >= planes) {
    throw new FitsError(`no plane ${plane} in ${size}, 0 to ${planes - 1} wanted`, context);
  }
  return plane;
}
