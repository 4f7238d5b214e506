import { existsSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { type FitsFile, parseFits } from '../../src/fits/file.js';
import type { CardValue, FitsHeader } from '../../src/fits/header.js';
import { readGeometry } from '../../src/geometry/image-geometry.js';
import { pixelToSurface } from '../../src/geometry/image-on-sun.js';
import { isFullDisk } from '../../src/geometry/map-checks.js';
import type { Observer } from '../../src/geometry/observer.js';
import { type Vector3, viewFrame } from '../../src/geometry/solar-frame.js';
import type { SolarMap } from '../../src/geometry/solar-map.js';

export type Cards = Readonly<Record<string, CardValue>>;

export function fixture<T>(name: string): T {
  const url = new URL(`../../fixtures/geometry/${name}`, import.meta.url);
  return JSON.parse(readFileSync(url, 'utf8')) as T;
}

/** Folder of the real observations, or undefined (said once) where they are not at hand. */
export const REAL_DATA: string | undefined = (() => {
  const root = new URL('../../', import.meta.url).pathname;
  const folder = process.env.SPOTJOULE_REAL_DATA ?? join(root, '../shared/data/real');
  if (existsSync(folder)) return folder;
  console.log(
    'real observations not found (SPOTJOULE_REAL_DATA): tests that read them are skipped',
  );
  return undefined;
})();

export function headerOf(cards: Cards): FitsHeader {
  const list = Object.entries(cards).map(([keyword, value]) => ({ keyword, value, comment: '' }));
  return { cards: list, warnings: [] };
}

function cardText(keyword: string, value: CardValue): string {
  const text = typeof value === 'string' ? `'${value.padEnd(8)}'` : `${value}`.padStart(20);
  const plain = typeof value === 'boolean' ? (value ? 'T' : 'F').padStart(20) : text;
  return `${keyword.padEnd(8)}= ${plain}`.padEnd(80);
}

/** A FITS file of one float32 image, written by hand so that the reader under test is not its own judge. */
export function fitsOf(cards: Cards, nx: number, ny: number, values?: Float32Array): FitsFile {
  const all = { SIMPLE: true, BITPIX: -32, NAXIS: 2, NAXIS1: nx, NAXIS2: ny, ...cards };
  const text = `${Object.entries(all)
    .map(([keyword, value]) => cardText(keyword, value))
    .join('')}${'END'.padEnd(80)}`;
  const header = Buffer.from(text.padEnd(Math.ceil(text.length / 2880) * 2880), 'latin1');
  const data = Buffer.alloc(Math.ceil((4 * nx * ny) / 2880) * 2880);
  for (let i = 0; i < nx * ny; i++) data.writeFloatBE(values ? values[i] : i % 7, 4 * i);
  return parseFits(new Uint8Array(Buffer.concat([header, data])), 'made.fits');
}

/** An observer on the Earth's meridian. */
export const OBSERVER: Observer = {
  distanceM: 1.495978707e11,
  latitudeDeg: 5,
  stonyhurstLongitudeDeg: 0,
  carringtonLongitudeDeg: 120,
  solarRadiusM: 6.957e8,
  basis: {
    distance: 'header',
    latitude: 'header',
    stonyhurstLongitude: 'header',
    carringtonLongitude: 'header',
    solarRadius: 'nominal',
  },
};

/** A map whose pixels hold `field` of the surface point (observer frame) they see; NaN off the disk. */
export function mapOf(
  cards: Cards,
  nx: number,
  ny: number,
  field: (point: Readonly<Vector3>) => number,
  at?: { lonDeg: number; latDeg: number },
): SolarMap {
  const { geometry } = readGeometry({
    header: headerOf(cards),
    nx,
    ny,
    observer: OBSERVER,
    options: { at },
  });
  if (!geometry) throw new Error('no geometry');
  const view = viewFrame(OBSERVER);
  const values = new Float64Array(nx * ny);
  const point: Vector3 = [0, 0, 0];
  for (let y = 0; y < ny; y++)
    for (let x = 0; x < nx; x++)
      values[x + nx * y] = pixelToSurface(view, geometry, x, y, point) ? field(point) : Number.NaN;
  return {
    nx,
    ny,
    values,
    component: 'line-of-sight',
    unit: 'G',
    geometryName: '',
    geometry,
    observer: OBSERVER,
    observed: '2031-05-01T12:00:00.000Z',
    pixelMm: (Number(cards.CDELT1) / 206264.806) * 148902.17,
    hdu: 0,
    sourceName: 'made',
    fullDisk: isFullDisk(geometry, OBSERVER, nx, ny),
    warnings: [],
  };
}

/** Helioprojective cards of a picture in arcsec. */
export function arcsecCards(scale: number, nx: number, ny: number, more: Cards = {}): Cards {
  return {
    CTYPE1: 'HPLN-TAN',
    CTYPE2: 'HPLT-TAN',
    CUNIT1: 'arcsec',
    CUNIT2: 'arcsec',
    CRPIX1: (nx + 1) / 2,
    CRPIX2: (ny + 1) / 2,
    CRVAL1: 0,
    CRVAL2: 0,
    CDELT1: scale,
    CDELT2: scale,
    ...more,
  };
}
