import { describe, expect, it } from 'vitest';
import { makePatch } from '../../src/geometry/make-patch.js';
import {
  PIXEL_GOOD,
  PIXEL_MISSING,
  PIXEL_OFF_LIMB,
  PIXEL_OUTSIDE_IMAGE,
} from '../../src/geometry/patch.js';
import { patchToStonyhurst, stonyhurstToPatch } from '../../src/geometry/patch-position.js';
import {
  cosineMu,
  localBasis,
  surfacePoint,
  type Vector3,
  viewFrame,
} from '../../src/geometry/solar-frame.js';
import { mapPixelToStonyhurst, stonyhurstToMapPixel } from '../../src/geometry/solar-map.js';
import { arcsecCards, mapOf, OBSERVER } from './support.js';

const R = 695.7;
const view = viewFrame(OBSERVER);

/** Gaussian blob of the surface, 15 Mm wide, about a Stonyhurst position. */
function blob(lonDeg: number, latDeg: number, widthMm = 15) {
  const c = surfacePoint(view, lonDeg, latDeg, [0, 0, 0]);
  return (p: Readonly<Vector3>) => {
    const chord = Math.hypot(p[0] - c[0], p[1] - c[1], p[2] - c[2]);
    return 1000 * Math.exp(-0.5 * ((2 * R * Math.asin(chord / 2)) / widthMm) ** 2);
  };
}

/** Its integral over the sphere [G Mm^2]: 2 pi R^2 times the integral of B sin(theta), by quadrature. */
function blobFlux(widthMm = 15): number {
  let sum = 0;
  const step = 1e-5;
  for (let theta = step / 2; theta < 0.3; theta += step)
    sum += 1000 * Math.exp(-0.5 * ((R * theta) / widthMm) ** 2) * Math.sin(theta) * step;
  return 2 * Math.PI * R * R * sum;
}

function fluxOf(patch: { field: { values: { data: Float64Array } }; pixelMm: number }): number {
  return (
    patch.field.values.data.reduce((a, b) => a + (Number.isNaN(b) ? 0 : b), 0) * patch.pixelMm ** 2
  );
}

const cutOut = (lonDeg: number, latDeg: number, field = blob(lonDeg, latDeg)) =>
  mapOf(arcsecCards(2, 200, 200), 200, 200, field, { lonDeg, latDeg });

describe('flux of a smooth blob, against its integral over the sphere', () => {
  // Source pixels are 1.44 Mm. Tolerance: 2e-4 of the flux for pixels of the source's size or finer;
  // coarse cells of 9 Mm blur but keep the flux.
  it.each([
    ['disk centre', 0, 5],
    ['40 degrees west', 40, 5],
    ['40 degrees south-east', -29, -23],
  ])('%s', (_name, lon, lat) => {
    const map = cutOut(lon, lat);
    const wanted = blobFlux();
    for (const pixelMm of [undefined, 0.5, 1, 1.45, 2.1, 3.7, 9]) {
      const options = pixelMm === undefined ? {} : { pixelMm };
      const { patch, warnings } = makePatch(map, {
        center: { lonDeg: lon, latDeg: lat },
        extentMm: 180,
        ...options,
      });
      expect(warnings).toEqual([]);
      expect(Math.abs(fluxOf(patch) / wanted - 1)).toBeLessThan(2e-4);
    }
  });
  it('keeps peak and width when refining: the field itself within 0.1 %', () => {
    const { patch } = makePatch(cutOut(40, 5), { extentMm: 100, pixelMm: 0.5 });
    const field = blob(40, 5);
    const data = patch.field.values.data;
    let worst = 0;
    for (let y = 0; y < patch.ny; y += 7)
      for (let x = 0; x < patch.nx; x += 7) {
        const [lon, lat] = patchToStonyhurst(patch, x, y);
        const wanted = field(surfacePoint(view, lon, lat, [0, 0, 0]));
        worst = Math.max(worst, Math.abs(data[x + patch.nx * y] - wanted));
      }
    expect(worst).toBeLessThan(1);
  });
});

describe('flux of a single source pixel, against its true area', () => {
  /** Area of the source pixel on the sphere [Mm^2], by the cross product of its diagonals. */
  function pixelArea(map: ReturnType<typeof cutOut>, x: number, y: number): number {
    const corner = (dx: number, dy: number) => {
      const [lon, lat] = mapPixelToStonyhurst(map, x + dx, y + dy)!;
      return surfacePoint(view, lon, lat, [0, 0, 0]);
    };
    const [a, b, c, d] = [
      corner(-0.5, -0.5),
      corner(0.5, -0.5),
      corner(0.5, 0.5),
      corner(-0.5, 0.5),
    ];
    const p = a.map((v, i) => c[i] - v);
    const q = b.map((v, i) => d[i] - v);
    const cross = [p[1] * q[2] - p[2] * q[1], p[2] * q[0] - p[0] * q[2], p[0] * q[1] - p[1] * q[0]];
    return 0.5 * R * R * Math.hypot(...cross);
  }
  it.each([1.44, 3, 6, 14])('pixels of %d Mm at 40 degrees', (pixelMm) => {
    let wanted = 0;
    // Nine lone pixels: each alone falls unevenly between the samples, their sum does not.
    const map = cutOut(40, 5, () => 0);
    for (const x of [71, 100, 131])
      for (const y of [70, 101, 128]) {
        map.values[x + 200 * y] = 1;
        wanted += pixelArea(map, x, y);
      }
    const found = fluxOf(
      makePatch(map, { center: { lonDeg: 40, latDeg: 5 }, extentMm: 200, pixelMm }).patch,
    );
    expect(Math.abs(found / wanted - 1)).toBeLessThan(0.02);
  });
});

describe('grid of a patch', () => {
  const { patch } = makePatch(cutOut(40, 5), {
    center: { lonDeg: 38, latDeg: 12 },
    extentMm: { x: 90, y: 60 },
  });
  it('has the centre asked for, half way along its sides', () => {
    const [lon, lat] = patchToStonyhurst(patch, (patch.nx - 1) / 2, (patch.ny - 1) / 2);
    expect(lon).toBeCloseTo(38, 9);
    expect(lat).toBeCloseTo(12, 9);
    expect(patch.nx * patch.pixelMm).toBeCloseTo(90, -0.5);
    expect(patch.ny * patch.pixelMm).toBeCloseTo(60, -0.5);
    expect(patch.center.carringtonLongitudeDeg).toBeCloseTo(158, 9);
    expect(patch.center.mu).toBeCloseTo(
      cosineMu(view, surfacePoint(view, 38, 12, [0, 0, 0])[2]),
      12,
    );
  });
  it('goes round', () => {
    for (const [x, y] of [
      [0, 0],
      [10.5, 33.25],
      [patch.nx - 1, patch.ny - 1],
    ]) {
      const [lon, lat] = patchToStonyhurst(patch, x, y);
      const [backX, backY] = stonyhurstToPatch(patch, lon, lat)!;
      expect(backX).toBeCloseTo(x, 7);
      expect(backY).toBeCloseTo(y, 7);
    }
    expect(stonyhurstToPatch(patch, -140, 0)).toBeUndefined();
  });
  it('has pixels of equal area: solid angle times R^2 is the square of the side', () => {
    const at = (x: number, y: number) => {
      const [lon, lat] = patchToStonyhurst(patch, x, y);
      return surfacePoint(view, lon, lat, [0, 0, 0]);
    };
    // Solid angle of a triangle by Oosterom & Strackee 1983, IEEE Trans. BME 30, 125.
    const triangle = (a: Vector3, b: Vector3, c: Vector3) => {
      const dot = (p: Vector3, q: Vector3) => p[0] * q[0] + p[1] * q[1] + p[2] * q[2];
      const [x, y, z] = [
        b[1] * c[2] - b[2] * c[1],
        b[2] * c[0] - b[0] * c[2],
        b[0] * c[1] - b[1] * c[0],
      ];
      return 2 * Math.atan2(a[0] * x + a[1] * y + a[2] * z, 1 + dot(a, b) + dot(b, c) + dot(c, a));
    };
    for (const [x, y] of [
      [0, 0],
      [patch.nx - 1, 0],
      [20, patch.ny - 1],
    ]) {
      // A block of 10 x 10 pixels, whose sides along small circles are nearly straight.
      const [a, b] = [at(x - 5, y - 5), at(x + 5, y - 5)];
      const [c, d] = [at(x + 5, y + 5), at(x - 5, y + 5)];
      const area = (triangle(a, b, c) + triangle(a, c, d)) * R * R;
      expect(Math.abs(area / (100 * patch.pixelMm ** 2) - 1)).toBeLessThan(2e-4);
    }
  });
  it('x runs west and y north at the centre', () => {
    const [cx, cy] = [(patch.nx - 1) / 2, (patch.ny - 1) / 2];
    expect(patchToStonyhurst(patch, cx + 5, cy)[0]).toBeGreaterThan(38);
    expect(patchToStonyhurst(patch, cx, cy + 5)[1]).toBeGreaterThan(12);
    expect(patchToStonyhurst(patch, cx, cy + 5)[0]).toBeCloseTo(38, 9);
  });
  it('knows the way to the observer in each pixel', () => {
    const { x, y, z } = patch.toObserver;
    for (const [i, j] of [
      [0, 0],
      [patch.nx - 1, 3],
      [30, patch.ny - 1],
    ]) {
      const p = i + patch.nx * j;
      expect(Math.hypot(x[p], y[p], z[p])).toBeCloseTo(1, 12);
      const [lon, lat] = patchToStonyhurst(patch, i, j);
      expect(z[p]).toBeCloseTo(cosineMu(view, surfacePoint(view, lon, lat, [0, 0, 0])[2]), 10);
    }
    const odd = makePatch(cutOut(40, 5), { extentMm: 101 * 1.5, pixelMm: 1.5 }).patch;
    const middle = 50 + 101 * 50;
    const { stonyhurstLongitudeDeg: lon, stonyhurstLatitudeDeg: lat } = odd.center;
    const basis = localBasis(view, lon, lat);
    const along = (axis: readonly number[]) =>
      basis.toObserver.reduce((sum, v, i) => sum + v * axis[i], 0);
    expect(odd.toObserver.x[middle]).toBeCloseTo(along(basis.west), 12);
    expect(odd.toObserver.y[middle]).toBeCloseTo(along(basis.north), 12);
    expect(odd.toObserver.z[middle]).toBeCloseTo(along(basis.up), 12);
    expect(odd.toObserver.x[middle]).toBeLessThan(0); // west of centre, the observer is to the east
  });
});

describe('mask', () => {
  it('does not let one missing pixel blank an area', () => {
    const map = cutOut(0, 5);
    map.values[100 + 200 * 100] = Number.NaN;
    const { patch } = makePatch(map, { extentMm: 100 });
    const missing = patch.mask.reduce((n, code) => n + (code === PIXEL_MISSING ? 1 : 0), 0);
    expect(missing).toBeLessThanOrEqual(2);
    const coarse = makePatch(map, { extentMm: 100, pixelMm: 5 }).patch;
    expect(coarse.mask.every((code) => code === PIXEL_GOOD)).toBe(true);
  });
  it('marks a block of missing pixels at its true size', () => {
    const map = cutOut(0, 5);
    for (let y = 90; y < 110; y++) map.values.fill(Number.NaN, 90 + 200 * y, 110 + 200 * y);
    const { patch } = makePatch(map, { extentMm: 100 });
    const missing = patch.mask.reduce((n, code) => n + (code === PIXEL_MISSING ? 1 : 0), 0);
    expect(missing * patch.pixelMm ** 2).toBeGreaterThan(0.9 * (20 * map.pixelMm) ** 2);
    expect(missing * patch.pixelMm ** 2).toBeLessThan(1.1 * (20 * map.pixelMm) ** 2);
  });
  it('is NaN exactly where it is not good', () => {
    const { patch } = makePatch(cutOut(0, 5), { extentMm: 400 });
    const codes = new Set(patch.mask);
    expect(codes).toEqual(new Set([PIXEL_GOOD, PIXEL_OUTSIDE_IMAGE]));
    patch.field.values.data.forEach((value, i) => {
      expect(Number.isNaN(value)).toBe(patch.mask[i] !== PIXEL_GOOD);
    });
  });
  it('tells what is behind the limb from what is blank', () => {
    const map = mapOf(arcsecCards(10, 220, 220), 220, 220, () => 1);
    const options = { center: { lonDeg: 69, latDeg: 5 }, extentMm: 600 };
    const { patch } = makePatch(map, options);
    const { z } = patch.toObserver;
    patch.mask.forEach((code, i) => {
      if (z[i] < -0.02) expect(code).toBe(PIXEL_OFF_LIMB);
      if (z[i] > 0.35) expect(code).toBe(PIXEL_GOOD);
    });
    expect(patch.mask.includes(PIXEL_OFF_LIMB)).toBe(true);
  });
});

describe('which patch', () => {
  it('takes the whole of a cut-out', () => {
    const map = cutOut(30, -15);
    const { patch, warnings } = makePatch(map);
    expect(warnings).toEqual([]);
    for (const [x, y] of [
      [0, 0],
      [199, 0],
      [0, 199],
      [199, 199],
    ]) {
      const [lon, lat] = mapPixelToStonyhurst(map, x, y)!;
      const [u, v] = stonyhurstToPatch(patch, lon, lat)!;
      expect(u).toBeGreaterThan(-0.6);
      expect(v).toBeGreaterThan(-0.6);
      expect(u).toBeLessThan(patch.nx - 0.4);
      expect(v).toBeLessThan(patch.ny - 0.4);
    }
    const outside = patch.mask.reduce((n, code) => n + (code === PIXEL_OUTSIDE_IMAGE ? 1 : 0), 0);
    expect(outside / patch.mask.length).toBeLessThan(0.3);
    const [x, y] = stonyhurstToMapPixel(
      map,
      patch.center.stonyhurstLongitudeDeg,
      patch.center.stonyhurstLatitudeDeg,
    )!;
    // The middle of the surface lies limbwards of the middle of the picture.
    expect(Math.hypot(x - 99.5, y - 99.5)).toBeLessThan(25);
  });
  it('leaves out the blank part of a cut-out', () => {
    const map = cutOut(0, 5);
    for (let y = 0; y < 200; y++) map.values.fill(Number.NaN, 200 * y, 200 * y + 100);
    const { patch } = makePatch(map);
    expect(patch.center.stonyhurstLongitudeDeg).toBeGreaterThan(4);
    expect(patch.nx).toBeLessThan(115);
  });
  it('keeps the native scale at disk centre and along the limb', () => {
    for (const lon of [0, 55]) {
      const { patch } = makePatch(cutOut(lon, 5), { extentMm: 60 });
      expect(Math.abs(patch.pixelMm / 1.4437 - 1)).toBeLessThan(0.005);
    }
  });
  it('coarsens beyond the largest size, with a warning', () => {
    const { patch, warnings } = makePatch(cutOut(0, 5), { extentMm: 200, maxPixels: 64 });
    expect(patch.nx).toBe(64);
    expect(warnings.join()).toMatch(/coarsened from 1\.44 to 3\.13 Mm/);
  });
});

describe('refusals', () => {
  const disk = mapOf(arcsecCards(20, 110, 110), 110, 110, () => 1);
  it('beyond 70 degrees, unless allowed', () => {
    const center = { lonDeg: 73, latDeg: 5 };
    expect(() => makePatch(disk, { center })).toThrow(/73 degrees from disk centre.*--allow-limb/);
    const { warnings } = makePatch(disk, { center, allowLimb: true });
    expect(warnings.join()).toMatch(/foreshortening/);
  });
  it('behind the limb, off the picture, blank, senseless sizes', () => {
    const behind = { center: { lonDeg: 150, latDeg: 0 }, allowLimb: true };
    expect(() => makePatch(disk, behind)).toThrow(/behind the limb/);
    const away = { center: { lonDeg: -30, latDeg: 5 }, extentMm: 50 };
    expect(() => makePatch(cutOut(40, 5), away)).toThrow(
      /no pixel of the patch lies in the picture/,
    );
    const blank = cutOut(0, 5, () => Number.NaN);
    expect(() => makePatch(blank)).toThrow(/blank in the map/);
    expect(() => makePatch(disk, { center: { lonDeg: 0, latDeg: 0 }, extentMm: 0 })).toThrow(
      /0 Mm/,
    );
    expect(() => makePatch(disk, { center: { lonDeg: 0, latDeg: 0 }, extentMm: 5000 })).toThrow(
      /1200/,
    );
    expect(() => makePatch(disk, { center: { lonDeg: 0, latDeg: 99 } })).toThrow(/no position/);
    const fine = { center: { lonDeg: 0, latDeg: 0 }, extentMm: 20 };
    expect(() => makePatch(disk, fine)).toThrow(/wanted at least 8 pixels/);
  });
});

describe('maps that are no TAN picture', () => {
  it.each(['SIN', 'ARC'])('%s gives the same patch', (projection) => {
    const more = { CTYPE1: `HPLN-${projection}`, CTYPE2: `HPLT-${projection}`, CROTA2: 33 };
    const map = mapOf(arcsecCards(10, 220, 220, more), 220, 220, blob(20, 10, 40));
    const plain = mapOf(arcsecCards(10, 220, 220), 220, 220, blob(20, 10, 40));
    const options = { center: { lonDeg: 20, latDeg: 10 }, extentMm: 250, pixelMm: 5 };
    const [a, b] = [makePatch(map, options), makePatch(plain, options)];
    expect(fluxOf(a.patch) / fluxOf(b.patch)).toBeCloseTo(1, 4);
  });
  it('a heliographic CEA map keeps its flux', () => {
    const cards = {
      CTYPE1: 'CRLN-CEA',
      CTYPE2: 'CRLT-CEA',
      CUNIT1: 'deg',
      CUNIT2: 'deg',
      CRPIX1: 100.5,
      CRPIX2: 90.5,
      CRVAL1: 140, // 20 west, the observer being at Carrington 120
      CRVAL2: -12,
      CDELT1: 0.12,
      CDELT2: 0.12,
    };
    const map = mapOf(cards, 200, 180, blob(20, -12));
    const { patch } = makePatch(map);
    expect(patch.center.stonyhurstLongitudeDeg).toBeCloseTo(20, 1);
    expect(patch.center.stonyhurstLatitudeDeg).toBeCloseTo(-12, 1);
    expect(patch.pixelMm).toBeCloseTo(0.12 * (Math.PI / 180) * R, 3);
    expect(Math.abs(fluxOf(patch) / blobFlux() - 1)).toBeLessThan(2e-4);
  });
});

describe('hostile scales', () => {
  it('a header that claims pixels of a milli-arcsec neither hangs nor fills the memory', () => {
    const map = mapOf(arcsecCards(1e-3, 64, 64), 64, 64, () => 5, { lonDeg: 0, latDeg: 5 });
    const start = performance.now();
    const options = { center: { lonDeg: 0, latDeg: 5 }, extentMm: 240 };
    expect(() => makePatch(map, options)).toThrow(/lies in the picture/);
    expect(performance.now() - start).toBeLessThan(30_000);
    expect(makePatch(map).patch.nx).toBeLessThan(100);
  });
});
