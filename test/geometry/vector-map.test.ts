import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { type FitsFile, parseFits, readFitsFile } from '../../src/fits/file.js';
import { readImage } from '../../src/fits/image.js';
import { writeFits } from '../../src/fits/index.js';
import { parseAzimuthZero } from '../../src/geometry/azimuth-zero.js';
import { type ComponentName, componentFamily } from '../../src/geometry/component-names.js';
import { mapPixelToStonyhurst } from '../../src/geometry/solar-map.js';
import {
  type CameraVectorMap,
  type ComponentSource,
  readVectorMap,
  type VectorMapOptions,
} from '../../src/geometry/vector-map.js';
import {
  type Camera,
  fileOf,
  heliographicGrid,
  observe,
  type Plane,
} from '../support/vector-sky.js';
import { REAL_DATA } from './support.js';

const CAMERA: Camera = { lonDeg: 10, latDeg: 6, nx: 60, ny: 50, cdelt: [2, 2], crotaDeg: 0 };
const made = observe(CAMERA);
const deg = { BUNIT: 'deg' };
const PLANES: readonly Plane[] = [
  { values: made.strength, cards: { BUNIT: 'G' } },
  { values: made.inclination, cards: deg },
  { values: made.azimuth, cards: deg },
];
const NAMES = ['strength', 'inclination', 'azimuth'] as const;
const inHdus = (names: readonly ComponentName[], file = 'made.fits'): ComponentSource[] =>
  names.map((name, hdu) => ({ name, file, hdu }));

function read(
  planes: readonly Plane[],
  options: VectorMapOptions = {},
  more: ComponentName[] = [],
) {
  const file = fileOf('made.fits', planes, made.shape, made.cards);
  return readVectorMap(inHdus([...NAMES, ...more]), options, () => file) as CameraVectorMap;
}

/** A plane with its values replaced, and cards. */
const replaced = (index: number, change: Partial<Plane>) =>
  PLANES.map((plane, i) => (i === index ? { ...plane, ...change } : plane));

describe('a complete family', () => {
  const family = (...names: ComponentName[]) => componentFamily(inHdus(names));
  it('is sorted whatever the order', () => {
    const found = family('azimuth', 'ambiguity', 'strength', 'inclination');
    expect(found.fields.map(({ name }) => name)).toEqual(NAMES);
    expect(found.ambiguity?.name).toBe('ambiguity');
    expect(family('radial', 'south', 'east').fields.map(({ name }) => name)).toEqual([
      'east',
      'south',
      'radial',
    ]);
    expect(family('radial', 'south', 'east').kind).toBe('heliographic');
  });
  it.each([
    [['strength', 'inclination'], /given: strength, inclination; wanted strength, inclination and/],
    [['radial', 'west'], /wanted .*north\|south/],
    [[], /given: nothing; wanted/],
    [['strength', 'strength', 'inclination', 'azimuth'], /strength and strength name one twice/],
    [['west', 'east', 'north', 'radial'], /west and east name one twice/],
    [['strength', 'inclination', 'azimuth', 'radial'], /radial belongs to the other family/],
    [['west', 'north', 'radial', 'ambiguity'], /ambiguity belongs to strength/],
    [['west', 'north', 'radial', 'error-azimuth'], /error-azimuth belongs to the other family/],
    [['west', 'north', 'radial', 'error-west'], /errors? .*all three components or none/],
    [['strength', 'inclination', 'azimuth', 'ambiguity', 'ambiguity'], /ambiguity is given twice/],
  ] as [ComponentName[], RegExp][])('%j is refused', (names, reason) => {
    expect(() => family(...names)).toThrow(reason);
    expect(() => family(...names)).toThrow(expect.objectContaining({ code: 'UsageError' }));
  });
});

describe('where components are', () => {
  it('three planes of a cube, three HDUs and three files read the same', () => {
    const size = made.strength.length;
    const cube = new Float32Array(3 * size);
    PLANES.forEach(({ values }, i) => {
      cube.set(values, i * size);
    });
    const cards = Object.entries(made.cards).map(([keyword, value]) => ({
      keyword,
      value,
      comment: '',
    }));
    const cubeFile = parseFits(
      writeFits([{ values: cube, shape: [60, 50, 3], cards }]),
      'cube.fits',
    );
    const one = readVectorMap(
      NAMES.map((name, plane) => ({ name, file: 'cube.fits', plane })),
      { unit: 'G' },
      () => cubeFile,
    );
    const files: Record<string, FitsFile> = {};
    NAMES.forEach((name, i) => {
      files[name] = fileOf(name, [PLANES[i]], made.shape, made.cards);
    });
    const three = readVectorMap(
      NAMES.map((name) => ({ name, file: name })),
      {},
      (path) => files[path],
    );
    const two = read(PLANES);
    expect(one).toMatchObject({ kind: 'camera', q: two.q, u: two.u });
    expect(three).toMatchObject({ kind: 'camera', q: two.q, u: two.u });
    expect(one.base.values).toEqual(two.base.values);
    expect(two.sources.map(({ hdu }) => hdu)).toEqual([0, 1, 2]);
    expect(() =>
      readVectorMap(
        NAMES.map((name) => ({ name, file: 'cube.fits' })),
        {},
        () => cubeFile,
      ),
    ).toThrow(/cube of 60 x 50 x 3; wanted strength=FILE:PLANE/);
  });
  it('an HDU may be found by its name, coordinates by one HDU alone', () => {
    const planes = PLANES.map((plane, i) => ({
      ...plane,
      cards: { ...plane.cards, EXTNAME: ['FIELD', 'INCLINATION', 'AZIMUTH'][i] },
    })).reverse();
    const file = fileOf('made.fits', planes, made.shape, made.cards);
    const sources = NAMES.map((name) => ({ name, file: 'made.fits' }));
    const map = readVectorMap(sources, {}, () => file);
    expect(map.sources.map(({ hdu }) => hdu)).toEqual([2, 1, 0]);
    const card = (keyword: string, value: string | number) => ({ keyword, value, comment: '' });
    const bare = writeFits([
      { values: made.strength, shape: [60, 50], cards: [card('BUNIT', 'G')] },
      {
        values: made.inclination,
        shape: [60, 50],
        cards: Object.entries(made.cards).map(([k, v]) => card(k, v)),
      },
      { values: made.azimuth, shape: [60, 50], cards: [] },
    ]);
    const lone = readVectorMap(inHdus(NAMES), {}, () => parseFits(bare, 'made.fits'));
    expect(lone.base.geometry).toEqual(map.base.geometry);
    const unnamed = fileOf('made.fits', PLANES, made.shape, made.cards);
    expect(() => readVectorMap(sources, {}, () => unnamed)).toThrow(
      /images 0, 1, 2: say which one is strength, as strength=FILE#HDU/,
    );
    expect(() =>
      readVectorMap([{ ...sources[0], hdu: 7 }, ...sources.slice(1)], {}, () => file),
    ).toThrow(/HDU 7 is not there/);
  });
  it('components elsewhere, of another shape or another time are refused or flagged, naming both', () => {
    const strength = fileOf('b.fits', [PLANES[0]], made.shape, made.cards);
    const apart = observe({ ...CAMERA, lonDeg: 11 });
    const small = observe({ ...CAMERA, nx: 59 });
    const late = { ...made, cards: { ...made.cards, 'DATE-OBS': '2031-05-14T09:00:00' } };
    const withInclination = (from: typeof made) => {
      const other = fileOf(
        'i.fits',
        [{ values: from.inclination, cards: deg }],
        from.shape,
        from.cards,
      );
      const azimuth = fileOf('a.fits', [PLANES[2]], made.shape, made.cards);
      const files: Record<string, FitsFile> = {
        'b.fits': strength,
        'i.fits': other,
        'a.fits': azimuth,
      };
      const sources = NAMES.map((name, i) => ({ name, file: ['b.fits', 'i.fits', 'a.fits'][i] }));
      return readVectorMap(sources, {}, (path) => files[path]);
    };
    expect(() => withInclination(apart)).toThrow(
      /strength \(b\.fits\) and inclination \(i\.fits\) do not lie on the same pixels/,
    );
    expect(() => withInclination(small)).toThrow(
      /strength \(b\.fits\) has 60 x 50 pixels, inclination \(i\.fits\) 59 x 50/,
    );
    expect(withInclination(late).base.warnings.join()).toMatch(/60 minutes apart/);
  });
});

describe('quantities and units', () => {
  it('an image of something else is refused by name', () => {
    expect(() => read(replaced(0, { cards: { BUNIT: 'deg', BTYPE: 'BINC' } }))).toThrow(
      /shows field inclination \(BTYPE = 'BINC'\); strength was wanted/,
    );
    expect(() => read(replaced(2, { cards: { BUNIT: 'G' } }))).toThrow(
      /field in G; azimuth was wanted/,
    );
    expect(() => read(replaced(0, { cards: { BUNIT: 'm/s' } }))).toThrow(/strength was wanted/);
    expect(() => read(replaced(1, { cards: { BUNIT: 'arcmin' } }))).toThrow(
      /deg or rad was wanted/,
    );
  });
  it('kG, T and radians are converted, unknown ones refused, missing ones flagged', () => {
    const wanted = read(PLANES);
    const close = (map: CameraVectorMap) => {
      const off = map.base.values.map((value, i) => Math.abs(value - wanted.base.values[i]));
      expect(Math.max(...off)).toBeLessThan(0.01);
      return map.base.warnings.join('; ');
    };
    const inTesla = made.strength.map((value) => value * 1e-4);
    close(read(replaced(0, { values: inTesla, cards: { BUNIT: 'T' } })));
    const radians = made.inclination.map((value) => (value * Math.PI) / 180);
    close(read(replaced(1, { values: radians, cards: { BUNIT: 'rad' } })));
    expect(close(read(replaced(1, { values: radians, cards: {} })))).toMatch(
      /no BUNIT: inclination taken as radians/,
    );
    expect(close(read(replaced(0, { cards: {} })))).toMatch(/no BUNIT: strength taken as G/);
    expect(close(read(replaced(0, { cards: {} }), { unit: 'G' }))).not.toMatch(/strength taken/);
    expect(() => read(replaced(0, { values: inTesla, cards: {} }))).toThrow(
      /no BUNIT and values up to 0\.1\d+, so the unit of strength is not known; give --unit/,
    );
    expect(() => read(PLANES, { unit: 'furlong' })).toThrow(/no magnetic unit/);
  });
  it('a pixel missing in one component is missing in all', () => {
    const azimuth = made.azimuth.slice();
    azimuth[77] = Number.NaN;
    const map = read(replaced(2, { values: azimuth }));
    for (const array of [map.base.values, map.transverseG, map.q, map.u])
      expect(array[77]).toBeNaN();
    const blank = new Float32Array(3000).fill(Number.NaN);
    expect(() => read(replaced(2, { values: blank }))).toThrow(/azimuth has no values/);
  });
});

describe('azimuth', () => {
  it.each(['+z', 'up', '+x,left', '', 'north,', '++x'])("'%s' is refused", (text) => {
    expect(() => parseAzimuthZero(text)).toThrow(/no azimuth zero; wanted \+x, -x/);
  });
  it('the choice is always told', () => {
    expect(parseAzimuthZero('Y')).toEqual({ from: '+y', clockwise: false });
    expect(read(PLANES).base.warnings.join()).toMatch(
      /taken as counter-clockwise from the image's \+y axis: the header does not say/,
    );
    const map = read(PLANES, { azimuthZero: parseAzimuthZero('west,cw') });
    expect(map.azimuthZero).toBe('clockwise from solar west on the sky');
    expect(map.base.warnings.join()).toMatch(/clockwise from solar west on the sky, as given/);
  });
  it('needs a direction on the sky where the grid is heliographic', () => {
    const grid = heliographicGrid(10, 6, 60, 0.1);
    const planes = [
      grid.west.map(Math.abs),
      new Float32Array(3600).fill(60),
      new Float32Array(3600),
    ];
    const file = fileOf(
      'g.fits',
      planes.map((values) => ({ values })),
      grid.shape,
      grid.cards,
    );
    const from = (options: VectorMapOptions) => readVectorMap(inHdus(NAMES), options, () => file);
    expect(() => from({})).toThrow(/carrington grid .*wanted --azimuth-zero north/);
    expect(from({ azimuthZero: parseAzimuthZero('north') }).kind).toBe('camera');
  });
  it('ambiguity maps: 0 and 1, 0 and 180, bits; nothing else', () => {
    const map = (factor: number, high = 0) => {
      const flips = made.flips.map((flip) => flip * factor + high);
      return read([...PLANES, { values: flips }], {}, ['ambiguity']);
    };
    const wanted = map(1).resolved!;
    expect(map(180).resolved).toEqual(wanted);
    expect(map(1, 4).resolved).toEqual(wanted);
    expect(map(1, 4).base.warnings.join()).toMatch(/several bits: the lowest one is used/);
    expect(() => map(0.5)).toThrow(/ambiguity map holds 0\.5/);
  });
  it('beyond 180 degrees without an ambiguity map is flagged', () => {
    const full = made.azimuth.map((phi, i) => phi + 180 * made.flips[i]);
    expect(read(replaced(2, { values: full })).base.warnings.join()).toMatch(
      /more than 180 degrees/,
    );
    expect(read(PLANES).base.warnings.join()).not.toMatch(/more than 180 degrees/);
  });
});

describe('failed fits', () => {
  it('a lone pixel at the limit is left out, a saturated area and a lone maximum are not', () => {
    const lone = made.strength.slice();
    for (const at of [5 + 60 * 5, 50 + 60 * 40, 0]) lone[at] = 5000;
    const map = read(replaced(0, { values: lone }));
    expect([5 + 60 * 5, 50 + 60 * 40, 0].every((at) => Number.isNaN(map.q[at]))).toBe(true);
    expect(map.base.warnings.join()).toMatch(/3 pixels at the upper limit of strength, 5000 G/);
    const saturated = made.strength.map((value) => Math.min(value, 900));
    expect(read(replaced(0, { values: saturated })).q.some(Number.isNaN)).toBe(false);
    const once = made.strength.slice();
    once[305] = 4000;
    expect(read(replaced(0, { values: once })).q.some(Number.isNaN)).toBe(false);
  });
  it('a limit of inclination unlike its neighbours is left out', () => {
    const inclination = made.inclination.slice();
    // The pixels along the line of sight stay: their neighbours are near to it.
    const tilted = inclination.findIndex((value, i) => value > 60 && value < 120 && i > 700);
    inclination[tilted] = 180;
    const map = read(replaced(1, { values: inclination }));
    expect(map.q[tilted]).toBeNaN();
    expect(map.base.warnings.join()).toMatch(/1 pixel of inclination exactly 0 or 180/);
  });
  it('maps of the wrong kind are told from slips', () => {
    const signed = made.strength.map((value, i) => (i % 2 ? value : -value));
    expect(() => read(replaced(0, { values: signed }))).toThrow(/negative strength/);
    const elevation = made.inclination.map((value) => 90 - value);
    expect(() => read(replaced(1, { values: elevation }))).toThrow(/inclination outside 0/);
  });
});

describe.skipIf(!REAL_DATA)('real vector maps', () => {
  // Place by the data's README: N26 W12 at 06:47; solar rotation of 0.55 degrees an hour carries it to W15.
  it.each([
    ['hinode_sotsp_20110304_0647_field-inc-azi_512x512.fits', 12.3, 18],
    ['hinode_sotsp_20110304_1132_field-inc-azi_508x512.fits', 14.9, 97],
  ])('%s is read and placed', (name, lonDeg, clipped) => {
    const file = join(REAL_DATA!, 'vector', name);
    const map = readVectorMap(NAMES.map((component, plane) => ({ name: component, file, plane })));
    const { base } = map;
    const [lon, lat] = mapPixelToStonyhurst(base, (base.nx - 1) / 2, (base.ny - 1) / 2)!;
    expect(Math.abs(lon - lonDeg)).toBeLessThan(1);
    expect(Math.abs(lat - 26)).toBeLessThan(1);
    const text = base.warnings.join('\n');
    expect(text).toContain(`${clipped} pixels at the upper limit of strength, 5000 G`);
    expect(text).toMatch(/strength taken as G.*5000/);
    expect(text).toMatch(/SOT\/SP mostly count from \+x/);
    expect(base.observed).toMatch(/^2011-03-04T/);
    // Pixels of 0.29714 x 0.31998 arcsec: README. Mean side in Mm at the distance of the date.
    const arcsec = Math.sqrt(0.29714 * 0.31998);
    expect(base.pixelMm).toBeCloseTo(
      ((arcsec / 206264.806) * (base.observer.distanceM - base.observer.solarRadiusM)) / 1e6,
      4,
    );
    // Line-of-sight flux: net over unsigned is +0.32 to +0.33 by the README, here without the failed fits.
    let net = 0;
    let unsigned = 0;
    for (const value of base.values) {
      if (Number.isNaN(value)) continue;
      net += value;
      unsigned += Math.abs(value);
    }
    expect(net / unsigned).toBeGreaterThan(0.3);
    expect(net / unsigned).toBeLessThan(0.35);
    const strengths = readImage(readFitsFile(file), 0, { plane: 0 }).values;
    let worst = 0;
    base.values.forEach((value, i) => {
      const both = Math.hypot(value, (map as CameraVectorMap).transverseG[i]);
      if (!Number.isNaN(both)) worst = Math.max(worst, Math.abs(both - strengths[i]));
    });
    expect(worst).toBeLessThan(1e-3);
  });

  it('headers of separate files for strength, inclination and azimuth are understood', () => {
    const stem = '_20241004T003104_V202506050052_0450040601.header.txt';
    const open = (component: string): FitsFile => {
      const path = join(REAL_DATA!, 'headers', `solo_L2_phi-hrt-${component}${stem}`);
      const lines = readFileSync(path, 'latin1')
        .split('\n')
        .filter((line) => line.trim() !== '');
      // The pixels are not at hand: a small picture around the reference pixel stands in for them.
      const header = lines
        .filter((line) => !/^(END|CHECKSUM|DATASUM)\b/.test(line))
        .map((line) =>
          line
            .replace(/^(NAXIS[12]) .*/, '$1  = 16')
            .replace(/^(CRPIX[12]) .*/, '$1  = 8.5')
            .padEnd(80),
        )
        .join('');
      const text = `${header}${'END'.padEnd(80)}`;
      const bytes = Buffer.from(text.padEnd(2880 * Math.ceil(text.length / 2880)), 'latin1');
      const data = Buffer.alloc(2880);
      const value = { bmag: 1500, binc: 60, bazi: 30 }[component]!;
      for (let i = 0; i < 256; i++) data.writeFloatBE(value, 4 * i);
      return parseFits(new Uint8Array(Buffer.concat([bytes, data])), component);
    };
    const files = ['bmag', 'binc', 'bazi'];
    const sources = NAMES.map((name, i) => ({ name, file: files[i] }));
    const map = readVectorMap(sources, {}, open) as CameraVectorMap;
    expect(map.base.values[0]).toBeCloseTo(1500 * Math.cos(Math.PI / 3), 6);
    expect(map.transverseG[0]).toBeCloseTo(1500 * Math.sin(Math.PI / 3), 6);
    // Turned by the 8.14 degrees of the PC matrix (and CROTA) from the image's +y axis.
    const psi = (Math.atan2(map.u[0], map.q[0]) / 2) * (180 / Math.PI);
    expect(psi).toBeCloseTo(30 + 8.140668, 2);
    expect(map.base.observer.stonyhurstLongitudeDeg).toBeCloseTo(-81.632747, 6);
    expect(map.base.warnings.join()).not.toMatch(/no BUNIT/);
    const mixed = [{ name: 'strength', file: 'binc' } as const, ...sources.slice(1)];
    expect(() => readVectorMap(mixed, {}, open)).toThrow(/field inclination \(BTYPE = 'BINC'\)/);
  });
});
