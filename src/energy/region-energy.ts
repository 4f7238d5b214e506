import { paddedSpectrum, type Sides } from '../field/potential.js';
import type { Spectrum2 } from '../grid/fft.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import {
  type Energy,
  evaluateForm,
  type FieldNoise,
  largestAlpha,
  openForm,
  periodicForm,
  subtractForms,
} from './spectral-energy.js';

/** Field above this many noise deviations counts as signal where noise would add up unsigned. */
export const SIGNAL_DEVIATIONS = 3;

/** Number of pixels that hold a value. */
function knownPixels(field: Grid2<'G'>): number {
  let count = 0;
  for (const value of field.values.data) if (!Number.isNaN(value)) count++;
  return count;
}

/** The same map with other values. */
function mapField(field: Grid2<'G'>, change: (fieldG: number) => number): Grid2<'G'> {
  const [ny, nx] = field.values.shape;
  return makeGrid(field.values.data.map(change), nx, ny, 'G', field.pixelMm);
}

/**
 * Energy of the current-free field above a patch [J], with nothing (open) or the patch repeated
 * (periodic, mean field left out) beyond its sides. `spectrum` is the map's padded spectrum, where the
 * caller has it already.
 */
export function potentialEnergy(
  radial: Grid2<'G'>,
  noise: FieldNoise,
  sides: Sides,
  spectrum: Spectrum2 = paddedSpectrum(radial, sides),
): Energy {
  const { nx, ny } = spectrum;
  const form =
    sides === 'open' ? openForm(nx, ny, radial.pixelMm) : periodicForm(nx, ny, radial.pixelMm, 0);
  return evaluateForm(spectrum, form, radial.pixelMm, knownPixels(radial), noise);
}

/**
 * Ceiling on free energy [J]: the energy of the wholly open field of the same boundary, which is the
 * current-free field of |Bz|, less that of the closed one (Aly 1991, ApJ 375, L61; Sturrock 1991, ApJ
 * 380, 655). Both are taken of the pixels above three noise deviations, since noise adds up in |Bz|.
 */
export function freeEnergyCeiling(radial: Grid2<'G'>, noise: FieldNoise): Energy {
  const least = SIGNAL_DEVIATIONS * noise.deviationG;
  const evaluate = (field: Grid2<'G'>): Energy => {
    const spectrum = paddedSpectrum(field, 'open');
    const form = openForm(spectrum.nx, spectrum.ny, radial.pixelMm);
    return evaluateForm(spectrum, form, radial.pixelMm, 0, noise);
  };
  const closed = evaluate(mapField(radial, (b) => (Math.abs(b) >= least ? b : 0)));
  const open = evaluate(mapField(radial, (b) => (Math.abs(b) >= least ? Math.abs(b) : 0)));
  return { joules: open.joules - closed.joules, sigma: Math.hypot(open.sigma, closed.sigma) };
}

/** Free energy of the linear force-free field of a patch as a function of alpha, and alpha's limit. */
export interface LinearFreeEnergy {
  /** Smallest wavenumber of the box [1/Mm]: |alpha| must stay below. */
  readonly largestAlphaPerMm: number;
  readonly at: (alphaPerMm: number) => Energy;
}

/**
 * Prepares the free energy of the linear force-free field above a patch with periodic sides: one
 * transform, then a sum over modes for each alpha.
 */
export function linearFreeEnergy(radial: Grid2<'G'>, noise: FieldNoise): LinearFreeEnergy {
  const spectrum = paddedSpectrum(radial, 'periodic');
  const { nx, ny } = spectrum;
  const { pixelMm } = radial;
  const potential = periodicForm(nx, ny, pixelMm, 0);
  const pixels = knownPixels(radial);
  return {
    largestAlphaPerMm: largestAlpha(nx, ny, pixelMm),
    at: (alphaPerMm) => {
      const form = subtractForms(periodicForm(nx, ny, pixelMm, alphaPerMm), potential);
      return evaluateForm(spectrum, form, pixelMm, pixels, noise);
    },
  };
}
