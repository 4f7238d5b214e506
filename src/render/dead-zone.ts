import { type Grid2, makeGrid } from '../grid/grid.js';
import { isBlocky, type MapFrame } from './map-frame.js';
import { niceLimitAbove, quantileOfSize } from './nice-number.js';
import type { VectorMaps } from './region-picture.js';
import { resampleMap } from './resample.js';

/** Current weaker than this many deviations of its noise counts as none. */
export const CURRENT_DEVIATIONS = 3;

/** Most cells along a side: finer detail is not legible, and means over cells rise out of the noise. */
const MOST_CELLS = 150;
const LEAST_QUIET_CELLS = 100;
const CURRENT_QUANTILE = 0.995;
/** Where the field is weak a few pixels have an alpha far beyond all others. */
const ALPHA_QUANTILE = 0.95;

/** A quantity in cells, row 0 south, with the scale it is shown on. */
export interface LiveMap {
  readonly width: number;
  readonly height: number;
  /** NaN where missing or below noise. */
  readonly values: Float64Array;
  /** 1 where the patch has a field, NaN elsewhere: a cell with field but no value is dead. */
  readonly covered: Float64Array;
  /** Side of a cell in Mm; undefined where the cells are the pixels. */
  readonly cellMm: number | undefined;
  /** Symmetric limit of the colours and the share of the live cells within it. */
  readonly limit: number;
  readonly share: number;
}

/** What the current panel shows, with the noise of most of its cells [mA/m^2]. */
export interface LiveCurrent extends LiveMap {
  readonly noise: number;
}

/**
 * The current density [mA/m^2]: means over cells, none where a mean lies below three deviations of its
 * noise. Limits at the 99.5 % quantile of what is left.
 */
export function liveCurrent(vector: VectorMaps, radial: Grid2<'G'>): LiveCurrent {
  const cells = cellsOf(radial);
  const density = vector.currentDensity.values.data;
  const sigma = vector.currentNoise.values.data;
  // A density without a known noise cannot be told from noise.
  const known = density.map((value, i) => (Number.isFinite(sigma[i]) ? value : Number.NaN));
  const mean = cells.mean(known);
  const square = cells.mean(sigma.map((deviation) => deviation ** 2));
  const count = cells.mean(known.map((value) => (Number.isFinite(value) ? 1 : 0)));
  const independent = square.map((each, i) =>
    Math.sqrt(each / Math.max(1, count[i] * cells.pixelsPerCell)),
  );
  const field = cells.mean(radial.values.data);
  const quiet = mean.map((value, i) =>
    Math.abs(field[i]) < vector.alphaLeastG ? value / independent[i] : Number.NaN,
  );
  const more = correlationExcess(quiet, cells.pixelsPerCell);
  const noise = independent.map((each) => more * each);
  const values = mean.map((value, i) =>
    Math.abs(value) >= CURRENT_DEVIATIONS * noise[i] ? value : Number.NaN,
  );
  const middle = quantileOfSize(noise, 0.5);
  // A map of noise alone still gets a scale: that of its noise.
  const scale = limitOf(values, CURRENT_QUANTILE, CURRENT_DEVIATIONS * middle);
  return { ...cells.place, values, covered: cells.covered(vector), ...scale, noise: middle };
}

/**
 * How much larger the noise of a cell's mean is than if its pixels were independent, from cells of weak
 * field: 1.4826 times the median size of the mean over its deviation. A resampled map has noise in
 * common to neighbours; at most all of it within a cell. 1 where there are too few such cells.
 */
function correlationExcess(quiet: Float64Array, pixelsPerCell: number): number {
  const ratios = quiet.filter(Number.isFinite);
  if (pixelsPerCell === 1 || ratios.length < LEAST_QUIET_CELLS) return 1;
  const measured = 1.4826 * quantileOfSize(ratios, 0.5);
  return Math.max(1, Math.min(Math.sqrt(pixelsPerCell), measured));
}

/**
 * Alpha [1/Mm]: its mean over the pixels of a cell weighted by the square of the field, which is the fit
 * of mu0 Jz = alpha Bz to them; none where half of the cell has a field too weak. Limits at the
 * 95 % quantile.
 */
export function liveAlpha(vector: VectorMaps, radial: Grid2<'G'>): LiveMap {
  const cells = cellsOf(radial);
  const field = radial.values.data;
  const alpha = vector.alpha.values.data;
  const weight = field.map((fieldG, i) =>
    Math.abs(fieldG) >= vector.alphaLeastG && Number.isFinite(alpha[i]) ? fieldG ** 2 : Number.NaN,
  );
  const total = cells.mean(weight);
  const weighted = cells.mean(weight.map((each, i) => each * alpha[i]));
  const values = weighted.map((each, i) => each / total[i]);
  return {
    ...cells.place,
    values,
    covered: cells.covered(vector),
    ...limitOf(values, ALPHA_QUANTILE, 0.01),
  };
}

/** How a map is divided into cells: pixels, or squares of several where there are many. */
function cellsOf(radial: Grid2<'G'>) {
  const [ny, nx] = radial.values.shape;
  const side = Math.ceil(Math.max(nx, ny) / MOST_CELLS);
  const width = Math.max(1, Math.round(nx / side));
  const height = Math.max(1, Math.round(ny / side));
  const mean = (data: Float64Array) =>
    side === 1 ? data : resampleMap(makeGrid(data, nx, ny, '1', 1), width, height, false);
  const covered = ({ horizontal }: VectorMaps) => {
    const [west, north] = [horizontal.x.values.data, horizontal.y.values.data];
    const has = (fieldG: number, i: number) =>
      Number.isFinite(fieldG + west[i] + north[i]) ? 1 : Number.NaN;
    return mean(radial.values.data.map(has));
  };
  const cellMm = side === 1 ? undefined : side * radial.pixelMm;
  const pixelsPerCell = (nx * ny) / (width * height);
  return { place: { width, height, cellMm }, mean, covered, pixelsPerCell };
}

/** A round number at or above the quantile of the sizes. */
function limitOf(values: Float64Array, share: number, otherwise: number) {
  const quantile = quantileOfSize(values.filter(Number.isFinite), share);
  const limit = [quantile, otherwise].find((size) => size > 0 && Number.isFinite(size)) ?? 1;
  return { limit: niceLimitAbove(limit), share };
}

/** A map at display resolution, row 0 south: NaN where missing or dead, `dead` tells which. */
export interface LiveSamples {
  readonly samples: Float64Array;
  readonly dead: Uint8Array;
}

/** Brings cells to the resolution of the frame. */
export function displayCells(map: LiveMap, frame: MapFrame): LiveSamples {
  // Pixels show as squares where they are large; larger cells do not fit the frame evenly.
  const blocky = map.cellMm === undefined && isBlocky(frame);
  const [samples, there] = [map.values, map.covered].map((data) => {
    const grid = makeGrid(data, map.width, map.height, '1', 1);
    return resampleMap(grid, frame.width, frame.height, blocky);
  });
  const dead = new Uint8Array(samples.length);
  for (let i = 0; i < dead.length; i++) {
    if (Number.isNaN(samples[i]) && !Number.isNaN(there[i])) dead[i] = 1;
  }
  return { samples, dead };
}
