import { describe, expect, it } from 'vitest';
import type { Quantity } from '../../src/figures/quantity.js';
import { type Grid2, makeGrid } from '../../src/grid/grid.js';
import { colourIndex, divergingScale, type ScaleName } from '../../src/render/colour-scale.js';
import { composePicture } from '../../src/render/compose.js';
import type { Tick } from '../../src/render/horizontal-ticks.js';
import { DEAD_GREY } from '../../src/render/map-layer.js';
import {
  type RegionPicture,
  renderRegionPicture,
  type VectorMaps,
} from '../../src/render/region-picture.js';
import { normalNoise } from '../support/random.js';
import { blockPlaces, commonColour, type Decoded, draw } from './decoded.js';
import { barePicture } from './sample-patch.js';
import { bareVectorPicture, TWISTED_SPOTS } from './sample-vector.js';

type Blocks = readonly (readonly number[])[];

const SIDE = 20;
const GREY = [DEAD_GREY, DEAD_GREY, DEAD_GREY];

/** Maps of blocks of one value, 20 pixels each, row 0 south; what is not given is zero. */
function blockVector(blocks: {
  readonly radial: Blocks;
  readonly west?: Blocks;
  readonly north?: Blocks;
  readonly current?: Blocks;
  readonly alpha?: Blocks;
}): RegionPicture & { readonly vector: VectorMaps } {
  const { radial } = blocks;
  const [ny, nx] = [SIDE * radial.length, SIDE * radial[0].length];
  const pixelMm = 100 / nx;
  const grid = <U extends 'G' | 'mA/m^2' | '1/Mm'>(unit: U, rows?: Blocks): Grid2<U> => {
    const value = (i: number) =>
      rows?.[Math.floor(Math.floor(i / nx) / SIDE)][Math.floor((i % nx) / SIDE)] ?? 0;
    const data = Float64Array.from({ length: nx * ny }, (_, i) => value(i));
    return makeGrid(data, nx, ny, unit, pixelMm);
  };
  return {
    ...barePicture({ nx, ny, spots: [], widthMm: 100 }),
    radialField: grid('G', radial),
    vector: {
      horizontal: { x: grid('G', blocks.west), y: grid('G', blocks.north) },
      horizontalNoiseG: 50,
      currentDensity: grid('mA/m^2', blocks.current),
      currentNoise: grid(
        'mA/m^2',
        radial.map((row) => row.map(() => 4)),
      ),
      alpha: grid('1/Mm', blocks.alpha),
      alphaLeastG: 100,
    },
  };
}

function scaleColour(name: ScaleName, value: number, limit: number): readonly number[] {
  const index = colourIndex(value, limit);
  return [...divergingScale(name).subarray(3 * index, 3 * index + 3)];
}

describe('the panels', () => {
  const radial = [
    [500, -500, 500],
    [60, Number.NaN, -800],
  ];
  const current = [
    [40, -40, 11],
    [20, 0, -11],
  ];
  const alpha = [
    [0.2, -0.2, 0.05],
    [0.1, 0.1, -0.1],
  ];
  const picture = blockVector({ radial, current, alpha });

  it('show known currents in the colours of their scale, north up and west right', async () => {
    const { image, panels, layout } = await draw(picture);
    const [{ limit }] = panels;
    expect(limit).toBe(40);
    const places = blockPlaces(layout.panels[0], 3, 2);
    for (const [column, row] of [
      [0, 0],
      [1, 0],
      [0, 1],
    ]) {
      const wanted = scaleColour('current', current[row][column], limit);
      expect(commonColour(image, places(column, row)), `${column} ${row}`).toEqual(wanted);
    }
    const [up, down] = [0, 1].map((column) => commonColour(image, places(column, 0)));
    // Purple has more red and blue than green, green the other way round.
    expect(up[0] + up[2] - 2 * up[1]).toBeGreaterThan(40);
    expect(down[0] + down[2] - 2 * down[1]).toBeLessThan(-40);
  });

  it('show known alphas in the colours of theirs', async () => {
    const { image, panels, layout } = await draw(picture);
    const { limit } = panels[1];
    expect(limit).toBe(0.2);
    const places = blockPlaces(layout.panels[1], 3, 2);
    for (const [column, row] of [
      [0, 0],
      [1, 0],
      [2, 0],
      [2, 1],
    ]) {
      const wanted = scaleColour('alpha', alpha[row][column], limit);
      expect(commonColour(image, places(column, row)), `${column} ${row}`).toEqual(wanted);
    }
  });

  it('show a current below three deviations and an alpha of a weak field as one grey', async () => {
    const { image, layout, drawing } = await draw(picture);
    const [currents, alphas] = layout.panels.map((panel) => blockPlaces(panel, 3, 2));
    // 11 of 3 x 4 mA/m^2 either way; 60 of 100 G, where the current of 20 mA/m^2 still shows.
    expect(commonColour(image, currents(2, 0))).toEqual(GREY);
    expect(commonColour(image, currents(2, 1))).toEqual(GREY);
    expect(commonColour(image, alphas(0, 1))).toEqual(GREY);
    expect(commonColour(image, currents(0, 1))).not.toEqual(GREY);
    const written = drawing.texts.map(({ text }) => text).join(' ');
    expect(written).toContain('Below noise');
    expect(written).toContain('mostly 12 mA/m²');
    expect(written).toContain('100 G');
  });

  it('hatch what is missing in every panel, unlike a dead zone', async () => {
    const { image, layout } = await draw(picture);
    for (const panel of [layout, ...layout.panels]) {
      const places = blockPlaces(panel, 3, 2)(1, 1);
      for (const [x, y] of places) {
        const [red, green, blue] = image.at(x, y);
        expect([red, green, blue]).not.toEqual(GREY);
        expect(Math.max(red, green, blue) - Math.min(red, green, blue)).toBeLessThan(16);
      }
    }
  });

  it('name three quantities with three units and a scale each', () => {
    const written = composePicture(picture).drawing.texts.map(({ text }) => text);
    for (const title of ['Radial field (G)', 'Vertical current density (mA/m²)', 'Alpha (Mm⁻¹)'])
      expect(written.filter((text) => text === title)).toHaveLength(1);
    const all = written.join(' ');
    expect(all).toContain('±40 mA/m²');
    expect(all).toContain('±0.2 Mm⁻¹');
    for (const tick of ['−40', '+20', '−0.1', '+0.2']) expect(written).toContain(tick);
  });

  it('draw the inversion line thin on both, on the same places of the Sun', async () => {
    const x = Float64Array.from([5, 55]);
    const y = Float64Array.from([33, 33]);
    const dead = blockVector({
      radial: [
        [0, 0, 0],
        [0, 0, 0],
      ],
    });
    const line = { ...dead, inversionLines: [{ x, y, strong: [true] }] };
    const { image, layout } = await draw(line);
    for (const { map } of layout.panels) {
      const py = map.y + map.height - (33.5 * map.height) / 40;
      const px = map.x + (30.5 * map.width) / 60;
      const column = [-4, -3, -2, -1, 0, 1, 2, 3, 4].map((dy) => image.at(px, py + dy)[0]);
      expect(Math.min(...column)).toBeLessThan(120);
      // The strong part is 5 px wide and yellow on the field only.
      expect(column.filter((red) => red < 150).length).toBeLessThanOrEqual(2);
      expect(Math.max(...column)).toBeGreaterThan(210);
    }
  });

  it('are not there without a vector map, and nothing else changes', async () => {
    const { vector, ...plain } = picture;
    expect(vector.alphaLeastG).toBe(100);
    const composed = composePicture(plain);
    expect(composed.panels).toEqual([]);
    expect(composed.layout.panels).toEqual([]);
    expect(composed.content.ticks).toBeUndefined();
    const written = composed.drawing.texts.map(({ text }) => text).join(' ');
    expect(written).not.toMatch(/Horizontal field|Below noise|mA\/m²\)/);
    const bytes = await renderRegionPicture({ ...plain, vector: undefined });
    expect(Buffer.compare(bytes, await renderRegionPicture(plain))).toBe(0);
  });

  it('gives the same bytes twice', async () => {
    const first = await renderRegionPicture(picture);
    expect(Buffer.compare(await renderRegionPicture(picture), first)).toBe(0);
  });
});

/** Mean of (along, across) the stroke over its dark pixels, weighted by darkness: > 0 is near the tip. */
function inkCentre(image: Decoded, [tailX, tailY, tipX, tipY]: Tick) {
  const [cx, cy] = [(tailX + tipX) / 2, (tailY + tipY) / 2];
  const length = Math.hypot(tipX - tailX, tipY - tailY);
  const [ux, uy] = [(tipX - tailX) / length, (tipY - tailY) / length];
  let [sum, along, across, spread] = [0, 0, 0, 0];
  for (let y = Math.floor(cy - 8); y <= cy + 8; y++) {
    for (let x = Math.floor(cx - 8); x <= cx + 8; x++) {
      const ink = Math.max(0, 110 - image.at(x, y)[0]);
      const [dx, dy] = [x + 0.5 - cx, y + 0.5 - cy];
      sum += ink;
      along += ink * (dx * ux + dy * uy);
      across += ink * (dx * uy - dy * ux);
      spread += ink * ((dx * ux + dy * uy) ** 2 - (dx * uy - dy * ux) ** 2);
    }
  }
  return { along: along / sum, across: across / sum, spread: spread / sum };
}

describe('the horizontal field', () => {
  const median = (list: readonly number[]) => [...list].sort((a, b) => a - b)[list.length >> 1];

  it.each([
    ['west', 600, 0, 1, 0],
    ['north', 0, 600, 0, -1],
    ['east', -600, 0, -1, 0],
    ['south', 0, -600, 0, 1],
    ['north-west', 400, 400, Math.SQRT1_2, -Math.SQRT1_2],
  ])('that points %s has its heads there', async (_, west, north, wantedX, wantedY) => {
    const picture = blockVector({
      radial: [
        [0, 0],
        [0, 0],
      ],
      west: [
        [west, west],
        [west, west],
      ],
      north: [
        [north, north],
        [north, north],
      ],
    });
    const { image, content } = await draw(picture);
    const ticks = content.ticks?.ticks ?? [];
    expect(ticks.length).toBeGreaterThan(200);
    for (const [tailX, tailY, tipX, tipY] of ticks) {
      const length = Math.hypot(tipX - tailX, tipY - tailY);
      expect((tipX - tailX) / length).toBeCloseTo(wantedX, 6);
      expect((tipY - tailY) / length).toBeCloseTo(wantedY, 6);
    }
    // In the pixels: an elongated mark along the field, heavier at the end it points to.
    const marks = ticks.map((tick) => inkCentre(image, tick));
    expect(median(marks.map(({ along }) => along))).toBeGreaterThan(1);
    expect(Math.abs(median(marks.map(({ across }) => across)))).toBeLessThan(0.6);
    expect(median(marks.map(({ spread }) => spread))).toBeGreaterThan(8);
  });

  it('has strokes by its strength, from three deviations of noise up', () => {
    const { content, drawing } = composePicture(
      blockVector({ radial: [[0, 0, 0]], west: [[1000, 500, 140]], north: [[0, 0, 0]] }),
    );
    const { map } = composePicture(blockVector({ radial: [[0, 0, 0]] })).layout;
    const lengths = [0, 1, 2].map((block) =>
      (content.ticks?.ticks ?? [])
        .filter(([tailX, , tipX]) => {
          const share = ((tailX + tipX) / 2 - map.x) / map.width;
          return Math.abs(share - (block + 0.5) / 3) < 0.1;
        })
        .map(([tailX, , tipX]) => tipX - tailX),
    );
    expect(lengths[2]).toEqual([]);
    expect(lengths[0].length).toBeGreaterThan(5);
    for (const length of lengths[0]) expect(length).toBeCloseTo(24, 6);
    for (const length of lengths[1]) expect(length).toBeCloseTo(12, 6);
    expect(content.ticks).toMatchObject({ leastG: 150, referenceG: 500 });
    expect(content.ticks?.referencePx).toBeCloseTo(12, 6);
    const written = drawing.texts.map(({ text }) => text).join(' ');
    expect(written).toContain('Horizontal field 500 G; drawn from 150 G');
  });

  it('turns round a twisted spot as the current there says', () => {
    const spot = { peakG: 2000, x: 0.5, y: 0.5, radius: 0.2, alphaPerMm: 0.1 };
    const { content, layout } = composePicture(
      bareVectorPicture({ nx: 96, ny: 96, spots: [spot], widthMm: 100 }),
    );
    const { map } = layout;
    const [cx, cy] = [map.x + map.width / 2, map.y + map.height / 2];
    const ticks = (content.ticks?.ticks ?? []).filter(([x, y]) => {
      const distance = Math.hypot(x - cx, y - cy) / map.width;
      return distance > 0.1 && distance < 0.3;
    });
    expect(ticks.length).toBeGreaterThan(20);
    for (const [tailX, tailY, tipX, tipY] of ticks) {
      // Counter-clockwise seen from above for a current out of the surface; y runs down here.
      const [rx, ry] = [(tailX + tipX) / 2 - cx, (tailY + tipY) / 2 - cy];
      expect(rx * (tipY - tailY) - ry * (tipX - tailX)).toBeLessThan(0);
    }
  });
});

describe('means over cells of a map with many pixels', () => {
  const n = 300;
  const options = { nx: n, ny: n, spots: [], widthMm: 150, noiseG: 10, horizontalNoiseG: 60 };
  const live = (picture: RegionPicture) => {
    const { samples } = composePicture(picture).panels[0];
    return samples.filter((value) => !Number.isNaN(value)).length / samples.length;
  };

  it('leave no more of pure noise than three deviations do', () => {
    const picture = bareVectorPicture(options);
    expect(composePicture(picture).panels[0].heading).toBe('Electric current, mean over 1.0 Mm');
    // 0.27 % of a normal distribution lies beyond; central differences share noise, in means for the better.
    expect(live(picture)).toBeLessThan(0.004);
  });

  it('allow for noise that neighbours share', () => {
    const picture = bareVectorPicture(options);
    const { vector } = picture;
    if (!vector) throw new Error('a vector picture was wanted');
    // Noise in blocks of 2 x 2 pixels: means over the cells have all of it.
    const noise = normalNoise(5);
    const blocks = Float64Array.from({ length: (n / 2) ** 2 }, () => 4 * noise());
    const shared = Float64Array.from(
      { length: n * n },
      (_, i) => blocks[((i % n) >> 1) + (n / 2) * (Math.floor(i / n) >> 1)],
    );
    const grid = (data: Float64Array) => makeGrid(data, n, n, 'mA/m^2', 0.5);
    const currentNoise = grid(new Float64Array(n * n).fill(4));
    const share = live({
      ...picture,
      vector: { ...vector, currentDensity: grid(shared), currentNoise },
    });
    // Without the allowance 13 % would show: twice the deviation expected.
    expect(share).toBeLessThan(0.008);
    expect(share).toBeGreaterThan(0);
  });

  it('show a current that single pixels hide in their noise', () => {
    const spots = [{ peakG: 1500, x: 0.5, y: 0.5, radius: 0.15, alphaPerMm: 0.16 }];
    const { panels } = composePicture(bareVectorPicture({ ...options, spots }));
    const [{ samples, frame }] = panels;
    const middle: number[] = [];
    for (let y = -10; y <= 10; y++) {
      for (let x = -10; x <= 10; x++)
        middle.push(samples[frame.width * (frame.height / 2 + y) + frame.width / 2 + x]);
    }
    // 0.0796 x 0.16 x 1500 = 19 mA/m^2 on a noise of 0.0796 x 60 / 0.5 = 9.5 per pixel, 4.8 per cell at most.
    const shown = middle.filter((value) => !Number.isNaN(value));
    expect(shown.length / middle.length).toBeGreaterThan(0.7);
    const mean = shown.reduce((a, b) => a + b) / shown.length;
    expect(mean).toBeGreaterThan(17);
    expect(mean).toBeLessThan(23);
  });
});

describe('current contours on the field', () => {
  const spots = [{ peakG: 2000, x: 0.35, y: 0.6, radius: 0.15, alphaPerMm: 0.4 }];
  const options = { nx: 128, ny: 128, spots, widthMm: 90, noiseG: 10, horizontalNoiseG: 60 };

  it('come from the measured current and say so', () => {
    const other = makeGrid(new Float64Array(128 * 128).fill(9), 128, 128, 'mA/m^2', 90 / 128);
    const picture = bareVectorPicture(options, { currentDensity: other });
    const { content, layout, drawing } = composePicture(picture);
    const up = content.contours.filter(({ level }) => level > 0).flatMap(({ lines }) => lines);
    const down = content.contours.filter(({ level }) => level < 0).flatMap(({ lines }) => lines);
    expect(up.length).toBeGreaterThan(0);
    expect(down).toEqual([]);
    const xs = up.flatMap((line) => line.filter((_, i) => i % 2 === 0));
    const { map } = layout;
    const middle = ((Math.min(...xs) + Math.max(...xs)) / 2 - map.x) / map.width;
    expect(Math.abs(middle - 0.35)).toBeLessThan(0.03);
    expect(drawing.texts.map(({ text }) => text).join(' ')).toMatch(/mA\/m², measured/);
  });

  it('are not drawn around noise', () => {
    const { content, drawing } = composePicture(bareVectorPicture({ ...options, spots: [] }));
    expect(content.contours).toEqual([]);
    const written = drawing.texts.map(({ text }) => text);
    expect(written).toContain('No electric current above noise');
  });
});

describe('the table of a vector region', () => {
  const figure = (value: number): Quantity => ({
    value,
    low: 0.9 * value,
    high: 1.1 * value,
    unit: '1',
    basis: 'measured',
  });

  it('shows the figures that are there, those it does not know under their key', () => {
    const bare = bareVectorPicture({ nx: 64, ny: 64, spots: TWISTED_SPOTS });
    const quantities = {
      net_force_z: figure(-0.31),
      unsigned_current: { ...figure(2.5e13), unit: 'A' as const },
      figure_of_tomorrow: figure(7),
    };
    const region = { ...bare.region, quantities };
    const written = composePicture({ ...bare, region }).drawing.texts.map(({ text }) => text);
    for (const text of [
      'Force over magnetic pressure',
      'Net force, up',
      'Unsigned current',
      'Other figures',
      'Figure of tomorrow',
    ]) {
      expect(written).toContain(text);
    }
    expect(written).not.toContain('Net force, west');
    expect(written).not.toContain('Virial energy');
    expect(written).not.toContain('Ambiguity of the azimuth');
  });
});
