import { FitsError } from '../errors.js';
import { type ArrayExtent, arrayExtent, type BinaryTable } from './binary-table.js';
import { inflateTile, unshuffle } from './gzip.js';
import { decodeHcompress } from './hcompress.js';
import { copyBigEndian } from './pixels.js';
import { decodePlio } from './plio.js';
import { decodeRice, isRicePixelSize } from './rice.js';
import type { TilePart } from './tiling.js';

/** ZCMPTYPE with its ZNAMEn/ZVALn parameters, and ZBITPIX. */
export interface TileCodec {
  readonly name: string;
  readonly bitpix: number;
  /** True when COMPRESSED_DATA of a floating-point image holds scaled integers. */
  readonly quantised: boolean;
  readonly parameters: ReadonlyMap<string, number>;
}

/** Where one tile is unpacked; made once, as large as the largest tile. */
export interface TileScratch {
  readonly integers: Int32Array;
  /** For images of floating-point numbers, by their type. */
  readonly floats: Float32Array | Float64Array;
  /** Big-endian 64-bit integers, when the tile holds such. */
  big: Uint8Array | undefined;
}

/** Which part of the scratch a tile was unpacked to. */
export type TileKind = 'integers' | 'floats' | 'big';

/**
 * Unpacks one tile from COMPRESSED_DATA or, where its row there is empty, from GZIP_COMPRESSED_DATA or
 * UNCOMPRESSED_DATA. Throws FitsError that names tile and codec.
 */
export function decodeTile(
  table: BinaryTable,
  tile: TilePart,
  codec: TileCodec,
  scratch: TileScratch,
): TileKind {
  for (const name of ['COMPRESSED_DATA', 'GZIP_COMPRESSED_DATA', 'UNCOMPRESSED_DATA']) {
    const column = table.columns.get(name);
    if (column === undefined) continue;
    if (!(column.type === 'P' || column.type === 'Q') || !/^[BIJKED]$/.test(column.elementType)) {
      throw new FitsError(
        `column ${name} holds no variable-length arrays of numbers`,
        table.context,
      );
    }
    const extent = arrayExtent(table, column, tile.row);
    if (extent.count === 0) continue;
    const quantised = codec.quantised && name === 'COMPRESSED_DATA';
    const used =
      { COMPRESSED_DATA: codec.name, GZIP_COMPRESSED_DATA: 'GZIP_1' }[name] ?? 'NOCOMPRESS';
    try {
      return decodeWith(used, table, extent, tile, { ...codec, quantised }, scratch);
    } catch (error) {
      if (!(error instanceof RangeError)) throw error;
      const label = `tile ${tile.row + 1}, ${used}`;
      throw new FitsError(`${label}: the data ${error.message}`, table.context, error);
    }
  }
  throw new FitsError(`tile ${tile.row + 1}, ${codec.name}: has no data`, table.context);
}

function decodeWith(
  name: string,
  table: BinaryTable,
  { start, end }: ArrayExtent,
  tile: TilePart,
  codec: TileCodec,
  scratch: TileScratch,
): TileKind {
  const { bytes, view } = table;
  const { pixels, lengths } = tile;
  const out = scratch.integers;
  switch (name) {
    case 'RICE_1': {
      const [size, block] = riceParameters(codec);
      decodeRice(view, start, end, size, block, pixels, out);
      return 'integers';
    }
    case 'PLIO_1':
      // a list of 16-bit words, whatever type the column is said to have
      decodePlio(view, start, Math.floor((end - start) / 2), pixels, out);
      return 'integers';
    case 'HCOMPRESS_1': {
      const long = lengths.filter((length) => length > 1);
      if (long.length > 2)
        throw new RangeError(`is of ${lengths.join(' x ')} pixels, two axes wanted`);
      const [width, height] = long.length === 2 ? long : [lengths[0], lengths[1]];
      const smooth = (codec.parameters.get('SMOOTH') ?? 0) !== 0;
      decodeHcompress(bytes, start, end, width, height, smooth, out);
      return 'integers';
    }
    case 'GZIP_1':
    case 'GZIP_2': {
      const data = inflateTile(bytes.subarray(start, end), pixels * 8);
      const width = pixelWidth(data.length, pixels);
      const plain = name === 'GZIP_2' ? unshuffle(data, width) : data;
      return takePixels(plain, pixels, width, codec, scratch);
    }
    case 'NOCOMPRESS': {
      const data = bytes.subarray(start, end);
      return takePixels(data, pixels, pixelWidth(data.length, pixels), codec, scratch);
    }
    default:
      throw new FitsError(
        `compression '${name}', one of RICE_1, GZIP_1, GZIP_2, HCOMPRESS_1, PLIO_1, NOCOMPRESS wanted`,
        table.context,
      );
  }
}

function riceParameters(codec: TileCodec): [number, number] {
  const size = codec.parameters.get('BYTEPIX') ?? 4;
  const block = codec.parameters.get('BLOCKSIZE') ?? 32;
  if (!isRicePixelSize(size)) throw new RangeError(`has BYTEPIX ${size}, one of 1, 2, 4 wanted`);
  if (!Number.isInteger(block) || block < 1) throw new RangeError(`has BLOCKSIZE ${block}`);
  return [size, block];
}

function pixelWidth(bytes: number, pixels: number): number {
  const width = bytes / pixels;
  if (width === 1 || width === 2 || width === 4 || width === 8) return width;
  throw new RangeError(`is ${bytes} bytes for the ${pixels} pixels of the tile`);
}

/**
 * Takes pixels that stand as big-endian numbers of `width` bytes. In a
 * floating-point image they are integers if it is quantised; eight bytes wide they never are.
 */
function takePixels(
  data: Uint8Array,
  pixels: number,
  width: number,
  codec: TileCodec,
  scratch: TileScratch,
): TileKind {
  if (codec.bitpix < 0 && (!codec.quantised || width === 8)) {
    if (width !== -codec.bitpix / 8) {
      throw new RangeError(`has ${width} bytes per pixel, ${-codec.bitpix / 8} wanted`);
    }
    copyBigEndian(data, 0, pixels, scratch.floats);
    return 'floats';
  }
  if (width === 8) {
    if (codec.bitpix !== 64)
      throw new RangeError(`has 8 bytes per pixel, ${codec.bitpix / 8} wanted`);
    scratch.big = data;
    return 'big';
  }
  takeIntegers(data, pixels, width, scratch.integers);
  return 'integers';
}

/** Unsigned bytes, or signed big-endian integers of 2 or 4 bytes. */
function takeIntegers(data: Uint8Array, pixels: number, width: number, out: Int32Array): void {
  if (width === 4) {
    copyBigEndian(data, 0, pixels, out);
  } else if (width === 1) {
    out.set(data.subarray(0, pixels));
  } else {
    for (let i = 0; i < pixels; i++) out[i] = ((data[2 * i] << 24) >> 16) | data[2 * i + 1];
  }
}
