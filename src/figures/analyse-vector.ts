import { type MeasuredCurrents, measureCurrents } from '../currents/measured-currents.js';
import { measureShear } from '../currents/shear.js';
import { quietCurrentNoise, verticalCurrent } from '../currents/vertical-current.js';
import { type AdoptedFreeEnergy, adoptFreeEnergy } from '../energy/adopted-energy.js';
import { inductance } from '../energy/circuit.js';
import { excessEnergy } from '../energy/excess-energy.js';
import { type ForceBalance, forceBalance } from '../energy/force-balance.js';
import { freeEnergyCeiling, linearFreeEnergy, potentialEnergy } from '../energy/region-energy.js';
import type { Energy } from '../energy/spectral-energy.js';
import { virialEnergy, virialFreeEnergy } from '../energy/virial.js';
import { sumFlux } from '../field/flux.js';
import type { InversionLine } from '../field/inversion-line.js';
import { polarityMap } from '../field/polarity.js';
import { paddedSpectrum, potentialHorizontalField, type Sides } from '../field/potential.js';
import type { VectorField, VectorNoise } from '../field/vector-field.js';
import type { LocalPatch } from '../geometry/patch.js';
import { type Grid2, makeGrid } from '../grid/grid.js';
import type { Interval } from '../grid/interval.js';
import { heliographicName, patchFlags } from './analyse-region.js';
import { circuitQuantities } from './current-figures.js';
import { fluxQuantities } from './flux-figures.js';
import { lineQuantities } from './line-figures.js';
import type { PatchNoise } from './patch-noise.js';
import { type Quantities, type QuantityKey, quantity, withSigma } from './quantity.js';
import type { RegionFigures } from './region.js';

/** A vector map on a patch, with what its figures need beside the field. */
export interface VectorInput {
  readonly patch: LocalPatch;
  readonly field: VectorField;
  /** 1-sigma noise of one patch pixel in each component. */
  readonly noise: VectorNoise;
  /** The same of the vertical component as the flux figures take it. */
  readonly verticalNoise: PatchNoise;
  /** Typical 1-sigma noise of the horizontal components [G]. */
  readonly horizontalNoiseG: number;
  /** Share of the transverse field of strong pixels that minimum energy reads otherwise than the acute angle. */
  readonly changedFieldFraction?: number;
  readonly flags: readonly string[];
}

/** A vector region's figures with the maps they came from. */
export interface VectorAnalysis {
  readonly figures: RegionFigures;
  readonly currents: MeasuredCurrents;
  /** 1-sigma noise of the current density, pixel by pixel. */
  readonly currentNoise: Grid2<'mA/m^2'>;
  /** mu0 Jz / Bz where the vertical field reaches `alphaLeastG`, NaN elsewhere. */
  readonly alpha: Grid2<'1/Mm'>;
  readonly alphaLeastG: number;
  readonly forces: ForceBalance;
  readonly adopted: AdoptedFreeEnergy;
  readonly inversionLines: readonly InversionLine[];
}

/** Weaker vertical field [G] has no alpha to speak of: the ratio of two noises. */
const ALPHA_LEAST_G = 100;
/** G/Mm of mu0 Jz for 1 mA/m^2: 4 pi 1e-7 x 1e-3 T/m. */
const GAUSS_PER_MM_PER_CURRENT = 4e-7 * Math.PI * 1e-3 * 1e4 * 1e6;

function fromInterval(key: QuantityKey, { value, low, high }: Interval) {
  return quantity(key, value, low, high, 'measured');
}

/** Sum of two intervals of independent errors. */
function sum(a: Interval, b: Interval): Interval {
  const value = a.value + b.value;
  return {
    value,
    low: value - Math.hypot(a.value - a.low, b.value - b.low),
    high: value + Math.hypot(a.high - a.value, b.high - b.value),
  };
}

/** Free energy of the linear force-free field with the fitted alpha; undefined where alpha allows none. */
function linearEstimate(
  radial: Grid2<'G'>,
  noise: PatchNoise,
  alpha: Interval,
): Interval | undefined {
  const linear = linearFreeEnergy(radial, noise);
  const sizes = [alpha.low, alpha.value, alpha.high].map(Math.abs);
  if (!sizes.every((size) => size < linear.largestAlphaPerMm)) return undefined;
  const energies = sizes.map((size) => linear.at(size));
  const [value, sigma] = [energies[1].joules, energies[1].sigma];
  const crossesZero = alpha.low * alpha.high < 0;
  const ends = energies.map(({ joules }) => joules);
  return {
    value,
    low: Math.max(0, (crossesZero ? 0 : Math.min(...ends)) - sigma),
    high: Math.max(...ends) + sigma,
  };
}

function alphaMap(density: Grid2<'mA/m^2'>, radial: Grid2<'G'>, leastG: number): Grid2<'1/Mm'> {
  const [ny, nx] = radial.values.shape;
  const bz = radial.values.data;
  const out = new Float64Array(nx * ny);
  for (let i = 0; i < out.length; i++)
    out[i] =
      Math.abs(bz[i]) >= leastG
        ? (GAUSS_PER_MM_PER_CURRENT * density.values.data[i]) / bz[i]
        : Number.NaN;
  return makeGrid(out, nx, ny, '1/Mm', radial.pixelMm);
}

/** Currents by direction and polarity, helicity, alpha. */
function currentFigures(currents: MeasuredCurrents, peak: Interval): Quantities {
  const { positive, negative, unsignedA } = currents.budget;
  return {
    upward_current: fromInterval('upward_current', sum(positive.upwardA, negative.upwardA)),
    downward_current: fromInterval('downward_current', sum(positive.downwardA, negative.downwardA)),
    net_current_positive: fromInterval('net_current_positive', positive.netA),
    net_current_negative: fromInterval('net_current_negative', negative.netA),
    unsigned_current: fromInterval('unsigned_current', unsignedA),
    peak_current_density: fromInterval('peak_current_density', peak),
    force_free_alpha: fromInterval('force_free_alpha', currents.alpha.fitted),
    neutralization_positive: fromInterval('neutralization_positive', positive.neutralization),
    neutralization_negative: fromInterval('neutralization_negative', negative.neutralization),
    current_helicity_mean: fromInterval('current_helicity_mean', currents.helicity.mean),
  };
}

/** Strongest current density among pixels above five deviations, with the error of that pixel. */
function peakCurrent({ density, sigma }: MeasuredCurrents): Interval {
  let [value, error] = [0, 0];
  density.values.data.forEach((j, i) => {
    if (Math.abs(j) < 5 * sigma[i] || !(Math.abs(j) > value)) return;
    value = Math.abs(j);
    error = sigma[i];
  });
  return { value, low: value - error, high: value + error };
}

function forceFigures(forces: ForceBalance): Quantities {
  return {
    net_force_x: withSigma('net_force_x', forces.x.value, forces.x.sigma, 'measured'),
    net_force_y: withSigma('net_force_y', forces.y.value, forces.y.sigma, 'measured'),
    net_force_z: withSigma('net_force_z', forces.z.value, forces.z.sigma, 'measured'),
  };
}

/** Inductance of the mean net current of both polarities and the adopted free energy. */
function inductanceFigure(currents: MeasuredCurrents, free: Interval): Quantities {
  const { positive, negative } = currents.budget;
  const amperes = 0.5 * (Math.abs(positive.netA.value) + Math.abs(negative.netA.value));
  const sigma =
    0.25 * (positive.netA.high - positive.netA.low + negative.netA.high - negative.netA.low);
  const value = inductance(free.value, amperes);
  const relative = (width: number) =>
    Math.abs(value) * Math.hypot(width / Math.abs(free.value), (2 * sigma) / amperes);
  return {
    inductance: quantity(
      'inductance',
      value,
      value - relative(free.value - free.low),
      value + relative(free.high - free.value),
      'measured',
    ),
  };
}

/** Every null figure gets its reason. */
function missingFlags(quantities: Quantities): string[] {
  const reasons: Partial<Record<QuantityKey, string>> = {
    neutralization_positive:
      'no current stands above the noise in the positive polarity, or none returns',
    neutralization_negative:
      'no current stands above the noise in the negative polarity, or none returns',
    inductance: 'no net current',
    force_free_alpha: 'no horizontal field to fit',
    current_helicity_mean: 'no pixel of either polarity',
    shear_line_length: 'no inversion line',
  };
  return (Object.entries(reasons) as [QuantityKey, string][])
    .filter(([key]) => quantities[key]?.value === null)
    .map(([key, reason]) => `${key.replaceAll('_', ' ')} cannot be had: ${reason}`);
}

/**
 * Works out every figure of a region from all three components: what a line-of-sight map gives, with
 * measured currents, alpha, shear, forces and the adopted free energy (the rules are those of
 * `adoptFreeEnergy`; its estimates stand in the flags).
 */
export function analyseVector(
  input: VectorInput,
  options: { readonly sides?: Sides; readonly id?: string } = {},
): VectorAnalysis {
  const { patch, field, noise, verticalNoise } = input;
  const sides = options.sides ?? 'open';
  const radial = field.z;
  const spectrum = paddedSpectrum(radial, sides);
  const horizontal = potentialHorizontalField(radial, sides, spectrum);
  const potential = potentialEnergy(radial, verticalNoise, sides, spectrum);
  const polarity = polarityMap(radial, verticalNoise);
  const ceiling = freeEnergyCeiling(radial, verticalNoise, polarity);
  const alphaLeastG = Math.max(ALPHA_LEAST_G, 3 * verticalNoise.pixelDeviationG);
  const currents = measuredCurrents(input, alphaLeastG);
  const forces = forceBalance(field, noise);
  const total = virialEnergy(field, noise);
  const virial = virialFreeEnergy(field, horizontal, total, potential);
  const linear = linearEstimate(radial, verticalNoise, currents.alpha.fitted);
  const excess = excessEnergy(field, horizontal, noise, potential);
  const adopted = adoptFreeEnergy(
    { total, virial, ...(linear && { linear }), excess, ceiling },
    forces,
  );
  const free = adopted.interval;
  const lines = lineQuantities(radial, verticalNoise, sides, spectrum);
  const shear = measureShear(lines.lines, field, horizontal, noise);
  const sums = sumFlux(radial, polarity);
  const circuit = circuitQuantities(radial, sums);
  const quantities: Quantities = {
    ...fluxQuantities(radial, sums, polarity, radial, verticalNoise),
    potential_energy: withSigma(
      'potential_energy',
      potential.joules,
      potential.sigma,
      'extrapolated',
    ),
    free_energy: fromInterval('free_energy', free),
    free_energy_ceiling: withSigma(
      'free_energy_ceiling',
      ceiling.joules,
      ceiling.sigma,
      'extrapolated',
    ),
    total_energy: fromInterval('total_energy', totalEnergy(potential, free)),
    ...currentFigures(currents, peakCurrent(currents)),
    ...lines.quantities,
    shear_line_length: fromInterval('shear_line_length', shear.shearedMm),
    virial_energy: withSigma('virial_energy', total.joules, total.sigma, 'measured'),
    virial_origin_change: withSigma(
      'virial_origin_change',
      total.originChange,
      total.originChangeNoise,
      'measured',
    ),
    ...forceFigures(forces),
    ...inductanceFigure(currents, free),
    ...circuit.quantities,
  };
  if (input.changedFieldFraction !== undefined)
    quantities.disambiguation_flux_fraction_changed = withSigma(
      'disambiguation_flux_fraction_changed',
      input.changedFieldFraction,
      0,
      'measured',
    );
  const [ny, nx] = radial.values.shape;
  return {
    figures: {
      id: options.id ?? heliographicName(patch.center),
      center: patch.center,
      patch: { nx, ny, pixelMm: patch.pixelMm },
      quantities,
      flags: [
        ...input.flags,
        ...patchFlags(patch, quantities),
        ...estimateFlags(adopted, virial, linear, excess),
        alphaFlag(currents),
        ...circuit.flags,
        ...lines.flags,
        'circuit estimates agree with field energies only within a factor of a few (Wheatland & Farvis 2004)',
        ...missingFlags(quantities),
      ],
    },
    currents,
    currentNoise: makeGrid(currents.sigma, nx, ny, 'mA/m^2', patch.pixelMm),
    alpha: alphaMap(currents.density, radial, alphaLeastG),
    alphaLeastG,
    forces,
    adopted,
    inversionLines: lines.lines,
  };
}

/** Draws of noise behind the intervals of currents: their 16 and 84 % are good to a fifth of a sigma. */
const DRAWS = 24;

/** Currents with the noise of the current map itself where the quiet pixels tell it. */
function measuredCurrents(input: VectorInput, leastG: number): MeasuredCurrents {
  const { field, noise } = input;
  const quietG = 3 * Math.max(input.horizontalNoiseG, input.verticalNoise.pixelDeviationG);
  const quiet = quietCurrentNoise(verticalCurrent(field, 'central'), field, quietG);
  if (!Number.isFinite(quiet)) return measureCurrents(field, noise, { leastG, draws: DRAWS });
  const currentSigma = new Float64Array(field.z.values.data.length).fill(quiet);
  return measureCurrents(field, noise, { leastG, draws: DRAWS, currentSigma });
}

function totalEnergy(potential: Energy, free: Interval): Interval {
  return sum(
    {
      value: potential.joules,
      low: potential.joules - potential.sigma,
      high: potential.joules + potential.sigma,
    },
    free,
  );
}

/** The other two estimates of alpha, in words. */
function alphaFlag({ alpha }: MeasuredCurrents): string {
  const words = ({ value, low, high }: Interval) =>
    `${value.toPrecision(2)} (${low.toPrecision(2)} to ${high.toPrecision(2)})`;
  return `alpha by flux weight ${words(alpha.fluxWeighted)}, median ${words(alpha.median)} 1/Mm`;
}

/** The adopted free energy and every estimate beside it, in words. */
function estimateFlags(
  adopted: AdoptedFreeEnergy,
  virial: Energy,
  linear: Interval | undefined,
  excess: Energy,
): string[] {
  const joules = (value: number) => `${value.toPrecision(3)} J`;
  const all = [
    `virial ${joules(virial.joules)} ± ${joules(virial.sigma)}`,
    linear ? `linear force-free ${joules(linear.value)}` : 'no linear force-free field',
    `excess density ${joules(excess.joules)}`,
  ];
  return [
    `free energy by ${adopted.reasons.join('; ')}`,
    `estimates of free energy: ${all.join(', ')}`,
  ];
}
