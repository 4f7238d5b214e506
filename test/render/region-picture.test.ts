import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'vite';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { makeGrid } from '../../src/grid/grid.js';
import { colourIndex, divergingScale } from '../../src/render/colour-scale.js';
import { composePicture } from '../../src/render/compose.js';
import { type Rect, shapesSvg, textSvg } from '../../src/render/drawing.js';
import { fieldLimit } from '../../src/render/map-layer.js';
import { type RegionPicture, renderRegionPicture } from '../../src/render/region-picture.js';
import { blockPlaces, commonColour, type Decoded, draw } from './decoded.js';
import { BIPOLE_SPOTS, barePicture, filledPicture } from './sample-patch.js';
import { samplePicture } from './sample-picture.js';

const root = fileURLToPath(new URL('../..', import.meta.url));

function scaleColour(value: number, limit: number): readonly number[] {
  const index = colourIndex(value, limit);
  return [...divergingScale().subarray(3 * index, 3 * index + 3)];
}

/** Share of the pixels of a box that are not white. */
function inked(image: Decoded, box: Rect): number {
  let count = 0;
  for (let y = box.y; y < box.y + box.height; y++) {
    for (let x = box.x; x < box.x + box.width; x++) {
      if (image.at(x, y).some((part) => part < 250)) count++;
    }
  }
  return count / (box.width * box.height);
}

/** A map of blocks of constant field, [nx, ny] blocks of 20 pixels, row 0 south. */
function blockPicture(rows: readonly (readonly number[])[], change: Partial<RegionPicture> = {}) {
  const [ny, nx] = [20 * rows.length, 20 * rows[0].length];
  const data = Float64Array.from(
    { length: nx * ny },
    (_, i) => rows[Math.floor(Math.floor(i / nx) / 20)][Math.floor((i % nx) / 20)],
  );
  const bare = barePicture({ nx, ny, spots: [], widthMm: 100 });
  return { ...bare, radialField: makeGrid(data, nx, ny, 'G', 100 / nx), ...change };
}

describe('the map', () => {
  it('shows known fields in the colours of the scale, north up and west right', async () => {
    const rows = [
      [-1500, -400, 0],
      [0, 90, 250],
      [-75, 0, 1500],
    ];
    const picture = blockPicture(rows);
    const limit = fieldLimit(picture.radialField);
    expect(limit).toBe(1500);
    const { image, layout } = await draw(picture);
    const places = blockPlaces(layout, 3, 3);
    rows.forEach((row, j) => {
      row.forEach((value, i) => {
        expect(commonColour(image, places(i, j)), `${value} G`).toEqual(scaleColour(value, limit));
      });
    });
  });

  it('puts a positive spot in the north-west at the upper right, in brown', async () => {
    const spot = { peakG: 1800, x: 0.75, y: 0.75, radius: 0.12 };
    const { image, layout } = await draw(barePicture({ nx: 96, ny: 96, spots: [spot] }));
    const { map } = layout;
    const mean = (x: number, y: number) => {
      let [red, blue] = [0, 0];
      for (let dy = -12; dy <= 12; dy += 3) {
        for (let dx = -12; dx <= 12; dx += 3) {
          const [r, , b] = image.at(map.x + x * map.width + dx, map.y + y * map.height + dy);
          red += r / 81;
          blue += b / 81;
        }
      }
      return { red, blue };
    };
    const spotColour = mean(0.75, 0.25);
    expect(spotColour.red - spotColour.blue).toBeGreaterThan(50);
    for (const [x, y] of [
      [0.25, 0.25],
      [0.25, 0.75],
      [0.75, 0.75],
    ]) {
      const { red, blue } = mean(x, y);
      expect(Math.abs(red - blue)).toBeLessThan(12);
      expect(red).toBeGreaterThan(220);
    }
  });

  it('shows opposite fields equally dark and opposite in hue', async () => {
    const { image, layout } = await draw(blockPicture([[-800, 800]]));
    const places = blockPlaces(layout, 2, 1);
    const [minus, plus] = [0, 1].map((column) => commonColour(image, places(column, 0)));
    const luma = ([r, g, b]: readonly number[]) => 0.2126 * r + 0.7152 * g + 0.0722 * b;
    expect(Math.abs(luma(minus) - luma(plus))).toBeLessThan(12);
    expect(minus[2]).toBeGreaterThan(minus[0] + 30);
    expect(plus[0]).toBeGreaterThan(plus[2] + 30);
  });

  it('marks the signs without colour: a plus and a minus at the strongest poles', () => {
    const { content, layout } = composePicture(
      samplePicture({ nx: 128, ny: 128, spots: BIPOLE_SPOTS }),
    );
    const { map } = layout;
    const share = (sign: number) =>
      content.poles
        .filter((pole) => pole.sign === sign)
        .map(({ px, py }) => [(px - map.x) / map.width, (map.y + map.height - py) / map.height]);
    // The strongest spots of the sample lie at (0.62, 0.55) and (0.42, 0.50) of the patch.
    const [plus] = share(1);
    const [minus] = share(-1);
    expect(Math.hypot(plus[0] - 0.62, plus[1] - 0.55)).toBeLessThan(0.03);
    expect(Math.hypot(minus[0] - 0.42, minus[1] - 0.5)).toBeLessThan(0.03);
  });

  it('hatches missing pixels in grey', async () => {
    const picture = blockPicture([[Number.NaN, 500]]);
    const { image, layout, content } = await draw(picture);
    expect(content.hasMissing).toBe(true);
    const greys = new Map<string, number>();
    for (let i = 0; i < 1600; i++) {
      const colour = image.at(
        layout.map.x + 20 + (i % 40),
        layout.map.y + 25 + (i - (i % 40)) / 40,
      );
      greys.set(colour.join(), (greys.get(colour.join()) ?? 0) + 1);
    }
    // Stripes of 2 px in 8, but for a grid line that may cross.
    expect((greys.get('140,140,140') ?? 0) / 1600).toBeCloseTo(0.25, 1);
    expect((greys.get('208,208,208') ?? 0) / 1600).toBeCloseTo(0.75, 1);
  });

  it('draws an inversion line where it lies, the strong part with a bright core', async () => {
    const x = Float64Array.from([10, 20, 30]);
    const y = Float64Array.from([12, 12, 12]);
    const picture = blockPicture(
      [
        [0, 0],
        [0, 0],
      ],
      { inversionLines: [{ x, y, strong: [false, true] }] },
    );
    const { image, layout } = await draw(picture);
    const { map } = layout;
    const place = (px: number) =>
      image.at(
        map.x + ((px + 0.5) * map.width) / 40,
        map.y + map.height - (12.5 * map.height) / 40,
      );
    expect(Math.max(...place(14))).toBeLessThan(150);
    const [red, green, blue] = place(26);
    expect(Math.min(red, green)).toBeGreaterThan(180);
    expect(blue).toBeLessThan(150);
    expect(Math.min(...place(35))).toBeGreaterThan(200);
  });

  it('contours upward current solid and downward dashed, at round levels', () => {
    const picture = samplePicture({ nx: 128, ny: 128, spots: BIPOLE_SPOTS });
    const data = Float64Array.from({ length: 128 * 128 }, (_, i) => {
      const [x, y] = [i % 128, Math.floor(i / 128)];
      const hill = (cx: number) => Math.exp(-(((x - cx) / 15) ** 2) - ((y - 64) / 15) ** 2);
      return 40 * (hill(36) - hill(92));
    });
    const currentDensity = makeGrid(data, 128, 128, 'mA/m^2', 1);
    const { content, layout, drawing } = composePicture({ ...picture, currentDensity });
    expect(content.current?.levels).toEqual([10, 30]);
    const middle = layout.map.x + layout.map.width / 2;
    for (const { level, lines } of content.contours) {
      expect(lines.length).toBe(1);
      const xs = lines[0].filter((_, i) => i % 2 === 0);
      const left = Math.max(...xs) < middle;
      expect(left).toBe(level > 0);
      // Half width of the hill at the level: 15 sqrt(ln(40 / level)) pixels (exact).
      const wanted = 15 * Math.sqrt(Math.log(40 / Math.abs(level)));
      const half = ((Math.max(...xs) - Math.min(...xs)) / 2) * (128 / layout.map.width);
      expect(Math.abs(half / wanted - 1)).toBeLessThan(0.06);
    }
    const dashed = drawing.shapes.filter((shape) => shape.includes('stroke-dasharray'));
    expect(dashed.length).toBeGreaterThan(0);
    const written = drawing.texts.map(({ text }) => text).join(' | ');
    expect(written).toContain('+10, +30 mA/m²');
    expect(written).toContain('−10, −30 mA/m²');
  });
});

describe('what is written', () => {
  const picture = samplePicture({ nx: 96, ny: 96, spots: BIPOLE_SPOTS });
  const written = (change: Partial<RegionPicture> = {}) =>
    composePicture({ ...picture, ...change }).drawing.texts.map(({ text }) => text);

  it('names source, time, version, place, limits with unit and every figure', () => {
    const texts = written();
    const all = texts.join(' | ');
    expect(texts.filter((text) => text.includes('marrow-hill-20310504-120000.fits'))).toHaveLength(
      2,
    );
    for (const part of [
      '2031-05-04 12:00:00 UTC',
      'spotjoule 0.1.0',
      'N17.2° E23.4°',
      'MH-1',
      'Radial field (G)',
      '+2000',
      '−2000',
      'Potential energy',
      'Lundquist number',
      '16–84 % interval',
      'extrapolated',
    ]) {
      expect(all, part).toContain(part);
    }
    const flag = picture.region.flags[0].split(' ').slice(0, 4).join(' ');
    expect(all).toContain(flag);
  });

  it('marks figures on a prior or an assumption by tilde, word and another ink', () => {
    const { drawing } = composePicture(picture);
    const row = (name: string) => {
      const label = drawing.texts.find(({ text }) => text === name);
      return drawing.texts.filter(({ y }) => Math.abs(y - (label?.y ?? -9)) < 1);
    };
    const measured = row('Positive flux').map(({ text }) => text);
    expect(measured).toContain('measured');
    expect(measured.some((text) => text.startsWith('~'))).toBe(false);
    const prior = row('Free energy').map(({ text }) => text);
    expect(prior).toContain('prior');
    expect(prior.some((text) => text.startsWith('~ '))).toBe(true);
    expect(drawing.inkPaths.size).toBeGreaterThanOrEqual(3);
    expect(written().join(' ')).toContain('rests on a prior or an assumption');
  });

  it('says what is not there', () => {
    const all = written({ currentDensity: undefined, inversionLines: [], observed: undefined });
    expect(all).toContain('No current map');
    expect(all).toContain('No polarity inversion line found');
    expect(all[all.length - 2]).toContain('time not stated');
    const bare = { ...picture.region, quantities: {} };
    expect(written({ region: bare }).filter((text) => text === 'not available')).toHaveLength(24);
  });

  it('uses no text element, whatever the file is called', () => {
    const { drawing } = composePicture({ ...picture, source: '<text>&"</svg>' });
    for (const svg of [shapesSvg(drawing, 900, 900), textSvg(drawing, 900, 900)]) {
      expect(svg).not.toMatch(/<text|<image|href|font/);
      expect(svg.match(/<\/?svg/g)).toHaveLength(2);
    }
  });
});

describe('the whole picture', () => {
  let folder: string;
  let bundle: string;
  const inProcess = filledPicture({ nx: 96, ny: 96, spots: BIPOLE_SPOTS });

  beforeAll(async () => {
    // Inside node_modules, so that the bundle finds the packages it leaves out.
    folder = mkdtempSync(join(root, 'node_modules', '.render-test-'));
    await build({
      root,
      configFile: false,
      logLevel: 'error',
      build: {
        ssr: join(root, 'test/render/render-child.ts'),
        outDir: folder,
        target: 'node20',
        rollupOptions: { output: { entryFileNames: 'child.mjs' } },
      },
    });
    bundle = join(folder, 'child.mjs');
  });

  afterAll(() => rmSync(folder, { recursive: true, force: true }));

  function render(name: string, env: Readonly<Record<string, string>>): Buffer {
    const file = join(folder, name);
    execFileSync(process.execPath, [bundle, file], { env: { ...process.env, ...env } });
    return readFileSync(file);
  }

  it('has ink in every part', async () => {
    const { image, layout } = await draw(inProcess);
    expect([image.width, image.height]).toEqual([layout.width, layout.height]);
    for (const part of ['title', 'colourBar', 'legend', 'note', 'flags', 'foot'] as const) {
      expect(inked(image, layout[part]), part).toBeGreaterThan(0.01);
    }
    expect(inked(image, layout.tables[0])).toBeGreaterThan(0.1);
    expect(inked(image, layout.map)).toBeGreaterThan(0.9);
    const margins = [
      { x: 0, y: 0, width: layout.width, height: 8 },
      { x: 0, y: layout.height - 8, width: layout.width, height: 8 },
      { x: 0, y: 0, width: 16, height: layout.height },
      { x: layout.width - 16, y: 0, width: 16, height: layout.height },
    ];
    for (const margin of margins) expect(inked(image, margin)).toBe(0);
  });

  it('gives the same bytes twice, in one process and in another', async () => {
    const first = await renderRegionPicture(inProcess);
    expect(Buffer.compare(await renderRegionPicture(inProcess), Buffer.from(first))).toBe(0);
    expect(Buffer.compare(render('plain.png', {}), Buffer.from(first))).toBe(0);
  });

  it('needs no font of the system', () => {
    const plain = render('with-fonts.png', {});
    const bare = render('no-fonts.png', {
      FONTCONFIG_FILE: '/dev/null',
      FONTCONFIG_PATH: folder,
      XDG_DATA_HOME: folder,
      HOME: folder,
    });
    expect(Buffer.compare(plain, bare)).toBe(0);
  });
});
