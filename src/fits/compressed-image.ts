import { FitsError } from '../errors.js';
import type { FitsFile } from './file.js';
import type { FitsHdu } from './hdu.js';
import type { ImageValues, Scaling } from './scaling.js';

export function readTiles(
  file: FitsFile,
  hdu: FitsHdu,
  _plane: number,
  _scaling: Scaling,
  _values: ImageValues,
  _warnings: string[],
): void {
  throw new FitsError(`compression ${hdu.compression} not yet read`, {
    file: file.name,
    hdu: hdu.index,
  });
}
