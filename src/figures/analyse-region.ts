import { linearCurrentMap } from '../currents/linear-current.js';
import { freeEnergyCeiling, linearFreeEnergy, potentialEnergy } from '../energy/region-energy.js';
import type { FieldNoise } from '../energy/spectral-energy.js';
import { type AlphaBelief, alphaPrior, assumedAlpha, beliefQuantile } from '../field/alpha.js';
import { areaAbove, STRONG_AREA_FIELD_G, sumFlux } from '../field/flux.js';
import type { InversionLine } from '../field/inversion-line.js';
import { paddedSpectrum, type Sides } from '../field/potential.js';
import { type RadialMethod, radialByMu, radialField } from '../field/radial.js';
import { type LocalPatch, PIXEL_GOOD, PIXEL_MISSING } from '../geometry/patch.js';
import type { Grid2 } from '../grid/grid.js';
import { circuitQuantities, currentQuantities } from './current-figures.js';
import { lineQuantities } from './line-figures.js';
import { type Quantity, type QuantityKey, quantity, withSigma } from './quantity.js';
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

/** Noise of the radial field over a patch and of one of its pixels [G]. */
export interface PatchNoise extends FieldNoise {
  readonly pixelDeviationG: number;
}

/** Foreshortening raises the noise of the radial field and the area of a source pixel, both by 1/mu. */
function patchNoise(patch: LocalPatch, options: AnalysisOptions): PatchNoise {
  const mu = Math.max(0.17, patch.center.mu);
  const deviationG = patch.component === 'radial' ? options.noiseG : options.noiseG / mu;
  const cellMm2 = options.sourcePixelMm ** 2 / (patch.component === 'radial' ? 1 : mu);
  const share = Math.min(1, Math.sqrt(cellMm2 / patch.pixelMm ** 2));
  return { deviationG, cellMm2, pixelDeviationG: deviationG * share };
}

function heliographicName({ stonyhurstLongitudeDeg, stonyhurstLatitudeDeg }: LocalPatch['center']) {
  const two = (deg: number) => String(Math.abs(Math.round(deg))).padStart(2, '0');
  const ns = stonyhurstLatitudeDeg < 0 ? 'S' : 'N';
  const ew = stonyhurstLongitudeDeg < 0 ? 'E' : 'W';
  return `${ns}${two(stonyhurstLatitudeDeg)}${ew}${two(stonyhurstLongitudeDeg)}`;
}

/**
 * What the other way from the line of sight would give is taken as the far end of a uniform
 * distribution: its deviation is the width over sqrt(12).
 */
const UNIFORM_DEVIATION = 1 / Math.sqrt(12);

/**
 * A pixel at the threshold T = 3 sigma is in or out by chance: integrated over the crossing, the
 * variance is T^2 sigma / sqrt(pi) per unit of field, 9 / (2 sqrt pi) sigma^2 for each pixel within one sigma.
 */
const EDGE_WEIGHT = 9 / (2 * Math.sqrt(Math.PI));

type Quantities = Partial<Record<QuantityKey, Quantity>>;

/**
 * Fluxes, peaks and area of the radial field. Flux sums count pixels above three noise deviations; their
 * errors join the noise, sigma sqrt(N pixel cell), with what the other way from the line of sight to
 * the radial field would change.
 */
function fluxQuantities(radial: Grid2<'G'>, other: Grid2<'G'>, noise: PatchNoise): Quantities {
  const least = 3 * noise.pixelDeviationG;
  const sums = sumFlux(radial, least);
  const others = sumFlux(other, least);
  const pixelMm2 = radial.pixelMm ** 2;
  const noiseOf = (pixels: number) =>
    1e16 * noise.deviationG * Math.sqrt(pixels * pixelMm2 * noise.cellMm2);
  const sigma = (pixels: number, here: number, there: number) =>
    Math.hypot(noiseOf(pixels), UNIFORM_DEVIATION * (here - there));
  const up = sums.positiveMx;
  const down = sums.negativeMx;
  const upPixels = sums.positivePixels + EDGE_WEIGHT * sums.positiveEdgePixels;
  const downPixels = sums.negativePixels + EDGE_WEIGHT * sums.negativeEdgePixels;
  const pixels = upPixels + downPixels;
  const unsigned = up + down;
  const unsignedSigma = sigma(pixels, unsigned, others.positiveMx + others.negativeMx);
  const net = up - down;
  const netSigma = sigma(pixels, net, others.positiveMx - others.negativeMx);
  const area = (shift: number) => areaAbove(radial, STRONG_AREA_FIELD_G + shift);
  const one = noise.pixelDeviationG;
  const peak = (key: 'peak_positive_field' | 'peak_negative_field') => {
    const field = key === 'peak_positive_field' ? 'peakPositiveG' : 'peakNegativeG';
    return withSigma(
      key,
      sums[field],
      Math.hypot(one, UNIFORM_DEVIATION * (sums[field] - others[field])),
      'measured',
    );
  };
  return {
    positive_flux: withSigma(
      'positive_flux',
      up,
      sigma(upPixels, up, others.positiveMx),
      'measured',
    ),
    negative_flux: withSigma(
      'negative_flux',
      -down,
      sigma(downPixels, down, others.negativeMx),
      'measured',
    ),
    unsigned_flux: withSigma('unsigned_flux', unsigned, unsignedSigma, 'measured'),
    net_flux: withSigma('net_flux', net, netSigma, 'measured'),
    flux_imbalance: withSigma('flux_imbalance', net / unsigned, netSigma / unsigned, 'measured'),
    peak_positive_field: peak('peak_positive_field'),
    peak_negative_field: peak('peak_negative_field'),
    strong_field_area: quantity('strong_field_area', area(0), area(one), area(-one), 'measured'),
  };
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
  const quantities: Quantities = fluxQuantities(radial, other, noise);
  const flags: string[] = fluxFlags(patch, quantities, method);

  const spectrum = paddedSpectrum(radial, sides);
  const potential = potentialEnergy(radial, noise, sides, spectrum);
  const spread =
    other === radial
      ? 0
      : UNIFORM_DEVIATION * (potential.joules - potentialEnergy(other, noise, sides).joules);
  const potentialSigma = Math.hypot(potential.sigma, spread);
  quantities.potential_energy = withSigma(
    'potential_energy',
    potential.joules,
    potentialSigma,
    'extrapolated',
  );
  const ceiling = freeEnergyCeiling(radial, noise);
  quantities.free_energy_ceiling = withSigma(
    'free_energy_ceiling',
    ceiling.joules,
    ceiling.sigma,
    'extrapolated',
  );

  const linear = linearFreeEnergy(radial, noise);
  const belief = alphaBelief(options, patch, linear.largestAlphaPerMm);
  if (belief) {
    const currents = currentQuantities(belief, linear, radial, quantities, noise, {
      joules: potential.joules,
      sigma: potentialSigma,
    });
    Object.assign(quantities, currents.quantities);
    flags.push(...currents.flags);
  } else {
    flags.push(
      `free energy and currents cannot be had: alpha ${options.alphaPerMm} 1/Mm is not below the limit ${linear.largestAlphaPerMm.toPrecision(3)} 1/Mm of a patch this wide`,
    );
  }
  const circuit = circuitQuantities(radial, noise);
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

function fluxFlags(patch: LocalPatch, quantities: Quantities, method: RadialMethod): string[] {
  const flags: string[] = [];
  if (method === 'potential')
    flags.push('radial field by potential reconstruction from the line of sight');
  if (method === 'mu') flags.push('radial field by mu correction (line of sight over mu)');
  const imbalance = quantities.flux_imbalance?.value ?? 0;
  if (Math.abs(imbalance) > 0.2)
    flags.push(
      `flux is out of balance by ${Math.round(100 * Math.abs(imbalance))} %: part of the region may lie outside the patch, energies are less sure than their intervals`,
    );
  let missing = 0;
  for (const code of patch.mask) if (code === PIXEL_MISSING) missing++;
  if (missing > 0)
    flags.push(
      `${missing} patch pixels (${((100 * missing) / patch.mask.length).toPrecision(2)} %) are missing and count as no field`,
    );
  if (!patch.mask.includes(PIXEL_GOOD)) flags.push('no pixel holds a value');
  return flags;
}
