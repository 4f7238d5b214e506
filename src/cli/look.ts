import { basename } from 'node:path';
import type { MapAnalysisOptions } from '../figures/analyse-map.js';
import type { RegionFigures } from '../figures/region.js';
import type { VolumeSource } from '../figures/region-volume.js';
import type { SolarMap } from '../geometry/solar-map.js';
import type { ComponentSource } from '../geometry/vector-map.js';
import type { RegionPicture } from '../render/region-picture.js';
import type { QuickLookDocument } from '../report/document.js';
import { quickLook, vectorQuickLook } from '../report/quick-look.js';
import type { VolumeRegion } from '../report/volume-cube.js';
import type { QuickLookArguments } from './quicklook.js';
import { readingOptions } from './reading-options.js';

/** What the command makes of one map, whatever its kind. */
export interface Look {
  /** The file that names the results. */
  readonly file: string;
  readonly document: QuickLookDocument;
  readonly figures: RegionFigures;
  readonly noiseG: number;
  readonly noiseBasis: 'measured' | 'assumed';
  readonly map: SolarMap;
  /** What volumes and field lines are made from. */
  readonly surface: VolumeSource & VolumeRegion;
  readonly picture: RegionPicture;
  /** The patch's maps as a FITS file. */
  readonly maps: () => Promise<Uint8Array>;
}

/** The viewing directions are not drawn: spare the second thread a copy of three maps. */
const NOTHING = new Float64Array(0);
const NOT_DRAWN = { x: NOTHING, y: NOTHING, z: NOTHING };

/** Options of region and patch, for either kind of map. */
function commonOptions(options: QuickLookArguments) {
  return {
    ...(options.center && { center: options.center }),
    ...(options.extent !== undefined && { extentMm: options.extent }),
    ...(options.pixel !== undefined && { pixelMm: options.pixel }),
    ...(options.allowLimb && { allowLimb: true }),
    ...(options.noise !== undefined && { noiseG: options.noise }),
    ...(options.regionId !== undefined && { id: options.regionId }),
    sides: options.sides,
  };
}

/** The quick look of a line-of-sight or radial map. */
export function lookAtMap(file: string, options: QuickLookArguments): Look {
  const analysisOptions: MapAnalysisOptions = {
    ...commonOptions(options),
    ...(options.alpha !== undefined && { alphaPerMm: options.alpha }),
    radialMethod: options.radial,
  };
  const { document, map, analysis } = quickLook(file, {
    reading: readingOptions(options),
    analysis: analysisOptions,
  });
  const { version } = document.tool;
  return {
    file,
    document,
    figures: analysis.figures,
    noiseG: analysis.noiseG,
    noiseBasis: analysis.noiseBasis,
    map,
    surface: analysis,
    picture: {
      source: basename(file),
      observed: map.observed,
      toolVersion: version,
      region: analysis.figures,
      patch: { ...analysis.patch, toObserver: NOT_DRAWN },
      radialField: analysis.radialField,
      currentDensity: analysis.currentDensity,
      inversionLines: analysis.inversionLines,
    },
    maps: async () => (await import('../report/maps.js')).regionMaps(analysis, map, version),
  };
}

/** The quick look of a vector map. */
export function lookAtVector(
  sources: readonly ComponentSource[],
  options: QuickLookArguments,
): Look {
  const [{ file }] = sources;
  const { document, map, analysis } = vectorQuickLook(sources, {
    reading: {
      ...readingOptions(options),
      ...(options.azimuthZero && { azimuthZero: options.azimuthZero }),
    },
    analysis: {
      ...commonOptions(options),
      ...(options.disambiguation && { disambiguation: options.disambiguation }),
    },
  });
  const { version } = document.tool;
  return {
    file,
    document,
    figures: analysis.figures,
    noiseG: analysis.noiseG,
    noiseBasis: analysis.noiseBasis,
    map,
    surface: { ...analysis, radialField: analysis.field.z },
    picture: {
      source: basename(file),
      observed: map.observed,
      toolVersion: version,
      region: analysis.figures,
      patch: { ...analysis.patch, toObserver: NOT_DRAWN },
      radialField: analysis.field.z,
      currentDensity: analysis.currents.density,
      inversionLines: analysis.inversionLines,
      vector: {
        horizontal: { x: analysis.field.x, y: analysis.field.y },
        horizontalNoiseG: analysis.horizontalNoiseG,
        currentDensity: analysis.currents.density,
        currentNoise: analysis.currentNoise,
        alpha: analysis.alpha,
        alphaLeastG: analysis.alphaLeastG,
      },
    },
    maps: async () => (await import('../report/maps.js')).vectorMaps(analysis, map, version),
  };
}
