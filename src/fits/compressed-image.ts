import { type ErrorContext, FitsError } from '../errors.js';
import { type BinaryTable, numberInRow, openTable, type TableColumn } from './binary-table.js';
import { type DitherMode, dequantise, type Quantisation } from './dither.js';
import type { FitsFile } from './file.js';
import type { FitsHdu } from './hdu.js';
import { type FitsHeader, numberAt, stringAt } from './header.js';
import { scaleInt64 } from './int64.js';
import { type ImageValues, type Scaling, scaleFloats, scaleIntegers } from './scaling.js';
import { decodeTile, type TileCodec, type TileScratch } from './tile.js';
import { type TilePart, tilesOfPlane, tilingOf } from './tiling.js';

/**
 * Unpacks the tiles of a compressed image that plane `plane` passes through into `values`, as
 * physical values (Standard 4.0, chapter 10), and counts the missing ones. Throws FitsError, naming tile and codec, when a tile
 * is damaged or does not fit its place.
 */
export function readTiles(
  file: FitsFile,
  hdu: FitsHdu,
  plane: number,
  scaling: Scaling,
  values: ImageValues,
  warnings: string[],
): number {
  const context = { file: file.name, hdu: hdu.index };
  const header = hdu.tableHeader ?? hdu.header;
  const table = openTable(file.bytes, header, hdu.dataOffset, hdu.dataLength, context);
  const tiling = tilingOf(header, hdu.shape, table.rows, context);
  const tilePixels = tiling.tile.reduce((product, length) => product * length, 1);
  if (tilePixels > file.limits.maxPixels) {
    throw new FitsError(
      `tiles of ${tiling.tile.join(' x ')} pixels, at most ${file.limits.maxPixels} are read`,
      context,
    );
  }
  const codec = codecOf(hdu, header, table);
  const rules = quantisationRules(hdu, header, table, context);
  const scalingFor = tileScaling(table, hdu, scaling);
  const scratch = makeScratch(tilePixels, hdu.bitpix);
  checkUnused(header, warnings);
  let missing = 0;
  for (const tile of tilesOfPlane(tiling, plane)) {
    const kind = decodeTile(table, tile, codec, scratch);
    if (kind === 'integers' && hdu.bitpix < 0) {
      dequantise(scratch.integers, tile.pixels, tile.row, rules(tile.row), scratch.floats);
    }
    missing += placeTile(scratch, kind, tile, hdu, scalingFor(tile.row), values);
  }
  return missing;
}

function codecOf(hdu: FitsHdu, header: FitsHeader, table: BinaryTable): TileCodec {
  const scaled = table.columns.has('ZSCALE') || numberAt(header, 'ZSCALE') !== undefined;
  const quantised = scaled && stringAt(header, 'ZQUANTIZ')?.toUpperCase() !== 'NONE';
  const parameters = new Map<string, number>();
  for (let n = 1; n <= 999; n++) {
    const name = stringAt(header, `ZNAME${n}`)?.toUpperCase();
    const value = numberAt(header, `ZVAL${n}`);
    if (name === undefined) break;
    if (value !== undefined) parameters.set(name, value);
  }
  return { name: hdu.compression ?? '', bitpix: hdu.bitpix, quantised, parameters };
}

/** The scaling of each tile: integers may have a blank value of their own in a column ZBLANK. */
function tileScaling(table: BinaryTable, hdu: FitsHdu, scaling: Scaling): (row: number) => Scaling {
  const column = table.columns.get('ZBLANK');
  if (column === undefined || hdu.bitpix < 0) return () => scaling;
  return (row) => {
    const blank = numberInRow(table, column, row);
    const whole = Number.isSafeInteger(blank);
    return { ...scaling, blank, blank64: whole ? BigInt(blank) : undefined };
  };
}

function makeScratch(pixels: number, bitpix: number): TileScratch {
  return {
    integers: new Int32Array(pixels),
    floats: bitpix === -64 ? new Float64Array(pixels) : new Float32Array(bitpix < 0 ? pixels : 0),
    big: undefined,
  };
}

function checkUnused(header: FitsHeader, warnings: string[]): void {
  if (stringAt(header, 'ZMASKCMP') !== undefined) {
    warnings.push('the mask of undefined pixels (ZMASKCMP) is not used');
  }
}

/** Gives, per row, how its integers become floating-point numbers; keyword or column for each part. */
function quantisationRules(
  hdu: FitsHdu,
  header: FitsHeader,
  table: BinaryTable,
  context: ErrorContext,
): (row: number) => Quantisation {
  const scale = rowNumber(table, header, 'ZSCALE');
  const zero = rowNumber(table, header, 'ZZERO');
  const blank = rowNumber(table, header, 'ZBLANK');
  if (hdu.bitpix > 0 && (scale !== undefined || zero !== undefined)) {
    throw new FitsError('ZSCALE or ZZERO in an image of integers is not read', context);
  }
  const mode = ditherMode(header, context);
  const seed = numberAt(header, 'ZDITHER0') ?? 1;
  if (mode !== 'NO_DITHER' && !(Number.isInteger(seed) && seed >= 1 && seed <= 10_000)) {
    throw new FitsError(`ZDITHER0 is ${seed}, 1 to 10000 wanted`, {
      ...context,
      keyword: 'ZDITHER0',
    });
  }
  return (row) => {
    if (scale === undefined) {
      throw new FitsError(`tile ${row + 1} holds scaled integers and there is no ZSCALE`, context);
    }
    return { mode, seed, scale: scale(row), zero: zero?.(row) ?? 0, blank: blank?.(row) };
  };
}

function rowNumber(
  table: BinaryTable,
  header: FitsHeader,
  name: string,
): ((row: number) => number) | undefined {
  const column: TableColumn | undefined = table.columns.get(name);
  if (column !== undefined) return (row) => numberInRow(table, column, row);
  const value = numberAt(header, name);
  return value === undefined ? undefined : () => value;
}

function ditherMode(header: FitsHeader, context: ErrorContext): DitherMode {
  const name = (stringAt(header, 'ZQUANTIZ') ?? 'NO_DITHER').toUpperCase();
  if (name === 'NO_DITHER' || name === 'NONE') return 'NO_DITHER';
  if (name === 'SUBTRACTIVE_DITHER_1' || name === 'SUBTRACTIVE_DITHER_2') return name;
  throw new FitsError(`ZQUANTIZ is '${name}', NO_DITHER or SUBTRACTIVE_DITHER_1 or _2 wanted`, {
    ...context,
    keyword: 'ZQUANTIZ',
  });
}

/** Copies the plane's part of a tile to its place, applying BSCALE, BZERO and BLANK; counts the missing. */
function placeTile(
  scratch: TileScratch,
  kind: 'integers' | 'floats' | 'big',
  tile: TilePart,
  hdu: FitsHdu,
  scaling: Scaling,
  values: ImageValues,
): number {
  const [width, height] = tile.lengths;
  let missing = 0;
  for (let y = 0; y < height; y++) {
    const from = tile.start + y * width;
    const at = tile.x + hdu.shape[0] * (tile.y + y);
    if (kind === 'big' && scratch.big !== undefined) {
      missing += scaleInt64(scratch.big, 8 * from, width, scaling, values, at);
    } else if (hdu.bitpix < 0) {
      missing += scaleFloats(scratch.floats, from, width, scaling, values, at);
    } else {
      missing += scaleIntegers(scratch.integers, from, width, scaling, values, at);
    }
  }
  return missing;
}
