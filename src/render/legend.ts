import type { Canvas } from './canvas.js';
import { drawLines, drawText, type Rect } from './drawing.js';
import { drawClosedLine, drawOpenLine } from './field-line-layer.js';
import { drawTicks, referenceTick } from './horizontal-ticks.js';
import { drawCurrentLine, drawPlainLine, drawPoleSign, drawStrongLine } from './line-styles.js';
import { paintDead, paintHatch } from './map-layer.js';
import { FRAME_INK, SMALL, SMALL_PRIOR } from './style.js';
import { wrapText } from './text-fit.js';

export type LegendSample =
  | 'line'
  | 'strong'
  | 'slim'
  | 'up'
  | 'down'
  | 'poles'
  | 'tick'
  | 'hatch'
  | 'dead'
  | 'grid'
  | 'none'
  | 'closed'
  | 'leaving';

export interface LegendEntry {
  readonly sample: LegendSample;
  readonly text: string;
  /** True when what it names rests on a prior or an assumption. */
  readonly supposed: boolean;
  /** Length of the stroke that stands for the strength named. */
  readonly tickPx?: number;
}

/** Entries of the wider first and the narrower second column. */
export type LegendColumns = readonly [readonly LegendEntry[], readonly LegendEntry[]];

/** A column as placed: its left edge from the legend's, and its width. */
interface PlacedColumn {
  readonly entries: readonly LegendEntry[];
  readonly x: number;
  readonly width: number;
}

const SAMPLE_WIDTH = 36;
const TEXT_LEFT = SAMPLE_WIDTH + 9;
const LINE = 16;
const ENTRY_GAP = 5;
const COLUMN_GAP = 18;
/** From this width up the two columns stand side by side, below it one under the other. */
const TWO_COLUMNS_FROM = 420;
const FIRST_SHARE = 0.56;

/** Height of the legend at this width. */
export function legendHeight(columns: LegendColumns, width: number): number {
  return Math.max(...placeColumns(columns, width).map(columnHeight));
}

/** Draws the entries in one or two columns. */
export function drawLegend(canvas: Canvas, box: Rect, columns: LegendColumns): void {
  for (const column of placeColumns(columns, box.width)) {
    const x = box.x + column.x;
    let y = box.y;
    for (const entry of column.entries) {
      drawSample(canvas, entry, x, y + 7);
      const lines = entryLines(entry, column.width);
      const style = entry.supposed ? SMALL_PRIOR : SMALL;
      lines.forEach((line, k) => {
        drawText(canvas.drawing, line, x + textLeft(entry), y + 12 + LINE * k, style);
      });
      y += LINE * lines.length + ENTRY_GAP;
    }
  }
}

function placeColumns(columns: LegendColumns, width: number): readonly PlacedColumn[] {
  if (width < TWO_COLUMNS_FROM) return [{ entries: columns.flat(), x: 0, width }];
  const first = Math.round(FIRST_SHARE * (width - COLUMN_GAP));
  const x = first + COLUMN_GAP;
  return [
    { entries: columns[0], x: 0, width: first },
    { entries: columns[1], x, width: width - x },
  ];
}

function columnHeight({ entries, width }: PlacedColumn): number {
  const lines = entries.reduce((sum, entry) => sum + entryLines(entry, width).length, 0);
  return LINE * lines + ENTRY_GAP * (entries.length - 1);
}

function entryLines(entry: LegendEntry, width: number): readonly string[] {
  // Slanted text leans out of its box by a few pixels.
  return wrapText(entry.text, width - textLeft(entry) - 4, SMALL, 6);
}

function textLeft(entry: LegendEntry): number {
  return entry.sample === 'none' ? 0 : TEXT_LEFT;
}

function drawSample(
  { drawing, paints }: Canvas,
  { sample, tickPx = 0 }: LegendEntry,
  x: number,
  y: number,
): void {
  const wave = [[x, y + 4, x + 12, y - 2, x + 24, y + 2, x + SAMPLE_WIDTH, y - 4]];
  const flat = [[x, y, x + SAMPLE_WIDTH, y]];
  if (sample === 'line') drawPlainLine(drawing, wave);
  if (sample === 'strong') drawStrongLine(drawing, wave);
  if (sample === 'slim') drawStrongLine(drawing, wave, true);
  if (sample === 'up') drawCurrentLine(drawing, flat, 1, true);
  if (sample === 'down') drawCurrentLine(drawing, flat, -1, true);
  if (sample === 'closed') drawClosedLine(drawing, wave);
  if (sample === 'leaving') drawOpenLine(drawing, wave);
  if (sample === 'grid') drawLines(drawing, flat, FRAME_INK, 0.8, { 'stroke-opacity': 0.6 });
  if (sample === 'tick') drawTicks(drawing, [referenceTick(x + SAMPLE_WIDTH / 2, y, tickPx)]);
  if (sample === 'poles') {
    drawPoleSign(drawing, x + 8, y, 1);
    drawPoleSign(drawing, x + 28, y, -1);
  }
  const box = { x: Math.round(x), y: Math.round(y - 6), width: SAMPLE_WIDTH, height: 13 };
  if (sample === 'hatch') paints.push((raster) => paintHatch(raster, box));
  if (sample === 'dead') paints.push((raster) => paintDead(raster, box));
}
