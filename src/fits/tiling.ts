import { type ErrorContext, FitsError } from '../errors.js';
import { type FitsHeader, hasCard, numberAt } from './header.js';

/** How a picture is cut into tiles, first axis fastest, edge tiles smaller (Standard 4.0, 10.1). */
export interface Tiling {
  readonly shape: readonly number[];
  /** Tile lengths, never longer than the axis. */
  readonly tile: readonly number[];
  /** Tiles along each axis. */
  readonly counts: readonly number[];
}

/** One tile and the part of it that lies in the plane asked for. */
export interface TilePart {
  /** Row of the table, from 0. */
  readonly row: number;
  /** Lengths of this tile, all axes. */
  readonly lengths: readonly number[];
  readonly pixels: number;
  /** First pixel of the tile in the picture. */
  readonly x: number;
  readonly y: number;
  /** Index in the tile of the first pixel of the plane. */
  readonly start: number;
}

/** ZTILEn of the table header: by default one picture row per tile. */
export function tilingOf(
  header: FitsHeader,
  shape: readonly number[],
  rows: number,
  context: ErrorContext,
): Tiling {
  const tile = shape.map((length, axis) => {
    const keyword = `ZTILE${axis + 1}`;
    const asked = numberAt(header, keyword) ?? (hasCard(header, keyword) || axis > 0 ? 1 : length);
    if (!Number.isSafeInteger(asked) || asked < 1) {
      throw new FitsError(`${keyword} is ${asked}, a whole number from 1 wanted`, context);
    }
    return Math.min(asked, length);
  });
  const counts = shape.map((length, axis) => Math.ceil(length / tile[axis]));
  const total = counts.reduce((product, count) => product * count, 1);
  if (total > rows) {
    throw new FitsError(
      `${shape.join(' x ')} pixels in tiles of ${tile.join(' x ')} are ${total} tiles, the table has ${rows}`,
      context,
    );
  }
  return { shape, tile, counts };
}

/** The tiles that plane `plane` (counted over all axes beyond the second) passes through, in order. */
export function* tilesOfPlane(tiling: Tiling, plane: number): Generator<TilePart> {
  const { shape, tile, counts } = tiling;
  const upper = upperAxes(tiling, plane);
  for (let tileY = 0; tileY < counts[1]; tileY++) {
    const y = tileY * tile[1];
    const height = Math.min(tile[1], shape[1] - y);
    for (let tileX = 0; tileX < counts[0]; tileX++) {
      const x = tileX * tile[0];
      const width = Math.min(tile[0], shape[0] - x);
      yield {
        row: tileX + counts[0] * (tileY + counts[1] * upper.tileIndex),
        lengths: [width, height, ...upper.lengths],
        pixels: width * height * upper.lengths.reduce((product, length) => product * length, 1),
        x,
        y,
        start: width * height * upper.planeInTile,
      };
    }
  }
}

/** Where a plane lies among the tiles of the axes beyond the second. */
function upperAxes(tiling: Tiling, plane: number) {
  const { shape, tile, counts } = tiling;
  const lengths: number[] = [];
  let left = plane;
  let tileIndex = 0;
  let planeInTile = 0;
  let tileStride = 1;
  let planeStride = 1;
  for (let axis = 2; axis < shape.length; axis++) {
    const position = left % shape[axis];
    left = Math.floor(left / shape[axis]);
    const number = Math.floor(position / tile[axis]);
    const length = Math.min(tile[axis], shape[axis] - number * tile[axis]);
    lengths.push(length);
    tileIndex += number * tileStride;
    planeInTile += (position - number * tile[axis]) * planeStride;
    tileStride *= counts[axis];
    planeStride *= length;
  }
  return { lengths, tileIndex, planeInTile };
}
