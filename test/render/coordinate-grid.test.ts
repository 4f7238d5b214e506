import { describe, expect, it } from 'vitest';
import { SOLAR_RADIUS_M } from '../../src/constants.js';
import {
  drawGridLabels,
  drawGridLines,
  gridStepDeg,
  latitudeText,
  longitudeText,
} from '../../src/render/coordinate-grid.js';
import { newDrawing } from '../../src/render/drawing.js';
import { samplePatch } from './sample-patch.js';

const RADIUS_MM = SOLAR_RADIUS_M / 1e6;

/** Patch of 1 pixel per Mm about (lonDeg, latDeg), shown at 1 px per pixel from (100, 50). */
function scene(nx: number, ny: number, lonDeg: number, latDeg: number) {
  const patch = samplePatch({
    nx,
    ny,
    spots: [],
    widthMm: nx,
    longitudeDeg: lonDeg,
    latitudeDeg: latDeg,
  });
  const frame = { x: 100, y: 50, width: nx, height: ny, nx, ny };
  const drawing = newDrawing();
  drawGridLabels(drawing, patch, frame);
  const centre = (text: string) => {
    const found = drawing.texts.find((each) => each.text === text);
    if (!found) throw new Error(`no label ${text}: ${drawing.texts.map((each) => each.text)}`);
    return { x: found.x + found.width / 2, y: found.y + 0.78 * found.sizePx - 4 };
  };
  return { patch, frame, drawing, centre };
}

describe('coordinate labels', () => {
  // Closed form: about the disk centre the equal-area frame has x = R lon and y = R sin(lat).
  it('stand where the equal-area frame about the disk centre puts them', () => {
    const { centre, patch, frame } = scene(640, 600, 0, 0);
    const step = gridStepDeg(patch, frame);
    expect(step).toBe(5);
    const degrees = Math.PI / 180;
    expect(centre('W10°').x).toBeCloseTo(100 + 320 + RADIUS_MM * 10 * degrees, 0);
    expect(centre('E20°').x).toBeCloseTo(100 + 320 - RADIUS_MM * 20 * degrees, 0);
    expect(centre('N20°').y).toBeCloseTo(50 + 300 - RADIUS_MM * Math.sin(20 * degrees), 0);
    expect(centre('S10°').y).toBeCloseTo(50 + 300 + RADIUS_MM * Math.sin(10 * degrees), 0);
  });

  it('grow to the west and to the north', () => {
    const { drawing } = scene(300, 300, -30, 20);
    const longitudes = drawing.texts.filter(({ text }) => /^[EW]/.test(text));
    const latitudes = drawing.texts.filter(({ text }) => /^[NS]/.test(text));
    expect(longitudes.length).toBeGreaterThanOrEqual(3);
    expect(latitudes.length).toBeGreaterThanOrEqual(3);
    const value = (text: string) => Number(text.slice(1, -1));
    for (let i = 1; i < longitudes.length; i++) {
      expect(longitudes[i].x).toBeGreaterThan(longitudes[i - 1].x);
      expect(value(longitudes[i].text)).toBeLessThan(value(longitudes[i - 1].text));
      expect(longitudes[i].text[0]).toBe('E');
    }
    for (let i = 1; i < latitudes.length; i++) {
      expect(latitudes[i].y).toBeLessThan(latitudes[i - 1].y);
      expect(value(latitudes[i].text)).toBeGreaterThan(value(latitudes[i - 1].text));
    }
  });

  it('count on across the far side and write longitudes within 180 degrees', () => {
    const { drawing } = scene(600, 300, 178, 5);
    const longitudes = drawing.texts.map(({ text }) => text).filter((text) => /^[EW]\d/.test(text));
    expect(longitudes).toContain('W170°');
    expect(longitudes).toContain('E170°');
  });

  it('bound their number around a pole', () => {
    const { patch, frame } = scene(600, 600, 0, 85);
    const drawing = newDrawing();
    drawGridLines(drawing, patch, frame);
    expect(drawing.shapes.length).toBeLessThanOrEqual(80);
    expect(drawing.shapes.join('')).not.toContain('NaN');
  });

  it('name the directions', () => {
    expect(longitudeText(-5)).toBe('E5°');
    expect(longitudeText(0)).toBe('0°');
    expect(latitudeText(-0.5)).toBe('S0.5°');
    expect(latitudeText(12, 1)).toBe('N12.0°');
    expect(longitudeText(-0.01, 1)).toBe('E0.0°');
  });
});
