import { type Drawing, drawLine, drawLines } from './drawing.js';
import { CURRENT_INK, INVERSION_INK, STRONG_CORE } from './style.js';

/** Joined lines, each as x, y pairs in the picture. */
type Lines = readonly (readonly number[])[];

const ROUND = { 'stroke-linejoin': 'round', 'stroke-linecap': 'round' } as const;

/** Thin dark line with a faint white halo: any inversion line. */
export function drawPlainLine(drawing: Drawing, lines: Lines): void {
  drawLines(drawing, lines, '#ffffff', 2.6, { ...ROUND, 'stroke-opacity': 0.5 });
  drawLines(drawing, lines, INVERSION_INK, 1, ROUND);
}

/** Thick cased line with a bright core: the strong-gradient part; slimmer on a map with strokes. */
export function drawStrongLine(drawing: Drawing, lines: Lines, slim = false): void {
  drawLines(drawing, lines, INVERSION_INK, slim ? 3.4 : 5.2, ROUND);
  drawLines(drawing, lines, STRONG_CORE, slim ? 1.6 : 2.4, ROUND);
}

/** Current-density contour: solid for upward, dashed for downward, thicker where strong. */
export function drawCurrentLine(
  drawing: Drawing,
  lines: Lines,
  sign: number,
  strong: boolean,
): void {
  const dash: Record<string, string> = sign < 0 ? { 'stroke-dasharray': '5 3.5' } : {};
  const width = strong ? 1.9 : 1.1;
  drawLines(drawing, lines, '#ffffff', width + 1.4, { 'stroke-opacity': 0.5, ...dash });
  drawLines(drawing, lines, CURRENT_INK, width, dash);
}

/** "+" or "−" in strokes with a white halo, 13 px wide. */
export function drawPoleSign(drawing: Drawing, x: number, y: number, sign: number): void {
  const [px, py] = [Math.round(x), Math.round(y)];
  for (const [ink, width, reach] of [
    ['#ffffff', 5.5, 6.8],
    [INVERSION_INK, 2.2, 6],
  ] as const) {
    drawLine(drawing, [px - reach, py, px + reach, py], ink, width);
    if (sign > 0) drawLine(drawing, [px, py - reach, px, py + reach], ink, width);
  }
}
