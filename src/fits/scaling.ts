import { type FitsHeader, hasCard, numberAt } from './header.js';
import { int64FromText } from './int64.js';

/** How stored numbers become physical ones: bzero + bscale x stored, NaN where stored is `blank`. */
export interface Scaling {
  readonly bscale: number;
  readonly bzero: number;
  /** Stored integer that means missing; only for integer images. */
  readonly blank: number | undefined;
  /** The same as 64 bits, for BITPIX 64 alone. */
  readonly blank64: bigint | undefined;
}

export type ImageValues = Float32Array | Float64Array;

const RANGES: Readonly<Record<number, readonly [number, number]>> = {
  8: [0, 255],
  16: [-32768, 32767],
  32: [-2147483648, 2147483647],
};

/** BSCALE, BZERO and BLANK of an image header (Standard 4.0, 4.4.2.5); adds to `warnings`. */
export function scalingOf(header: FitsHeader, bitpix: number, warnings: string[]): Scaling {
  let bscale = numberAt(header, 'BSCALE') ?? 1;
  if (bscale === 0) {
    warnings.push('BSCALE is 0, taken as 1');
    bscale = 1;
  }
  const bzero = numberAt(header, 'BZERO') ?? 0;
  const blank64 = hasCard(header, 'BLANK') ? blankOf(header, bitpix, warnings) : undefined;
  return { bscale, bzero, blank: blank64 === undefined ? undefined : Number(blank64), blank64 };
}

function blankOf(header: FitsHeader, bitpix: number, warnings: string[]): bigint | undefined {
  const card = header.cards.find(
    ({ keyword, value }) => keyword === 'BLANK' && value !== undefined,
  );
  const blank = int64FromText(String(card?.value ?? ''));
  if (bitpix < 0) {
    warnings.push('BLANK has no meaning in an image of floating-point numbers, ignored');
    return undefined;
  }
  const range = RANGES[bitpix];
  const outside =
    range !== undefined && blank !== undefined && (blank < range[0] || blank > range[1]);
  if (blank === undefined || outside) {
    warnings.push(`BLANK is ${card?.value}, no value that BITPIX ${bitpix} can store, ignored`);
    return undefined;
  }
  return blank;
}

/**
 * An array of the kind that loses nothing that matters: float32 for float32, and for integers up to
 * 16 bits whose offset is at most 2^16 steps, so rounding stays below 1/128 of a step; else float64.
 */
export function makeValues(count: number, bitpix: number, scaling: Scaling): ImageValues {
  const { bscale, bzero } = scaling;
  const plain = bscale === 1 && bzero === 0;
  const small = (bitpix === 8 || bitpix === 16) && Math.abs(bzero) <= 65536 * Math.abs(bscale);
  return small || (bitpix === -32 && plain) ? new Float32Array(count) : new Float64Array(count);
}

/**
 * Writes `count` stored integers from `from` on as physical values to `out` from `at` on. Returns how
 * many are missing: counting here saves a second pass over a large picture.
 */
export function scaleIntegers(
  stored: Uint8Array | Int16Array | Int32Array,
  from: number,
  count: number,
  scaling: Scaling,
  out: ImageValues,
  at: number,
): number {
  const { bscale, bzero, blank } = scaling;
  if (blank === undefined) {
    for (let i = 0; i < count; i++) out[at + i] = bzero + bscale * stored[from + i];
    return 0;
  }
  let missing = 0;
  for (let i = 0; i < count; i++) {
    const value = stored[from + i];
    if (value === blank) {
      out[at + i] = Number.NaN;
      missing++;
    } else out[at + i] = bzero + bscale * value;
  }
  return missing;
}

/** The same for floating-point pixels; infinities become NaN, being no value of a field. */
export function scaleFloats(
  stored: Float32Array | Float64Array,
  from: number,
  count: number,
  scaling: Scaling,
  out: ImageValues,
  at: number,
): number {
  const { bscale, bzero } = scaling;
  let missing = 0;
  for (let i = 0; i < count; i++) {
    const value = bzero + bscale * stored[from + i];
    const finite = value - value === 0;
    out[at + i] = finite ? value : Number.NaN;
    if (!finite) missing++;
  }
  return missing;
}
