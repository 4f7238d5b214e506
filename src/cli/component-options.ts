import { existsSync } from 'node:fs';
import { UsageError } from '../errors.js';
import type { AzimuthZero } from '../geometry/azimuth-zero.js';
import {
  COMPONENT_NAMES,
  type ComponentSource,
  componentFamily,
} from '../geometry/component-names.js';
import { hduArgument } from './arguments.js';

/**
 * Reads NAME=FILE[#HDU][:PLANE]. The first '=' ends the name; a last ':' with digits after it is a plane, the
 * last '#' before that an HDU; all others belong to the file's name, as they all do where there is a
 * file of the whole name. Throws UsageError.
 */
export function parseComponent(text: string): ComponentSource {
  const [, given, rest] = /^([^=]*)=(.*)$/s.exec(text) ?? [];
  const name = COMPONENT_NAMES.find((known) => known === given?.trim().toLowerCase());
  if (name === undefined)
    throw new UsageError(
      `component '${text}' is not understood; wanted NAME=FILE[#HDU][:PLANE] with NAME among ${COMPONENT_NAMES.join(', ')}`,
    );
  const source = { name, ...parsePlace(rest) };
  if (source.file === '')
    throw new UsageError(`component '${text}' names no file; wanted ${name}=FILE[#HDU][:PLANE]`);
  return source;
}

function parsePlace(text: string): Omit<ComponentSource, 'name'> {
  if (existsSync(text)) return { file: text };
  const [, place, planeText] = /^(.*?)(?::(\d+))?$/s.exec(text)!;
  const plane = planeText === undefined ? {} : { plane: Number(planeText) };
  const mark = place.lastIndexOf('#');
  if (existsSync(place) || mark < 0 || mark === place.length - 1) return { file: place, ...plane };
  return { file: place.slice(0, mark), hdu: hduArgument(place.slice(mark + 1)), ...plane };
}

/** For commander: adds one more `--component` to those before. */
export function componentArgument(
  text: string,
  before: readonly ComponentSource[] = [],
): readonly ComponentSource[] {
  return [...before, parseComponent(text)];
}

/** Options of vector maps as commander gives them. */
export interface ComponentOptions {
  readonly component?: readonly ComponentSource[];
  readonly azimuthZero?: AzimuthZero;
}

/** Throws UsageError unless there are either files or a complete set of components. */
export function checkInputs(files: readonly string[], options: ComponentOptions): void {
  const { component, azimuthZero } = options;
  if (component === undefined) {
    if (files.length === 0) throw new UsageError("missing required argument 'file'");
    if (azimuthZero) throw new UsageError('--azimuth-zero belongs to --component azimuth=FILE');
    return;
  }
  if (files.length > 0)
    throw new UsageError(
      `--component describes one vector map; ${files.join(', ')} beside it is one map too many`,
    );
  componentFamily(component);
}
