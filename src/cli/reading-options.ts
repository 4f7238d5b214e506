import type { MapOptions } from '../geometry/solar-map.js';

/** Options that say what a file's header does not, as commander gives them. */
export interface ReadingOptions {
  readonly hdu?: number | string;
  readonly plane?: number;
  readonly date?: string;
  readonly at?: { readonly lonDeg: number; readonly latDeg: number };
  readonly pixelScale?: number;
  readonly unit?: string;
}

/** The same for the reader of maps. */
export function readingOptions(options: ReadingOptions): MapOptions {
  return {
    ...(options.hdu !== undefined && { hdu: options.hdu }),
    ...(options.plane !== undefined && { plane: options.plane }),
    ...(options.date !== undefined && { dateIso: options.date }),
    ...(options.at && { at: options.at }),
    ...(options.pixelScale !== undefined && { pixelScaleArcsec: options.pixelScale }),
    ...(options.unit !== undefined && { unit: options.unit }),
  };
}
