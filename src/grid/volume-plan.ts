// Plans for the compiled volumes (src/grid/kernel/volume-passes.ts): a transform to n points of which
// only the frequencies -k .. k count is a spread by r = n / m and passes of length m, the smallest
// divisor of n that holds 2 k + 1 modes.
import { setRootOfUnity } from './fft-plan.js';

/** Precision of a volume's numbers. */
export type Precision = 'single' | 'double';

/** Writes plans and their factors behind one another; those of equal lengths share their factors. */
export interface PlanWriter {
  /** The address of the plan for `points` points and frequencies up to `band`. */
  readonly plan: (points: number, band: number) => number;
  /** The address of a plan for `points` points, of which only the first `given` are not zero. */
  readonly padded: (points: number, given: number) => number;
  /** The plans' bytes, for the address given when the writer was made. */
  readonly bytes: () => Uint8Array;
}

/** The length m of a plan's passes. Throws RangeError where the band does not fit in. */
export function bandLength(points: number, band: number): number {
  if (!(band >= 0 && 2 * band <= points)) throw new RangeError(`band ${band} of ${points} points`);
  for (let m = 2 * band + 1; m < points; m++) if (points % m === 0) return m;
  return points;
}

/** A writer whose bytes will be put at address `base`, a multiple of 16. */
export function planWriter(base: number, precision: Precision): PlanWriter {
  const numberBytes = precision === 'single' ? 4 : 8;
  const parts: { readonly at: number; readonly bytes: Uint8Array }[] = [];
  const known = new Map<string, number>();
  let size = 0;
  const append = (view: { readonly buffer: ArrayBufferLike }): number => {
    const bytes = new Uint8Array(view.buffer);
    const at = size;
    parts.push({ at, bytes });
    size += 16 * Math.ceil(bytes.length / 16);
    return base + at;
  };
  const once = (key: string, make: () => number): number => {
    const at = known.get(key) ?? make();
    known.set(key, at);
    return at;
  };
  const factors = (values: Float64Array) =>
    append(numberBytes === 4 ? Float32Array.from(values) : values);
  const plan = (points: number, m: number, band: number, signed: boolean): number => {
    const r = points / m;
    const make = () => factors(spreadFactors(m, r, signed));
    const spread = r === 1 ? 0 : once(`spread ${m} ${r} ${signed}`, make);
    const passes: number[] = [];
    let rest = m;
    let s = r;
    const radices = radicesOf(m);
    for (const radix of radices) {
      rest /= radix;
      const [length, left] = [radix * rest, rest];
      const at = once(`pass ${radix} ${length}`, () => factors(passFactors(radix, left)));
      passes.push(radix, rest, s, at);
      s *= radix;
    }
    return append(Uint32Array.of(m, r, band, spread, radices.length, ...passes));
  };
  return {
    plan: (points, band) =>
      once(`plan ${points} ${band}`, () => plan(points, bandLength(points, band), band, true)),
    padded: (points, given) => {
      const m = points % 2 === 0 && points >= 2 * given ? points / 2 : points;
      // Zero padding is the same spread with all m numbers at frequencies 0 .. m - 1.
      return once(`padded ${points} ${m}`, () => plan(points, m, m, false));
    },
    bytes: () => {
      const bytes = new Uint8Array(size);
      for (const part of parts) bytes.set(part.bytes, part.at);
      return bytes;
    },
  };
}

/** Radices 5, 3, 2 and 4 in the order of the passes. Throws RangeError for other primes. */
function radicesOf(m: number): number[] {
  const radices: number[] = [];
  let rest = m;
  for (const radix of [4, 2, 3, 5]) {
    while (rest % radix === 0) {
      radices.unshift(radix);
      rest /= radix;
    }
  }
  if (rest !== 1) throw new RangeError(`${m} has a prime factor above 5`);
  return radices;
}

/** exp(2 pi i f(p) v / (m r)) for p < m, v < r, with f(p) = p or, from the middle on if signed, p - m. */
function spreadFactors(m: number, r: number, signed: boolean): Float64Array {
  const out = new Float64Array(2 * m * r);
  for (let p = 0; p < m; p++) {
    const frequency = signed && 2 * p >= m ? p - m + m * r : p;
    for (let v = 0; v < r; v++) setRoot(out, 2 * (p * r + v), frequency * v, m * r);
  }
  return out;
}

/** exp(2 pi i p k / (radix m)) for 0 < p < m, 0 < k < radix. */
function passFactors(radix: number, m: number): Float64Array {
  const out = new Float64Array(2 * Math.max(1, (m - 1) * (radix - 1)));
  let at = 0;
  for (let p = 1; p < m; p++) {
    for (let k = 1; k < radix; k++, at += 2) setRoot(out, at, p * k, radix * m);
  }
  return out;
}

function setRoot(out: Float64Array, at: number, k: number, n: number): void {
  setRootOfUnity(out, at, k, n);
  out[at + 1] *= -1;
}
