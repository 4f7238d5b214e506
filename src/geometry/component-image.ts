// One component of a vector map: which image of a file it is, and its values in G or radians.
import { DataError, UsageError } from '../errors.js';
import { type FitsFile, imageHdus } from '../fits/file.js';
import { type FitsHeader, stringAt } from '../fits/header.js';
import { readImage } from '../fits/image.js';
import { RADIANS_PER_DEGREE } from '../units.js';
import type { ComponentName, ComponentSource } from './component-names.js';
import { gaussPerUnit } from './magnetic-unit.js';
import { namedHdu, readQuantity } from './magnetogram.js';

/** A component as it stands in its file. */
export interface ComponentImage {
  readonly source: ComponentSource & { readonly hdu: number };
  readonly file: FitsFile;
  readonly header: FitsHeader;
  readonly nx: number;
  readonly ny: number;
  readonly values: Float32Array | Float64Array;
  readonly warnings: readonly string[];
}

/** How EXTNAME or BTYPE of real files names the components. */
const DESCRIPTIONS: Readonly<Record<string, RegExp>> = {
  strength: /^bmag\b|^field$|strength|total.?field/i,
  inclination: /^binc\b|inclin/i,
  azimuth: /^bazi\b|azimuth/i,
  ambiguity: /ambig/i,
  radial: /^b_?r(ad|$)|radial/i,
  west: /^b_?p(hi|$)|west/i,
  south: /^b_?t(h|$)|south/i,
  east: /east/i,
  north: /north/i,
};
const ERROR = /err|sigma|uncert/i;

function describes(text: string | undefined, name: ComponentName): boolean {
  if (text === undefined || ERROR.test(text) !== name.startsWith('error-')) return false;
  return DESCRIPTIONS[name.replace('error-', '')].test(text);
}

/** HDU of a component: the one named, the file's only image, or the only one described by its name. */
function chooseHdu(file: FitsFile, source: ComponentSource, fallback?: number | string): number {
  const wanted = source.hdu ?? fallback;
  if (wanted !== undefined) return namedHdu(file, wanted).index;
  const images = imageHdus(file);
  const named = images.filter(({ name, header }) =>
    [name, stringAt(header, 'BTYPE')].some((text) => describes(text, source.name)),
  );
  const [choice, ...others] = images.length === 1 ? images : named;
  if (choice && others.length === 0) return choice.index;
  const list = images.map(({ index, name }) => `${index}${name && ` ${name}`}`).join(', ');
  throw new DataError(
    images.length === 0
      ? `holds no image of two axes; ${source.name} was wanted`
      : `has the images ${list}: say which one is ${source.name}, as ${source.name}=FILE#HDU`,
    { file: file.name },
  );
}

/** Refuses an image that says it shows something else. */
function checkQuantity(name: ComponentName, header: FitsHeader, file: string, hdu: number): void {
  if (name === 'ambiguity' || name.startsWith('error-')) return;
  const isAngle = name === 'inclination' || name === 'azimuth';
  const { kind, found, unit } = readQuantity(header);
  const own = {
    strength: 'total field strength',
    inclination: 'field inclination',
    azimuth: 'field azimuth',
  };
  const isOwn = found.startsWith(own[name as keyof typeof own] ?? '-');
  const isWrong = isAngle
    ? kind === 'magnetic' || (kind === 'other' && !isOwn && !found.startsWith('BUNIT'))
    : kind === 'other' && !isOwn;
  if (isWrong)
    throw new DataError(
      `shows ${kind === 'magnetic' ? `a field in ${unit}` : found}; ${name} was wanted`,
      {
        file,
        hdu,
      },
    );
}

/** Reads the image of a component; `fallback` is where it lies if the source itself does not say. */
export function readComponent(
  source: ComponentSource,
  file: FitsFile,
  fallback: { readonly hdu?: number | string | undefined; readonly plane?: number | undefined },
): ComponentImage {
  const hdu = chooseHdu(file, source, fallback.hdu);
  const { header, shape } = file.hdus[hdu];
  checkQuantity(source.name, header, file.name, hdu);
  const plane = source.plane ?? fallback.plane;
  const planes = shape.slice(2).reduce((product, length) => product * length, 1);
  if (plane === undefined && planes > 1)
    throw new UsageError(
      `${source.name}: ${file.name} is a cube of ${shape.join(' x ')}; wanted ${source.name}=FILE:PLANE, planes from 0`,
    );
  const image = readImage(file, hdu, plane === undefined ? {} : { plane });
  if (image.missing === image.values.length)
    throw new DataError(`${source.name} has no values, all of its pixels are blank`, {
      file: file.name,
      hdu,
    });
  const { nx, ny, values, warnings } = image;
  return { source: { ...source, hdu }, file, header, nx, ny, values, warnings };
}

function largest(values: Float32Array | Float64Array): number {
  let most = 0;
  for (const value of values) if (Math.abs(value) > most) most = Math.abs(value);
  return most;
}

/** Fields of an active region reach at least the first and never the second [G]. */
const PLAUSIBLE_G = [100, 20_000] as const;

/** Factor from the values of a field component to G, by `--unit`, BUNIT or, flagged, their size. */
export function gaussFactor(
  image: ComponentImage,
  unit: string | undefined,
  flags: string[],
): number {
  const { name } = image.source;
  const bunit = stringAt(image.header, 'BUNIT');
  const factor = gaussPerUnit(unit ?? bunit ?? '');
  if (factor !== undefined) return factor;
  if (unit !== undefined)
    throw new UsageError(`'${unit}' is no magnetic unit; wanted G, kG, mT, T or Mx/cm^2`);
  const most = largest(image.values);
  const found = bunit === undefined ? 'no BUNIT' : `BUNIT = '${bunit}'`;
  if (bunit !== undefined || most < PLAUSIBLE_G[0] || most > PLAUSIBLE_G[1])
    throw new DataError(
      `${found} and values up to ${most.toPrecision(4)}, so the unit of ${name} is not known; give --unit (G, Mx/cm^2 or T)`,
      { file: image.file.name, hdu: image.source.hdu },
    );
  flags.push(
    `no BUNIT: ${name} taken as G, its values reach ${most.toPrecision(4)} (--unit overrules)`,
  );
  return 1;
}

/** Largest angle that radians can reach, with room for rounding. */
const FULL_TURN = 2 * Math.PI + 1e-5;

/** Factor from the values of an angle to radians by BUNIT; without one by their size, degrees by default. */
export function radianFactor(image: ComponentImage, flags: string[]): number {
  const bunit = stringAt(image.header, 'BUNIT');
  if (bunit !== undefined) {
    if (/^deg(ree)?s?$|^°$/i.test(bunit)) return RADIANS_PER_DEGREE;
    if (/^rad(ian)?s?$/i.test(bunit)) return 1;
    throw new DataError(`BUNIT = '${bunit}'; ${image.source.name} in deg or rad was wanted`, {
      file: image.file.name,
      hdu: image.source.hdu,
    });
  }
  const isRadians = largest(image.values) <= FULL_TURN;
  flags.push(
    `no BUNIT: ${image.source.name} taken as ${isRadians ? 'radians, no value is above 2 pi' : 'degrees'}`,
  );
  return isRadians ? 1 : RADIANS_PER_DEGREE;
}

/** Values times a factor, as float64. */
export function scaledValues(image: ComponentImage, factor: number): Float64Array {
  return Float64Array.from(image.values, (value) => value * factor);
}
