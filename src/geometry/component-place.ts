import { DataError } from '../errors.js';
import type { ComponentImage } from './component-image.js';
import { type MapOptions, type PlacedMap, readPlacement } from './solar-map.js';
import { pixelToVector } from './wcs.js';

/** Components of one map may differ by this in place [pixels]: headers round. */
const SAME_PLACE = 0.3;
/** Components of one map whose times differ by more deserve a flag [s]. */
const SAME_TIME_S = 60;

/**
 * Checks that a component lies on the same pixels as the first one, which is placed. A component without
 * coordinates of its own is taken to lie there. Throws DataError that names both files; gives flags.
 */
export function checkSamePlace(
  first: ComponentImage,
  placed: PlacedMap,
  other: ComponentImage,
  options: MapOptions,
): string[] {
  if (other === first) return [];
  const name = ({ source }: ComponentImage) => `${source.name} (${source.file})`;
  const context = { file: other.file.name, hdu: other.source.hdu };
  const { nx, ny } = other;
  if (nx !== first.nx || ny !== first.ny)
    throw new DataError(
      `${name(first)} has ${first.nx} x ${first.ny} pixels, ${name(other)} ${nx} x ${ny}; wanted the same`,
      context,
    );
  if (other.header === first.header) return [];
  const { geometry, observed } = readPlacement(other.header, nx, ny, options);
  if (!geometry) return [];
  const [a, b, c, d] = placed.geometry.wcs.forward;
  const pixel = Math.sqrt(Math.abs(a * d - b * c));
  const [here, there] = [
    [0, 0, 0],
    [0, 0, 0],
  ];
  for (const [x, y] of [
    [0, 0],
    [nx - 1, 0],
    [0, ny - 1],
  ]) {
    pixelToVector(placed.geometry.wcs, x, y, here);
    pixelToVector(geometry.wcs, x, y, there);
    const off = Math.hypot(...here.map((value, i) => value - there[i])) / pixel;
    if (geometry.frame !== placed.geometry.frame || off > SAME_PLACE)
      throw new DataError(
        `${name(first)} and ${name(other)} do not lie on the same pixels, a corner is ${off.toPrecision(2)} pixels off; wanted the same coordinates`,
        context,
      );
  }
  const [one, two] = [placed.observed, observed].map((iso) => Date.parse(iso ?? ''));
  return Math.abs(one - two) > 1000 * SAME_TIME_S
    ? [
        `${name(first)} and ${name(other)} were taken ${Math.round(Math.abs(one - two) / 6e4)} minutes apart`,
      ]
    : [];
}
