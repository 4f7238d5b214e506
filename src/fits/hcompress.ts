// HCOMPRESS_1 (Standard 4.0, 10.4.4; White, Postman & Lattanzi 1992): a two-dimensional Haar-like
// transform whose coefficients are stored by bit planes, each as a quadtree. This file reads the
// stream; haar.ts undoes the transform.
import { invertHaar } from './haar.js';

const HEADER_BYTES = 25;
/** Sums over a tile of 32-bit pixels stay below this many bits, and double precision holds them. */
const MAX_BIT_PLANES = 52;

/** Reads bits from [position, end), the high bit of each byte first. */
interface BitSource {
  readonly bytes: Uint8Array;
  readonly end: number;
  /** In bits from the start of `bytes`. */
  position: number;
}

/**
 * Decodes a tile of `width` x `height` pixels from bytes [start, end) into the front of `out`;
 * `smooth` asks for the smoothing of the convention. Throws RangeError when the stream claims other
 * dimensions, ends early or is no such stream.
 */
export function decodeHcompress(
  bytes: Uint8Array,
  start: number,
  end: number,
  width: number,
  height: number,
  smooth: boolean,
  out: Int32Array,
): void {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (end - start < HEADER_BYTES)
    throw new RangeError(`has ${end - start} bytes, no room for its header`);
  if (view.getUint16(start) !== 0xdd99) throw new RangeError('does not start with bytes DD 99');
  const rows = view.getInt32(start + 2);
  const columns = view.getInt32(start + 6);
  if (rows !== height || columns !== width) {
    throw new RangeError(`claims ${columns} x ${rows} pixels, its tile has ${width} x ${height}`);
  }
  const scale = view.getInt32(start + 10);
  const sum = view.getInt32(start + 14) * 2 ** 32 + view.getUint32(start + 18);
  const planes = bytes.subarray(start + 22, start + 25);
  if (planes.some((count) => count > MAX_BIT_PLANES)) {
    throw new RangeError(
      `claims ${Math.max(...planes)} bit planes, at most ${MAX_BIT_PLANES} wanted`,
    );
  }
  const coefficients = new Float64Array(width * height);
  const source = { bytes, end, position: (start + HEADER_BYTES) * 8 };
  readQuadrants(source, coefficients, width, height, planes);
  readSigns(source, coefficients);
  coefficients[0] = sum;
  if (scale > 1) for (let i = 0; i < coefficients.length; i++) coefficients[i] *= scale;
  invertHaar(coefficients, width, height, smooth ? Math.floor(scale / 2) : 0);
  for (let i = 0; i < coefficients.length; i++) out[i] = coefficients[i];
}

function readQuadrants(
  source: BitSource,
  coefficients: Float64Array,
  width: number,
  height: number,
  planes: Uint8Array,
): void {
  const halfWidth = (width + 1) >> 1;
  const halfHeight = (height + 1) >> 1;
  const scratch = new Uint8Array(halfWidth * halfHeight);
  const quadrants = [
    [0, 0, halfWidth, halfHeight, planes[0]],
    [halfWidth, 0, width >> 1, halfHeight, planes[1]],
    [0, halfHeight, halfWidth, height >> 1, planes[1]],
    [halfWidth, halfHeight, width >> 1, height >> 1, planes[2]],
  ];
  for (const [x, y, nx, ny, bits] of quadrants) {
    const quadrant = { coefficients, offset: x + width * y, stride: width, nx, ny };
    for (let bit = bits - 1; bit >= 0; bit--) readPlane(source, quadrant, 2 ** bit, scratch);
  }
  if (takeBits(source, 4) !== 0) throw new RangeError('has no end mark after its bit planes');
}

interface Quadrant {
  readonly coefficients: Float64Array;
  readonly offset: number;
  readonly stride: number;
  readonly nx: number;
  readonly ny: number;
}

/** One bit plane: nybble 0 means stored bit by bit, 15 means as a quadtree. */
function readPlane(
  source: BitSource,
  quadrant: Quadrant,
  weight: number,
  scratch: Uint8Array,
): void {
  const { nx, ny } = quadrant;
  const kind = takeBits(source, 4);
  if (kind !== 0 && kind !== 15) throw new RangeError(`has a bit plane of unknown kind ${kind}`);
  if (nx === 0 || ny === 0) return;
  if (kind === 0) {
    const cells = ((nx + 1) >> 1) * ((ny + 1) >> 1);
    for (let i = 0; i < cells; i++) scratch[i] = takeBits(source, 4);
  } else {
    const levels = ceilLog2(Math.max(nx, ny));
    scratch[0] = takeCode(source);
    for (let level = 1; level < levels; level++) {
      // after `level` steps of halving-up from the top, each axis has this many cells
      const shift = 2 ** (levels - level);
      expand(source, scratch, Math.ceil(nx / shift), Math.ceil(ny / shift));
    }
  }
  addPlane(quadrant, weight, scratch);
}

export function ceilLog2(length: number): number {
  return length <= 1 ? 0 : 32 - Math.clz32(length - 1);
}

/**
 * Expands codes of 2 x 2 cells in place to nx x ny cells, and reads a new code for each that is set.
 * Bits of a code, high to low: (x, y) = (0,0), (1,0), (0,1), (1,1).
 */
function expand(source: BitSource, codes: Uint8Array, nx: number, ny: number): void {
  const fromX = (nx + 1) >> 1;
  // from the end on, so that no code is overwritten before it is read
  for (let y = ny - 1; y >= 0; y--) {
    for (let x = nx - 1; x >= 0; x--) {
      const code = codes[(y >> 1) * fromX + (x >> 1)];
      codes[y * nx + x] = (code >> (3 - (x & 1) - 2 * (y & 1))) & 1;
    }
  }
  for (let i = nx * ny - 1; i >= 0; i--) if (codes[i] !== 0) codes[i] = takeCode(source);
}

function addPlane(quadrant: Quadrant, weight: number, codes: Uint8Array): void {
  const { coefficients, offset, stride, nx, ny } = quadrant;
  const cellsX = (nx + 1) >> 1;
  for (let y = 0; y < ny; y++) {
    const row = offset + y * stride;
    const codeRow = (y >> 1) * cellsX;
    const lower = 3 - 2 * (y & 1);
    for (let x = 0; x < nx; x++) {
      if ((codes[codeRow + (x >> 1)] >> (lower - (x & 1))) & 1) coefficients[row + x] += weight;
    }
  }
}

function readSigns(source: BitSource, coefficients: Float64Array): void {
  source.position = Math.ceil(source.position / 8) * 8;
  for (let i = 0; i < coefficients.length; i++) {
    if (coefficients[i] !== 0 && takeBits(source, 1) === 1) coefficients[i] = -coefficients[i];
  }
}

function takeBits(source: BitSource, n: number): number {
  const { bytes, end, position } = source;
  const byte = Math.floor(position / 8);
  const used = position - byte * 8;
  if (byte * 8 + used + n > end * 8) throw new RangeError('ends before its last pixel');
  const next = byte + 1 < end ? bytes[byte + 1] : 0;
  source.position = position + n;
  return ((((bytes[byte] << 8) | next) << used) >> (16 - n)) & ((1 << n) - 1);
}

const FOUR_BITS: readonly number[] = [3, 5, 10, 12, 15]; // codes 8 to 12
const FIVE_BITS: readonly number[] = [6, 7, 9, 11, 13]; // codes 26 to 30

/** One 4-bit value in the fixed Huffman code of the method (3 to 6 bits). */
function takeCode(source: BitSource): number {
  let code = takeBits(source, 3);
  if (code < 4) return 1 << code;
  code = code * 2 + takeBits(source, 1);
  if (code < 13) return FOUR_BITS[code - 8];
  code = code * 2 + takeBits(source, 1);
  if (code < 31) return FIVE_BITS[code - 26];
  return takeBits(source, 1) === 0 ? 0 : 14;
}
