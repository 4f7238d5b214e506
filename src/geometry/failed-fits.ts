// Pixels where the inversion that made a vector map has failed: it leaves them at a limit of its
// parameters. Such pixels become missing, and are counted.
import { DataError } from '../errors.js';
import { RADIANS_PER_DEGREE } from '../units.js';

/** A pixel at the greatest strength is believed only where its neighbours come near to it. */
const NEIGHBOUR_SHARE = 0.8;
/** A pixel at a limit of inclination is believed only where its neighbours differ by less [rad]. */
const NEIGHBOUR_TURN = 20 * RADIANS_PER_DEGREE;
/** Angles this near to a limit stand on it: float32 rounding [rad]. */
const ON_LIMIT = 1e-6;
/** More impossible values than this share mean that the map is something else. */
const FEW = 0.01;

/** Median over the up to eight neighbours that `accept` takes; NaN without any. */
function neighbourMedian(
  values: Float64Array,
  nx: number,
  ny: number,
  at: number,
  accept: (value: number) => boolean,
): number {
  const [column, row] = [at % nx, Math.floor(at / nx)];
  const found: number[] = [];
  for (let y = Math.max(0, row - 1); y <= Math.min(ny - 1, row + 1); y++) {
    for (let x = Math.max(0, column - 1); x <= Math.min(nx - 1, column + 1); x++) {
      const value = values[x + nx * y];
      if (x + nx * y !== at && accept(value)) found.push(value);
    }
  }
  found.sort((a, b) => a - b);
  const middle = found.length >> 1;
  return found.length % 2 === 1 ? found[middle] : (found[middle - 1] + found[middle]) / 2;
}

/** Pixels of the greatest strength, where that occurs more than once, far above their neighbours. */
function clipped(strengthG: Float64Array, nx: number, ny: number): [limit: number, number[]] {
  let limit = 0;
  for (const value of strengthG) if (value > limit) limit = value;
  const at: number[] = [];
  strengthG.forEach((value, i) => {
    if (value === limit) at.push(i);
  });
  if (at.length < 2) return [limit, []];
  const below = (value: number) => value < limit;
  return [
    limit,
    at.filter((i) => neighbourMedian(strengthG, nx, ny, i, below) < NEIGHBOUR_SHARE * limit),
  ];
}

/** Pixels of inclination 0 or 180 degrees whose neighbours point elsewhere. */
function atInclinationLimit(inclinationRad: Float64Array, nx: number, ny: number): number[] {
  const isOnLimit = (value: number) => value <= ON_LIMIT || value >= Math.PI - ON_LIMIT;
  const isBetween = (value: number) => value > ON_LIMIT && value < Math.PI - ON_LIMIT;
  const at: number[] = [];
  inclinationRad.forEach((value, i) => {
    if (!isOnLimit(value)) return;
    const median = neighbourMedian(inclinationRad, nx, ny, i, isBetween);
    if (Math.abs(median - value) > NEIGHBOUR_TURN) at.push(i);
  });
  return at;
}

/** Pixels beyond what a quantity can be. Throws DataError where they are too many for slips. */
function impossible(values: Float64Array, low: number, high: number, what: string): number[] {
  const at: number[] = [];
  values.forEach((value, i) => {
    if (value < low || value > high) at.push(i);
  });
  if (at.length > FEW * values.length)
    throw new DataError(`${at.length} of ${values.length} pixels have ${what}`);
  return at;
}

/**
 * Sets strengths to NaN where the fit has failed: lone pixels at the strength's upper limit, or at exactly 0
 * or 180 degrees among others; values that no field has. Pushes a flag for each kind found. Throws
 * DataError where more than 1 % of the values are impossible.
 */
export function dropFailedFits(
  strengthG: Float64Array,
  inclinationRad: Float64Array,
  nx: number,
  ny: number,
  flags: string[],
): void {
  const wrong = [
    ...impossible(strengthG, 0, Number.POSITIVE_INFINITY, 'a negative strength, wanted 0 or more'),
    ...impossible(
      inclinationRad,
      -ON_LIMIT,
      Math.PI + ON_LIMIT,
      'an inclination outside 0 (towards the observer) to 180 degrees',
    ),
  ];
  const [limit, lone] = clipped(strengthG, nx, ny);
  const turned = atInclinationLimit(inclinationRad, nx, ny);
  const note = (count: number, what: string) => {
    if (count > 0)
      flags.push(`${count} pixel${count === 1 ? '' : 's'} ${what}: failed fits, left out`);
  };
  note(wrong.length, 'with impossible strength or inclination');
  note(
    lone.length,
    `at the upper limit of strength, ${limit.toFixed(0)} G, far above their neighbours`,
  );
  note(turned.length, 'of inclination exactly 0 or 180 degrees unlike their neighbours');
  for (const i of [...wrong, ...lone, ...turned]) strengthG[i] = Number.NaN;
}
