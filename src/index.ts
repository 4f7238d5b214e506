// What a program may import from spotjoule.
export {
  type EnergyProfile,
  freeEnergyByHeight,
  potentialEnergyByHeight,
} from './energy/energy-by-height.js';
export * from './errors.js';
export { type FieldLine, type TraceOptions, traceFieldLines } from './field/field-lines.js';
export { geometricHeights, uniformHeights } from './field/heights.js';
export { seedsByFlux } from './field/line-seeds.js';
export {
  type FieldVolume,
  potentialVolume,
  potentialVolumeDouble,
  type VolumeOptions,
} from './field/volume.js';
export type { MapAnalysis, MapAnalysisOptions } from './figures/analyse-map.js';
export { analyseMap } from './figures/analyse-map.js';
export {
  type AnalysisOptions,
  analyseRegion,
  type RegionAnalysis,
} from './figures/analyse-region.js';
export { analyseVectorMap, type VectorMapAnalysis } from './figures/analyse-vector-map.js';
export {
  type Basis,
  QUANTITY_FACTS,
  QUANTITY_KEYS,
  type Quantity,
  type QuantityKey,
  type QuantityUnit,
} from './figures/quantity.js';
export type { RegionFigures } from './figures/region.js';
export * from './fits/index.js';
export { makePatch, type PatchOptions, type PatchResult } from './geometry/make-patch.js';
export * from './geometry/patch.js';
export { patchToStonyhurst, stonyhurstToPatch } from './geometry/patch-position.js';
export { type MapOptions, readSolarMap, type SolarMap } from './geometry/solar-map.js';
export { type Grid2, makeGrid } from './grid/grid.js';
export { type RegionPicture, renderRegionPicture } from './render/region-picture.js';
export { type QuickLookDocument, quickLookDocument, type RegionJson } from './report/document.js';
export {
  type QuickLook,
  type QuickLookOptions,
  quickLook,
  type VectorQuickLookOptions,
  vectorQuickLook,
} from './report/quick-look.js';
export { quickLookCsv } from './report/table.js';
