import { linearCurrentMap } from '../currents/linear-current.js';
import { freeEnergyCeiling, linearFreeEnergy, potentialEnergy } from '../energy/region-energy.js';
import type { Energy } from '../energy/spectral-energy.js';
import { type AlphaBelief, alphaPrior, assumedAlpha, beliefQuantile } from '../field/alpha.js';
import { sumFlux } from '../field/flux.js';
import type { InversionLine } from '../field/inversion-line.js';
import { polarityMap } from '../field/polarity.js';
import { paddedSpectrum, type Sides } from '../field/potential.js';
import { type RadialMethod, radialByMu, radialField } from '../field/radial.js';
import { type LocalPatch, PIXEL_GOOD, PIXEL_MISSING } from '../geometry/patch.js';
import type { Spectrum2 } from '../grid/fft.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import { blockMean } from '../grid/rebin.js';
import { circuitQuantities, currentQuantities } from './current-figures.js';
import { fluxQuantities } from './flux-figures.js';
import { lineQuantities } from './line-figures.js';
import { type PatchNoise, patchNoise, UNIFORM_DEVIATION } from './patch-noise.js';
import { type Quantities, type Quantity, withSigma } from './quantity.js';
import type { RegionFigures } from './region.js';

/** How a region is worked out. */
export interface AnalysisOptions {
  /** 1-sigma noise [G] of one source pixel along the line of sight, and that pixel's side at disk centre [Mm]. */
  readonly noiseG: number;
  readonly sourcePixelMm: number;
  readonly sides?: Sides;
  readonly radialMethod?: 'potential' | 'mu';
  /** Force-free alpha fixed by the user [1/Mm]; otherwise the prior. */
  readonly alphaPerMm?: number;
  readonly id?: string;
}

/** A region's figures with the maps and lines they came from. */
export interface RegionAnalysis {
  readonly figures: RegionFigures;
  readonly patch: LocalPatch;
  readonly radialField: Grid2<'G'>;
  readonly radialMethod: RadialMethod;
  /** Linear force-free current density at the median |alpha|, with the sign of the latitude's rule. */
  readonly currentDensity: Grid2<'mA/m^2'> | undefined;
  readonly inversionLines: readonly InversionLine[];
}

export function heliographicName({
  stonyhurstLongitudeDeg,
  stonyhurstLatitudeDeg,
}: LocalPatch['center']) {
  const two = (deg: number) => String(Math.abs(Math.round(deg))).padStart(2, '0');
  const ns = stonyhurstLatitudeDeg < 0 ? 'S' : 'N';
  const ew = stonyhurstLongitudeDeg < 0 ? 'E' : 'W';
  return `${ns}${two(stonyhurstLatitudeDeg)}${ew}${two(stonyhurstLongitudeDeg)}`;
}

/**
 * Works out every figure of one region from its patch.
 * Throws RangeError when `noiseG` or `sourcePixelMm` is not a positive number.
 */
export function analyseRegion(patch: LocalPatch, options: AnalysisOptions): RegionAnalysis {
  if (!(options.noiseG >= 0 && options.sourcePixelMm > 0))
    throw new RangeError('noise and source pixel must be positive numbers');
  const sides = options.sides ?? 'open';
  const { field: radial, method } = radialField(patch, options.radialMethod ?? 'potential');
  const other = otherRadial(patch, radial, method);
  const noise = patchNoise(patch, options);
  const polarity = polarityMap(radial, noise);
  const sums = sumFlux(radial, polarity);
  const spectrum = paddedSpectrum(radial, sides);
  const potential = potentialWithSpread(radial, other, noise, sides, spectrum);
  const ceiling = freeEnergyCeiling(radial, noise, polarity);
  const quantities: Quantities = {
    ...fluxQuantities(radial, sums, polarity, other, noise),
    potential_energy: energyQuantity('potential_energy', potential),
    free_energy_ceiling: energyQuantity('free_energy_ceiling', ceiling),
  };
  const flags: string[] = [...methodFlags(method), ...patchFlags(patch, quantities)];

  const linear = linearFreeEnergy(radial, noise);
  const belief = alphaBelief(options, patch, linear.largestAlphaPerMm);
  if (belief) {
    const currents = currentQuantities({ belief, linear, sums, quantities, noise, potential });
    Object.assign(quantities, currents.quantities);
    flags.push(...currents.flags);
  } else {
    flags.push(
      `free energy and currents cannot be had: alpha ${options.alphaPerMm} 1/Mm is not below the limit ${linear.largestAlphaPerMm.toPrecision(3)} 1/Mm of a patch this wide`,
    );
  }
  const circuit = circuitQuantities(radial, sums);
  Object.assign(quantities, circuit.quantities);
  flags.push(...circuit.flags);
  const lines = lineQuantities(radial, noise, sides, spectrum);
  Object.assign(quantities, lines.quantities);
  flags.push(...lines.flags);

  return {
    figures: {
      id: options.id ?? heliographicName(patch.center),
      center: patch.center,
      patch: { nx: patch.nx, ny: patch.ny, pixelMm: patch.pixelMm },
      quantities,
      flags,
    },
    patch,
    radialField: radial,
    radialMethod: method,
    currentDensity: belief && linearCurrentMap(radial, shownAlpha(belief)),
    inversionLines: lines.lines,
  };
}

function energyQuantity(key: 'potential_energy' | 'free_energy_ceiling', energy: Energy): Quantity {
  return withSigma(key, energy.joules, energy.sigma, 'extrapolated');
}

/**
 * Potential energy whose error includes what the other way to the radial field would change, which half
 * the resolution and periodic sides tell well enough.
 */
function potentialWithSpread(
  radial: Grid2<'G'>,
  other: Grid2<'G'>,
  noise: PatchNoise,
  sides: Sides,
  spectrum: Spectrum2,
): Energy {
  const potential = potentialEnergy(radial, noise, sides, spectrum);
  if (other === radial) return potential;
  const [here, there] = [radial, other].map(
    (field) => potentialEnergy(halveResolution(field), noise, 'periodic').joules,
  );
  const sigma = Math.hypot(potential.sigma, UNIFORM_DEVIATION * (here - there));
  return { joules: potential.joules, sigma };
}

function halveResolution(field: Grid2<'G'>): Grid2<'G'> {
  const [ny, nx] = field.values.shape;
  if (Math.min(nx, ny) < 4) return field;
  const half = blockMean(field.values.data, nx, ny, 2);
  return makeGrid(half.values, half.nx, half.ny, 'G', 2 * field.pixelMm);
}

/** The radial field the other way, to tell how much hangs on the choice. */
function otherRadial(patch: LocalPatch, radial: Grid2<'G'>, method: RadialMethod): Grid2<'G'> {
  if (method === 'given') return radial;
  return method === 'potential' ? radialByMu(patch) : radialField(patch, 'potential').field;
}

/** The prior, or the alpha the user fixed; undefined when that is beyond the patch's limit. */
function alphaBelief(
  options: AnalysisOptions,
  patch: LocalPatch,
  largestPerMm: number,
): AlphaBelief | undefined {
  if (options.alphaPerMm === undefined)
    return alphaPrior(patch.center.stonyhurstLatitudeDeg, largestPerMm);
  return Math.abs(options.alphaPerMm) < largestPerMm ? assumedAlpha(options.alphaPerMm) : undefined;
}

/** Alpha of the current map: the fixed one, or the median size with the prior's more likely sign. */
function shownAlpha(belief: AlphaBelief): number {
  const size = beliefQuantile(belief.perMm.map(Math.abs), 0.5);
  return Math.sign(beliefQuantile(belief.perMm, 0.5) || 1) * size;
}

function methodFlags(method: RadialMethod): string[] {
  if (method === 'potential')
    return ['radial field by potential reconstruction from the line of sight'];
  return method === 'mu' ? ['radial field by mu correction (line of sight over mu)'] : [];
}

/** The strongest field ever seen in a spot is below this [G]: common practice, no source. */
const STRONGEST_FIELD_G = 10_000;

/** What the reader must know of the patch itself: balance of flux, missing pixels. */
export function patchFlags(patch: LocalPatch, quantities: Quantities): string[] {
  const flags: string[] = [];
  const imbalance = quantities.flux_imbalance?.value ?? 0;
  if (Math.abs(imbalance) > 0.2)
    flags.push(
      `flux is out of balance by ${Math.round(100 * Math.abs(imbalance))} %: part of the region may lie outside the patch, energies are less sure than their intervals`,
    );
  const peak = Math.max(
    quantities.peak_positive_field?.value ?? 0,
    -(quantities.peak_negative_field?.value ?? 0),
  );
  if (peak > STRONGEST_FIELD_G)
    flags.push(
      `a field of ${peak.toPrecision(2)} G is beyond what the Sun shows: check the unit of the map`,
    );
  let missing = 0;
  for (const code of patch.mask) if (code === PIXEL_MISSING) missing++;
  if (missing > 0)
    flags.push(
      `${missing} patch pixels (${((100 * missing) / patch.mask.length).toPrecision(2)} %) are missing and count as no field`,
    );
  if (!patch.mask.includes(PIXEL_GOOD)) flags.push('no pixel holds a value');
  if (quantities.flux_imbalance?.value === null)
    flags.push('fluxes cannot be had: no pixel stands above the noise');
  return flags;
}
