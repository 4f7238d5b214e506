import { DataError } from '../errors.js';
import type { ComponentImage } from './component-image.js';

/** A flag map holds more bits than this in none of the files known. */
const MOST = 255;

/**
 * 1 where an ambiguity map says to turn the azimuth by 180 degrees, 0 where not, NaN where it is blank. Maps of 0
 * and 1 or of 0 and 180 (degrees) mean what they say; of other whole numbers the lowest bit counts, with a
 * flag. Throws DataError for anything else.
 */
export function ambiguityFlips(image: ComponentImage, flags: string[]): Float64Array {
  const found = new Set<number>();
  for (const value of image.values) if (!Number.isNaN(value)) found.add(value);
  const only = (...allowed: number[]) => [...found].every((value) => allowed.includes(value));
  if (only(0, 1)) return Float64Array.from(image.values);
  if (only(0, 180)) return Float64Array.from(image.values, (value) => value / 180);
  const odd = [...found].find((value) => !(Number.isInteger(value) && value >= 0 && value <= MOST));
  if (odd !== undefined)
    throw new DataError(
      `the ambiguity map holds ${odd}; wanted 0 and 1, 0 and 180, or whole numbers up to ${MOST}`,
      { file: image.file.name, hdu: image.source.hdu },
    );
  flags.push('the ambiguity map holds several bits: the lowest one is used');
  return Float64Array.from(image.values, (value) => value % 2);
}
