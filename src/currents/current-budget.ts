import { normalCumulative } from '../grid/distribution.js';
import { type Interval, intervalFromDraws } from '../grid/interval.js';
import { AMPERE_PER_CURRENT_DENSITY } from './vertical-current.js';

/** Current of a pixel counts as upward or downward from this many deviations of its noise. */
const SIGNAL_DEVIATIONS = 3;

/**
 * What noise alone adds to an unsigned sum. A pixel without current passes the threshold of k sigma
 * now and then, with 2 phi(k) sigma on average; one in it stays below with probability P. So each
 * pixel below the threshold stands for 1/P pixels without current, and 2 phi(k) / P of its sigma is
 * taken off the sum. Pure noise then gives zero on average, a current far above the noise is left as
 * it is, and currents that no pixel shows above its noise are not counted.
 */
const NOISE_SHARE =
  (2 * Math.exp(-0.5 * SIGNAL_DEVIATIONS ** 2)) /
  Math.sqrt(2 * Math.PI) /
  (2 * normalCumulative(SIGNAL_DEVIATIONS) - 1);

/** Sums of vertical current [A] over the pixels of one polarity; downward is negative. */
export interface PolaritySums {
  readonly up: number;
  readonly down: number;
  readonly net: number;
}

/** Sums over both polarities, and the unsigned current of all pixels. */
export interface CurrentSums {
  readonly positive: PolaritySums;
  readonly negative: PolaritySums;
  readonly unsigned: number;
  /** Sum of Jz Bz: its sign is the handedness of the region. */
  readonly product: number;
}

/**
 * Sums a current map [mA/m^2] with noise `sigma` [mA/m^2]. A pixel belongs to a polarity from
 * `leastG` of vertical field [G]. Net currents count every pixel (noise cancels in them); upward,
 * downward and unsigned ones those above three deviations, less what noise adds. NaN is left out.
 */
export function sumCurrents(
  density: Float64Array,
  sigma: Float64Array,
  bz: Float64Array,
  leastG: number,
  pixelMm: number,
): CurrentSums {
  const sums = [0, 1].map(() => ({ up: 0, down: 0, net: 0 }));
  let unsigned = 0;
  let product = 0;
  for (let i = 0; i < density.length; i++) {
    const value = density[i];
    if (Number.isNaN(value)) continue;
    const size = Math.abs(value);
    const isSignal = size >= SIGNAL_DEVIATIONS * sigma[i];
    const noisePart = NOISE_SHARE * sigma[i];
    unsigned += isSignal ? size : -noisePart;
    if (!(Math.abs(bz[i]) >= leastG)) continue;
    const part = sums[bz[i] > 0 ? 0 : 1];
    part.net += value;
    product += value * bz[i];
    if (!isSignal) {
      part.up -= 0.5 * noisePart;
      part.down += 0.5 * noisePart;
    } else if (value > 0) part.up += value;
    else part.down += value;
  }
  const scale = AMPERE_PER_CURRENT_DENSITY * pixelMm * pixelMm;
  const [positive, negative] = sums.map(({ up, down, net }) => ({
    up: scale * up,
    down: scale * down,
    net: scale * net,
  }));
  return { positive, negative, unsigned: scale * unsigned, product };
}

/** The map less everything below the threshold: the best guess of the currents without noise. */
export function currentsAboveNoise(density: Float64Array, sigma: Float64Array): Float64Array {
  return density.map((value, i) => {
    if (Number.isNaN(value)) return value;
    return Math.abs(value) >= SIGNAL_DEVIATIONS * sigma[i] ? value : 0;
  });
}

/** Currents [A] of one polarity. */
export interface PolarityBudget {
  readonly upwardA: Interval;
  /** Negative. */
  readonly downwardA: Interval;
  readonly netA: Interval;
  /**
   * Direct over return current: direct is what flows the way the region's handedness asks for, up
   * in the positive polarity of a region with positive helicity. 1 is neutral; NaN where no current
   * stands above the noise, infinite where no return current does.
   */
  readonly neutralization: Interval;
}

/** Currents of both polarities and of the whole map. */
export interface CurrentBudget {
  readonly positive: PolarityBudget;
  readonly negative: PolarityBudget;
  readonly unsignedA: Interval;
  readonly handedness: 1 | -1;
}

/** The budget with intervals from `draws`, the sums under repeated noise. */
export function currentBudget(value: CurrentSums, draws: readonly CurrentSums[]): CurrentBudget {
  const handedness = value.product < 0 ? -1 : 1;
  const interval = (of: (sums: CurrentSums) => number) =>
    intervalFromDraws(of(value), draws.map(of));
  const polarity = (name: 'positive' | 'negative'): PolarityBudget => {
    const direct = name === 'positive' ? handedness : -handedness;
    return {
      upwardA: interval((sums) => sums[name].up),
      downwardA: interval((sums) => sums[name].down),
      netA: interval((sums) => sums[name].net),
      neutralization: ratioInterval(interval((sums) => excess(sums[name], direct))),
    };
  };
  return {
    positive: polarity('positive'),
    negative: polarity('negative'),
    unsignedA: interval((sums) => sums.unsigned),
    handedness,
  };
}

/** (direct - return) / (direct + return), between -1 and 1; NaN without current. */
function excess({ up, down }: PolaritySums, direct: number): number {
  const along = Math.max(0, direct > 0 ? up : -down);
  const against = Math.max(0, direct > 0 ? -down : up);
  return along + against > 0 ? (along - against) / (along + against) : Number.NaN;
}

/** Direct over return current from their excess. */
function ratioInterval({ value, low, high }: Interval): Interval {
  const ratio = (part: number) => (part >= 1 ? Number.POSITIVE_INFINITY : (1 + part) / (1 - part));
  return { value: ratio(value), low: ratio(Math.max(-1, low)), high: ratio(high) };
}
