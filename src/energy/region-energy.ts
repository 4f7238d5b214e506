import { polarityMap } from '../field/polarity.js';
import { paddedSpectrum, type Sides } from '../field/potential.js';
import type { Spectrum2 } from '../grid/fft.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { blockMean } from '../grid/rebin.js';
import { openEnergy } from './open-energy.js';
import {
  type Energy,
  evaluateForm,
  type FieldNoise,
  largestAlpha,
  openForm,
  periodicForm,
  subtractForms,
} from './spectral-energy.js';

/** Number of pixels that hold a value. */
function knownPixels(field: Grid2<'G'>): number {
  let count = 0;
  for (const value of field.values.data) if (!Number.isNaN(value)) count++;
  return count;
}

/**
 * Energy of the current-free field above a patch [J], with nothing (open) or the patch repeated
 * (periodic, mean field left out) beyond its sides. `given` is the map's padded spectrum, where the
 * caller has it already.
 */
export function potentialEnergy(
  radial: Grid2<'G'>,
  noise: FieldNoise,
  sides: Sides,
  given?: Spectrum2,
): Energy {
  if (sides === 'open' && !given) return openEnergy(radial, knownPixels(radial), noise);
  const spectrum = given ?? paddedSpectrum(radial, sides);
  const { nx, ny } = spectrum;
  const form =
    sides === 'open' ? openForm(nx, ny, radial.pixelMm) : periodicForm(nx, ny, radial.pixelMm, 0);
  return evaluateForm(spectrum, form, radial.pixelMm, knownPixels(radial), noise);
}

/** From this many pixels a side the ceiling is had from pairs of pixels: 0.1 % off, far below its error. */
const COARSENED_SIDE = 200;

/**
 * Ceiling on free energy [J]: the energy of the wholly open field of the same boundary, which is the
 * current-free field of |Bz|, less that of the closed one (Aly 1991, ApJ 375, L61; Sturrock 1991, ApJ
 * 380, 655). Noise would add up in |Bz|: it is the field times the polarity of `polarityMap` instead.
 */
export function freeEnergyCeiling(
  radial: Grid2<'G'>,
  noise: FieldNoise,
  polarity: Int8Array = polarityMap(radial, { ...noise, pixelDeviationG: noise.deviationG }),
): Energy {
  const [ny, nx] = radial.values.shape;
  const factor = Math.min(nx, ny) >= COARSENED_SIDE ? 2 : 1;
  const evaluate = (weight: (sign: number) => number): Energy => {
    const { data } = radial.values;
    const signal = new Float64Array(data.length);
    for (let i = 0; i < data.length; i++)
      if (polarity[i] !== 0) signal[i] = weight(polarity[i]) * data[i];
    const blocks = blockMean(signal, nx, ny, factor);
    const field = makeGrid(blocks.values, blocks.nx, blocks.ny, 'G', factor * radial.pixelMm);
    return openEnergy(field, 0, noise);
  };
  const closed = evaluate(() => 1);
  const open = evaluate((sign) => sign);
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
