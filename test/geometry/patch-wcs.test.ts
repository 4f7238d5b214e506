import { describe, expect, it } from 'vitest';
import { readGeometry } from '../../src/geometry/image-geometry.js';
import { patchToStonyhurst } from '../../src/geometry/patch-position.js';
import { patchWcsCards } from '../../src/geometry/patch-wcs.js';
import { readPlacement } from '../../src/geometry/solar-map.js';
import { pixelToWorld } from '../../src/geometry/wcs.js';
import { type Cards, fixture, OBSERVER } from './support.js';

interface GridCase {
  readonly nx: number;
  readonly ny: number;
  readonly pixelMm: number;
  readonly sphereRadiusMm: number;
  readonly carringtonLongitudeDeg: number;
  readonly latitudeDeg: number;
  readonly cards: Cards;
  readonly pixels: readonly [number, number][];
  readonly lonLatDeg: readonly [number, number][];
}

const { cases } = fixture<{ cases: GridCase[] }>('patch-grid.json');
const apart = (a: number, b: number) => Math.abs(((((a - b) % 360) + 540) % 360) - 180);

describe('cards of a patch grid, read by WCSLIB (astropy 5.2.1, fixtures/geometry/patch-grid.json)', () => {
  it('has all its samples', () => expect(cases.length).toBe(4));
  it.each(cases.map((sample) => [sample.latitudeDeg, sample] as const))(
    'latitude %d',
    (_lat, sample) => {
      // The observer's Carrington longitude is 120, so Stonyhurst is Carrington less 120.
      const patch = {
        ...sample,
        center: {
          stonyhurstLongitudeDeg: sample.carringtonLongitudeDeg - 120,
          stonyhurstLatitudeDeg: sample.latitudeDeg,
          carringtonLongitudeDeg: sample.carringtonLongitudeDeg,
          mu: 1,
        },
      };
      const header = {
        cards: patchWcsCards(patch, '2031-05-01T12:00:00.000Z', OBSERVER),
        warnings: [],
      };
      const values = new Map(header.cards.map(({ keyword, value }) => [keyword, value]));
      for (const [keyword, value] of Object.entries(sample.cards)) {
        if (typeof value === 'number') expect(values.get(keyword)).toBeCloseTo(value, 12);
        else expect(values.get(keyword)).toBe(value);
      }
      const { geometry } = readGeometry({ header, nx: sample.nx, ny: sample.ny });
      const out = [0, 0];
      sample.pixels.forEach(([x, y], i) => {
        const [lon, lat] = sample.lonLatDeg[i];
        const [stonyhurst, latitude] = patchToStonyhurst(patch, x - 1, y - 1);
        expect(apart(stonyhurst + 120, lon)).toBeLessThan(1e-9);
        expect(Math.abs(latitude - lat)).toBeLessThan(1e-9);
        expect(pixelToWorld(geometry!.wcs, x - 1, y - 1, out)).toBe(true);
        expect(apart(out[0], lon)).toBeLessThan(1e-9);
        expect(Math.abs(out[1] - lat)).toBeLessThan(1e-9);
      });
      const place = readPlacement(header, sample.nx, sample.ny);
      expect(place.observed).toBe('2031-05-01T12:00:00.000Z');
      expect(place.observer!.carringtonLongitudeDeg).toBe(120);
      expect(place.observer!.solarRadiusM / 1e6).toBeCloseTo(sample.sphereRadiusMm, 9);
    },
  );
  it('falls back to Stonyhurst coordinates', () => {
    const center = {
      stonyhurstLongitudeDeg: -10,
      stonyhurstLatitudeDeg: 3,
      carringtonLongitudeDeg: Number.NaN,
      mu: 1,
    };
    const observer = { ...OBSERVER, carringtonLongitudeDeg: Number.NaN };
    const cards = patchWcsCards({ nx: 9, ny: 9, pixelMm: 1, center }, undefined, observer);
    expect(cards.find(({ keyword }) => keyword === 'CTYPE1')!.value).toBe('HGLN-CEA');
    expect(cards.every(({ value }) => typeof value !== 'number' || Number.isFinite(value))).toBe(
      true,
    );
  });
});
