// Plans for the compiled transforms: how a length is split into passes, and their factors, as the
// bytes that src/grid/kernel/transform.ts reads. A plan knows no address, so it can be kept and
// copied to wherever the next transform wants it.

/** The plan of one length, ready to be copied to an address divisible by 16. */
export interface FftPlan {
  readonly length: number;
  /** Points the kernel's buffers must hold: the length itself, or that of its convolution. */
  readonly points: number;
  /** True where the length is done by a convolution. */
  readonly chirped: boolean;
  readonly bytes: Uint8Array;
}

/**
 * Primes up to this are summed directly; for larger ones, two transforms of twice the length take less
 * time (measured on lengths 8 p: 61 gains a third by the sums, 97 loses a tenth).
 */
const LARGEST_DIRECT_PRIME = 83;
/** Plans kept: the longest not used lately go first. A plan takes about 16 bytes a point. */
const KEPT_BYTES = 8 * 2 ** 20;

const kept = new Map<number, FftPlan>();

/** The plan for complex transforms of `length` points (1 .. 2^26), from the cache where it is there. */
export function fftPlan(length: number): FftPlan {
  const plan = kept.get(length) ?? makePlan(length);
  kept.delete(length);
  kept.set(length, plan);
  let bytes = 0;
  for (const each of kept.values()) bytes += each.bytes.length;
  for (const [old, each] of kept) {
    if (bytes <= KEPT_BYTES || old === length) break;
    kept.delete(old);
    bytes -= each.bytes.length;
  }
  return plan;
}

/** The smallest length >= n whose only prime factors are 2, 3 and 5: transforms of it are fast. */
export function goodSize(n: number): number {
  if (!(n >= 1 && n <= 2 ** 30)) throw new RangeError(`goodSize: ${n} is not within 1 .. 2^30`);
  let best = 2 ** Math.ceil(Math.log2(n));
  for (let fives = 1; fives < best; fives *= 5) {
    for (let odd = fives; odd < best; odd *= 3) {
      let length = odd;
      while (length < n) length *= 2;
      if (length < best) best = length;
    }
  }
  return best;
}

/**
 * Writes cos and -sin of 2 pi k / n times `gain` to `out[at]`, `out[at + 1]`: exp(-2 pi i k / n).
 * The angle is folded into the first eighth of the circle, so that the factors have its symmetry.
 */
export function setRootOfUnity(out: Float64Array, at: number, k: number, n: number, gain = 1) {
  let eighths = 8 * (k % n);
  let swap = false;
  let negateCos = false;
  let negateSin = false;
  if (eighths > 4 * n) {
    eighths = 8 * n - eighths;
    negateSin = true;
  }
  if (eighths > 2 * n) {
    eighths = 4 * n - eighths;
    negateCos = true;
  }
  if (eighths > n) {
    eighths = 2 * n - eighths;
    swap = true;
  }
  const angle = (Math.PI * eighths) / (4 * n);
  const cos = swap ? Math.sin(angle) : Math.cos(angle);
  const sin = swap ? Math.cos(angle) : Math.sin(angle);
  out[at] = gain * (negateCos ? -cos : cos);
  out[at + 1] = gain * (negateSin ? sin : -sin);
}

function makePlan(length: number): FftPlan {
  if (!(Number.isInteger(length) && length >= 1 && length <= 2 ** 26)) {
    throw new RangeError(`transform length ${length} is not an integer within 1 .. 2^26`);
  }
  const radices = passRadices(length);
  return radices ? passPlan(length, radices) : chirpPlan(length);
}

/** Radices whose product is n, in the order of the passes; undefined where a prime is too large. */
function passRadices(n: number): number[] | undefined {
  const radices: number[] = [];
  let rest = n;
  let twos = 0;
  while (rest % 2 === 0) {
    rest /= 2;
    twos++;
  }
  for (let prime = 3; rest > 1; prime += 2) {
    if (prime > LARGEST_DIRECT_PRIME) return undefined;
    while (rest % prime === 0) {
      radices.unshift(prime);
      rest /= prime;
    }
  }
  // Radix 4 costs least for each factor of two; radix 8 spills registers.
  for (; twos > 3 || twos === 2; twos -= 2) radices.push(4);
  if (twos === 3) radices.unshift(8);
  if (twos === 1) radices.unshift(2);
  return radices;
}

function passPlan(length: number, radices: readonly number[]): FftPlan {
  const header = 16 + 16 * radices.length;
  let size = header;
  let span = length;
  for (const r of radices) {
    size += 16 * ((isFixed(r) ? 0 : r) + (span / r - 1) * (r - 1));
    span /= r;
  }
  const bytes = new Uint8Array(size);
  const ints = new Int32Array(bytes.buffer, 0, header / 4);
  const factors = new Float64Array(bytes.buffer);
  ints.set([0, length, radices.length, 0]);
  let at = header / 8;
  let m = length;
  let s = 1;
  radices.forEach((r, i) => {
    m /= r;
    ints.set([r, m, s, 8 * at], 4 + 4 * i);
    if (!isFixed(r)) at = setCircle(factors, at, r);
    for (let p = 1; p < m; p++) {
      for (let k = 1; k < r; k++, at += 2) setRootOfUnity(factors, at, p * k, r * m);
    }
    s *= r;
  });
  return { length, points: length, chirped: false, bytes };
}

/** Radices with a pass of their own; any other is summed directly. */
function isFixed(radix: number): boolean {
  return radix <= 5 || radix === 8;
}

/** (cos, +sin) of all multiples of 2 pi / r, as odd-pass.ts wants them. */
function setCircle(out: Float64Array, at: number, r: number): number {
  for (let j = 0; j < r; j++) {
    setRootOfUnity(out, at + 2 * j, j, r);
    out[at + 2 * j + 1] *= -1;
  }
  return at + 2 * r;
}

/** A length with a large prime factor, as a convolution of a friendly length (see transform.ts). */
function chirpPlan(length: number): FftPlan {
  const points = goodSize(2 * length - 1);
  const inner = fftPlan(points);
  const chirpAt = 32;
  const filterAt = chirpAt + 16 * length;
  const innerAt = filterAt + 16 * points;
  const bytes = new Uint8Array(innerAt + inner.bytes.length);
  new Int32Array(bytes.buffer, 0, 6).set([1, length, points, chirpAt, filterAt, innerAt]);
  bytes.set(inner.bytes, innerAt);
  const chirp = new Float64Array(bytes.buffer, chirpAt, 2 * length);
  const filter = new Float64Array(2 * points);
  for (let j = 0; j < length; j++) {
    setRootOfUnity(chirp, 2 * j, (j * j) % (2 * length), 2 * length);
    const mirror = (points - j) % points;
    for (const to of [j, mirror]) {
      filter[2 * to] = chirp[2 * j] / points;
      filter[2 * to + 1] = -chirp[2 * j + 1] / points;
    }
  }
  new Float64Array(bytes.buffer, filterAt, 2 * points).set(plainTransform(filter));
  return { length, points, chirped: true, bytes };
}

/** Forward transform of interleaved complex values by plain recursion; used once for a length. */
function plainTransform(x: Float64Array): Float64Array {
  const n = x.length / 2;
  const roots = new Float64Array(2 * n);
  for (let k = 0; k < n; k++) setRootOfUnity(roots, 2 * k, k, n);
  return recurse(x, 0, 1, n, roots);
}

/** The transform of n points, `step` apart from point `first` on. */
function recurse(
  x: Float64Array,
  first: number,
  step: number,
  n: number,
  roots: Float64Array,
): Float64Array {
  if (n === 1) return x.subarray(2 * first, 2 * first + 2);
  const radix = [2, 3, 5].find((r) => n % r === 0)!;
  const m = n / radix;
  const out = new Float64Array(2 * n);
  for (let j = 0; j < radix; j++) {
    const part = recurse(x, first + j * step, step * radix, m, roots);
    for (let k = 0; k < n; k++) {
      const w = 2 * (((j * k) % n) * step);
      const at = 2 * (k % m);
      out[2 * k] += part[at] * roots[w] - part[at + 1] * roots[w + 1];
      out[2 * k + 1] += part[at] * roots[w + 1] + part[at + 1] * roots[w];
    }
  }
  return out;
}
