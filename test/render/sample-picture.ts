import { analyseRegion } from '../../src/figures/analyse-region.js';
import type { RegionPicture } from '../../src/render/region-picture.js';
import { type SampleOptions, samplePatch } from './sample-patch.js';

/** A whole picture of invented region MH-1 of the station on Marrow Hill. */
export function samplePicture(
  options: SampleOptions,
  change: Partial<RegionPicture> = {},
): RegionPicture {
  const patch = samplePatch(options);
  const analysis = analyseRegion(patch, {
    noiseG: options.noiseG ?? 12,
    sourcePixelMm: patch.pixelMm,
    id: 'MH-1',
  });
  return {
    source: 'marrow-hill-20310504-120000.fits',
    observed: '2031-05-04T12:00:00.000Z',
    toolVersion: '0.1.0',
    region: analysis.figures,
    patch,
    radialField: analysis.radialField,
    currentDensity: analysis.currentDensity,
    inversionLines: analysis.inversionLines,
    ...change,
  };
}
