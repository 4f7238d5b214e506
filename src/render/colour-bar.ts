import type { Canvas } from './canvas.js';
import type { ScaleName } from './colour-scale.js';
import { drawLine, drawShape, drawText, type Rect, styledWidth } from './drawing.js';
import { paintScale } from './map-layer.js';
import { plainNumber } from './number-format.js';
import { FRAME_INK, HEADING, SMALL, SMALL_QUIET } from './style.js';
import { wrapText } from './text-fit.js';

const BAR_HEIGHT = 14;
/** Room for half a tick label at both ends of the bar. */
export const COLOUR_BAR_SIDE = 26;

/** What a colour bar says. */
export interface ColourBarFacts {
  readonly scale: ScaleName;
  /** Name of the quantity with its unit. */
  readonly title: string;
  /** What the two signs mean. */
  readonly negative: string;
  readonly positive: string;
  /** Symmetric limit, and a sentence on where it comes from. */
  readonly limit: number;
  readonly note: string;
}

/** Height of the colour bar with title, ticks and the note on its limits at this width. */
export function colourBarHeight(width: number, facts: ColourBarFacts): number {
  return barTop(width, facts) + BAR_HEIGHT + 24 + 16 * noteLines(width, facts).length;
}

/** Draws the colour bar: its unit, its symmetric limits and where they come from. */
export function drawColourBar(canvas: Canvas, box: Rect, facts: ColourBarFacts): void {
  const { drawing } = canvas;
  const bar = {
    x: Math.round(box.x + COLOUR_BAR_SIDE),
    y: Math.round(box.y + barTop(box.width, facts)),
    width: Math.round(box.width - 2 * COLOUR_BAR_SIDE),
    height: BAR_HEIGHT,
  };
  const middle = bar.x + bar.width / 2;
  drawText(drawing, facts.title, middle, box.y + 14, HEADING, 'middle');
  drawText(drawing, facts.negative, bar.x, bar.y - 8, SMALL);
  drawText(drawing, facts.positive, bar.x + bar.width, bar.y - 8, SMALL, 'end');
  canvas.paints.push((raster) => paintScale(raster, bar, facts.scale));
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
    drawText(drawing, sign + plainNumber(share * facts.limit), x, bottom + 17, SMALL, 'middle');
  }
  noteLines(box.width, facts).forEach((line, i) => {
    drawText(drawing, line, middle, bottom + 34 + 16 * i, SMALL_QUIET, 'middle');
  });
}

/** The title takes a line of its own where the words of the signs leave no room beside it. */
function barTop(width: number, { title, negative, positive }: ColourBarFacts): number {
  const sides = Math.max(styledWidth(negative, SMALL), styledWidth(positive, SMALL));
  const needed = styledWidth(title, HEADING) + 2 * (sides + 12);
  return width - 2 * COLOUR_BAR_SIDE < needed ? 40 : 22;
}

function noteLines(width: number, { note }: ColourBarFacts): readonly string[] {
  return wrapText(note, width, SMALL_QUIET);
}
