import { contours } from 'd3-contour';
import type { Grid2 } from '../grid/grid.js';
import { type MapFrame, toPictureX, toPictureY } from './map-frame.js';
import { nearestNice, quantileOfSize } from './nice-number.js';
import { resampleMap } from './resample.js';

/** Contours of one level, as picture x, y pairs of open or closed lines. */
export interface ContourSet {
  readonly level: number;
  readonly lines: readonly number[][];
}

/** Longest side of the grid that contours are traced on; finer detail is not legible. */
const TRACE_SIDE = 200;
/** Lines shorter than this are specks. */
const LEAST_LENGTH_PX = 24;
const LEAST_STEP_PX = 1.6;
const NOISE_DEVIATIONS = 3;

/**
 * Levels [mA/m^2] worth drawing, weak first, for both directions: round numbers, the upper near two
 * thirds of the 99.8 % quantile of |j|, the lower near a quarter. Empty when there is no current.
 */
export function currentLevels(smooth: Float64Array): readonly number[] {
  const strong = quantileOfSize(smooth, 0.998);
  if (!(strong > 0)) return [];
  const upper = nearestNice(0.65 * strong);
  return [nearestNice(upper / 2.6), upper];
}

/** A current-density map made ready for contours. */
export interface CurrentGrid {
  readonly values: Float64Array;
  readonly width: number;
  readonly height: number;
  readonly levels: readonly number[];
}

/** Brings a map to the resolution contours are traced at, smooths it and picks the levels. */
export function currentGrid(map: Grid2<'mA/m^2'>): CurrentGrid {
  const [ny, nx] = map.values.shape;
  return smoothedGrid(map, Math.max(nx, ny) > 100 ? 1 : 0);
}

/**
 * The same for a measured map of 1-sigma noise `sigma` [mA/m^2] per pixel: smoothed further, and only
 * levels beyond three deviations of what the smoothing leaves of the noise.
 */
export function measuredCurrentGrid(map: Grid2<'mA/m^2'>, sigma: number): CurrentGrid {
  const [ny, nx] = map.values.shape;
  const passes = Math.max(nx, ny) > 100 ? 4 : 2;
  const grid = smoothedGrid(map, passes);
  const left = (sigma * noiseShare(passes) * grid.width) / nx;
  return { ...grid, levels: grid.levels.filter((level) => !(level < NOISE_DEVIATIONS * left)) };
}

/**
 * Share of white noise that n passes of the 1-2-1 filter leave: the root of the sum of the squared
 * weights, C(4n, 2n) / 16^n in two dimensions.
 */
function noiseShare(passes: number): number {
  let share = 1;
  for (let k = 1; k <= 2 * passes; k++) share *= (2 * passes + k) / k / 4;
  return share;
}

function smoothedGrid(map: Grid2<'mA/m^2'>, passes: number): CurrentGrid {
  const [ny, nx] = map.values.shape;
  const shrink = Math.min(1, TRACE_SIDE / Math.max(nx, ny));
  const [width, height] = [Math.ceil(nx * shrink), Math.ceil(ny * shrink)];
  const coarse = shrink < 1 ? resampleMap(map, width, height, false) : map.values.data;
  // A missing current is drawn as none, so that lines end where the map does.
  const filled = coarse.map((value) => (Number.isNaN(value) ? 0 : value));
  let values: Float64Array = filled;
  for (let pass = 0; pass < passes; pass++) values = smoothOnce(values, width, height);
  return { values, width, height, levels: currentLevels(values) };
}

/** Contours at plus and minus each level: upward (positive) and downward. */
export function currentContours(grid: CurrentGrid, frame: MapFrame): readonly ContourSet[] {
  const sets: ContourSet[] = [];
  for (const sign of [1, -1]) {
    const signed = sign > 0 ? grid.values : grid.values.map((value) => -value);
    for (const level of grid.levels) {
      sets.push({ level: sign * level, lines: trace({ ...grid, values: signed }, level, frame) });
    }
  }
  return sets;
}

function trace(grid: CurrentGrid, level: number, frame: MapFrame): number[][] {
  const lines: number[][] = [];
  const { values, width, height } = grid;
  const toX = (x: number) => toPictureX(frame, (x * frame.nx) / width - 0.5);
  const toY = (y: number) => toPictureY(frame, (y * frame.ny) / height - 0.5);
  const tracer = contours().size([width, height]);
  // The tracer only reads the values; its type asks for a plain array.
  const shape = tracer.contour(values as unknown as number[], level);
  for (const ring of shape.coordinates.flat()) {
    for (const piece of withoutBorder(ring, width, height)) {
      const line = thin(piece.flatMap(([x, y]) => [toX(x), toY(y)]));
      if (lineLength(line) >= LEAST_LENGTH_PX) lines.push(line);
    }
  }
  return lines;
}

/** Cuts a ring where it runs along the edge of the grid: there is no contour there. */
function withoutBorder(ring: number[][], width: number, height: number): number[][][] {
  const onEdge = ([x, y]: number[]) =>
    x <= 0.5 || y <= 0.5 || x >= width - 0.5 || y >= height - 0.5;
  const pieces: number[][][] = [];
  let piece: number[][] = [];
  for (const point of ring) {
    if (onEdge(point)) {
      if (piece.length > 0) pieces.push([...piece, point]);
      piece = [];
      continue;
    }
    piece.push(point);
  }
  if (piece.length > 0) pieces.push(piece);
  return pieces;
}

/** Leaves out points closer than a step to the last one kept; keeps both ends. */
export function thin(line: number[]): number[] {
  const kept = line.slice(0, 2);
  for (let i = 2; i < line.length; i += 2) {
    const last = i + 2 >= line.length;
    const step = Math.hypot(line[i] - kept[kept.length - 2], line[i + 1] - kept[kept.length - 1]);
    if (last || step >= LEAST_STEP_PX) kept.push(line[i], line[i + 1]);
  }
  return kept;
}

export function lineLength(line: readonly number[]): number {
  let sum = 0;
  for (let i = 2; i < line.length; i += 2) {
    sum += Math.hypot(line[i] - line[i - 2], line[i + 1] - line[i - 1]);
  }
  return sum;
}

/** One pass of the 1-2-1 filter in both directions; edges repeat. */
function smoothOnce(values: Float64Array, width: number, height: number): Float64Array {
  const across = new Float64Array(values.length);
  const out = new Float64Array(values.length);
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const i = x + width * y;
      const left = values[x > 0 ? i - 1 : i];
      const right = values[x < width - 1 ? i + 1 : i];
      across[i] = (left + 2 * values[i] + right) / 4;
    }
  }
  for (let y = 0; y < height; y++) {
    for (let x = 0; x < width; x++) {
      const i = x + width * y;
      const below = across[y > 0 ? i - width : i];
      const above = across[y < height - 1 ? i + width : i];
      out[i] = (below + 2 * across[i] + above) / 4;
    }
  }
  return out;
}
