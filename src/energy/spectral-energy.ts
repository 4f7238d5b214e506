import { VACUUM_PERMEABILITY } from '../constants.js';
import { realFft2, type Spectrum2 } from '../grid/fft.js';
import { columnWeight, wavenumbers } from '../grid/wavenumbers.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';
import { cellPairInverseDistance } from './cell-pair.js';

/**
 * Every energy of a current-free or linear force-free field over a plane is a sum over the modes of
 * its vertical field, E = factor * sum of gain |B_k|^2. `gain` has one value per stored mode of a half
 * spectrum; `factorJ` carries the units for B_k in G.
 */
export interface EnergyForm {
  readonly gain: Float64Array;
  readonly factorJ: number;
}

/** Noise of a radial field: 1 sigma [G] of independent cells of `cellMm2` [Mm^2] on the Sun. */
export interface FieldNoise {
  readonly deviationG: number;
  readonly cellMm2: number;
}

/** An energy [J] with the noise's own contribution taken out and its 1-sigma error. */
export interface Energy {
  readonly joules: number;
  readonly sigma: number;
}

/**
 * Energy form of the current-free field in the free half space above a map that is zero outside
 * its nx x ny corner: E = 1/(4 pi mu0) double integral of Bz Bz' / |r - r'|, with 1/|r - r'| averaged
 * over both pixels (exact for a map that is constant in each pixel). Needs px >= 2 nx, py >= 2 ny.
 */
export function openForm(px: number, py: number, pixelMm: number): EnergyForm {
  return { gain: inverseDistanceSpectrum(px, py), factorJ: openFactor(px, py, pixelMm) };
}

/** The units of an open form for B_k in G. */
export function openFactor(px: number, py: number, pixelMm: number): number {
  const h = pixelMm * METRES_PER_MEGAMETRE;
  return (h ** 3 * TESLA_PER_GAUSS ** 2) / (4 * Math.PI * VACUUM_PERMEABILITY * px * py);
}

/** The last kernel made: one region asks for the same one several times. */
let lastKernel:
  | { readonly px: number; readonly py: number; readonly gain: Float64Array }
  | undefined;

function inverseDistanceSpectrum(px: number, py: number): Float64Array {
  if (lastKernel?.px === px && lastKernel.py === py) return lastKernel.gain;
  const kernel = new Float64Array(px * py);
  for (let y = 0; 2 * y <= py; y++) {
    const row = px * y;
    for (let x = 0; 2 * x <= px; x++) {
      const value = cellPairInverseDistance(x, y);
      kernel[row + x] = value;
      if (x > 0) kernel[row + px - x] = value;
    }
    if (y > 0) kernel.copyWithin(px * (py - y), row, row + px);
  }
  lastKernel = { px, py, gain: realFft2(kernel, px, py).re };
  return lastKernel.gain;
}

/**
 * Energy form of the field with constant alpha [1/Mm] above a periodic map (alpha 0: current-free):
 * E = A/(2 mu0) sum of |b_k|^2 / l with l = sqrt(k^2 - alpha^2) (Nakagawa & Raadu 1972, Sol. Phys. 25,
 * 127; Alissandrakis 1981, A&A 100, 197). The mean field has no energy here. Throws RangeError unless
 * |alpha| is below the smallest wavenumber.
 */
export function periodicForm(
  nx: number,
  ny: number,
  pixelMm: number,
  alphaPerMm: number,
): EnergyForm {
  if (!(Math.abs(alphaPerMm) < largestAlpha(nx, ny, pixelMm)))
    throw new RangeError(`alpha ${alphaPerMm} 1/Mm is not below the smallest wavenumber`);
  const columns = (nx >> 1) + 1;
  const kx = wavenumbers(nx, pixelMm);
  const ky = wavenumbers(ny, pixelMm);
  const gain = new Float64Array(columns * ny);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < columns; x++) {
      const square = kx[x] * kx[x] + ky[y] * ky[y];
      if (square > 0) gain[x + columns * y] = 1 / Math.sqrt(square - alphaPerMm * alphaPerMm);
    }
  }
  const h = pixelMm * METRES_PER_MEGAMETRE;
  const factorJ =
    (h * h * METRES_PER_MEGAMETRE * TESLA_PER_GAUSS ** 2) / (2 * VACUUM_PERMEABILITY * nx * ny);
  return { gain, factorJ };
}

/** Smallest wavenumber [1/Mm] of a periodic map: 2 pi over its longer side; alpha must stay below. */
export function largestAlpha(nx: number, ny: number, pixelMm: number): number {
  return (2 * Math.PI) / (Math.max(nx, ny) * pixelMm);
}

/** The form whose value is the difference of two: free energy from total and potential. */
export function subtractForms(a: EnergyForm, b: EnergyForm): EnergyForm {
  const scale = b.factorJ / a.factorJ;
  return { gain: a.gain.map((value, i) => value - scale * b.gain[i]), factorJ: a.factorJ };
}

/**
 * Evaluates a form on the spectrum of a padded map [G]. `filledCells` is how many independent noise
 * cells the map holds: their own expected energy is subtracted, and sigma is the linear propagation
 * of white noise, 2 factor sqrt(M sigma^2 c sum of gain^2 |B_k|^2) with c the cell over the pixel area.
 */
export function evaluateForm(
  spectrum: Spectrum2,
  form: EnergyForm,
  pixelMm: number,
  pixels: number,
  noise: FieldNoise,
): Energy {
  const { nx, ny, columns, re, im } = spectrum;
  const { gain } = form;
  let energy = 0;
  let slope = 0;
  let trace = 0;
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < columns; x++) {
      const i = x + columns * y;
      const weight = columnWeight(x, nx);
      const part = weight * gain[i] * (re[i] * re[i] + im[i] * im[i]);
      energy += part;
      slope += gain[i] * part;
      trace += weight * gain[i];
    }
  }
  return energyOfSums({ energy, slope, trace }, form.factorJ, nx * ny, pixelMm, pixels, noise);
}

/** Over all modes of a form: sum of gain |B_k|^2, of gain^2 |B_k|^2 and of gain. */
export interface FormSums {
  readonly energy: number;
  readonly slope: number;
  readonly trace: number;
}

/** The energy with its noise taken out and its error, from the sums over `modes` modes. */
export function energyOfSums(
  { energy, slope, trace }: FormSums,
  factorJ: number,
  modes: number,
  pixelMm: number,
  pixels: number,
  noise: FieldNoise,
): Energy {
  const pixelMm2 = pixelMm * pixelMm;
  const ratio = noise.cellMm2 / pixelMm2;
  const variance = noise.deviationG ** 2;
  // Cells wider than a pixel are fewer but larger: their energy grows as their side. Narrower ones
  // average out within a pixel, so that the variance falls as their area.
  const ownEnergy = variance * pixels * trace * (ratio > 1 ? Math.sqrt(ratio) : ratio);
  return {
    joules: factorJ * (energy - ownEnergy),
    sigma: 2 * factorJ * Math.sqrt(modes * variance * ratio * Math.max(0, slope)),
  };
}
