import type { Canvas } from './canvas.js';
import { drawLines, drawText, type Rect } from './drawing.js';
import { drawCurrentLine, drawPlainLine, drawPoleSign, drawStrongLine } from './line-styles.js';
import { paintHatch } from './map-layer.js';
import { FRAME_INK, SMALL, SMALL_PRIOR } from './style.js';
import { wrapText } from './text-fit.js';

export type LegendSample = 'line' | 'strong' | 'up' | 'down' | 'poles' | 'hatch' | 'grid' | 'none';

export interface LegendEntry {
  readonly sample: LegendSample;
  readonly text: string;
  /** True when what it names rests on a prior or an assumption. */
  readonly supposed: boolean;
}

const SAMPLE_WIDTH = 40;
const TEXT_LEFT = SAMPLE_WIDTH + 10;
const LINE = 16;
const ENTRY_GAP = 5;
const COLUMN_GAP = 20;
/** From this width up the legend stands in two columns. */
const TWO_COLUMNS_FROM = 520;

/** Height of the legend at this width. */
export function legendHeight(entries: readonly LegendEntry[], width: number): number {
  return Math.max(...columnsOf(entries, width).map((column) => columnHeight(column, width)));
}

/** Draws the entries in one or two columns. */
export function drawLegend(canvas: Canvas, box: Rect, entries: readonly LegendEntry[]): void {
  columnsOf(entries, box.width).forEach((column, i) => {
    const x = box.x + i * (columnWidth(box.width) + COLUMN_GAP);
    let y = box.y;
    for (const entry of column) {
      drawSample(canvas, entry.sample, x, y + 7);
      const lines = entryLines(entry, box.width);
      const style = entry.supposed ? SMALL_PRIOR : SMALL;
      lines.forEach((line, k) => {
        drawText(canvas.drawing, line, x + textLeft(entry), y + 12 + LINE * k, style);
      });
      y += LINE * lines.length + ENTRY_GAP;
    }
  });
}

function columnWidth(width: number): number {
  return width >= TWO_COLUMNS_FROM ? (width - COLUMN_GAP) / 2 : width;
}

function columnsOf(
  entries: readonly LegendEntry[],
  width: number,
): readonly (readonly LegendEntry[])[] {
  if (width < TWO_COLUMNS_FROM) return [entries];
  const first = Math.ceil(entries.length / 2);
  return [entries.slice(0, first), entries.slice(first)];
}

function columnHeight(column: readonly LegendEntry[], width: number): number {
  return column.reduce(
    (sum, entry) => sum + LINE * entryLines(entry, width).length + ENTRY_GAP,
    -ENTRY_GAP,
  );
}

function entryLines(entry: LegendEntry, width: number): readonly string[] {
  // Slanted text leans out of its box by a few pixels.
  return wrapText(entry.text, columnWidth(width) - textLeft(entry) - 4, SMALL, 4);
}

function textLeft(entry: LegendEntry): number {
  return entry.sample === 'none' ? 0 : TEXT_LEFT;
}

function drawSample({ drawing, paints }: Canvas, sample: LegendSample, x: number, y: number): void {
  const wave = [[x, y + 4, x + 13, y - 2, x + 27, y + 2, x + SAMPLE_WIDTH, y - 4]];
  const flat = [[x, y, x + SAMPLE_WIDTH, y]];
  if (sample === 'line') drawPlainLine(drawing, wave);
  if (sample === 'strong') drawStrongLine(drawing, wave);
  if (sample === 'up') drawCurrentLine(drawing, flat, 1, true);
  if (sample === 'down') drawCurrentLine(drawing, flat, -1, true);
  if (sample === 'grid') drawLines(drawing, flat, FRAME_INK, 0.8, { 'stroke-opacity': 0.6 });
  if (sample === 'poles') {
    drawPoleSign(drawing, x + 10, y, 1);
    drawPoleSign(drawing, x + 30, y, -1);
  }
  if (sample === 'hatch') {
    const box = { x: Math.round(x), y: Math.round(y - 6), width: SAMPLE_WIDTH, height: 13 };
    paints.push((raster) => paintHatch(raster, box));
  }
}
