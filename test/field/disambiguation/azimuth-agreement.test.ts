import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { potentialReference } from '../../../src/field/disambiguation/acute-angle.js';
import { azimuthAgreement } from '../../../src/field/disambiguation/azimuth-agreement.js';
import { parseAzimuthZero } from '../../../src/geometry/azimuth-zero.js';
import { readVectorMap } from '../../../src/geometry/vector-map.js';
import { makeVectorPatch } from '../../../src/geometry/vector-patch.js';
import { REAL_DATA } from '../../geometry/support.js';
import { fileOf, observe } from '../../support/vector-sky.js';

const NAMES = ['strength', 'inclination', 'azimuth'] as const;

/** Agreement of a current-free field seen by a turned camera, its azimuths counted from `zero`. */
function agreementOf(zero: string) {
  const camera = {
    lonDeg: 30,
    latDeg: -12,
    nx: 150,
    ny: 150,
    cdelt: [1, 1],
    crotaDeg: 17,
  } as const;
  const { strength, inclination, azimuth, cards, shape } = observe(camera);
  const planes = [strength, inclination, azimuth].map((values) => ({ values }));
  const file = fileOf('made.fits', planes, shape, cards);
  const sources = NAMES.map((name, hdu) => ({ name, file: 'made.fits', hdu }));
  const map = readVectorMap(sources, { azimuthZero: parseAzimuthZero(zero) }, () => file);
  const center = { lonDeg: 30, latDeg: -12 };
  const patch = makeVectorPatch(map, { center, extentMm: 90, pixelMm: 1 });
  if (patch.kind !== 'camera') throw new Error('a camera patch was wanted');
  return azimuthAgreement(patch, potentialReference(patch), 300);
}

describe('azimuths against the current-free field', () => {
  it('of charges agree when counted from the right axis, and tell the turn when not', () => {
    const right = agreementOf('+y');
    expect(right.meanCosine).toBeGreaterThan(0.97);
    expect(Math.abs(right.turnDeg)).toBeLessThan(2);
    const wrong = agreementOf('+x');
    expect(wrong.meanCosine).toBeCloseTo(-right.meanCosine, 6);
    expect(Math.abs(wrong.turnDeg)).toBeGreaterThan(88);
    // North lies 17 degrees clockwise of the image's +y: counted from there azimuths come out too small.
    expect(agreementOf('north').turnDeg).toBeCloseTo(right.turnDeg - 17, 1);
  });

  // Outside truth: the data's README names counter-clockwise from +x as the instrument's usual convention.
  it
    .skipIf(!REAL_DATA)
    .each([
      'hinode_sotsp_20110304_0647_field-inc-azi_512x512.fits',
      'hinode_sotsp_20110304_1132_field-inc-azi_508x512.fits',
    ])('of %s agree when counted from +x, counter-clockwise', (name) => {
    const file = join(REAL_DATA!, 'vector', name);
    const sources = NAMES.map((component, plane) => ({ name: component, file, plane }));
    const [fromX, fromY, mirrored] = ['+x', '+y', '+x,cw'].map((zero) => {
      const map = readVectorMap(sources, { azimuthZero: parseAzimuthZero(zero) });
      const patch = makeVectorPatch(map, { pixelMm: 0.8 });
      if (patch.kind !== 'camera') throw new Error('a camera patch was wanted');
      return azimuthAgreement(patch, potentialReference(patch), 500).meanCosine;
    });
    expect(fromX).toBeGreaterThan(0.4);
    expect(fromY).toBeLessThan(-0.4);
    expect(Math.abs(mirrored)).toBeLessThan(0.2);
  });
});
