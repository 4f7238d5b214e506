import { paddedSpectrum, transformSize } from '../field/potential.js';
import type { Grid2 } from '../grid/grid.js';
import { openPlaneSums } from '../grid/open-sums.js';
import { CLOSED_FORM_REACH, cellPairInverseDistance } from './cell-pair.js';
import {
  type Energy,
  energyOfSums,
  evaluateForm,
  type FieldNoise,
  openFactor,
  openForm,
} from './spectral-energy.js';

let nearPairs: Float64Array | undefined;

/**
 * Energy [J] of the current-free field in free space above a map with nothing beyond its sides, as
 * `openForm` states it. The sums are made without writing out either spectrum where the kernels can do
 * so, and by the transforms otherwise. `pixels` holding noise as for `evaluateForm`; NaN counts as zero.
 */
export function openEnergy(radial: Grid2<'G'>, pixels: number, noise: FieldNoise): Energy {
  const [ny, nx] = radial.values.shape;
  const { pixelMm } = radial;
  const [px, py] = [transformSize(nx, 'open'), transformSize(ny, 'open')];
  const side = CLOSED_FORM_REACH + 1;
  nearPairs ??= Float64Array.from({ length: side * side }, (_, i) =>
    cellPairInverseDistance(i % side, Math.floor(i / side)),
  );
  const sums = openPlaneSums(radial.values.data, nx, ny, px, py, nearPairs);
  if (sums) return energyOfSums(sums, openFactor(px, py, pixelMm), px * py, pixelMm, pixels, noise);
  const form = openForm(px, py, pixelMm);
  return evaluateForm(paddedSpectrum(radial, 'open'), form, pixelMm, pixels, noise);
}
