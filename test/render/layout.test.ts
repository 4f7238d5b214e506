import { describe, expect, it } from 'vitest';
import type { QuantityKey } from '../../src/figures/quantity.js';
import { composePicture } from '../../src/render/compose.js';
import type { Rect } from '../../src/render/drawing.js';
import type { Layout } from '../../src/render/layout.js';
import type { RegionPicture } from '../../src/render/region-picture.js';
import { BIPOLE_SPOTS, barePicture, filledPicture } from './sample-patch.js';
import { samplePicture } from './sample-picture.js';
import { type SampleVectorOptions, sampleVectorMaps, TWISTED_SPOTS } from './sample-vector.js';

const LONG_FLAG = `${'a flag that says much more than anyone wants to read, '.repeat(30)}${'x'.repeat(900)}`;

function withFigures(picture: RegionPicture, value: number | null): RegionPicture {
  const { quantities } = picture.region;
  const changed = Object.fromEntries(
    Object.entries(quantities).map(([key, quantity]) => {
      const shown = value === null ? null : value;
      return [key, { ...quantity, value: shown, low: shown, high: shown }];
    }),
  ) as Partial<Record<QuantityKey, never>>;
  return { ...picture, region: { ...picture.region, quantities: changed } };
}

const square = samplePicture({ nx: 128, ny: 128, spots: BIPOLE_SPOTS });

/** A vector picture with every figure there is. */
function vectorPicture(nx: number, ny: number, more: Partial<SampleVectorOptions> = {}) {
  const options = { nx, ny, spots: TWISTED_SPOTS, horizontalNoiseG: 40, ...more };
  const picture = filledPicture(options);
  return { ...picture, vector: sampleVectorMaps(picture, options) };
}

const LONG_TEXTS = {
  source: `${'directory_like_name_'.repeat(40)}.fits.gz`,
  observed: 'sometime before the second world war, '.repeat(20),
  toolVersion: '1.0.0-a-very-long-prerelease-tag.'.repeat(10),
};
const MANY_FLAGS = [LONG_FLAG, '', ...Array.from({ length: 60 }, (_, i) => `flag number ${i}`)];

const CASES: Readonly<Record<string, () => RegionPicture>> = {
  'a square patch': () => square,
  '32 x 32': () => samplePicture({ nx: 32, ny: 32, spots: BIPOLE_SPOTS, widthMm: 40 }),
  '5 : 1': () => samplePicture({ nx: 320, ny: 64, spots: BIPOLE_SPOTS, widthMm: 300 }),
  '1 : 5': () => samplePicture({ nx: 64, ny: 320, spots: BIPOLE_SPOTS, widthMm: 50 }),
  '2 : 1': () => barePicture({ nx: 200, ny: 100, spots: BIPOLE_SPOTS }),
  '1 : 1.9': () => barePicture({ nx: 100, ny: 190, spots: BIPOLE_SPOTS }),
  '40 : 1': () => barePicture({ nx: 400, ny: 10, spots: [] }),
  '1 : 40': () => barePicture({ nx: 10, ny: 400, spots: [] }),
  'a single pixel': () => barePicture({ nx: 1, ny: 1, spots: [] }),
  '2048 x 2048': () => barePicture({ nx: 2048, ny: 2048, spots: BIPOLE_SPOTS, widthMm: 900 }),
  'no values at all': () => barePicture({ nx: 60, ny: 60, spots: [], missing: () => true }),
  'a quarter missing': () =>
    samplePicture({ nx: 96, ny: 96, spots: BIPOLE_SPOTS, missing: (u, v) => u + v < 0.7 }),
  'no inversion line, no currents': () => ({
    ...square,
    inversionLines: [],
    currentDensity: undefined,
  }),
  'null figures': () => withFigures(square, null),
  'huge figures': () => withFigures(square, -8.888888e300),
  'tiny figures': () => withFigures(square, 7.777777e-300),
  'long names and flags': () => ({
    ...square,
    ...LONG_TEXTS,
    region: { ...square.region, id: 'MH-'.repeat(80), flags: MANY_FLAGS },
  }),
  'hostile signs in the texts': () => ({
    ...square,
    source: '<script>"&\u0000\u202e漢字😀.fits',
    region: { ...square.region, id: '</svg>', flags: ['<text>&amp;\u0007"</text>', '\ud800'] },
  }),
  'names of nothing': () => ({
    ...square,
    source: '',
    observed: undefined,
    toolVersion: '',
    region: { ...square.region, id: '', flags: [], quantities: {} },
  }),
  'close to a pole': () =>
    barePicture({ nx: 128, ny: 128, spots: BIPOLE_SPOTS, latitudeDeg: 86, widthMm: 300 }),
};

const VECTOR_CASES: Readonly<Record<string, () => RegionPicture>> = {
  'a square vector map': () => vectorPicture(128, 128),
  'vector, 32 x 32': () => vectorPicture(32, 32, { widthMm: 40 }),
  'vector, 300 x 300': () => vectorPicture(300, 300),
  'vector, 1.5 : 1': () => vectorPicture(240, 160),
  'vector, 2 : 1': () => vectorPicture(200, 100),
  'vector, 3 : 1, a corner missing': () =>
    vectorPicture(300, 100, { missing: (u, v) => u + v < 0.4 }),
  'vector, 5 : 1': () => vectorPicture(320, 64),
  'vector, 8 : 1': () => vectorPicture(400, 50),
  'vector, 40 : 1': () => vectorPicture(400, 10),
  'vector, 1 : 1.5': () => vectorPicture(100, 150),
  'vector, 1 : 2': () => vectorPicture(80, 160),
  'vector, 1 : 5': () => vectorPicture(64, 320, { widthMm: 50 }),
  'vector, 1 : 40': () => vectorPicture(10, 400),
  'vector, a single pixel': () => vectorPicture(1, 1),
  'vector, no values at all': () => vectorPicture(60, 60, { missing: () => true }),
  'vector, no figures': () => {
    const picture = vectorPicture(128, 128);
    return { ...picture, region: { ...picture.region, quantities: {} } };
  },
  ...Object.fromEntries(
    [
      [128, 128],
      [300, 100],
      [500, 50],
      [80, 240],
    ].map(([nx, ny]) => [
      `vector, ${nx} x ${ny}, long texts`,
      () => {
        const picture = vectorPicture(nx, ny);
        const region = { ...picture.region, id: 'MH-'.repeat(80), flags: MANY_FLAGS };
        return { ...picture, ...LONG_TEXTS, region };
      },
    ]),
  ),
};

function boxes(layout: Layout): Readonly<Record<string, Rect>> {
  const { width, height, tables, panels, ...single } = layout;
  const named = (list: readonly Rect[], name: string) =>
    list.map((rect, i) => [`${name} ${i}`, rect]);
  const rects = panels.flatMap((panel, i) =>
    Object.entries(panel).map(([name, rect]) => [`${name} of panel ${i}`, rect]),
  );
  return { ...single, ...Object.fromEntries([...named(tables, 'table'), ...rects]) };
}

function overlap(a: Rect, b: Rect): boolean {
  const slack = 0.5;
  return (
    a.x + slack < b.x + b.width &&
    b.x + slack < a.x + a.width &&
    a.y + slack < b.y + b.height &&
    b.y + slack < a.y + a.height
  );
}

function inside(inner: Rect, outer: Rect): boolean {
  return (
    inner.x >= outer.x - 0.5 &&
    inner.y >= outer.y - 0.5 &&
    inner.x + inner.width <= outer.x + outer.width + 0.5 &&
    inner.y + inner.height <= outer.y + outer.height + 0.5
  );
}

describe.each(Object.entries({ ...CASES, ...VECTOR_CASES }))('%s', (name, make) => {
  const { layout, drawing } = composePicture(make());
  const whole = { x: 0, y: 0, width: layout.width, height: layout.height };
  const parts = Object.entries(boxes(layout));

  it('keeps all parts inside the picture and apart', () => {
    parts.forEach(([name, part], i) => {
      expect(inside(part, whole), name).toBe(true);
      for (const [other, second] of parts.slice(i + 1)) {
        expect(overlap(part, second), `${name} and ${other}`).toBe(false);
      }
    });
  });

  it('keeps every text inside a part of the picture, 12 px or larger, and off all others', () => {
    // Faults are collected first: an assertion for each of the many pairs takes seconds.
    const faults: string[] = [];
    drawing.texts.forEach((text, i) => {
      if (text.sizePx < 12) faults.push(`"${text.text}" is ${text.sizePx} px`);
      if (!parts.some(([, part]) => inside(text, part)))
        faults.push(`"${text.text}" ${JSON.stringify(text)} is outside`);
      for (const other of drawing.texts.slice(i + 1)) {
        if (overlap(text, other)) faults.push(`"${text.text}" is on "${other.text}"`);
      }
    });
    expect(drawing.texts.length).toBeGreaterThan(20);
    expect(faults).toEqual([]);
  });

  it('has a sensible size', () => {
    expect(layout.width).toBeGreaterThan(900);
    expect(layout.width).toBeLessThan(name in VECTOR_CASES ? 1960 : 1500);
    expect(layout.height).toBeGreaterThan(600);
    expect(layout.height).toBeLessThan(name in VECTOR_CASES ? 1460 : 1400);
  });
});

it('keeps the shape of the patch', () => {
  for (const [nx, ny] of [
    [512, 512],
    [500, 100],
    [100, 500],
    [2048, 1024],
    [33, 57],
  ]) {
    const { map } = composePicture(barePicture({ nx, ny, spots: [] })).layout;
    expect(map.width / map.height / (nx / ny), `${nx} x ${ny}`).toBeCloseTo(1, 1);
    expect(Math.max(map.width, map.height)).toBeGreaterThanOrEqual(550);
  }
});

it('keeps the shape and one scale in all panels of a vector map', () => {
  for (const [nx, ny, least] of [
    [400, 400, 450],
    [300, 200, 540],
    [320, 80, 830],
    [500, 50, 1300],
    [80, 320, 800],
  ]) {
    const { layout } = composePicture(vectorPicture(nx, ny));
    expect(layout.panels).toHaveLength(2);
    for (const { map } of layout.panels) {
      expect([map.width, map.height]).toEqual([layout.map.width, layout.map.height]);
    }
    const { map } = layout;
    expect(map.width / map.height / (nx / ny), `${nx} x ${ny}`).toBeCloseTo(1, 1);
    expect(Math.max(map.width, map.height)).toBeGreaterThanOrEqual(least);
  }
});
