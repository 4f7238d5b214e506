// Quantised floating-point tiles (Standard 4.0, 10.2): physical = (stored - r + 0.5) x scale + zero,
// with r from a fixed series of 10000 random numbers.

export type DitherMode = 'NO_DITHER' | 'SUBTRACTIVE_DITHER_1' | 'SUBTRACTIVE_DITHER_2';

/** How one tile is turned back into floating-point numbers. */
export interface Quantisation {
  readonly mode: DitherMode;
  readonly scale: number;
  readonly zero: number;
  /** Stored value of an undefined pixel. */
  readonly blank: number | undefined;
  /** ZDITHER0, 1 to 10000. */
  readonly seed: number;
}

const SERIES_LENGTH = 10_000;
/** Stored in place of an exact zero under SUBTRACTIVE_DITHER_2 (Standard 4.0, 10.2.2). */
const STORED_ZERO = -2147483646;

let series: Float32Array | undefined;

/**
 * The random numbers of the standard's appendix I: Park & Miller's generator, multiplier 16807,
 * modulus 2^31 - 1, from seed 1; single precision, as the reference implementation keeps them.
 */
export function ditherSeries(): Float32Array {
  if (series === undefined) {
    series = new Float32Array(SERIES_LENGTH);
    let seed = 1;
    for (let i = 0; i < SERIES_LENGTH; i++) {
      seed = (16807 * seed) % 2147483647; // below 2^46: exact in double precision
      series[i] = seed / 2147483647;
    }
  }
  return series;
}

/**
 * Writes the physical values of `count` stored integers to `out`, undefined ones as NaN. `row` is the
 * tile's row in the table, from 0, which picks the place in the series.
 */
export function dequantise(
  stored: Int32Array,
  count: number,
  row: number,
  quantisation: Quantisation,
  out: Float32Array | Float64Array,
): void {
  const { mode, scale, zero, blank, seed } = quantisation;
  if (mode === 'NO_DITHER') {
    for (let i = 0; i < count; i++) {
      out[i] = stored[i] === blank ? Number.NaN : stored[i] * scale + zero;
    }
    return;
  }
  const random = ditherSeries();
  const keepsZero = mode === 'SUBTRACTIVE_DITHER_2';
  let start = (row + seed - 1) % SERIES_LENGTH;
  let next = Math.trunc(random[start] * 500);
  for (let i = 0; i < count; i++) {
    const value = stored[i];
    if (value === blank) out[i] = Number.NaN;
    else if (keepsZero && value === STORED_ZERO) out[i] = 0;
    else out[i] = (value - random[next] + 0.5) * scale + zero;
    if (++next === SERIES_LENGTH) {
      start = (start + 1) % SERIES_LENGTH;
      next = Math.trunc(random[start] * 500);
    }
  }
}
