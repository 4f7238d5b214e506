import { scaleInt64 } from './int64.js';
import { type ImageValues, type Scaling, scaleFloats, scaleIntegers } from './scaling.js';

/** Pixels as stored, in the byte order of this machine; 64-bit integers stay big-endian bytes. */
export type StoredPixels = Uint8Array | Int16Array | Int32Array | Float32Array | Float64Array;

/** Pixels turned at a time: small enough to stay in the cache. */
const CHUNK = 4096;

/**
 * Turns `count` big-endian pixels of type `bitpix` at byte `offset` into physical values in `out`
 * from index `at` on, and counts the missing ones. The caller has checked that all of it is there.
 */
export function scalePixels(
  bytes: Uint8Array,
  offset: number,
  count: number,
  bitpix: number,
  scaling: Scaling,
  out: ImageValues,
  at: number,
): number {
  if (bitpix === 64) {
    return scaleInt64(bytes, offset, count, scaling, out, at);
  }
  const width = Math.abs(bitpix) / 8;
  const chunk = makeStored(Math.min(CHUNK, count), bitpix);
  let missing = 0;
  for (let done = 0; done < count; done += CHUNK) {
    const some = Math.min(CHUNK, count - done);
    copyBigEndian(bytes, offset + done * width, some, chunk);
    if (chunk instanceof Float32Array || chunk instanceof Float64Array) {
      missing += scaleFloats(chunk, 0, some, scaling, out, at + done);
    } else {
      missing += scaleIntegers(chunk, 0, some, scaling, out, at + done);
    }
  }
  return missing;
}

/** An array that holds pixels of type `bitpix` (not 64). */
export function makeStored(count: number, bitpix: number): StoredPixels {
  if (bitpix === 8) return new Uint8Array(count);
  if (bitpix === 16) return new Int16Array(count);
  if (bitpix === 32) return new Int32Array(count);
  return bitpix === -32 ? new Float32Array(count) : new Float64Array(count);
}

/** Copies `count` big-endian numbers at byte `offset` into the front of `out`, by the type of `out`. */
export function copyBigEndian(
  bytes: Uint8Array,
  offset: number,
  count: number,
  out: StoredPixels,
): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (out instanceof Uint8Array) out.set(bytes.subarray(offset, offset + count));
  else if (out instanceof Int16Array) {
    for (let i = 0; i < count; i++) out[i] = view.getInt16(offset + 2 * i);
  } else if (out instanceof Int32Array) {
    for (let i = 0; i < count; i++) out[i] = view.getInt32(offset + 4 * i);
  } else if (out instanceof Float32Array) {
    for (let i = 0; i < count; i++) out[i] = view.getFloat32(offset + 4 * i);
  } else {
    for (let i = 0; i < count; i++) out[i] = view.getFloat64(offset + 8 * i);
  }
}
