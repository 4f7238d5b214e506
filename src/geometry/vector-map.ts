import { DataError, UsageError } from '../errors.js';
import { type FitsFile, readFitsFile } from '../fits/file.js';
import { stringAt } from '../fits/header.js';
import { ambiguityFlips } from './ambiguity-flags.js';
import {
  type AzimuthZero,
  azimuthOnSky,
  azimuthZeroText,
  countsFromImage,
  DEFAULT_AZIMUTH_ZERO,
} from './azimuth-zero.js';
import {
  type ComponentImage,
  gaussFactor,
  radianFactor,
  readComponent,
  scaledValues,
} from './component-image.js';
import { type ComponentFamily, type ComponentSource, componentFamily } from './component-names.js';
import { checkSamePlace } from './component-place.js';
import { dropFailedFits } from './failed-fits.js';
import {
  type MapOptions,
  type PlacedMap,
  placeMap,
  readPlacement,
  type SolarMap,
} from './solar-map.js';

export type { ComponentName, ComponentSource } from './component-names.js';

/** What both kinds of vector map have. */
interface VectorMapBase {
  /**
   * Geometry, observer and date, and as values the component along the line of sight (camera family) or the
   * radial one (heliographic family). A pixel without one of its components is NaN in every array.
   */
  readonly base: SolarMap;
  /** What was read, with the HDU of each. */
  readonly sources: readonly (ComponentSource & { readonly hdu: number })[];
}

/**
 * A vector map in the frame of the camera; nx * ny values each. psi is the azimuth counter-clockwise from
 * solar north on the sky as the observer sees it, known up to 180 degrees.
 */
export interface CameraVectorMap extends VectorMapBase {
  readonly kind: 'camera';
  /** Transverse field Bt [G]. */
  readonly transverseG: Float64Array;
  /** Bt^2 cos 2 psi and Bt^2 sin 2 psi [G^2], which do not change when the azimuth turns by 180 degrees. */
  readonly q: Float64Array;
  readonly u: Float64Array;
  /** Which azimuth is zero and which way it counts, in words. */
  readonly azimuthZero: string;
  /** Transverse components to solar north and west on the sky [G], where an ambiguity map resolves them. */
  readonly resolved?: { readonly northG: Float64Array; readonly westG: Float64Array };
  /** 1-sigma errors of a source pixel. */
  readonly errors?: {
    readonly strengthG: Float64Array;
    readonly inclinationRad: Float64Array;
    readonly azimuthRad: Float64Array;
  };
}

/** A vector map in heliographic components, nx * ny values each [G]. */
export interface HeliographicVectorMap extends VectorMapBase {
  readonly kind: 'heliographic';
  readonly westG: Float64Array;
  readonly northG: Float64Array;
  readonly radialG: Float64Array;
  /** 1-sigma errors of a source pixel. */
  readonly errors?: {
    readonly westG: Float64Array;
    readonly northG: Float64Array;
    readonly radialG: Float64Array;
  };
}

export type VectorMap = CameraVectorMap | HeliographicVectorMap;

/** What the user says about a vector map. */
export interface VectorMapOptions extends MapOptions {
  /** Counter-clockwise from the image's +y axis where left out. */
  readonly azimuthZero?: AzimuthZero | undefined;
}

/** The images of a family, the place they share, and what is worth a flag. */
interface Components {
  readonly fields: readonly [ComponentImage, ComponentImage, ComponentImage];
  readonly errors?: readonly [ComponentImage, ComponentImage, ComponentImage];
  readonly ambiguity?: ComponentImage;
  readonly placed: PlacedMap;
  readonly flags: string[];
}

type Three<T> = readonly [T, T, T];
const three = <T, U>([a, b, c]: Three<T>, f: (item: T) => U): Three<U> => [f(a), f(b), f(c)];

function readComponents(
  family: ComponentFamily,
  options: VectorMapOptions,
  open: (path: string) => FitsFile,
): Components {
  const files = new Map<string, FitsFile>();
  const read = (source: ComponentSource): ComponentImage => {
    const file = files.get(source.file) ?? open(source.file);
    files.set(source.file, file);
    return readComponent(source, file, options);
  };
  const fields = three(family.fields, read);
  const errors = family.errors && three(family.errors, read);
  const ambiguity = family.ambiguity && read(family.ambiguity);
  // Of three HDUs often one alone has the coordinates.
  const isPlaced = ({ header, nx, ny }: ComponentImage) =>
    readPlacement(header, nx, ny, options).missing.length === 0;
  const carrier = fields.find(isPlaced) ?? fields[0];
  const placed = placeMap(carrier.file, carrier.source.hdu, options);
  const flags = [...placed.warnings];
  const all = [...fields, ...(errors ?? []), ...(ambiguity ? [ambiguity] : [])];
  for (const image of all)
    flags.push(...image.warnings, ...checkSamePlace(carrier, placed, image, options));
  return { fields, ...(errors && { errors }), ...(ambiguity && { ambiguity }), placed, flags };
}

function sourcesOf({ fields, errors = [] as never, ambiguity }: Components) {
  return [...fields, ...errors, ...(ambiguity ? [ambiguity] : [])].map(({ source }) => source);
}

/** Makes a pixel missing in every array where it is missing in one. Gives the number of pixels left. */
function shareGaps(arrays: readonly Float64Array[]): number {
  const size = arrays[0].length;
  let known = 0;
  for (let i = 0; i < size; i++) {
    if (arrays.some((array) => Number.isNaN(array[i])))
      for (const array of arrays) array[i] = Number.NaN;
    else known++;
  }
  return known;
}

function baseMap(
  { placed, fields, flags }: Components,
  values: Float64Array,
  component: SolarMap['component'],
  options: VectorMapOptions,
): SolarMap {
  const unit =
    options.unit ?? stringAt(fields[component === 'radial' ? 2 : 0].header, 'BUNIT') ?? 'G';
  return { ...placed, values, component, unit, warnings: [...new Set(flags)] };
}

const EMPTY = 'no pixel has all three components';

function heliographicMap(parts: Components, options: VectorMapOptions): HeliographicVectorMap {
  const { fields, flags } = parts;
  const factors = three(fields, (image) => gaussFactor(image, options.unit, flags));
  const signed = (image: ComponentImage, i: number) =>
    scaledValues(image, /east|south/.test(image.source.name) ? -factors[i] : factors[i]);
  const [westG, northG, radialG] = fields.map(signed);
  // An error map without a unit of its own has that of its component.
  const errors = parts.errors?.map((image, i) =>
    scaledValues(
      image,
      stringAt(image.header, 'BUNIT') ? gaussFactor(image, options.unit, flags) : factors[i],
    ),
  );
  if (shareGaps([westG, northG, radialG, ...(errors ?? [])]) === 0)
    throw new DataError(EMPTY, { file: parts.placed.sourceName });
  return {
    kind: 'heliographic',
    base: baseMap(parts, radialG, 'radial', options),
    sources: sourcesOf(parts),
    westG,
    northG,
    radialG,
    ...(errors && { errors: { westG: errors[0], northG: errors[1], radialG: errors[2] } }),
  };
}

/** Instruments whose inversions are known to count azimuth from +x; a hint is all that a header allows. */
const COUNTS_FROM_X = /^SOT\/?SP$/i;

function chooseZero(parts: Components, options: VectorMapOptions): AzimuthZero {
  const zero = options.azimuthZero ?? DEFAULT_AZIMUTH_ZERO;
  const { frame } = parts.placed.geometry;
  if (countsFromImage(zero) && frame !== 'helioprojective')
    throw new UsageError(
      `azimuths on a ${frame} grid have no image axis to count from; wanted --azimuth-zero north, east, south or west`,
    );
  const instrument = stringAt(parts.fields[2].header, 'INSTRUME') ?? '';
  const hint =
    !options.azimuthZero && COUNTS_FROM_X.test(instrument)
      ? `; maps of ${instrument} mostly count from +x`
      : '';
  parts.flags.push(
    options.azimuthZero
      ? `azimuth counted ${azimuthZeroText(zero)}, as given`
      : `azimuth taken as ${azimuthZeroText(zero)}: the header does not say (--azimuth-zero overrules)${hint}`,
  );
  return zero;
}

/** Azimuths beyond half a turn may be resolved already, but nothing says so. */
function noteFullTurn(azimuthRad: Float64Array, flags: string[]): void {
  if (azimuthRad.some((value) => value < -Math.PI / 2 - 1e-3 || value > Math.PI + 1e-3))
    flags.push('azimuths span more than 180 degrees, but no ambiguity map says they are resolved');
}

function cameraMap(parts: Components, options: VectorMapOptions): CameraVectorMap {
  const { fields, placed, flags } = parts;
  const { nx, ny } = placed;
  const factors = three(fields, (image) =>
    image.source.name === 'strength'
      ? gaussFactor(image, options.unit, flags)
      : radianFactor(image, flags),
  );
  const [strength, inclination, azimuth] = fields.map((image, i) =>
    scaledValues(image, factors[i]),
  );
  const errors = parts.errors?.map((image, i) =>
    scaledValues(
      image,
      stringAt(image.header, 'BUNIT') === undefined
        ? factors[i]
        : i === 0
          ? gaussFactor(image, options.unit, flags)
          : radianFactor(image, flags),
    ),
  );
  dropFailedFits(strength, inclination, nx, ny, flags);
  const zero = chooseZero(parts, options);
  const { offsetRad, sign } = azimuthOnSky(zero, placed.geometry, nx, ny);
  const flips = parts.ambiguity && ambiguityFlips(parts.ambiguity, flags);
  if (!flips) noteFullTurn(azimuth, flags);
  const known = shareGaps([
    strength,
    inclination,
    azimuth,
    ...(errors ?? []),
    ...(flips ? [flips] : []),
  ]);
  if (known === 0) throw new DataError(EMPTY, { file: placed.sourceName });
  const psi = azimuth.map((value) => offsetRad + sign * value);
  const transverseG = strength.map((value, i) => value * Math.sin(inclination[i]));
  const along = strength.map((value, i) => value * Math.cos(inclination[i]));
  const turned = (i: number) => (flips?.[i] ? -transverseG[i] : transverseG[i]);
  return {
    kind: 'camera',
    base: baseMap(parts, along, 'line-of-sight', options),
    sources: sourcesOf(parts),
    transverseG,
    q: transverseG.map((value, i) => value * value * Math.cos(2 * psi[i])),
    u: transverseG.map((value, i) => value * value * Math.sin(2 * psi[i])),
    azimuthZero: azimuthZeroText(zero),
    ...(flips && {
      resolved: {
        northG: psi.map((angle, i) => turned(i) * Math.cos(angle)),
        westG: psi.map((angle, i) => -turned(i) * Math.sin(angle)),
      },
    }),
    ...(errors && {
      errors: { strengthG: errors[0], inclinationRad: errors[1], azimuthRad: errors[2] },
    }),
  };
}

/**
 * Reads the components of a vector map, from one file or several, converts them to G and places them on the Sun.
 * Throws UsageError where the components make no complete family, DataError where they do not lie on the
 * same pixels or show something else, GeometryError where they cannot be placed.
 */
export function readVectorMap(
  sources: readonly ComponentSource[],
  options: VectorMapOptions = {},
  open: (path: string) => FitsFile = readFitsFile,
): VectorMap {
  const family = componentFamily(sources);
  if (family.kind === 'heliographic' && options.azimuthZero)
    throw new UsageError('--azimuth-zero belongs to strength, inclination and azimuth only');
  const parts = readComponents(family, options, open);
  return family.kind === 'camera' ? cameraMap(parts, options) : heliographicMap(parts, options);
}
