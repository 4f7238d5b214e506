import { linearCurrent, linearCurrentDensity } from '../currents/linear-current.js';
import { inductance, lundquistNumber } from '../energy/circuit.js';
import type { LinearFreeEnergy } from '../energy/region-energy.js';
import type { Energy } from '../energy/spectral-energy.js';
import { type AlphaBelief, beliefQuantile } from '../field/alpha.js';
import type { FluxSums } from '../field/flux.js';
import { potentialStrengthAbove } from '../field/potential.js';
import type { Grid2 } from '../grid/grid.js';
import { METRES_PER_MEGAMETRE, TESLA_PER_GAUSS } from '../units.js';
import type { PatchNoise } from './patch-noise.js';
import { type Quantities, type QuantityKey, quantity } from './quantity.js';

/** 16, 50 and 84 % of equally likely values, widened by an independent relative error. */
function spread(
  key: QuantityKey,
  values: Float64Array,
  relativeSigma: number,
  belief: AlphaBelief,
) {
  const middle = beliefQuantile(values, 0.5);
  const low = beliefQuantile(values, 0.16);
  const high = beliefQuantile(values, 0.84);
  const noise = relativeSigma * Math.abs(middle);
  return quantity(
    key,
    middle,
    middle - Math.hypot(middle - low, noise),
    middle + Math.hypot(high - middle, noise),
    belief.basis,
  );
}

/**
 * Free and total energy, currents, alpha and inductance of the linear force-free field, each the
 * median and 16/84 % of the belief on alpha. Free energy grows with |alpha|, so its quantiles are its
 * values at the quantiles of |alpha|.
 */
export function currentQuantities(known: {
  readonly belief: AlphaBelief;
  readonly linear: LinearFreeEnergy;
  readonly sums: FluxSums;
  readonly quantities: Quantities;
  readonly noise: PatchNoise;
  readonly potential: Energy;
}): { readonly quantities: Quantities; readonly flags: string[] } {
  const { belief, linear, sums, noise, potential } = known;
  const { basis, perMm } = belief;
  const sizes = perMm.map(Math.abs);
  const atQuantile = (p: number) => linear.at(beliefQuantile(sizes, p));
  const [low, middle, high] = [0.16, 0.5, 0.84].map(atQuantile);
  const relative = (energy: Energy) => (energy.joules > 0 ? energy.sigma / energy.joules : 0);
  const energyNoise = relative(middle) * middle.joules;
  const free = quantity(
    'free_energy',
    middle.joules,
    Math.max(0, middle.joules - Math.hypot(middle.joules - low.joules, energyNoise)),
    middle.joules + Math.hypot(high.joules - middle.joules, energyNoise),
    basis,
  );
  const downFree = middle.joules - (free.low ?? 0);
  const upFree = (free.high ?? 0) - middle.joules;
  const up = sums.positiveMx;
  const down = sums.negativeMx;
  const fluxNoise = fluxRelativeSigma(known.quantities);
  const total = potential.joules + middle.joules;
  const peakG = Math.max(sums.peakPositiveG, -sums.peakNegativeG);
  const quantities: Quantities = {
    force_free_alpha: spread('force_free_alpha', perMm, 0, belief),
    free_energy: free,
    total_energy: quantity(
      'total_energy',
      total,
      total - Math.hypot(potential.sigma, downFree),
      total + Math.hypot(potential.sigma, upFree),
      basis,
    ),
    upward_current: spread(
      'upward_current',
      perMm.map((alpha) => (alpha > 0 ? linearCurrent(alpha, up) : linearCurrent(-alpha, down))),
      fluxNoise,
      belief,
    ),
    downward_current: spread(
      'downward_current',
      perMm.map((alpha) => (alpha > 0 ? -linearCurrent(alpha, down) : linearCurrent(alpha, up))),
      fluxNoise,
      belief,
    ),
    net_current_positive: spread(
      'net_current_positive',
      perMm.map((alpha) => linearCurrent(alpha, up)),
      fluxNoise,
      belief,
    ),
    net_current_negative: spread(
      'net_current_negative',
      perMm.map((alpha) => linearCurrent(alpha, -down)),
      fluxNoise,
      belief,
    ),
    peak_current_density: spread(
      'peak_current_density',
      sizes.map((alpha) => linearCurrentDensity(alpha, peakG)),
      peakG > 0 ? noise.pixelDeviationG / peakG : 0,
      belief,
    ),
  };
  const oneWay = 0.5 * (up + down);
  const inductances = Float64Array.from([0.16, 0.5, 0.84], (p, i) => {
    const current = linearCurrent(beliefQuantile(sizes, p), oneWay);
    return inductance([low, middle, high][i].joules, current);
  });
  const inductanceNoise = Math.hypot(relative(middle), 2 * fluxNoise) * inductances[1];
  quantities.inductance = quantity(
    'inductance',
    inductances[1],
    inductances[1] - Math.hypot(inductances[1] - inductances[0], inductanceNoise),
    inductances[1] + Math.hypot(inductances[2] - inductances[1], inductanceNoise),
    basis,
  );
  return { quantities, flags: beliefFlags(belief, quantities) };
}

function fluxRelativeSigma({ unsigned_flux: flux }: Quantities): number {
  if (!flux?.value || flux.high === null) return 0;
  return (flux.high - flux.value) / flux.value;
}

function beliefFlags({ basis, removed }: AlphaBelief, quantities: Quantities): string[] {
  const flags: string[] = [];
  if (basis === 'prior')
    flags.push(
      'free energy, currents and inductance rest on a prior for alpha (by latitude) and are those of the median size of alpha, whatever its sign: a line-of-sight map does not measure them',
    );
  else
    flags.push(
      'free energy, currents and inductance rest on the alpha you gave: they are not measured',
    );
  if (removed > 0.005)
    flags.push(
      `${Math.round(100 * removed)} % of the prior on alpha was cut off, beyond 0.9 of the largest alpha of a patch this wide`,
    );
  if (quantities.inductance?.value === null)
    flags.push(
      'inductance cannot be had: no current (alpha is zero or no flux stands above the noise)',
    );
  return flags;
}

/** Corona assumed for the Lundquist number: protons per cubic metre and kelvin, with a plain range (common practice, no source). */
const CORONA = {
  middle: { protonsPerM3: 1e15, temperatureK: 1e6 },
  low: { protonsPerM3: 1e16, temperatureK: 1e6 },
  high: { protonsPerM3: 1e15, temperatureK: 2e6 },
} as const;

/**
 * Lundquist number of the region's corona: length the distance between the centres of the polarities,
 * field the current-free one half that distance above their midpoint, density and temperature assumed.
 */
export function circuitQuantities(
  radial: Grid2<'G'>,
  sums: FluxSums,
): { readonly quantities: Quantities; readonly flags: string[] } {
  const [px, py] = sums.positiveCenter;
  const [qx, qy] = sums.negativeCenter;
  const lengthMm = radial.pixelMm * Math.hypot(px - qx, py - qy);
  const one = 'lundquist_number';
  if (!(lengthMm > radial.pixelMm))
    return {
      quantities: { [one]: quantity(one, Number.NaN, Number.NaN, Number.NaN, 'assumed') },
      flags: ['Lundquist number cannot be had: no two polarities stand above the noise'],
    };
  const fieldG = potentialStrengthAbove(radial, 0.5 * (px + qx), 0.5 * (py + qy), 0.5 * lengthMm);
  const at = ({ protonsPerM3, temperatureK }: { protonsPerM3: number; temperatureK: number }) =>
    lundquistNumber(
      lengthMm * METRES_PER_MEGAMETRE,
      fieldG * TESLA_PER_GAUSS,
      protonsPerM3,
      temperatureK,
    );
  return {
    quantities: {
      [one]: quantity(one, at(CORONA.middle), at(CORONA.low), at(CORONA.high), 'assumed'),
    },
    flags: [],
  };
}
