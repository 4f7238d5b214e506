import { gunzipSync } from 'node:zlib';

/**
 * Inflates the gzip stream of one tile (GZIP_1) to at most `maxBytes`. Throws RangeError, saying what
 * is wrong, when it is damaged or longer.
 */
export function inflateTile(bytes: Uint8Array, maxBytes: number): Uint8Array {
  try {
    return gunzipSync(bytes, { maxOutputLength: Math.max(1, maxBytes) });
  } catch (error) {
    const code = (error as NodeJS.ErrnoException).code;
    if (code === 'ERR_BUFFER_TOO_LARGE') {
      throw new RangeError(`holds more than the ${maxBytes} bytes of its tile`);
    }
    throw new RangeError(code === 'Z_BUF_ERROR' ? 'is cut short' : (error as Error).message);
  }
}

/**
 * Undoes the shuffle of GZIP_2 (Standard 4.0, 10.4.2): all first bytes of the pixels, then all second
 * bytes, and so on. `bytes` holds a whole number of pixels of `width` bytes.
 */
export function unshuffle(bytes: Uint8Array, width: number): Uint8Array {
  const count = bytes.length / width;
  const out = new Uint8Array(bytes.length);
  for (let part = 0; part < width; part++) {
    const from = part * count;
    for (let i = 0; i < count; i++) out[i * width + part] = bytes[from + i];
  }
  return out;
}
