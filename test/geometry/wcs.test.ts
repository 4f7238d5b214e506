import { describe, expect, it } from 'vitest';
import { GeometryError } from '../../src/errors.js';
import { readGeometry } from '../../src/geometry/image-geometry.js';
import { pixelToWorld, worldToPixel } from '../../src/geometry/wcs.js';
import { readLinearPart } from '../../src/geometry/wcs-linear.js';
import { arcsecCards, type Cards, fixture, headerOf } from './support.js';

interface Case {
  readonly name: string;
  readonly cards: Cards;
  readonly pixels: readonly [number, number][];
  readonly lonLatDeg: readonly [number, number][];
}

const { cases } = fixture<{ cases: Case[] }>('wcs.json');
/** Agreement with WCSLIB [deg]; 1e-9 deg is 4 micro-arcsec, rounding of both sides. */
const TOLERANCE_DEG = 1e-9;
const TOLERANCE_PIXEL = 1e-7;

function wcsOf(cards: Cards) {
  const { geometry } = readGeometry({ header: headerOf(cards), nx: 200, ny: 160 });
  if (!geometry) throw new Error('no geometry');
  return geometry.wcs;
}

const apart = (a: number, b: number) => Math.abs(((((a - b) % 360) + 540) % 360) - 180);

describe('WCS against WCSLIB (astropy 5.2.1, fixtures/geometry/wcs.json)', () => {
  it('has all its samples', () => expect(cases.length).toBe(24));
  it.each(cases.map((sample) => [sample.name, sample] as const))('%s', (_name, sample) => {
    const wcs = wcsOf(sample.cards);
    const out = [0, 0];
    sample.pixels.forEach(([x, y], i) => {
      const [lon, lat] = sample.lonLatDeg[i];
      expect(pixelToWorld(wcs, x - 1, y - 1, out)).toBe(true);
      expect(apart(out[0], lon) * Math.cos((lat * Math.PI) / 180)).toBeLessThan(TOLERANCE_DEG);
      expect(Math.abs(out[1] - lat)).toBeLessThan(TOLERANCE_DEG);
      expect(worldToPixel(wcs, lon, lat, out)).toBe(true);
      expect(Math.hypot(out[0] - x + 1, out[1] - y + 1)).toBeLessThan(TOLERANCE_PIXEL);
    });
  });
});

describe('WCS examples of the papers, worked by an independent implementation', () => {
  const at = (cards: Cards, x: number, y: number) => {
    const out = [0, 0];
    pixelToWorld(wcsOf({ CRPIX1: 1, CRPIX2: 1, ...cards }), x, y, out);
    return out;
  };
  it('TAN: 0.01 degree, offset (500, 300)', () => {
    const cards = { CTYPE1: 'HPLN-TAN', CTYPE2: 'HPLT-TAN', CDELT1: 0.01, CDELT2: 0.01 };
    const [lon, lat] = at(cards, 500, 300);
    expect(lon).toBeCloseTo(4.9873653, 6);
    expect(lat).toBeCloseTo(2.9859356, 6);
  });
  it('CEA: 0.03 degree, offset (100, 1000), also with lambda', () => {
    const cards = { CTYPE1: 'CRLN-CEA', CTYPE2: 'CRLT-CEA', CDELT1: 0.03, CDELT2: 0.03 };
    const [lon, lat] = at(cards, 100, 1000);
    expect(lon).toBeCloseTo(3, 9);
    expect(lat).toBeCloseTo(31.5739613, 6);
    expect(at({ ...cards, PV2_1: 0.75 }, 100, 1000)[1]).toBeCloseTo(23.1225487, 6);
  });
  it('CEA with CRVAL2 not zero is oblique', () => {
    const cards = { CTYPE1: 'CRLN-CEA', CTYPE2: 'CRLT-CEA', CDELT1: 0.03, CDELT2: 0.03 };
    const [lon, lat] = at({ ...cards, CRVAL1: 100, CRVAL2: 20 }, 100, 100);
    expect(lon).toBeCloseTo(103.2542, 4);
    expect(lat).toBeCloseTo(22.9722, 4);
  });
});

describe('linear part', () => {
  it('lets PC win over CROTA and CD with a warning', () => {
    const cards = { CDELT1: 2, CDELT2: 2, PC1_1: 1, CROTA2: 10, CD1_1: 5 };
    const { matrix, warnings } = readLinearPart(headerOf(cards));
    expect(matrix).toEqual([2, 0, 0, 2]);
    expect(warnings.join(' ')).toMatch(/PC used.*CROTA says 10/);
  });
  it('says nothing where PC and a bare CROTA agree, as in the PHI headers', () => {
    const [c, s] = [0.9899233972324522, 0.1416039110044662];
    const cards = { CDELT1: 0.5, CDELT2: 0.5, PC1_1: c, PC1_2: -s, PC2_1: s, PC2_2: c };
    const part = readLinearPart(headerOf({ ...cards, CROTA: 8.140668302815151 }));
    expect(part.warnings).toEqual([]);
  });
  it('takes a bare CROTA, and two numbers, with a warning where they differ', () => {
    const rotation = (cards: Cards) => {
      const { matrix } = readLinearPart(headerOf({ CDELT1: 1, CDELT2: 1, ...cards }));
      return (Math.atan2(matrix[2], matrix[0]) * 180) / Math.PI;
    };
    expect(rotation({ CROTA: 30 })).toBeCloseTo(30, 10);
    expect(rotation({ CROTA1: 0.412, CROTA2: 0.412 })).toBeCloseTo(0.412, 10);
    expect(rotation({ CROTA1: 20 })).toBeCloseTo(20, 10);
    expect(readLinearPart(headerOf({ CROTA1: 1, CROTA2: 2 })).warnings).toHaveLength(1);
  });
});

describe('what a WCS may not be', () => {
  const read = (cards: Cards) => readGeometry({ header: headerOf(cards), nx: 10, ny: 10 });
  it('refuses other projections, units and zero scale by name', () => {
    const cards = arcsecCards(1, 10, 10);
    expect(() => read({ ...cards, CTYPE1: 'HPLN-AZP' })).toThrow(/AZP.*TAN/);
    expect(() => read({ ...cards, CUNIT1: 'parsec' })).toThrow(/'parsec', wanted deg/);
    expect(() => read({ ...cards, CDELT1: 0 })).toThrow(GeometryError);
    expect(() => read({ ...cards, PV1_1: 30 })).toThrow(/PV1_1 is 30/);
  });
  it('takes an absurd span in degrees as arcsec, with a warning', () => {
    const { CUNIT1: _1, CUNIT2: _2, ...cards } = arcsecCards(2, 1000, 1000);
    const result = readGeometry({ header: headerOf(cards), nx: 1000, ny: 1000 });
    expect(result.warnings.join(' ')).toMatch(/taken as arcsec/);
    expect(result.geometry!.wcs.forward[0] * 206264.806).toBeCloseTo(2, 6);
  });
});
