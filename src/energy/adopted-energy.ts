import type { Interval } from '../grid/interval.js';
import type { ExcessEnergy } from './excess-energy.js';
import type { ForceBalance } from './force-balance.js';
import type { Energy } from './spectral-energy.js';
import type { VirialEnergy, VirialFreeEnergy } from './virial.js';

/** Every estimate of free energy there is for a map [J]; `linear` is absent where alpha has no linear field. */
export interface FreeEnergyEstimates {
  readonly total: VirialEnergy;
  readonly virial: VirialFreeEnergy;
  readonly linear?: Interval;
  readonly excess: ExcessEnergy;
  readonly ceiling: Energy;
}

export type FreeEnergyBasis = 'virial' | 'linear and excess' | 'excess';

/** The free energy [J] to go by, what it rests on and why, in plain words. */
export interface AdoptedFreeEnergy {
  readonly interval: Interval;
  readonly basis: FreeEnergyBasis;
  readonly reasons: readonly string[];
}

/** Virial free energies below minus this many of their deviations cannot be: free energy is not negative. */
const IMPOSSIBLE_DEVIATIONS = 3;
/** The height of the excess-energy proxy is right within about this share (a judgement, no source). */
const HEIGHT_UNCERTAINTY = 0.5;

/**
 * The free energy to go by. The rules, in their order:
 * 1. The virial theorem holds for force-free fields only: it is adopted where the map's forces are
 *    below the limit by more than their error, the value is not impossibly negative and its error is
 *    smaller than the ceiling. Its interval joins noise, what the patch cuts off, and the change under
 *    a shift of the origin by the region's radius beyond noise. It may reach below zero: that is the noise.
 * 2. Otherwise the linear force-free field of the measured alpha and the excess-energy proxy bracket
 *    the answer: their mean, with an interval that holds both and their errors.
 * 3. Without a linear field the proxy alone, with half of it as the error of its height.
 * 4. Nothing is adopted above the ceiling, the energy of the wholly open field.
 */
export function adoptFreeEnergy(
  estimates: FreeEnergyEstimates,
  balance: ForceBalance,
): AdoptedFreeEnergy {
  const { total, virial, linear, excess, ceiling } = estimates;
  const virialSigma = Math.hypot(virial.sigma, originShift(total));
  const against = virialObjection(virial.joules, virialSigma, ceiling.joules, balance);
  if (against === undefined)
    return belowCeiling(
      symmetric(virial.joules, virialSigma),
      'virial',
      [`virial theorem: the map is ${balance.words}`],
      ceiling,
    );
  const reasons = [`virial theorem not used: ${against}`];
  const excessSigma = Math.hypot(excess.sigma, HEIGHT_UNCERTAINTY * Math.max(0, excess.joules));
  const proxy = symmetric(excess.joules, excessSigma);
  const words = `excess energy density over ${excess.heightMm.toPrecision(2)} Mm of height`;
  if (linear === undefined)
    return belowCeiling(
      proxy,
      'excess',
      [...reasons, `${words}, no linear force-free field fits`],
      ceiling,
    );
  return belowCeiling(
    {
      value: 0.5 * (linear.value + proxy.value),
      low: Math.min(linear.low, proxy.low),
      high: Math.max(linear.high, proxy.high),
    },
    'linear and excess',
    [...reasons, `between the linear force-free field of the measured alpha and the ${words}`],
    ceiling,
  );
}

/** Change of the virial energy [J] with the origin, less what its noise, counted already, makes of it. */
function originShift({ joules, originChange, originChangeNoise }: VirialEnergy): number {
  const share = Math.sqrt(Math.max(0, originChange ** 2 - originChangeNoise ** 2));
  return share * Math.abs(joules);
}

const symmetric = (value: number, sigma: number): Interval => ({
  value,
  low: value - sigma,
  high: value + sigma,
});

/** Why the virial theorem is not trusted; undefined where it is. */
function virialObjection(
  joules: number,
  sigma: number,
  ceilingJ: number,
  balance: ForceBalance,
): string | undefined {
  if (balance.verdict !== 'force-free') return `the map is ${balance.words}`;
  if (!Number.isFinite(joules + sigma)) return 'it gives no number';
  if (joules < -IMPOSSIBLE_DEVIATIONS * sigma)
    return 'its free energy is negative beyond its error';
  if (ceilingJ > 0 && sigma > ceilingJ) return 'its error is larger than the ceiling';
  return undefined;
}

function belowCeiling(
  interval: Interval,
  basis: FreeEnergyBasis,
  reasons: readonly string[],
  ceiling: Energy,
): AdoptedFreeEnergy {
  const most = ceiling.joules + ceiling.sigma;
  if (!(most > 0) || interval.high <= most) return { interval, basis, reasons };
  const cut = (value: number) => Math.min(value, most);
  return {
    interval: { value: cut(interval.value), low: cut(interval.low), high: most },
    basis,
    reasons: [...reasons, 'cut at the ceiling, the energy of the wholly open field'],
  };
}
