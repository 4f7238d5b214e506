import {
  type AmbiguousField,
  type FieldReadings,
  readField,
} from '../../src/field/disambiguation/ambiguous-field.js';
import { fieldArrays, type VectorField } from '../../src/field/vector-field.js';
import { makeGrid } from '../../src/grid/grid.js';
import type { Charge } from './charges.js';
import { CASE_ONE, CASE_TWO, lowLouPlane, solveLowLou } from './low-lou.js';
import { flatPatch } from './patch.js';
import { normalNoise, uniform } from './random.js';
import { ropePlane, type TwistedRope } from './twisted-rope.js';

/** A known field seen by a camera that cannot tell an azimuth from its opposite. */
export interface AmbiguityCase {
  readonly field: AmbiguousField;
  /** 1 where the azimuth given points the wrong way. */
  readonly truth: Uint8Array;
  /** Size of the true transverse field [G]. */
  readonly transverseG: Float64Array;
}

/**
 * Looks at `field` from `view` (unit vector to the observer), turns half the azimuths at random and adds
 * `noiseG` to each transverse and a tenth of it to the line-of-sight component.
 */
export function hideAzimuth(
  field: VectorField,
  view: readonly [number, number, number],
  seed: number,
  noiseG = 0,
): AmbiguityCase {
  const { nx, ny, pixelMm, bx, by, bz } = fieldArrays(field);
  const [n1, n2, n3] = view;
  const squeeze = Math.hypot(n1, n3);
  const right = [n3 / squeeze, 0, -n1 / squeeze];
  const up = [(-n2 * n1) / squeeze, squeeze, (-n2 * n3) / squeeze];
  const coin = uniform(seed);
  const noise = normalNoise(seed + 1);
  const arrays = [0, 1, 2, 3].map(() => new Float64Array(nx * ny));
  const [los, measured, azimuthRad, transverseG] = arrays;
  const truth = new Uint8Array(nx * ny);
  for (let i = 0; i < nx * ny; i++) {
    const part = (axis: readonly number[]) => bx[i] * axis[0] + by[i] * axis[1] + bz[i] * axis[2];
    const [a, b] = [part(right), part(up)];
    transverseG[i] = Math.hypot(a, b);
    los[i] = part(view) + 0.1 * noiseG * noise();
    const [p, q] = [a + noiseG * noise(), b + noiseG * noise()];
    measured[i] = Math.hypot(p, q);
    truth[i] = coin() < 0.5 ? 1 : 0;
    azimuthRad[i] = Math.atan2(-p, q) + (truth[i] ? Math.PI : 0);
  }
  const patch = flatPatch(makeGrid(los, nx, ny, 'G', pixelMm), view);
  return { field: { patch, transverseG: measured, azimuthRad }, truth, transverseG };
}

/** Share of right azimuths, weighted with the true transverse field, over pixels of at least `leastG`. */
export function scoreFlips(hidden: AmbiguityCase, flips: Uint8Array, leastG = 0): number {
  let right = 0;
  let all = 0;
  for (let i = 0; i < flips.length; i++) {
    const weight = hidden.transverseG[i];
    if (weight < leastG) continue;
    all += weight;
    if (flips[i] === hidden.truth[i]) right += weight;
  }
  return right / all;
}

/** The readings of a case, for tests of their parts. */
export const readingsOf = (hidden: AmbiguityCase): FieldReadings => readField(hidden.field);

const ARCADE: readonly Charge[] = [
  { strength: 1.2e5, x: 0, y: -25, depth: 12 },
  { strength: -1.2e5, x: 0, y: 25, depth: 12 },
];
const THREE_CHARGES: readonly Charge[] = [
  { strength: 1.2e5, x: -18, y: 0, depth: 9 },
  { strength: -1.0e5, x: 16, y: 5, depth: 7 },
  { strength: -0.2e5, x: 2, y: -14, depth: 5 },
];

const rope = (depth: number, twist: number): TwistedRope => ({
  ...{ axisG: 1500, ringRadius: 25, tubeRadius: 7, x: 0, y: 0, turn: 0.2 },
  depth,
  twist,
});

const one = solveLowLou(1);
const three = solveLowLou(3);

/** Known fields of 128 Mm (Low & Lou: 100 Mm) across on size x size pixels. */
export const KNOWN_FIELDS: readonly {
  readonly name: string;
  readonly potential?: boolean;
  readonly make: (size: number) => VectorField;
}[] = [
  { name: 'Low & Lou I', make: (size) => lowLouPlane(one, CASE_ONE, size) },
  { name: 'Low & Lou II', make: (size) => lowLouPlane(three, CASE_TWO, size) },
  {
    name: 'three charges',
    potential: true,
    make: (size) => ropePlane([], THREE_CHARGES, size, 128 / size),
  },
  ...(
    [
      ['charges, rope risen', 5, 0.8],
      ['charges, rope half risen', 18, 0.8],
      ['charges, rope top', 23, 0.8],
      ['charges, rope top, left-handed', 23, -1],
      ['charges, rope half risen, twist 1.5', 18, 1.5],
    ] as const
  ).map(([name, depth, twist]) => ({
    name,
    make: (size: number) => ropePlane([rope(depth, twist)], ARCADE, size, 128 / size),
  })),
];

/** Directions to the observer: disk centre, 45 degrees west, 42 degrees to the north-east (east is -x). */
export const VIEWS: readonly {
  readonly name: string;
  readonly view: readonly [number, number, number];
}[] = [
  { name: 'disk centre', view: [0, 0, 1] },
  { name: '45 deg west', view: [-Math.SQRT1_2, 0, Math.SQRT1_2] },
  { name: '42 deg north-east', view: [0.45, -0.49, Math.sqrt(1 - 0.45 ** 2 - 0.49 ** 2)] },
];
