import { describe, expect, it } from 'vitest';
import { acuteAngle } from '../../../src/field/disambiguation/acute-angle.js';
import { readField, resolveField } from '../../../src/field/disambiguation/ambiguous-field.js';
import { minimumEnergy } from '../../../src/field/disambiguation/minimum-energy.js';
import { settleWeakPixels } from '../../../src/field/disambiguation/weak-pixels.js';
import { PIXEL_MISSING } from '../../../src/geometry/patch.js';
import { makeGrid } from '../../../src/grid/grid.js';
import {
  hideAzimuth,
  KNOWN_FIELDS,
  readingsOf,
  scoreFlips,
  VIEWS,
} from '../../support/ambiguity.js';
import { flatPatch } from '../../support/patch.js';
import { ropeVector } from '../../support/twisted-rope.js';

/** What the acute angle reaches at 64 x 64, seen at disk centre, 45 degrees west and 42 degrees north-east; rounded down. */
const ACUTE_FLOORS: Readonly<Record<string, readonly [number, number, number]>> = {
  'Low & Lou I': [0.97, 0.9, 0.9],
  'Low & Lou II': [0.97, 0.94, 0.96],
  'three charges': [0.999, 0.999, 0.999],
  'charges, rope risen': [0.91, 0.9, 0.9],
  'charges, rope half risen': [0.91, 0.84, 0.87],
  'charges, rope top': [0.94, 0.86, 0.92],
  'charges, rope top, left-handed': [0.96, 0.88, 0.91],
  'charges, rope half risen, twist 1.5': [0.79, 0.78, 0.79],
};

const CASES = KNOWN_FIELDS.flatMap((known) =>
  VIEWS.map((view, i) => ({ known, view, floor: ACUTE_FLOORS[known.name][i] })),
);

describe('the ambiguity of known fields', () => {
  // Truth: the exact fields of test/support; scores are weighted with the true transverse field.
  it.each(CASES)('$known.name, $view.name', ({ known, view, floor }) => {
    const hidden = hideAzimuth(known.make(64), view.view, 3);
    const acute = scoreFlips(hidden, acuteAngle(hidden.field).flips);
    const result = minimumEnergy(hidden.field, { weakG: 0, starts: 1 });
    const least = scoreFlips(hidden, result.flips);
    expect(acute).toBeGreaterThan(floor);
    expect(least).toBeGreaterThan(0.998);
    if (!known.potential) expect(least).toBeGreaterThan(acute);
    expect(result.functional).toBeLessThanOrEqual(result.startFunctional * (1 + 1e-9));
  });

  // 100 G of noise in each transverse component, 10 G along the line of sight; pixels above 300 G.
  it.each([0, 2, 4, 6])('strong pixels come right under noise (field %i)', (index) => {
    const hidden = hideAzimuth(KNOWN_FIELDS[index].make(96), VIEWS[1].view, 3, 100);
    const { flips } = minimumEnergy(hidden.field, { weakG: 200, starts: 1 });
    expect(scoreFlips(hidden, flips, 300)).toBeGreaterThan(0.99);
  });
});

describe('minimum energy', () => {
  const hidden = hideAzimuth(KNOWN_FIELDS[5].make(48), VIEWS[1].view, 3);

  it('gives the same field whatever azimuth the map happened to give, and again', () => {
    const other = hideAzimuth(KNOWN_FIELDS[5].make(48), VIEWS[1].view, 11);
    const options = { weakG: 100, starts: 1 };
    const a = minimumEnergy(hidden.field, options);
    const b = minimumEnergy(other.field, options);
    expect(hidden.truth).not.toEqual(other.truth);
    a.field.x.values.data.forEach((value, i) => {
      expect(b.field.x.values.data[i]).toBeCloseTo(value, 6);
    });
    expect(minimumEnergy(hidden.field, options).flips).toEqual(a.flips);
  });

  it('counts what it changed', () => {
    const result = minimumEnergy(hidden.field, { weakG: 300, starts: 1 });
    const acute = acuteAngle(hidden.field).flips;
    let [strong, changed, turned] = [0, 0, 0];
    hidden.field.transverseG.forEach((value, i) => {
      if (value < 300) return;
      strong++;
      changed += acute[i] === result.flips[i] ? 0 : 1;
      turned += result.flips[i];
    });
    expect(result.strongPixels).toBe(strong);
    expect(result.changedFraction).toBe(changed / strong);
    expect(result.turnedFraction).toBe(turned / strong);
  });

  it('leaves missing pixels out and the rest right', () => {
    const n = 48;
    const patch = {
      ...hidden.field.patch,
      mask: hidden.field.patch.mask.map((code, i) =>
        i % n > 20 && i % n < 24 && i > 10 * n && i < 14 * n ? PIXEL_MISSING : code,
      ),
    };
    const { flips, field } = minimumEnergy({ ...hidden.field, patch }, { weakG: 0, starts: 1 });
    expect(field.z.values.data[22 + 12 * n]).toBeNaN();
    expect(scoreFlips(hidden, flips)).toBeGreaterThan(0.98);
  });

  it('takes a map with no strong pixel', () => {
    const result = minimumEnergy(hidden.field, { weakG: 1e6, starts: 1 });
    expect(result.strongPixels).toBe(0);
    expect(result.functional).toBeNaN();
  });
});

describe('reading an ambiguous map', () => {
  it('counts azimuth counter-clockwise from north at disk centre', () => {
    const patch = flatPatch(makeGrid(Float64Array.of(70, 70), 2, 1, 'G', 1));
    const readings = readField({
      patch,
      transverseG: Float64Array.of(100, 100),
      azimuthRad: Float64Array.of(0, Math.PI / 2),
    });
    const field = resolveField(readings, Uint8Array.of(0, 1));
    const round = (value: number) => Math.round(value) + 0;
    // North; then east (-x) turned to west.
    expect(Array.from(field.x.values.data, round)).toEqual([0, 100]);
    expect(Array.from(field.y.values.data, round)).toEqual([100, 0]);
    expect(Array.from(field.z.values.data, round)).toEqual([70, 70]);
  });

  it.each(VIEWS)('returns the true field with the true readings seen from $name', ({ view }) => {
    const truth = KNOWN_FIELDS[0].make(16);
    const hidden = hideAzimuth(truth, view, 5);
    const field = resolveField(readingsOf(hidden), hidden.truth);
    for (const axis of ['x', 'y', 'z'] as const)
      truth[axis].values.data.forEach((value, i) => {
        expect(field[axis].values.data[i]).toBeCloseTo(value, 8);
      });
  });

  it('refuses arrays of another size', () => {
    const patch = flatPatch(makeGrid(new Float64Array(4), 2, 2, 'G', 1));
    const short = new Float64Array(3);
    expect(() => readField({ patch, transverseG: short, azimuthRad: short })).toThrow(RangeError);
  });
});

it('a weak pixel follows its neighbours', () => {
  const size = 9;
  const strength = new Float64Array(size).fill(500);
  strength[4] = 20;
  const patch = flatPatch(makeGrid(new Float64Array(size), 3, 3, 'G', 1));
  const azimuthRad = new Float64Array(size);
  azimuthRad[4] = Math.PI + 0.3;
  const flips = new Uint8Array(size);
  settleWeakPixels(readField({ patch, transverseG: strength, azimuthRad }), flips, 100);
  expect(Array.from(flips)).toEqual([0, 0, 0, 0, 1, 0, 0, 0, 0]);
});

it('the twisted rope is free of divergence', () => {
  const rope = {
    ...{ axisG: 1500, ringRadius: 25, tubeRadius: 7, twist: 0.8, depth: 18 },
    ...{ x: 1, y: 2, turn: 0.2 },
  };
  const e = 1e-4;
  for (const [x, y] of [
    [15, 3],
    [-18, -2],
    [3, 8],
  ]) {
    const along = (i: 0 | 1 | 2, dx: number, dy: number, dz: number) =>
      ropeVector(rope, x + dx, y + dy, dz)[i] - ropeVector(rope, x - dx, y - dy, -dz)[i];
    const divergence = along(0, e, 0, 0) + along(1, 0, e, 0) + along(2, 0, 0, e);
    const size = Math.hypot(...ropeVector(rope, x, y, 0));
    expect(divergence / (2 * e * size)).toBeCloseTo(0, 6);
  }
});
