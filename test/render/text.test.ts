import { describe, expect, it } from 'vitest';
import { styledWidth } from '../../src/render/drawing.js';
import { textPath, textWidth } from '../../src/render/font.js';
import { BODY, TITLE } from '../../src/render/style.js';
import { oneLine, shortenMiddle, wrapText } from '../../src/render/text-fit.js';

/** Every sign the picture writes beyond ASCII. */
const SIGNS = '×−°αμ±²³⁰¹⁴⁵⁶⁷⁸⁹⁻…·•—–~';

describe('text outlines', () => {
  it.each(['regular', 'bold'] as const)('has a glyph of its own for every sign, %s', (weight) => {
    const missing = textPath('\uffff', 0, 0, 13, weight, false);
    expect(missing).not.toBe('');
    const seen = new Set([missing]);
    for (const sign of SIGNS) {
      const path = textPath(sign, 0, 0, 13, weight, false);
      expect(path, sign).not.toBe('');
      expect(seen.has(path), sign).toBe(false);
      seen.add(path);
    }
  });

  it('measures as the font says: DejaVu Sans Condensed, advances read with fontTools', () => {
    // hmtx of DejaVuSansCondensed.ttf 2.37: A 1260, i 512, W 1822, space 585, of 2048 units per em.
    expect(textWidth('A', 2048, 'regular')).toBe(1260);
    expect(textWidth('i', 2048, 'regular')).toBe(512);
    expect(textWidth('W', 2048, 'regular')).toBe(1822);
    expect(textWidth('AiW ', 2048, 'regular')).toBe(1260 + 512 + 1822 + 585);
  });

  it('draws nothing for control characters and does not fail on any code point', () => {
    expect(textPath('\u0000\u0007', 0, 0, 13, 'regular', false)).toBe('');
    expect(() => textPath('漢\u{1f31e}\ud800', 0, 0, 13, 'regular', false)).not.toThrow();
  });
});

describe('shortenMiddle', () => {
  it('keeps both ends and fits', () => {
    const name = `start_${'x'.repeat(300)}_end.fits`;
    const short = shortenMiddle(name, 300, TITLE);
    expect(styledWidth(short, TITLE)).toBeLessThanOrEqual(300);
    expect(styledWidth(short, TITLE)).toBeGreaterThan(270);
    expect(short).toMatch(/^start_x+…x+_end\.fits$/);
  });

  it('leaves a name that fits alone, and makes one line of what is not', () => {
    expect(shortenMiddle('a.fits', 300, TITLE)).toBe('a.fits');
    expect(shortenMiddle('a\n\tb', 300, TITLE)).toBe('a b');
    expect(oneLine('\u0000a\u007f')).toBe('a');
  });

  it('is quick on an absurd name', () => {
    const start = performance.now();
    shortenMiddle('z'.repeat(1_000_000), 500, TITLE);
    expect(performance.now() - start).toBeLessThan(500);
  });
});

describe('wrapText', () => {
  it('keeps all words, in lines that fit', () => {
    const text = 'the quick brown fox jumps over the lazy dog '.repeat(6).trim();
    const lines = wrapText(text, 200, BODY);
    expect(lines.join(' ')).toBe(text);
    for (const line of lines) expect(styledWidth(line, BODY)).toBeLessThanOrEqual(200);
  });

  it('breaks a word longer than a line', () => {
    const lines = wrapText(`a ${'w'.repeat(100)} b`, 150, BODY);
    expect(lines.join('').replaceAll(' ', '')).toBe(`a${'w'.repeat(100)}b`);
    for (const line of lines) expect(styledWidth(line, BODY)).toBeLessThanOrEqual(150);
  });

  it('stops at the number of lines asked for, with an ellipsis', () => {
    const lines = wrapText('word '.repeat(500), 120, BODY, 3);
    expect(lines).toHaveLength(3);
    expect(lines[2]).toMatch(/…$/);
    expect(styledWidth(lines[2], BODY)).toBeLessThanOrEqual(120);
  });

  it('gives nothing for blanks', () => {
    expect(wrapText('  \n ', 100, BODY)).toEqual([]);
  });
});
