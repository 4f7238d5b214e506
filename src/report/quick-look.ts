import { createHash } from 'node:crypto';
import { closeSync, openSync, readSync } from 'node:fs';
import { analyseMap, type MapAnalysis, type MapAnalysisOptions } from '../figures/analyse-map.js';
import { readFitsFile } from '../fits/index.js';
import { type MapOptions, readSolarMap, type SolarMap } from '../geometry/solar-map.js';
import { type QuickLookDocument, quickLookDocument } from './document.js';
import { toolVersion } from './tool-version.js';

/** The quick look of one file: the document, and the maps behind it. */
export interface QuickLook {
  readonly document: QuickLookDocument;
  readonly map: SolarMap;
  readonly analysis: MapAnalysis;
}

/** How a file is read and worked out; all optional. */
export interface QuickLookOptions {
  readonly reading?: MapOptions;
  readonly analysis?: MapAnalysisOptions;
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

/**
 * Reads a magnetogram and works out one region of it. Writes nothing. Throws FitsError, GeometryError or
 * DataError, each with a one-line message, when the file cannot be used.
 */
export function quickLook(path: string, options: QuickLookOptions = {}): QuickLook {
  const map = readSolarMap(readFitsFile(path), options.reading ?? {});
  const analysis = analyseMap(map, options.analysis ?? {});
  const settings = {
    radial_field: analysis.radialMethod,
    sides: analysis.sides,
    noise_G: analysis.noiseG,
    noise_basis: analysis.noiseBasis,
  };
  const source = {
    path,
    sha256: sha256(path),
    observed: map.observed ?? null,
    hdu: map.hdu,
  };
  const regions = [{ figures: analysis.figures, settings }];
  return { document: quickLookDocument(source, regions, toolVersion()), map, analysis };
}
