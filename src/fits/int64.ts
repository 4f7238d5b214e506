import type { ImageValues, Scaling } from './scaling.js';

/** The 64-bit integer written in `text`, or undefined when it is none. */
export function int64FromText(text: string): bigint | undefined {
  const trimmed = text.trim().replace(/^\+/, '');
  if (!/^-?\d{1,19}$/.test(trimmed)) return undefined;
  const value = BigInt(trimmed);
  return BigInt.asIntN(64, value) === value ? value : undefined;
}

/**
 * Writes `count` big-endian 64-bit integers at byte `offset` of `bytes` as physical values. Beyond
 * 2^53 a value is rounded once to double precision; BZERO = 2^63 (the unsigned convention) is
 * applied before that, so small unsigned values stay exact. Returns how many are missing.
 */
export function scaleInt64(
  bytes: Uint8Array,
  offset: number,
  count: number,
  scaling: Scaling,
  out: ImageValues,
  at: number,
): number {
  const { bscale, blank64 } = scaling;
  const unsigned = scaling.bzero === 2 ** 63 && bscale === 1;
  const bzero = unsigned ? 0 : scaling.bzero;
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const blankHigh = blank64 === undefined ? 0 : Number(BigInt.asIntN(32, blank64 >> 32n));
  const blankLow = blank64 === undefined ? 0 : Number(BigInt.asUintN(32, blank64));
  let blanks = 0;
  for (let i = 0; i < count; i++) {
    const high = view.getInt32(offset + 8 * i);
    const low = view.getUint32(offset + 8 * i + 4);
    const missing = blank64 !== undefined && high === blankHigh && low === blankLow;
    const stored = (unsigned ? high + 2 ** 31 : high) * 2 ** 32 + low;
    out[at + i] = missing ? Number.NaN : bzero + bscale * stored;
    if (missing) blanks++;
  }
  return blanks;
}
