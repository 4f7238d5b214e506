import { type Grid2, makeGrid } from '../grid/grid.js';
import { isBlocky, type MapFrame } from './map-frame.js';
import { niceLimitAbove, quantileOfSize } from './nice-number.js';
import type { VectorMaps } from './region-picture.js';
import { resampleMap } from './resample.js';

/** Current weaker than this many deviations of its noise counts as none. */
export const CURRENT_DEVIATIONS = 3;

const CURRENT_QUANTILE = 0.995;
/** Where the field is weak a few pixels have an alpha far beyond all others. */
const ALPHA_QUANTILE = 0.95;

/** Limit of a colour scale and the share of the live pixels within it. */
interface LiveLimit {
  readonly limit: number;
  readonly share: number;
}

/** The current density [mA/m^2] with NaN where it lies below its noise, or where that is not known. */
function liveCurrent({ currentDensity, currentNoise }: VectorMaps): Float64Array {
  const sigma = currentNoise.values.data;
  return currentDensity.values.data.map((density, i) =>
    Math.abs(density) >= CURRENT_DEVIATIONS * sigma[i] ? density : Number.NaN,
  );
}

/** Alpha [1/Mm] with NaN where the radial field is too weak for one. */
function liveAlpha(vector: VectorMaps, radial: Grid2<'G'>): Float64Array {
  const field = radial.values.data;
  return vector.alpha.values.data.map((alpha, i) =>
    Math.abs(field[i]) >= vector.alphaLeastG ? alpha : Number.NaN,
  );
}

/** 1 for every pixel that has a field; beside one without, and at the edges, current and alpha are dead. */
function covered({ horizontal }: VectorMaps, radial: Grid2<'G'>): Float64Array {
  const field = radial.values.data;
  const [west, north] = [horizontal.x.values.data, horizontal.y.values.data];
  return field.map((fieldG, i) => (Number.isFinite(fieldG + west[i] + north[i]) ? 1 : Number.NaN));
}

/** A map at display resolution, row 0 south: NaN where missing or dead, `dead` tells which. */
export interface LiveSamples {
  readonly samples: Float64Array;
  readonly dead: Uint8Array;
}

/** The current density [mA/m^2] at the resolution of the frame. */
export function displayCurrent(
  vector: VectorMaps,
  radial: Grid2<'G'>,
  frame: MapFrame,
): LiveSamples {
  return display(liveCurrent(vector), covered(vector, radial), frame);
}

/** Alpha [1/Mm] at the resolution of the frame. */
export function displayAlpha(vector: VectorMaps, radial: Grid2<'G'>, frame: MapFrame): LiveSamples {
  return display(liveAlpha(vector, radial), covered(vector, radial), frame);
}

function display(live: Float64Array, cover: Float64Array, frame: MapFrame): LiveSamples {
  const [samples, there] = [live, cover].map((data) => {
    const grid = makeGrid(data, frame.nx, frame.ny, '1', 1);
    return resampleMap(grid, frame.width, frame.height, isBlocky(frame));
  });
  const dead = new Uint8Array(samples.length);
  for (let i = 0; i < dead.length; i++) {
    if (Number.isNaN(samples[i]) && !Number.isNaN(there[i])) dead[i] = 1;
  }
  return { samples, dead };
}

/** Symmetric limit [mA/m^2]: a round number at or above the 99.5 % quantile of the current above noise. */
export function currentLimit(vector: VectorMaps): LiveLimit {
  // A map of noise alone still gets a scale: that of its noise.
  const noise = CURRENT_DEVIATIONS * quantileOfSize(vector.currentNoise.values.data, 0.5);
  return liveLimit(liveCurrent(vector), CURRENT_QUANTILE, noise);
}

/** Symmetric limit [1/Mm]: a round number at or above the 95 % quantile of alpha where there is one. */
export function alphaLimit(vector: VectorMaps, radial: Grid2<'G'>): LiveLimit {
  return liveLimit(liveAlpha(vector, radial), ALPHA_QUANTILE, 0.01);
}

function liveLimit(live: Float64Array, share: number, otherwise: number): LiveLimit {
  const quantile = quantileOfSize(live.filter(Number.isFinite), share);
  const limit = [quantile, otherwise].find((size) => size > 0 && Number.isFinite(size)) ?? 1;
  return { limit: niceLimitAbove(limit), share };
}
