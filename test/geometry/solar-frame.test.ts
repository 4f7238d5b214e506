import { describe, expect, it } from 'vitest';
import {
  carringtonOf,
  cosineMu,
  helioprojectiveOf,
  isVisible,
  localBasis,
  stonyhurstOf,
  stonyhurstOfCarrington,
  surfaceFromHelioprojective,
  surfacePoint,
  type Vector3,
  viewFrame,
} from '../../src/geometry/solar-frame.js';

const ARCSEC = Math.PI / 648000;
const view = viewFrame({
  distanceM: 1.495978707e11,
  latitudeDeg: 7,
  stonyhurstLongitudeDeg: 0,
  carringtonLongitudeDeg: 350,
  solarRadiusM: 6.957e8,
});
const dot = (a: Vector3, b: Vector3) => a[0] * b[0] + a[1] * b[1] + a[2] * b[2];

describe('helioprojective and heliographic (Thompson 2006), values of an independent calculation', () => {
  it.each([
    [300, 200, 18.606516, 19.182434],
    [-500, 400, 30.228686, -36.955325],
    [900, 0, 2.444957, 69.650176],
  ])('(%d, %d) arcsec', (x, y, lat, lon) => {
    const point = surfaceFromHelioprojective(view, x * ARCSEC, y * ARCSEC, [0, 0, 0])!;
    const [foundLon, foundLat] = stonyhurstOf(view, point);
    expect(foundLon).toBeCloseTo(lon, 5);
    expect(foundLat).toBeCloseTo(lat, 5);
    expect(Math.hypot(...point)).toBeCloseTo(1, 12);
  });
  it('z at (300, 200) arcsec, and the way back', () => {
    expect(surfaceFromHelioprojective(view, 300 * ARCSEC, 200 * ARCSEC, [0, 0, 0])![2]).toBeCloseTo(
      0.927324,
      6,
    );
    const [x, y] = helioprojectiveOf(view, surfacePoint(view, 15, -20, [0, 0, 0]));
    expect(x / ARCSEC).toBeCloseTo(234.22994, 4);
    expect(y / ARCSEC).toBeCloseTo(-433.46836, 4);
  });
  it('has its limb at asin(R / D)', () => {
    const limb = 959.231; // arcsec, 1 au and the nominal radius
    const at = (arcsec: number) => surfaceFromHelioprojective(view, arcsec * ARCSEC, 0, [0, 0, 0]);
    expect(at(limb - 0.001)).toBeDefined();
    expect(at(limb + 0.001)).toBeUndefined();
    expect(cosineMu(view, at(limb - 0.001)![2])).toBeLessThan(0.002);
  });
});

describe('frame laws', () => {
  it('goes round over the visible disk', () => {
    for (let lon = -85; lon <= 85; lon += 17) {
      for (let lat = -80; lat <= 80; lat += 16) {
        const point = surfacePoint(view, lon, lat, [0, 0, 0]);
        const [backLon, backLat] = stonyhurstOf(view, point);
        expect(backLon).toBeCloseTo(lon, 9);
        expect(backLat).toBeCloseTo(lat, 9);
        if (!isVisible(view, point[2])) continue;
        const [x, y] = helioprojectiveOf(view, point);
        const seen = surfaceFromHelioprojective(view, x, y, [0, 0, 0])!;
        expect(Math.hypot(seen[0] - point[0], seen[1] - point[1])).toBeLessThan(1e-9);
      }
    }
  });
  it('mu is the cosine of rho plus theta_rho', () => {
    const point = surfacePoint(view, 50, -20, [0, 0, 0]);
    const [x, y] = helioprojectiveOf(view, point);
    const theta = Math.acos(Math.cos(x) * Math.cos(y));
    expect(cosineMu(view, point[2])).toBeCloseTo(Math.cos(Math.acos(point[2]) + theta), 12);
    expect(point[2] - cosineMu(view, point[2])).toBeGreaterThan(0.003); // z alone is not mu
  });
  it('local basis: orthonormal, along growing longitude and latitude, sees the observer at mu', () => {
    const { west, north, up, toObserver } = localBasis(view, -40, 25);
    for (const [a, b, product] of [
      [west, west, 1],
      [north, north, 1],
      [west, north, 0],
      [west, up, 0],
      [north, up, 0],
      [toObserver, toObserver, 1],
    ] as const)
      expect(dot(a as Vector3, b as Vector3)).toBeCloseTo(product, 12);
    const step = 1e-4;
    const east = surfacePoint(view, -40 - step, 25, [0, 0, 0]);
    const south = surfacePoint(view, -40, 25 - step, [0, 0, 0]);
    const toWest = up.map((value, i) => value - east[i]) as Vector3;
    const toNorth = up.map((value, i) => value - south[i]) as Vector3;
    expect(dot(toWest, west) / Math.hypot(...toWest)).toBeCloseTo(1, 8);
    expect(dot(toNorth, north) / Math.hypot(...toNorth)).toBeCloseTo(1, 8);
    expect(dot(toObserver, up)).toBeCloseTo(cosineMu(view, up[2]), 12);
  });
  it('Carrington is Stonyhurst plus L0', () => {
    expect(carringtonOf(view, 30)).toBeCloseTo(20, 12);
    expect(stonyhurstOfCarrington(view, 20)).toBeCloseTo(30, 12);
    expect(stonyhurstOfCarrington(view, 180)).toBeCloseTo(-170, 12);
  });
});
