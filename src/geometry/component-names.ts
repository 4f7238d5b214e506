import { UsageError } from '../errors.js';

const HELIOGRAPHIC = ['east', 'west', 'north', 'south', 'radial'] as const;
const CAMERA = ['strength', 'inclination', 'azimuth'] as const;

/** Component along a heliographic direction; the sign follows the name, so south = -north. */
export type HeliographicName = (typeof HELIOGRAPHIC)[number];
/** Component in the frame of the camera. */
export type CameraName = (typeof CAMERA)[number];
export type ComponentName =
  | HeliographicName
  | CameraName
  | 'ambiguity'
  | `error-${HeliographicName | CameraName}`;

/** One component of a vector map: where its values are. */
export interface ComponentSource {
  readonly name: ComponentName;
  readonly file: string;
  /** HDU by number from 0 or by EXTNAME. */
  readonly hdu?: number | string;
  /** Plane of a cube, from 0. */
  readonly plane?: number;
}

/** Every name a component may have. */
export const COMPONENT_NAMES: readonly ComponentName[] = [
  ...HELIOGRAPHIC,
  ...CAMERA,
  'ambiguity',
  ...[...HELIOGRAPHIC, ...CAMERA].map((name) => `error-${name}` as const),
];

/** The components of a complete map, sorted by what they are. */
export interface ComponentFamily {
  readonly kind: 'camera' | 'heliographic';
  /** strength, inclination, azimuth; or along west (or east), along north (or south), radial. */
  readonly fields: readonly [ComponentSource, ComponentSource, ComponentSource];
  /** 1-sigma errors of the same three, where given. */
  readonly errors?: readonly [ComponentSource, ComponentSource, ComponentSource];
  readonly ambiguity?: ComponentSource;
}

const WANTED =
  'wanted strength, inclination and azimuth, or east|west, north|south and radial, each once';

/** The slots of a family: every slot takes one of its names. */
const SLOTS: Readonly<Record<ComponentFamily['kind'], readonly (readonly string[])[]>> = {
  camera: CAMERA.map((name) => [name]),
  heliographic: [['west', 'east'], ['north', 'south'], ['radial']],
};

/**
 * Sorts components into a family. Throws UsageError where a component is given twice, the families are
 * mixed, one is missing, or the errors are not those of all three components.
 */
export function componentFamily(sources: readonly ComponentSource[]): ComponentFamily {
  const given = sources.map(({ name }) => name).join(', ') || 'nothing';
  const refuse = (what: string): never => {
    throw new UsageError(`components given: ${given}; ${what}`);
  };
  const kind = sources.some(({ name }) => (CAMERA as readonly string[]).includes(name))
    ? 'camera'
    : 'heliographic';
  const taken = new Set<ComponentSource>();
  const fill = (prefix: string): (ComponentSource | undefined)[] =>
    SLOTS[kind].map((names) => {
      const found = sources.filter(({ name }) => names.some((one) => name === prefix + one));
      for (const source of found) taken.add(source);
      if (found.length > 1) refuse(`${found.map(({ name }) => name).join(' and ')} name one twice`);
      return found[0];
    });
  const fields = fill('');
  const errors = fill('error-');
  const flips = sources.filter(({ name }) => name === 'ambiguity');
  if (flips.length > 1) refuse('ambiguity is given twice, wanted once');
  if (fields.some((source) => source === undefined)) refuse(WANTED);
  if (flips.length > 0 && kind === 'heliographic')
    refuse('ambiguity belongs to strength, inclination and azimuth only');
  const stray = sources.find((source) => !taken.has(source) && source.name !== 'ambiguity');
  if (stray) refuse(`${stray.name} belongs to the other family: ${WANTED}`);
  const errorCount = errors.filter((source) => source !== undefined).length;
  if (errorCount > 0 && errorCount < 3) refuse('wanted error maps of all three components or none');
  return {
    kind,
    fields: fields as unknown as ComponentFamily['fields'],
    ...(errorCount === 3 && { errors: errors as unknown as ComponentFamily['fields'] }),
    ...(flips[0] && { ambiguity: flips[0] }),
  };
}
