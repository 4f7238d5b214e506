import { type FieldBox, type FieldSampler, fieldBox, fieldSampler } from './field-sampler.js';
import type { FieldVolume } from './volume.js';

/** Where a line ends: at the surface, at a side of the volume, or within it (a null, or too long). */
export type LineEnd = 'surface' | 'west' | 'east' | 'south' | 'north' | 'top' | 'inside';

/** One field line, from where the field comes to where it goes. */
export interface FieldLine {
  /** x, y [Mm from the first sample], height [Mm] of each point. */
  readonly points: Float64Array;
  readonly ends: readonly [LineEnd, LineEnd];
  /** True when both ends are at the surface. */
  readonly closed: boolean;
  readonly lengthMm: number;
  readonly apexMm: number;
  /** Field strength averaged over the length [G]. */
  readonly meanFieldG: number;
}

export interface TraceOptions {
  /** Largest error of a step across the line [Mm]; by default 1/500 of a sample's width. */
  readonly errorMm?: number;
  /** Longest line [Mm]; by default eight times the way around the box. */
  readonly longestMm?: number;
}

/** A field weaker than this part of the seed's is a null: there the line has no direction. */
const NULL_FIELD = 1e-9;
const MOST_STEPS = 20_000;
/** Longest step in samples: two points of a line are never farther apart. */
const LONGEST_STEP = 4;
/** A place this near the bottom, in samples, is on it. */
const NEAR = 1e-6;

/** Half a line, from the seed along or against the field. */
interface HalfLine {
  readonly points: number[];
  readonly end: LineEnd;
  readonly lengthMm: number;
  /** Integral of the field strength over the length [G Mm]. */
  readonly fieldLength: number;
}

/**
 * Traces the lines of a volume through places given as x, y [Mm from the first sample] and height [Mm].
 * dr/ds = B / |B| by the embedded pair of orders 3 and 2 of Bogacki & Shampine 1989 (Appl. Math. Lett. 2,
 * 321) in the trilinear field; an end is put on the side of the box where the cubic through the last
 * step's ends and directions crosses it. A seed without field gives a line of one point.
 */
export function traceFieldLines(
  volume: FieldVolume,
  seeds: readonly (readonly [x: number, y: number, heightMm: number])[],
  options: TraceOptions = {},
): FieldLine[] {
  const box = fieldBox(volume);
  const tracer = {
    box,
    sample: fieldSampler(volume),
    stepMm: volume.stepMm,
    errorMm: options.errorMm ?? volume.stepMm / 500,
    longestMm: options.longestMm ?? 16 * (box.widthMm + box.depthMm),
  };
  return seeds.map((seed) => joinHalves(trace(tracer, seed, -1), trace(tracer, seed, 1)));
}

function joinHalves(back: HalfLine, ahead: HalfLine): FieldLine {
  const points = new Float64Array(back.points.length + ahead.points.length - 3);
  const count = back.points.length / 3;
  for (let i = 0; i < count; i++) {
    for (let c = 0; c < 3; c++) points[3 * i + c] = back.points[3 * (count - 1 - i) + c];
  }
  points.set(ahead.points.slice(3), 3 * count);
  let apexMm = Number.NEGATIVE_INFINITY;
  for (let i = 2; i < points.length; i += 3) apexMm = Math.max(apexMm, points[i]);
  const lengthMm = back.lengthMm + ahead.lengthMm;
  return {
    points,
    ends: [back.end, ahead.end],
    closed: back.end === 'surface' && ahead.end === 'surface',
    lengthMm,
    apexMm,
    meanFieldG: lengthMm > 0 ? (back.fieldLength + ahead.fieldLength) / lengthMm : 0,
  };
}

interface Tracer {
  readonly box: FieldBox;
  readonly sample: FieldSampler;
  readonly stepMm: number;
  readonly errorMm: number;
  readonly longestMm: number;
}

function trace(tracer: Tracer, seed: readonly [number, number, number], sign: number): HalfLine {
  const { box, stepMm, errorMm, longestMm } = tracer;
  const points = [seed[0], seed[1], seed[2]];
  let [x, y, z] = seed;
  const [k1, k2, k3, k4] = [0, 1, 2, 3].map(() => new Float64Array(3));
  let field = direction(tracer, x, y, z, sign, k1);
  const least = NULL_FIELD * field;
  let end: LineEnd | undefined = field > 0 ? leavingAt(box, x, y, z, k1, NEAR * stepMm) : 'inside';
  let [lengthMm, fieldLength] = [0, 0];
  let h = 0.5 * stepMm;
  for (let tries = 0; end === undefined; tries++) {
    if (tries === MOST_STEPS || lengthMm >= longestMm) {
      end = 'inside';
      break;
    }
    direction(tracer, x + (h / 2) * k1[0], y + (h / 2) * k1[1], z + (h / 2) * k1[2], sign, k2);
    const g = 0.75 * h;
    direction(tracer, x + g * k2[0], y + g * k2[1], z + g * k2[2], sign, k3);
    const nextX = x + (h / 9) * (2 * k1[0] + 3 * k2[0] + 4 * k3[0]);
    const nextY = y + (h / 9) * (2 * k1[1] + 3 * k2[1] + 4 * k3[1]);
    const nextZ = z + (h / 9) * (2 * k1[2] + 3 * k2[2] + 4 * k3[2]);
    const nextField = direction(tracer, nextX, nextY, nextZ, sign, k4);
    const error = stepError(h, k1, k2, k3, k4);
    const change = 0.9 * Math.cbrt(errorMm / Math.max(error, 1e-12 * errorMm));
    if (error > errorMm && h > 1e-4 * stepMm) {
      h *= Math.max(0.2, change);
      continue;
    }
    end = sideBeyond(box, nextX, nextY, nextZ);
    if (end !== undefined) {
      const t = crossing(box, [x, y, z], k1, [nextX, nextY, nextZ], k4, h);
      points.push(...hermite([x, y, z], k1, [nextX, nextY, nextZ], k4, h, t));
      setOnSide(box, points, end);
      lengthMm += t * h;
      const [endX, endY, endZ] = points.slice(-3);
      fieldLength += ((t * h) / 2) * (field + direction(tracer, endX, endY, endZ, sign, k2));
      break;
    }
    [x, y, z] = [nextX, nextY, nextZ];
    points.push(x, y, z);
    lengthMm += h;
    fieldLength += (h / 2) * (field + nextField);
    field = nextField;
    if (!(field > least)) end = 'inside';
    k1.set(k4);
    h = Math.min(h * Math.min(4, change), LONGEST_STEP * stepMm);
  }
  return { points, end: end ?? 'inside', lengthMm, fieldLength };
}

/** Writes the unit vector along (sign 1) or against the field at a place; returns its strength [G]. */
function direction(
  { sample }: Tracer,
  x: number,
  y: number,
  z: number,
  sign: number,
  out: Float64Array,
): number {
  sample(x, y, z, out);
  const strength = Math.sqrt(out[0] * out[0] + out[1] * out[1] + out[2] * out[2]);
  const factor = strength > 0 ? sign / strength : 0;
  out[0] *= factor;
  out[1] *= factor;
  out[2] *= factor;
  return strength;
}

/** Distance between the results of orders 3 and 2. */
function stepError(
  h: number,
  k1: Float64Array,
  k2: Float64Array,
  k3: Float64Array,
  k4: Float64Array,
): number {
  let square = 0;
  for (let c = 0; c < 3; c++) {
    const e = h * ((-5 / 72) * k1[c] + k2[c] / 12 + k3[c] / 9 - k4[c] / 8);
    square += e * e;
  }
  return Math.sqrt(square);
}

/** The side a place is beyond; the surface counts first. */
function sideBeyond(box: FieldBox, x: number, y: number, z: number): LineEnd | undefined {
  if (z < box.bottomMm) return 'surface';
  if (x < 0) return 'east';
  if (x > box.widthMm) return 'west';
  if (y < 0) return 'south';
  if (y > box.depthMm) return 'north';
  return z > box.topMm ? 'top' : undefined;
}

/** The side of a place on the edge of the box, or beyond it, whose direction leads out. */
function leavingAt(
  box: FieldBox,
  x: number,
  y: number,
  z: number,
  along: Float64Array,
  nearMm: number,
): LineEnd | undefined {
  return sideBeyond(box, x + nearMm * along[0], y + nearMm * along[1], z + nearMm * along[2]);
}

type Place = readonly [number, number, number];

/** The cubic through two places with their directions, at the fraction t of the step. */
function hermite(
  a: Place,
  alongA: Float64Array,
  b: Place,
  alongB: Float64Array,
  h: number,
  t: number,
): [number, number, number] {
  const s = 1 - t;
  const at = (c: number) =>
    s * s * (1 + 2 * t) * a[c] +
    t * t * (3 - 2 * t) * b[c] +
    h * t * s * (s * alongA[c] - t * alongB[c]);
  return [at(0), at(1), at(2)];
}

/** The fraction of a step at which its cubic leaves the box, by bisection. */
function crossing(
  box: FieldBox,
  a: Place,
  alongA: Float64Array,
  b: Place,
  alongB: Float64Array,
  h: number,
): number {
  let [inside, outside] = [0, 1];
  for (let i = 0; i < 40; i++) {
    const t = (inside + outside) / 2;
    if (sideBeyond(box, ...hermite(a, alongA, b, alongB, h, t)) === undefined) inside = t;
    else outside = t;
  }
  return (inside + outside) / 2;
}

/** Puts the last point exactly on the side it ends at. */
function setOnSide(box: FieldBox, points: number[], end: LineEnd): void {
  const at = points.length - 3;
  if (end === 'surface') points[at + 2] = box.bottomMm;
  if (end === 'top') points[at + 2] = box.topMm;
  if (end === 'east') points[at] = 0;
  if (end === 'west') points[at] = box.widthMm;
  if (end === 'south') points[at + 1] = 0;
  if (end === 'north') points[at + 1] = box.depthMm;
}
