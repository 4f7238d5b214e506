import { createHash } from 'node:crypto';
import { closeSync, openSync, readSync } from 'node:fs';
import { analyseMap, type MapAnalysis, type MapAnalysisOptions } from '../figures/analyse-map.js';
import {
  analyseVectorMap,
  type VectorAnalysisOptions,
  type VectorMapAnalysis,
} from '../figures/analyse-vector-map.js';
import { readFitsFile } from '../fits/index.js';
import { type MapOptions, readSolarMap, type SolarMap } from '../geometry/solar-map.js';
import {
  type ComponentSource,
  readVectorMap,
  type VectorMapOptions,
} from '../geometry/vector-map.js';
import { type QuickLookDocument, quickLookDocument, type Settings } from './document.js';
import { toolVersion } from './tool-version.js';

/** The quick look of one map: the document, and the maps behind it. */
export interface QuickLook<Analysis = MapAnalysis> {
  readonly document: QuickLookDocument;
  readonly map: SolarMap;
  readonly analysis: Analysis;
}

/** How a file is read and worked out; all optional. */
export interface QuickLookOptions {
  readonly reading?: MapOptions;
  readonly analysis?: MapAnalysisOptions;
}

/** The same for a vector map. */
export interface VectorQuickLookOptions {
  readonly reading?: VectorMapOptions;
  readonly analysis?: VectorAnalysisOptions;
}

function sha256(path: string): string {
  const hash = createHash('sha256');
  const chunk = new Uint8Array(1 << 20);
  const handle = openSync(path, 'r');
  try {
    for (let read = readSync(handle, chunk); read > 0; read = readSync(handle, chunk))
      hash.update(chunk.subarray(0, read));
  } finally {
    closeSync(handle);
  }
  return hash.digest('hex');
}

function documentOf(
  path: string,
  map: SolarMap,
  analysis: MapAnalysis | VectorMapAnalysis,
  radialField: Settings['radial_field'],
): QuickLookDocument {
  const settings: Settings = {
    radial_field: radialField,
    sides: analysis.sides,
    noise_G: analysis.noiseG,
    noise_basis: analysis.noiseBasis,
  };
  const source = { path, sha256: sha256(path), observed: map.observed ?? null, hdu: map.hdu };
  return quickLookDocument(source, [{ figures: analysis.figures, settings }], toolVersion());
}

/**
 * Reads a magnetogram and works out one region of it. Writes nothing. Throws FitsError, GeometryError or
 * DataError, each with a one-line message, when the file cannot be used.
 */
export function quickLook(path: string, options: QuickLookOptions = {}): QuickLook {
  const map = readSolarMap(readFitsFile(path), options.reading ?? {});
  const analysis = analyseMap(map, options.analysis ?? {});
  return { document: documentOf(path, map, analysis, analysis.radialMethod), map, analysis };
}

/**
 * The same for a vector map whose components lie in one or several files; the document names the first.
 * Throws UsageError as well, where the components do not make a whole.
 */
export function vectorQuickLook(
  sources: readonly ComponentSource[],
  options: VectorQuickLookOptions = {},
): QuickLook<VectorMapAnalysis> {
  const vector = readVectorMap(sources, options.reading ?? {});
  const analysis = analyseVectorMap(vector, options.analysis ?? {});
  const { base: map } = vector;
  return { document: documentOf(sources[0].file, map, analysis, 'vector'), map, analysis };
}
