import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { inflateSync } from 'node:zlib';

/** What other software reads in one image of a fixture; see fixtures/fits/README.md. */
export interface ExpectedImage {
  readonly hdu: number;
  readonly plane: number | null;
  readonly read_by: string;
  readonly shape: readonly number[];
  readonly min: number;
  readonly max: number;
  readonly sum: number;
  readonly missing: number;
  readonly values?: string;
  readonly sha256?: string;
}

export interface ExpectedCards {
  readonly cards: readonly (readonly [string, string | number | boolean | null, string])[];
}

const folder = new URL('../../fixtures/fits/', import.meta.url);

export function fixturePath(name: string): string {
  return fileURLToPath(new URL(name, folder));
}

export function fixtureBytes(name: string): Uint8Array {
  return new Uint8Array(readFileSync(fixturePath(name)));
}

export const expected: Readonly<Record<string, readonly ExpectedImage[] | ExpectedCards>> =
  JSON.parse(readFileSync(fixturePath('expected.json'), 'utf8')).cases;

/** The expected pixels, or undefined where only a hash is kept. */
export function expectedValues(image: ExpectedImage): Float64Array | undefined {
  if (image.values === undefined) return undefined;
  const planes = inflateSync(Buffer.from(image.values, 'base64'));
  const count = planes.length / 8;
  const bytes = new Uint8Array(planes.length);
  for (let i = 0; i < planes.length; i++)
    bytes[8 * (i % count) + Math.floor(i / count)] = planes[i];
  return new Float64Array(bytes.buffer);
}

/** SHA-256 of the values as little-endian float64 with numpy's pattern for NaN. */
export function hashOf(values: ArrayLike<number>): string {
  const bytes = new DataView(new ArrayBuffer(8 * values.length));
  for (let i = 0; i < values.length; i++) bytes.setFloat64(8 * i, values[i], true);
  return createHash('sha256').update(new Uint8Array(bytes.buffer)).digest('hex');
}
