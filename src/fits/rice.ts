// RICE_1 of the tiled image convention (Standard 4.0, 10.4.1; Rice, Yeh & Miller 1993): differences
// between neighbours, folded to be positive, in blocks; each difference as a unary quotient and
// `split` low bits, the split chosen per block.

/** Bits that hold split + 1, and the split that means "differences stored whole", per pixel size. */
const SPLIT_BITS: Readonly<Record<number, number>> = { 1: 3, 2: 4, 4: 5 };
const WHOLE_SPLIT: Readonly<Record<number, number>> = { 1: 6, 2: 14, 4: 25 };

/** True for the pixel sizes (BYTEPIX) that the decoder knows. */
export function isRicePixelSize(bytesPerPixel: number): boolean {
  return bytesPerPixel in SPLIT_BITS;
}

/**
 * Decodes `count` pixels of `bytesPerPixel` (1 unsigned; 2 and 4 signed) from bytes [start, end) into
 * the front of `out`. Reads no byte from `end` on and writes no more than `count` values. Throws
 * RangeError, saying what is wrong, when the stream ends early or holds an impossible split.
 */
export function decodeRice(
  view: DataView,
  start: number,
  end: number,
  bytesPerPixel: number,
  blockSize: number,
  count: number,
  out: Int32Array,
): void {
  const splitBits = SPLIT_BITS[bytesPerPixel];
  const whole = WHOLE_SPLIT[bytesPerPixel];
  const pixelBits = 8 * bytesPerPixel;
  if (end - start < bytesPerPixel) throw new RangeError('ends inside its first pixel');
  const lastWord = end - 4; // the last place where four bytes may be read at once
  let last = readBits(view, start, 0, pixelBits) | 0;
  let byte = start + bytesPerPixel;
  let bit = 0; // bits of `byte` already used, 0 to 7

  for (let block = 0; block < count; block += blockSize) {
    const blockEnd = Math.min(block + blockSize, count);
    if ((end - byte) * 8 - bit < splitBits)
      throw new RangeError(`ends at pixel ${block} of ${count}`);
    const split = readBits(view, byte, bit, splitBits) - 1;
    bit += splitBits;
    byte += bit >> 3;
    bit &= 7;

    if (split < 0) {
      out.fill(last, block, blockEnd); // all differences of the block are zero
      continue;
    }
    if (split >= whole) {
      if (split > whole) throw new RangeError(`has a split of ${split}, at most ${whole} wanted`);
      if ((end - byte) * 8 - bit < pixelBits * (blockEnd - block)) {
        throw new RangeError(`ends in the block at pixel ${block} of ${count}`);
      }
      for (let i = block; i < blockEnd; i++) {
        const folded = readBits(view, byte, bit, pixelBits);
        byte += bytesPerPixel;
        last = (last + ((folded >>> 1) ^ -(folded & 1))) | 0;
        out[i] = last;
      }
      continue;
    }
    const low = 31 - split;
    for (let i = block; i < blockEnd; i++) {
      let folded: number;
      // At least 25 bits from the current place, left-aligned; zero bits beyond.
      const word = byte <= lastWord ? view.getUint32(byte) << bit : 0;
      const zeros = Math.clz32(word);
      const used = bit + zeros + 1 + split;
      if (used <= 32) {
        // (x >>> 1) >>> (31 - n) is x >>> (32 - n) that also works for n = 0
        folded = (zeros << split) | (((word << (zeros + 1)) >>> 1) >>> low);
        byte += used >> 3;
        bit = used & 7;
      } else {
        // near the end of the stream, or a long code: byte by byte
        let run = 0;
        for (;;) {
          if (byte >= end) throw new RangeError(`ends at pixel ${i} of ${count}`);
          const rest = (view.getUint8(byte) << (24 + bit)) | 0;
          if (rest !== 0) {
            const more = Math.clz32(rest);
            run += more;
            bit += more + 1;
            byte += bit >> 3;
            bit &= 7;
            break;
          }
          run += 8 - bit;
          byte++;
          bit = 0;
        }
        if ((end - byte) * 8 - bit < split) throw new RangeError(`ends at pixel ${i} of ${count}`);
        folded = (run << split) | readBits(view, byte, bit, split);
        bit += split;
        byte += bit >> 3;
        bit &= 7;
      }
      last = (last + ((folded >>> 1) ^ -(folded & 1))) | 0;
      out[i] = last;
    }
  }
  wrapSmall(out, count, bytesPerPixel);
}

/** Bits `bit` to `bit + n` from `byte` on as an unsigned number, n up to 32; the caller checks the end. */
function readBits(view: DataView, byte: number, bit: number, n: number): number {
  let value = 0;
  let at = byte;
  let used = bit;
  for (let left = n; left > 0; ) {
    const take = Math.min(left, 8 - used);
    value = (value << take) | ((view.getUint8(at) >> (8 - used - take)) & ((1 << take) - 1));
    left -= take;
    used = 0;
    at++;
  }
  return value >>> 0;
}

/** Sums above run modulo 2^32; smaller pixels are modulo 2^8 (unsigned) or 2^16 (signed). */
function wrapSmall(out: Int32Array, count: number, bytesPerPixel: number): void {
  if (bytesPerPixel === 1) for (let i = 0; i < count; i++) out[i] &= 0xff;
  if (bytesPerPixel === 2) for (let i = 0; i < count; i++) out[i] = (out[i] << 16) >> 16;
}
