import { type FontWeight, textPath, textWidth } from './font.js';

/** A rectangle in picture pixels, y down from the top. */
export interface Rect {
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export interface TextStyle {
  readonly sizePx: number;
  readonly weight: FontWeight;
  readonly ink: string;
  readonly slanted?: boolean;
}

export type Anchor = 'start' | 'middle' | 'end';

/** A piece of text with the box it takes, for checks of overlap and clipping. */
export interface PlacedText extends Rect {
  readonly text: string;
  readonly sizePx: number;
}

/** Collects the vector part of a picture: shapes in order, then all text on top. */
export interface Drawing {
  readonly shapes: string[];
  readonly texts: PlacedText[];
  /** Path data of the text by ink, so that each ink is one path element. */
  readonly inkPaths: Map<string, string[]>;
}

export function newDrawing(): Drawing {
  return { shapes: [], texts: [], inkPaths: new Map() };
}

/** Width of `text` in its style, in pixels. */
export function styledWidth(text: string, style: TextStyle): number {
  return textWidth(text, style.sizePx, style.weight);
}

/** Draws one line of text with its baseline at y; returns its width. */
export function drawText(
  drawing: Drawing,
  text: string,
  x: number,
  y: number,
  style: TextStyle,
  anchor: Anchor = 'start',
): number {
  const width = styledWidth(text, style);
  if (text === '') return 0;
  const start = anchor === 'start' ? x : anchor === 'middle' ? x - width / 2 : x - width;
  const { sizePx, weight, ink, slanted = false } = style;
  const list = drawing.inkPaths.get(ink) ?? [];
  list.push(textPath(text, start, Math.round(y), sizePx, weight, slanted));
  drawing.inkPaths.set(ink, list);
  const rise = 0.78 * sizePx;
  drawing.texts.push({ text, sizePx, x: start, y: y - rise, width, height: rise + 0.22 * sizePx });
  return width;
}

/** Adds an SVG element; attribute values are ours, never text from a file. */
export function drawShape(
  drawing: Drawing,
  element: string,
  attributes: Readonly<Record<string, string | number>>,
): void {
  let written = '';
  for (const [name, value] of Object.entries(attributes)) {
    written += ` ${name}="${value}"`;
  }
  drawing.shapes.push(`<${element}${written}/>`);
}

/** Draws joined lines, each given as x, y pairs, as one path. */
export function drawLines(
  drawing: Drawing,
  lines: readonly (readonly number[])[],
  ink: string,
  widthPx: number,
  extra: Readonly<Record<string, string | number>> = {},
): void {
  if (lines.length === 0) return;
  const data = lines.map(lineData).join('');
  const stroke = { fill: 'none', stroke: ink, 'stroke-width': widthPx };
  drawShape(drawing, 'path', { d: data, ...stroke, ...extra });
}

/** Draws one straight or joined line. */
export function drawLine(
  drawing: Drawing,
  points: readonly number[],
  ink: string,
  widthPx: number,
  extra: Readonly<Record<string, string | number>> = {},
): void {
  drawLines(drawing, [points], ink, widthPx, extra);
}

/** Shapes drawn by `draw` show inside the rectangle only. */
export function drawClipped(drawing: Drawing, clip: Rect, draw: () => void): void {
  const { x, y, width, height } = clip;
  const id = `map-${x}-${y}`;
  drawing.shapes.push(
    `<clipPath id="${id}"><rect x="${x}" y="${y}" width="${width}" height="${height}"/></clipPath>`,
    `<g clip-path="url(#${id})">`,
  );
  draw();
  drawing.shapes.push('</g>');
}

function lineData(points: readonly number[]): string {
  let data = `M${shortNumber(points[0])} ${shortNumber(points[1])}`;
  for (let i = 2; i < points.length; i += 2) {
    data += `L${shortNumber(points[i])} ${shortNumber(points[i + 1])}`;
  }
  return data;
}

/** The shapes as an SVG document. */
export function shapesSvg(drawing: Drawing, width: number, height: number): string {
  return svgDocument(drawing.shapes, width, height);
}

/** The text as an SVG document of paths, one for each ink; there is no text element. */
export function textSvg(drawing: Drawing, width: number, height: number): string {
  const paths = [...drawing.inkPaths].map(
    ([ink, data]) => `<path fill="${ink}" d="${data.join('')}"/>`,
  );
  return svgDocument(paths, width, height);
}

function svgDocument(elements: readonly string[], width: number, height: number): string {
  const size = `width="${width}" height="${height}" viewBox="0 0 ${width} ${height}"`;
  return `<svg xmlns="http://www.w3.org/2000/svg" ${size}>${elements.join('')}</svg>`;
}

/** A coordinate at a tenth of a pixel. */
export function shortNumber(value: number): number {
  return Math.round(value * 10) / 10;
}
