import { type Drawing, drawLine, drawShape, drawText, type Rect, styledWidth } from './drawing.js';
import { plainNumber } from './number-format.js';
import { FRAME_INK, SMALL } from './style.js';

/** Height of the strip above the map with the scale bar and the compass. */
export const MARKS_HEIGHT = 40;
const COMPASS_WIDTH = 46;

/** Length of the scale bar in Mm: the largest round one below about a third of the map's width. */
export function scaleBarMm(mapWidthMm: number, mapWidthPx: number): number {
  const most = (mapWidthMm * Math.min(0.36 * mapWidthPx, 180)) / mapWidthPx;
  const power = 10 ** Math.floor(Math.log10(most));
  const step = [5, 2, 1].find((each) => each * power <= most) ?? 1;
  return Number((step * power).toPrecision(3));
}

/** Draws the scale bar at the left and the compass (north up, west right) at the right. */
export function drawMarks(
  drawing: Drawing,
  strip: Rect,
  mapWidthMm: number,
  mapWidthPx: number,
): void {
  const lengthMm = scaleBarMm(mapWidthMm, mapWidthPx);
  const lengthPx = (lengthMm / mapWidthMm) * mapWidthPx;
  const y = strip.y + strip.height - 12;
  const x = strip.x;
  drawLine(drawing, [x, y - 5, x, y + 5], FRAME_INK, 1.5);
  drawLine(drawing, [x + lengthPx, y - 5, x + lengthPx, y + 5], FRAME_INK, 1.5);
  drawLine(drawing, [x, y, x + lengthPx, y], FRAME_INK, 3);
  drawText(drawing, `${plainNumber(lengthMm)} Mm`, x + lengthPx + 8, y + 4, SMALL);
  drawCompass(drawing, strip.x + strip.width - COMPASS_WIDTH, strip.y);
}

function drawCompass(drawing: Drawing, x: number, y: number): void {
  const [cornerX, cornerY] = [x + 6, y + MARKS_HEIGHT - 10];
  const [tipX, tipY] = [cornerX + 20, cornerY - 20];
  drawLine(drawing, [cornerX, tipY + 4, cornerX, cornerY, tipX - 4, cornerY], FRAME_INK, 1.5);
  arrow(drawing, [cornerX - 4, tipY + 5, cornerX + 4, tipY + 5, cornerX, tipY - 3]);
  arrow(drawing, [tipX - 5, cornerY - 4, tipX - 5, cornerY + 4, tipX + 3, cornerY]);
  drawText(drawing, 'N', cornerX + 8, tipY + 6, SMALL);
  drawText(drawing, 'W', tipX + 6, cornerY + 4, SMALL);
}

function arrow(drawing: Drawing, points: readonly number[]): void {
  drawShape(drawing, 'polygon', { points: points.join(' '), fill: FRAME_INK });
}

/** Least width of the strip that keeps the bar, its label and the compass apart. */
export function marksWidth(mapWidthMm: number, mapWidthPx: number): number {
  const lengthMm = scaleBarMm(mapWidthMm, mapWidthPx);
  const label = styledWidth(`${plainNumber(lengthMm)} Mm`, SMALL);
  return (lengthMm / mapWidthMm) * mapWidthPx + 8 + label + 16 + COMPASS_WIDTH;
}
