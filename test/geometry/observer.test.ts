import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { headerFromText } from '../../src/fits/header.js';
import { sunFromEarth } from '../../src/geometry/ephemeris.js';
import { angularRadiusOf, readObserver } from '../../src/geometry/observer.js';
import { observationTime } from '../../src/geometry/time.js';
import { type Cards, headerOf, REAL_DATA } from './support.js';

const AU = 1.495978707e11;
const ARCSEC = 206264.806;
const apart = (a: number, b: number) => Math.abs(((((a - b) % 360) + 540) % 360) - 180);
const read = (cards: Cards, date?: string) => readObserver(headerOf(cards), date);

describe('observer from a header', () => {
  it('lets the angular radius win over a distance that contradicts it', () => {
    // As in a header of 2009: exactly 1 au, but a radius that belongs to 0.974 au.
    const { observer, warnings } = read({
      DSUN_OBS: 149597870691,
      OBS_R0: 984.9524,
      OBS_B0: -6.03,
      OBS_L0: 130.89,
    });
    expect(warnings).toHaveLength(1);
    expect(warnings[0]).toMatch(/1\.0000 au contradicts the solar radius 985\.0 arcsec/);
    expect(observer!.distanceM / AU).toBeCloseTo(0.974, 3);
    expect(angularRadiusOf(observer!) * ARCSEC).toBeCloseTo(984.952, 2);
  });
  it('tells radians from arcsec and au from metres', () => {
    const { observer } = read({ RADIUS: 0.0047311, B0: -3.9, L0: 330 });
    expect(angularRadiusOf(observer!)).toBeCloseTo(0.0047311, 9);
    expect(read({ DSUN_AU: 0.5, B0: 1, L0: 2 }).observer!.distanceM / AU).toBeCloseTo(0.5, 12);
    expect(read({ DSUN_OBS: 7.5e7, B0: 1, L0: 2 }).observer!.distanceM / 1e10).toBeCloseTo(7.5, 9);
  });
  it('reads quoted numbers and passes over absurd ones', () => {
    const { observer } = read({ RSUN_OBS: '  975.3', CRLT_OBS: '  -3.2 ', DSUN_OBS: 0 });
    expect(observer!.latitudeDeg).toBe(-3.2);
    expect(angularRadiusOf(observer!) * ARCSEC).toBeCloseTo(975.3, 5);
    expect(observer!.carringtonLongitudeDeg).toBeNaN();
  });
  it('asks the ephemeris where the header is silent, and says so', () => {
    const date = '2031-05-01T12:00:00Z';
    const { observer } = read({}, date);
    const sun = sunFromEarth(date);
    expect(observer!.latitudeDeg).toBe(sun.b0Deg);
    expect(observer!.distanceM).toBe(sun.distanceM);
    expect(observer!.carringtonLongitudeDeg).toBeCloseTo(sun.l0Deg, 10);
    expect(Object.values(observer!.basis)).toEqual([
      'ephemeris',
      'ephemeris',
      'ephemeris',
      'ephemeris',
      'nominal',
    ]);
    expect(readObserver(headerOf({}), date, true).observer!.basis.latitude).toBe('option');
    expect(read({}).observer).toBeUndefined();
  });
  it('derives the Stonyhurst longitude of a far observer from its Carrington longitude', () => {
    const date = '2031-05-01T12:00:00Z';
    const { l0Deg } = sunFromEarth(date);
    const far = read({ DSUN_AU: 0.9, CRLT_OBS: 2, CRLN_OBS: l0Deg - 120 }, date);
    expect(far.observer!.stonyhurstLongitudeDeg).toBeCloseTo(-120, 9);
    const near = read({ DSUN_AU: 0.99, CRLT_OBS: 2, CRLN_OBS: l0Deg + 0.1 }, date);
    expect(near.observer!.stonyhurstLongitudeDeg).toBe(0);
  });
});

/** Header file, distance [au], B0, L0, angular radius [arcsec], Stonyhurst longitude, all as written there. */
const REAL = [
  ['mdi.fd_M_96m_lev182.20101015_191200_TAI.data', 0.98868, 5.85769, 192.90198, 970.63, 0],
  ['hmi_patch_camera_frame', 1.016457, 2.56596, 25.16855, 944.107, 0],
  ['hmi_patch_cea_frame', 1.016457, 2.56596, 25.16855, 944.107, 0],
  ['hmi_patch_velocity', 1.015093, 0.38701, 238.8194, 945.376, 0],
  ['gong_magnetogram', 0.983, -3.93743, 330.44058, 975.867, 0],
  ['svsm_e3100_S2_20110625_1856', 1.0161, 2.2301, 95.51645, 944.071, 0],
  [
    'solo_L2_phi-hrt-blos_20241004T003104_V202506050052_0450040601',
    0.30166,
    0.35753,
    87.88545,
    3179.92,
    -81.632747,
  ],
  [
    'solo_LL02_phi-fdt-blos_20240305T041509_V202405151730C_0403057611',
    0.62494,
    -4.71244,
    80.3866,
    1534.93,
    -21.82038,
  ],
] as const;

describe.skipIf(!REAL_DATA)('observer of real headers', () => {
  const header = (name: string) =>
    headerFromText(readFileSync(`${REAL_DATA}/headers/${name}.header.txt`, 'latin1'));

  it.each(REAL)('%s', (name, au, b0, l0, arcsec, stonyhurst) => {
    const { observer } = readObserver(header(name), observationTime(header(name)));
    expect(observer!.distanceM / AU).toBeCloseTo(au, 3);
    expect(observer!.latitudeDeg).toBeCloseTo(b0, 4);
    expect(observer!.carringtonLongitudeDeg).toBeCloseTo(l0, 4);
    expect(Math.abs(angularRadiusOf(observer!) * ARCSEC - arcsec)).toBeLessThan(0.15);
    expect(observer!.stonyhurstLongitudeDeg).toBe(stonyhurst);
  });
  it.each(REAL.filter(([, , , , , stonyhurst]) => stonyhurst === 0))(
    '%s agrees with the ephemeris within 0.1 degree',
    (name, _au, b0, l0) => {
      const sun = sunFromEarth(observationTime(header(name))!);
      expect(Math.abs(sun.b0Deg - b0)).toBeLessThan(0.1);
      expect(apart(sun.l0Deg, l0)).toBeLessThan(0.1);
    },
  );
  it('gives the Solar Orbiter its place by the ephemeris of the Earth', () => {
    for (const [name, , , l0, , stonyhurst] of REAL.slice(-2)) {
      const sun = sunFromEarth(observationTime(header(name))!);
      // Light time differs between the two observers: 0.1 degree of rotation.
      expect(apart(l0 - sun.l0Deg, stonyhurst)).toBeLessThan(0.2);
    }
  });
});
