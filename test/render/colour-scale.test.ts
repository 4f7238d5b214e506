// Outside reference for OKLab, colour differences and simulated colour blindness: culori 4.0.2.
import {
  differenceCiede2000,
  differenceEuclidean,
  filterDeficiencyDeuter,
  filterDeficiencyProt,
  filterDeficiencyTrit,
  oklch,
  type Rgb,
  rgb,
  wcagContrast,
} from 'culori';
import { describe, expect, it } from 'vitest';
import {
  COLOUR_COUNT,
  colourIndex,
  divergingScale,
  oneSide,
  SCALE_HUES,
  type ScaleName,
} from '../../src/render/colour-scale.js';
import { DEAD_GREY } from '../../src/render/map-layer.js';
import { inGamut, oklchToSrgb } from '../../src/render/oklab.js';
import { BODY_PRIOR, BODY_QUIET, SMALL_QUIET, ZEBRA_INK } from '../../src/render/style.js';

const HALF = (COLOUR_COUNT - 1) / 2;
const NAMES = Object.keys(SCALE_HUES) as readonly ScaleName[];

function scaleColour(index: number, name: ScaleName): Rgb {
  const bytes = divergingScale(name);
  const [r, g, b] = bytes.subarray(3 * index, 3 * index + 3);
  return { mode: 'rgb', r: r / 255, g: g / 255, b: b / 255 };
}

describe('OKLCh to sRGB', () => {
  it.each([
    [0.9, 0.05, 40],
    [0.6, 0.12, 252],
    [0.35, 0.09, 130],
    [0.5, 0.3, 320],
    [1, 0, 0],
    [0, 0, 0],
  ])('agrees with culori at L %f C %f h %f', (lightness, chroma, hueDeg) => {
    const outside = rgb({ mode: 'oklch', l: lightness, c: chroma, h: hueDeg });
    const [r, g, b] = oklchToSrgb({ lightness, chroma, hueDeg });
    // culori carries its matrices to 16 digits, ours have ten: 2e-7 near black, less elsewhere.
    expect(r).toBeCloseTo(outside.r, 6);
    expect(g).toBeCloseTo(outside.g, 6);
    expect(b).toBeCloseTo(outside.b, 6);
  });
});

describe.each(NAMES)('diverging scale of the %s map', (name) => {
  const colour = (index: number) => scaleColour(index, name);

  it('lies in the sRGB gamut before rounding, so nothing is clipped', () => {
    const { negativeDeg, positiveDeg, chromaShare } = SCALE_HUES[name];
    for (let i = 0; i <= 200; i++) {
      for (const hueDeg of [negativeDeg, positiveDeg]) {
        expect(
          inGamut(oklchToSrgb({ ...oneSide(i / 200, chromaShare), hueDeg })),
          `${hueDeg} ${i}`,
        ).toBe(true);
      }
    }
  });

  it('is neutral and lightest in the middle', () => {
    const { c, l } = oklch(colour(HALF));
    expect(c).toBeLessThan(0.003);
    expect(l).toBeGreaterThan(0.95);
  });

  it('has the same lightness and chroma at equal distance from zero', () => {
    for (let step = 0; step <= HALF; step++) {
      const [minus, plus] = [oklch(colour(HALF - step)), oklch(colour(HALF + step))];
      // One step of an 8-bit channel is worth up to 0.003 in lightness and 0.006 in chroma.
      expect(Math.abs(minus.l - plus.l)).toBeLessThan(0.004);
      expect(Math.abs(minus.c - plus.c)).toBeLessThan(0.008);
    }
  });

  it('grows darker with strength on both sides, so lightness alone tells strength', () => {
    for (let step = 0; step + 8 <= HALF; step += 8) {
      for (const sign of [-1, 1]) {
        const here = oklch(colour(HALF + sign * step)).l;
        const further = oklch(colour(HALF + sign * (step + 8))).l;
        expect(further).toBeLessThan(here - 0.008);
      }
    }
    expect(oklch(colour(0)).l).toBeLessThan(0.36);
  });

  it('moves in equal steps of OKLab distance', () => {
    const distance = differenceEuclidean('oklab');
    const steps: number[] = [];
    for (let i = 0; i + 15 < COLOUR_COUNT; i += 15) {
      // The step across the middle turns a corner of the path.
      if (i < HALF && i + 15 > HALF) continue;
      steps.push(distance(colour(i), colour(i + 15)));
    }
    const mean = steps.reduce((a, b) => a + b) / steps.length;
    for (const step of steps) expect(Math.abs(step / mean - 1)).toBeLessThan(0.12);
  });

  it.each([
    ['protanopia', filterDeficiencyProt(1)],
    ['deuteranopia', filterDeficiencyDeuter(1)],
    ['tritanopia', filterDeficiencyTrit(1)],
  ])('keeps the signs apart with %s', (_, see) => {
    const difference = differenceCiede2000();
    for (const [share, least] of [
      [0.15, 8],
      [0.3, 15],
      [0.6, 25],
      [1, 25],
    ]) {
      const [minus, plus] = [-share, share].map((value) => see(colour(colourIndex(value, 1))));
      expect(difference(minus, plus), `at ${share}`).toBeGreaterThan(least);
    }
  });
});

it('has symmetric limits and ends for what lies beyond', () => {
  expect(colourIndex(0, 300)).toBe(HALF);
  expect(colourIndex(300, 300)).toBe(COLOUR_COUNT - 1);
  expect(colourIndex(-300, 300)).toBe(0);
  expect(colourIndex(9e9, 300)).toBe(COLOUR_COUNT - 1);
  for (const value of [12, 77, 210]) {
    expect(colourIndex(value, 300) - HALF).toBe(HALF - colourIndex(-value, 300));
  }
});

it('has scales whose strong colours are told from one another', () => {
  const difference = differenceCiede2000();
  NAMES.forEach((name, i) => {
    for (const other of NAMES.slice(i + 1)) {
      for (const share of [-0.6, 0.6]) {
        for (const otherShare of [-0.6, 0.6]) {
          const pair = [
            scaleColour(colourIndex(share, 1), name),
            scaleColour(colourIndex(otherShare, 1), other),
          ];
          expect(difference(pair[0], pair[1]), `${name} ${other}`).toBeGreaterThan(10);
        }
      }
    }
  });
});

it('keeps the grey of dead zones apart from the middle and the weak colours of every scale', () => {
  const difference = differenceCiede2000();
  const grey: Rgb = { mode: 'rgb', r: DEAD_GREY / 255, g: DEAD_GREY / 255, b: DEAD_GREY / 255 };
  for (const name of NAMES) {
    for (let index = 0; index < COLOUR_COUNT; index++) {
      expect(difference(grey, scaleColour(index, name)), `${name} ${index}`).toBeGreaterThan(4);
    }
  }
});

it('writes text with the contrast WCAG 2 asks of body text, 4.5 : 1', () => {
  for (const { ink } of [BODY_PRIOR, BODY_QUIET, SMALL_QUIET]) {
    expect(wcagContrast(ink, '#ffffff')).toBeGreaterThan(4.5);
    expect(wcagContrast(ink, ZEBRA_INK)).toBeGreaterThan(4.5);
  }
});
