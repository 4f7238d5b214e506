import { VACUUM_PERMEABILITY } from '../constants.js';
import { paddedSpectrum, type Sides } from '../field/potential.js';
import { realFft2 } from '../grid/fft.js';
import type { Grid2 } from '../grid/grid.js';
import { wavenumbers } from '../grid/wavenumbers.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';
import { cellPairAtHeight } from './cell-pair-height.js';
import {
  type Energy,
  type EnergyForm,
  evaluateForm,
  type FieldNoise,
  largestAlpha,
  openForm,
  periodicForm,
  subtractForms,
} from './spectral-energy.js';

/** Where an energy sits: at each height its density and what lies below. */
export interface EnergyProfile {
  readonly heightsMm: Float64Array;
  /** Energy per height [J/Mm]. */
  readonly density: readonly Energy[];
  /** Energy between the surface and the height [J]. */
  readonly below: readonly Energy[];
  /** Energy at all heights [J], as the surface formulas of region-energy.ts have it. */
  readonly total: Energy;
}

/** The two forms of one height; gains like those of the whole energy. */
interface HeightForms {
  readonly density: EnergyForm;
  readonly below: EnergyForm;
}

/**
 * Potential energy by height above a patch. Periodic sides: each mode has the density
 * A/mu0 |b|^2 exp(-2 k z). Open sides: what lies above z is 1/(4 pi mu0) times the double integral of
 * Bz Bz' / sqrt(r^2 + 4 z^2), averaged over both pixels; one transform for each height. Heights [Mm] not
 * below 0. NaN counts as zero; noise as in `potentialEnergy`.
 */
export function potentialEnergyByHeight(
  radial: Grid2<'G'>,
  noise: FieldNoise,
  sides: Sides,
  heightsMm: Float64Array,
): EnergyProfile {
  const { pixelMm } = radial;
  const spectrum = paddedSpectrum(radial, sides);
  const { nx, ny } = spectrum;
  const evaluate = (form: EnergyForm) =>
    evaluateForm(spectrum, form, pixelMm, knownPixels(radial), noise);
  const total = sides === 'open' ? openForm(nx, ny, pixelMm) : periodicForm(nx, ny, pixelMm, 0);
  return profile(heightsMm, evaluate, total, (height) =>
    sides === 'open'
      ? openHeightForms(total, nx, ny, pixelMm, height)
      : periodicHeightForms(nx, ny, pixelMm, 0, height),
  );
}

/**
 * Free energy by height of the linear force-free field above a patch with periodic sides: that field's
 * energy less the current-free one's. Its density is negative nowhere, since every mode falls off more
 * slowly with alpha. Throws RangeError unless |alpha| [1/Mm] is below the smallest wavenumber.
 */
export function freeEnergyByHeight(
  radial: Grid2<'G'>,
  noise: FieldNoise,
  alphaPerMm: number,
  heightsMm: Float64Array,
): EnergyProfile {
  const { pixelMm } = radial;
  const spectrum = paddedSpectrum(radial, 'periodic');
  const { nx, ny } = spectrum;
  const evaluate = (form: EnergyForm) =>
    evaluateForm(spectrum, form, pixelMm, knownPixels(radial), noise);
  const total = subtractForms(
    periodicForm(nx, ny, pixelMm, alphaPerMm),
    periodicForm(nx, ny, pixelMm, 0),
  );
  return profile(heightsMm, evaluate, total, (height) => {
    const twisted = periodicHeightForms(nx, ny, pixelMm, alphaPerMm, height);
    const plain = periodicHeightForms(nx, ny, pixelMm, 0, height);
    return {
      density: subtractForms(twisted.density, plain.density),
      below: subtractForms(twisted.below, plain.below),
    };
  });
}

function profile(
  heightsMm: Float64Array,
  evaluate: (form: EnergyForm) => Energy,
  total: EnergyForm,
  formsAt: (heightMm: number) => HeightForms,
): EnergyProfile {
  const density: Energy[] = [];
  const below: Energy[] = [];
  for (const height of heightsMm) {
    if (!(height >= 0)) throw new RangeError(`height ${height} Mm is below the surface`);
    const forms = formsAt(height);
    density.push(evaluate(forms.density));
    below.push(evaluate(forms.below));
  }
  return { heightsMm, density, below, total: evaluate(total) };
}

/** Gains 2 exp(-2 l z) and (1 - exp(-2 l z)) / l, l = sqrt(k^2 - alpha^2); the mean has no energy. */
function periodicHeightForms(
  nx: number,
  ny: number,
  pixelMm: number,
  alphaPerMm: number,
  heightMm: number,
): HeightForms {
  if (!(Math.abs(alphaPerMm) < largestAlpha(nx, ny, pixelMm)))
    throw new RangeError(`alpha ${alphaPerMm} 1/Mm is not below the smallest wavenumber`);
  const columns = (nx >> 1) + 1;
  const kx = wavenumbers(nx, pixelMm);
  const ky = wavenumbers(ny, pixelMm);
  const density = new Float64Array(columns * ny);
  const below = new Float64Array(columns * ny);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < columns; x++) {
      const square = kx[x] * kx[x] + ky[y] * ky[y];
      if (square === 0) continue;
      const l = Math.sqrt(square - alphaPerMm * alphaPerMm);
      density[x + columns * y] = 2 * Math.exp(-2 * l * heightMm);
      below[x + columns * y] = -Math.expm1(-2 * l * heightMm) / l;
    }
  }
  const h = pixelMm * METRES_PER_MEGAMETRE;
  const factorJ =
    (h * h * METRES_PER_MEGAMETRE * TESLA_PER_GAUSS ** 2) / (2 * VACUUM_PERMEABILITY * nx * ny);
  return { density: { gain: density, factorJ }, below: { gain: below, factorJ } };
}

/** The same from the field of every pair of pixels in free space; `total` is the form of all heights. */
function openHeightForms(
  total: EnergyForm,
  px: number,
  py: number,
  pixelMm: number,
  heightMm: number,
): HeightForms {
  const { factorJ } = total;
  const c = (2 * heightMm) / pixelMm;
  const slopes = new Float64Array(px * py);
  if (c === 0) {
    // The limit: a pair of one and the same pixel, and 2 pi for all of the plane.
    slopes[0] = -2 * Math.PI;
    const gain = realFft2(slopes, px, py).re.map((value) => (-2 / pixelMm) * value);
    return {
      density: { gain, factorJ },
      below: { gain: new Float64Array(gain.length), factorJ },
    };
  }
  const values = new Float64Array(px * py);
  for (let y = 0; 2 * y <= py; y++) {
    const row = px * y;
    for (let x = 0; 2 * x <= px; x++) {
      const { value, slope } = cellPairAtHeight(x, y, c);
      values[row + x] = value;
      slopes[row + x] = slope;
      if (x > 0) {
        values[row + px - x] = value;
        slopes[row + px - x] = slope;
      }
    }
    if (y > 0) {
      values.copyWithin(px * (py - y), row, row + px);
      slopes.copyWithin(px * (py - y), row, row + px);
    }
  }
  const above = realFft2(values, px, py).re;
  // c grows by 2 / pixel for each Mm of height.
  const density = realFft2(slopes, px, py).re.map((value) => (-2 / pixelMm) * value);
  const below = total.gain.map((value, i) => value - above[i]);
  return { density: { gain: density, factorJ }, below: { gain: below, factorJ } };
}

function knownPixels(field: Grid2<'G'>): number {
  let count = 0;
  for (const value of field.values.data) if (!Number.isNaN(value)) count++;
  return count;
}
