import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { type Font, type PathCommand, parse } from 'opentype.js/dist/opentype.mjs';

export type FontWeight = 'regular' | 'bold';

const FILES: Readonly<Record<FontWeight, string>> = {
  regular: 'dejavu-fonts-ttf/ttf/DejaVuSansCondensed.ttf',
  bold: 'dejavu-fonts-ttf/ttf/DejaVuSansCondensed-Bold.ttf',
};

/** Slope of the slanted style, the tangent of about 11 degrees. */
const SLANT = 0.2;

interface Outline {
  /** Advance in units of the font size. */
  readonly advance: number;
  readonly commands: readonly PathCommand[];
}

const fonts = new Map<FontWeight, Font>();
const outlines = new Map<string, Outline>();
const paths = new Map<string, string>();

/** Width of `text` in pixels at `sizePx`. */
export function textWidth(text: string, sizePx: number, weight: FontWeight): number {
  let sum = 0;
  for (const character of text) sum += outline(character, weight).advance;
  return sum * sizePx;
}

/**
 * SVG path data of `text` with its baseline starting at (x, y), in pixels; `slanted` shears it.
 * Characters the font does not have show its "missing" box; control characters show nothing.
 */
export function textPath(
  text: string,
  x: number,
  y: number,
  sizePx: number,
  weight: FontWeight,
  slanted: boolean,
): string {
  let data = '';
  let pen = x;
  for (const character of text) {
    const glyph = glyphPath(character, sizePx, weight, slanted);
    if (glyph !== '') data += `M${hundredth(pen)} ${hundredth(y)}${glyph}`;
    pen += outline(character, weight).advance * sizePx;
  }
  return data;
}

function outline(character: string, weight: FontWeight): Outline {
  const key = weight + character;
  let found = outlines.get(key);
  if (!found) {
    const font = loadFont(weight);
    const control = character.codePointAt(0)! < 32;
    const glyph = font.charToGlyph(control ? ' ' : character);
    found = {
      advance: (glyph.advanceWidth ?? 0) / font.unitsPerEm,
      commands: glyph.path.commands,
    };
    outlines.set(key, found);
  }
  return found;
}

function loadFont(weight: FontWeight): Font {
  let font = fonts.get(weight);
  if (!font) {
    const bytes = readFileSync(createRequire(import.meta.url).resolve(FILES[weight]));
    // A file this large has a buffer of its own; copying it would cost a millisecond.
    const whole = bytes.byteLength === bytes.buffer.byteLength;
    const buffer = whole ? bytes.buffer : Uint8Array.from(bytes).buffer;
    // lowMemory skips the tables we do not use and parses glyphs on demand: 25 ms instead of 75.
    font = parse(buffer as ArrayBuffer, { lowMemory: true });
    fonts.set(weight, font);
  }
  return font;
}

/** Glyph outline in relative commands from its own origin, so one string serves every place. */
function glyphPath(
  character: string,
  sizePx: number,
  weight: FontWeight,
  slanted: boolean,
): string {
  const key = `${weight}${slanted ? '/' : '|'}${sizePx}${character}`;
  let data = paths.get(key);
  if (data === undefined) {
    const scale = sizePx / loadFont(weight).unitsPerEm;
    data = relativePath(outline(character, weight).commands, scale, slanted ? SLANT : 0);
    paths.set(key, data);
  }
  return data;
}

function relativePath(commands: readonly PathCommand[], scale: number, slant: number): string {
  // Steps are differences of rounded places, so rounding does not add up along the outline.
  let [atX, atY, startX, startY] = [0, 0, 0, 0];
  const px = (x: number, y: number) => Math.round((x + slant * y) * scale * 100);
  const py = (y: number) => Math.round(-y * scale * 100);
  const step = (x: number, y: number) => `${(px(x, y) - atX) / 100} ${(py(y) - atY) / 100}`;
  let data = '';
  for (const command of commands) {
    if (command.type === 'Z') {
      data += 'z';
      [atX, atY] = [startX, startY];
      continue;
    }
    if (command.type === 'Q') data += `q${step(command.x1, command.y1)} `;
    else if (command.type === 'C')
      data += `c${step(command.x1, command.y1)} ${step(command.x2, command.y2)} `;
    else data += command.type.toLowerCase();
    data += step(command.x, command.y);
    [atX, atY] = [px(command.x, command.y), py(command.y)];
    if (command.type === 'M') [startX, startY] = [atX, atY];
  }
  return data;
}

function hundredth(value: number): number {
  return Math.round(value * 100) / 100;
}
