import type { Canvas } from './canvas.js';
import { drawLine, drawShape, drawText, type Rect } from './drawing.js';
import { LIMIT_QUANTILE, paintScale } from './map-layer.js';
import { plainNumber } from './number-format.js';
import { FRAME_INK, HEADING, SMALL, SMALL_QUIET } from './style.js';
import { wrapText } from './text-fit.js';

const BAR_HEIGHT = 14;
/** Room for half a tick label at both ends of the bar. */
export const COLOUR_BAR_SIDE = 26;
/** Below this width the title takes a line of its own. */
const ONE_LINE_FROM = 340;

/** Height of the colour bar with title, ticks and the note on its limits at this width. */
export function colourBarHeight(width: number, limit: number): number {
  return barTop(width) + BAR_HEIGHT + 24 + 16 * noteLines(width, limit).length;
}

/** Draws the colour bar: its unit, its symmetric limits and where they come from. */
export function drawColourBar(canvas: Canvas, box: Rect, limit: number): void {
  const { drawing } = canvas;
  const bar = {
    x: Math.round(box.x + COLOUR_BAR_SIDE),
    y: Math.round(box.y + barTop(box.width)),
    width: Math.round(box.width - 2 * COLOUR_BAR_SIDE),
    height: BAR_HEIGHT,
  };
  const middle = bar.x + bar.width / 2;
  drawText(drawing, 'Radial field (G)', middle, box.y + 14, HEADING, 'middle');
  drawText(drawing, '− inward', bar.x, bar.y - 8, SMALL);
  drawText(drawing, 'outward +', bar.x + bar.width, bar.y - 8, SMALL, 'end');
  canvas.paints.push((raster) => paintScale(raster, bar));
  drawShape(drawing, 'rect', {
    x: bar.x - 0.5,
    y: bar.y - 0.5,
    width: bar.width + 1,
    height: bar.height + 1,
    fill: 'none',
    stroke: FRAME_INK,
  });
  const bottom = bar.y + bar.height;
  for (const share of [-1, -0.5, 0, 0.5, 1]) {
    const x = Math.round(middle + (share * bar.width) / 2) - 0.5;
    drawLine(drawing, [x, bottom, x, bottom + 4], FRAME_INK, 1);
    const sign = share > 0 ? '+' : '';
    drawText(drawing, sign + plainNumber(share * limit), x, bottom + 17, SMALL, 'middle');
  }
  noteLines(box.width, limit).forEach((line, i) => {
    drawText(drawing, line, middle, bottom + 34 + 16 * i, SMALL_QUIET, 'middle');
  });
}

function barTop(width: number): number {
  return width < ONE_LINE_FROM ? 40 : 22;
}

function noteLines(width: number, limit: number): readonly string[] {
  const share = plainNumber(100 * LIMIT_QUANTILE);
  const text = `Limits ±${plainNumber(limit)} G hold ${share} % of the pixels; stronger ones take the end colours.`;
  return wrapText(text, width, SMALL_QUIET);
}
