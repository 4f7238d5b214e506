import { DataError } from '../errors.js';
import type { RadialMethod } from '../field/radial.js';
import { makePatch, type PatchOptions } from '../geometry/make-patch.js';
import type { SolarMap } from '../geometry/solar-map.js';
import { estimateNoise } from '../grid/noise.js';
import { findSpikes } from '../grid/spikes.js';
import { analyseRegion, type RegionAnalysis } from './analyse-region.js';

/** How a map is worked out: the choices of patch and region, all optional. */
export interface MapAnalysisOptions extends PatchOptions {
  /** 1-sigma noise of a source pixel [G]; estimated from the map's quiet pixels when left out. */
  readonly noiseG?: number;
  readonly sides?: 'open' | 'periodic';
  readonly radialMethod?: 'potential' | 'mu';
  readonly alphaPerMm?: number;
  readonly id?: string;
}

/** A region with the choices that were made. */
export interface MapAnalysis extends RegionAnalysis {
  readonly noiseG: number;
  readonly noiseBasis: 'measured' | 'assumed';
  readonly sides: 'open' | 'periodic';
  readonly radialMethod: RadialMethod;
}

/** The map with lone spikes taken out, and their number. */
export function withoutSpikes(
  map: SolarMap,
  noiseG: number,
): { readonly map: SolarMap; readonly spikes: number } {
  const spikes = findSpikes(map.values, map.nx, map.ny, noiseG);
  if (spikes.length === 0) return { map, spikes: 0 };
  const values = map.values.slice();
  for (const i of spikes) values[i] = Number.NaN;
  return { map: { ...map, values }, spikes: spikes.length };
}

/**
 * Works out one region of a map: noise, patch, radial field, figures. Throws GeometryError when the
 * patch asked for is not on the disk, DataError when the map has too little in it.
 */
export function analyseMap(source: SolarMap, options: MapAnalysisOptions = {}): MapAnalysis {
  const estimated = estimateNoise(source.values, source.nx, source.ny);
  const noiseG = options.noiseG ?? estimated;
  if (!Number.isFinite(noiseG))
    throw new DataError('has too few quiet pixels to estimate the noise from: give --noise GAUSS');
  const { map, spikes } = withoutSpikes(source, noiseG);
  const { patch, warnings } = makePatch(map, options);
  const sides = options.sides ?? 'open';
  const analysis = analyseRegion(patch, {
    noiseG,
    sourcePixelMm: map.pixelMm,
    sides,
    ...(options.radialMethod && { radialMethod: options.radialMethod }),
    ...(options.alphaPerMm !== undefined && { alphaPerMm: options.alphaPerMm }),
    ...(options.id !== undefined && { id: options.id }),
  });
  const spikeFlags =
    spikes === 0
      ? []
      : [`${spikes} lone spike${spikes === 1 ? '' : 's'} set aside as no solar field`];
  return {
    ...analysis,
    figures: {
      ...analysis.figures,
      flags: [...map.warnings, ...warnings, ...spikeFlags, ...analysis.figures.flags],
    },
    noiseG,
    noiseBasis: options.noiseG === undefined ? 'measured' : 'assumed',
    sides,
  };
}
