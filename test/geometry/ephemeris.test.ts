import { describe, expect, it } from 'vitest';
import { sunAtEphemerisDay, sunFromEarth } from '../../src/geometry/ephemeris.js';
import { fixture } from './support.js';

const apart = (a: number, b: number) => Math.abs(((((a - b) % 360) + 540) % 360) - 180);

describe('ephemeris of the Sun', () => {
  it("gives Meeus's example 29.a, 1992 October 13 at 0h TD", () => {
    const sun = sunAtEphemerisDay(2448908.5);
    expect(sun.pDeg).toBeCloseTo(26.27, 2);
    expect(sun.b0Deg).toBeCloseTo(5.99, 2);
    expect(Math.abs(sun.l0Deg - 238.63)).toBeLessThan(0.02); // printed to two digits, low-order theory
  });
  // Independent low-precision values, good to 0.01-0.02 degrees: P, B0, L0, distance [au].
  it.each([
    ['2011-02-15T01:44:00Z', -17.29, -6.815, 21.83, 0.9876],
    ['2014-10-24T21:00:00Z', 25.49, 5.083, 229.74, 0.9945],
    ['2017-09-06T12:00:00Z', 22.39, 7.246, 82.24, 1.0079],
    ['2006-12-13T02:20:00Z', 11.13, -0.639, 347.75, 0.9845],
  ])('%s', (date, p, b0, l0, au) => {
    const sun = sunFromEarth(date);
    expect(Math.abs(sun.pDeg - p)).toBeLessThan(0.02);
    expect(Math.abs(sun.b0Deg - b0)).toBeLessThan(0.02);
    expect(apart(sun.l0Deg, l0)).toBeLessThan(0.02);
    expect(Math.abs(sun.distanceM / 1.495978707e11 - au)).toBeLessThan(1e-4);
  });
  // Meeus eq. 29 for the start of Carrington rotations (L0 = 0), days in dynamical time.
  it.each([
    ['CR 1699', 2444480.723, 0.02],
    ['CR 1909', 2450208.78, 0.08], // rounded to 0.01 day, which is 0.13 degree of rotation
    ['CR 2107', 2455609.23, 0.08],
  ])('%s starts at longitude zero', (_name, jde, toleranceDeg) => {
    expect(apart(sunAtEphemerisDay(jde).l0Deg, 0)).toBeLessThan(toleranceDeg);
  });
  it('agrees with astropy in distance', () => {
    const { cases } = fixture<{ cases: { date: string; distanceAu: number }[] }>('sun.json');
    expect(cases.length).toBe(6);
    for (const { date, distanceAu } of cases) {
      const { distanceM } = sunFromEarth(`${date}Z`);
      // The apparent distance there is a light time older: up to 1e-6 au; equatorial parallax aside.
      expect(Math.abs(distanceM / 1.495978707e11 - distanceAu)).toBeLessThan(5e-6);
    }
  });
  it('refuses what is no date', () => expect(() => sunFromEarth('soon')).toThrow(RangeError));
});
