import type { FitsHeader } from '../fits/header.js';
import type { Frame } from './axis.js';
import type { Observer } from './observer.js';
import type { Wcs } from './wcs.js';

/** Where the pixels of an image lie; plain data, opaque outside this folder. */
export interface ImageGeometry {
  readonly frame: Frame;
  readonly wcs: Wcs;
}

/** What the user says where the header is silent or wrong. */
export interface GeometryOptions {
  /** Stonyhurst position of the image centre. */
  readonly at?: { readonly lonDeg: number; readonly latDeg: number } | undefined;
  readonly pixelScaleArcsec?: number | undefined;
}

/** The header's part of the question: what is known of the image besides its WCS. */
export interface GeometryInput {
  readonly header: FitsHeader;
  readonly nx: number;
  readonly ny: number;
  /** Needed with `options.at` only. */
  readonly observer?: Observer | undefined;
  /** Angular radius of the Sun [rad], for scales in solar radii. */
  readonly angularRadius?: number | undefined;
  readonly options?: GeometryOptions;
}

export interface GeometryReading {
  readonly geometry?: ImageGeometry;
  /** Options that would supply what is missing. */
  readonly missing: readonly string[];
  readonly warnings: readonly string[];
}

export const SCALE_OPTION = '--pixel-scale ARCSEC';
export const POSITION_OPTION = '--at LON,LAT';

/** A 2 x 2 matrix by rows. */
export type Matrix2 = readonly [number, number, number, number];

/** The matrix scaled so that its pixels have the mean side `size`. */
export function rescaled(matrix: Matrix2, size: number): Matrix2 {
  const factor = size / Math.sqrt(Math.abs(matrix[0] * matrix[3] - matrix[1] * matrix[2]));
  return [matrix[0] * factor, matrix[1] * factor, matrix[2] * factor, matrix[3] * factor];
}
