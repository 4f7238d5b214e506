import type { FieldLine } from '../field/field-lines.js';
import { thin } from './current-contours.js';
import { type Drawing, drawLines } from './drawing.js';
import { type MapFrame, toPictureX, toPictureY } from './map-frame.js';

/** Field lines seen from above, as x, y pairs in the picture. */
export interface FieldLinePaths {
  /** Both feet in the patch. */
  readonly closed: readonly number[][];
  /** Leave the patch, or end in a null. */
  readonly open: readonly number[][];
}

const CLOSED_INK = '#6a1b9a';
const OPEN_INK = '#a8005c';
/** Most points drawn, and least in picture pixels from one to the next (see `thin`). */
const MOST_POINTS = 60_000;

/** Brings lines, in Mm from the first pixel of a patch of such pixels, to the picture. */
export function fieldLinePaths(
  lines: readonly FieldLine[],
  pixelMm: number,
  frame: MapFrame,
): FieldLinePaths {
  const closed: number[][] = [];
  const open: number[][] = [];
  let points = 0;
  for (const line of lines) {
    const path: number[] = [];
    for (let i = 0; i < line.points.length; i += 3) {
      path.push(
        toPictureX(frame, line.points[i] / pixelMm),
        toPictureY(frame, line.points[i + 1] / pixelMm),
      );
    }
    if (path.length < 4) continue;
    const drawn = thin(path);
    points += drawn.length / 2;
    if (points > MOST_POINTS) break;
    (line.closed ? closed : open).push(drawn);
  }
  return { closed, open };
}

/** Solid violet with a faint halo: a line with both feet in the patch. */
export function drawClosedLine(drawing: Drawing, lines: readonly (readonly number[])[]): void {
  drawLines(drawing, lines, '#ffffff', 2.2, { 'stroke-opacity': 0.35 });
  drawLines(drawing, lines, CLOSED_INK, 0.9, { 'stroke-opacity': 0.85 });
}

/** Dotted red: a line that leaves the patch. */
export function drawOpenLine(drawing: Drawing, lines: readonly (readonly number[])[]): void {
  const dots = { 'stroke-dasharray': '1.5 4', 'stroke-linecap': 'round' };
  drawLines(drawing, lines, '#ffffff', 2.6, { ...dots, 'stroke-opacity': 0.35 });
  drawLines(drawing, lines, OPEN_INK, 1.3, { ...dots, 'stroke-opacity': 0.9 });
}
