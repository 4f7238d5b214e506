import { makeGrid } from '../grid/grid.js';
import { type Drawing, drawLines, drawShape, shortNumber } from './drawing.js';
import { type MapFrame, toPictureX, toPictureY } from './map-frame.js';
import { nearestNice, quantileOfSize } from './nice-number.js';
import type { VectorMaps } from './region-picture.js';
import { resampleMap } from './resample.js';
import { TICK_INK } from './style.js';

/** Tail and tip of a stroke in the picture. */
export type Tick = readonly [tailX: number, tailY: number, tipX: number, tipY: number];

/** The horizontal field as strokes, with the strength that a stroke of known length stands for. */
export interface HorizontalTicks {
  readonly ticks: readonly Tick[];
  readonly referenceG: number;
  readonly referencePx: number;
  /** Weaker fields have no stroke: three deviations of noise. */
  readonly leastG: number;
  /** Fields up to this have the shortest stroke, which still shows its direction. */
  readonly shortestG: number;
}

const SPACING_PX = 20;
/** Length of the strokes of the strongest fields, all but one in a hundred. */
const STRONG_PX = 24;
const LONGEST_PX = 30;
const SHORTEST_PX = 8;
const NOISE_DEVIATIONS = 3;

/**
 * One stroke for each cell of about 20 px: the mean of the horizontal field over the cell, length by
 * its strength, centred on the cell; none where the mean lies below three deviations of one pixel's
 * noise or half of the cell is missing.
 */
export function horizontalTicks(vector: VectorMaps, frame: MapFrame): HorizontalTicks {
  const { columns, rows, x, y } = cellMeans(vector, frame);
  const leastG = NOISE_DEVIATIONS * vector.horizontalNoiseG;
  const strength = x.map((west, i) => {
    const size = Math.hypot(west, y[i]);
    return size > 0 && size >= leastG ? size : Number.NaN;
  });
  const strong = quantileOfSize(strength.filter(Number.isFinite), 0.99);
  const ticks: Tick[] = [];
  if (!(strong > 0)) return { ticks, referenceG: 0, referencePx: 0, leastG, shortestG: 0 };
  const pxPerGauss = STRONG_PX / strong;
  strength.forEach((size, i) => {
    if (Number.isNaN(size)) return;
    const length = Math.max(SHORTEST_PX, Math.min(LONGEST_PX, pxPerGauss * size));
    const [alongX, alongY] = [(0.5 * length * x[i]) / size, (-0.5 * length * y[i]) / size];
    const px = toPictureX(frame, (((i % columns) + 0.5) * frame.nx) / columns - 0.5);
    const py = toPictureY(frame, ((Math.floor(i / columns) + 0.5) * frame.ny) / rows - 0.5);
    ticks.push([px - alongX, py - alongY, px + alongX, py + alongY]);
  });
  const referenceG = nearestNice(0.7 * strong);
  const shortestG = SHORTEST_PX / pxPerGauss;
  return { ticks, referenceG, referencePx: pxPerGauss * referenceG, leastG, shortestG };
}

/** Means of both components over cells of about the spacing, at least one patch pixel wide. */
function cellMeans({ horizontal }: VectorMaps, frame: MapFrame) {
  const columns = Math.max(1, Math.min(frame.nx, Math.round(frame.width / SPACING_PX)));
  const rows = Math.max(1, Math.min(frame.ny, Math.round(frame.height / SPACING_PX)));
  const mean = ({ values }: VectorMaps['horizontal']['x']) =>
    resampleMap(makeGrid(values.data, frame.nx, frame.ny, 'G', 1), columns, rows, true);
  return { columns, rows, x: mean(horizontal.x), y: mean(horizontal.y) };
}

/** Draws the strokes with a head at the tip and a white halo, so that they stand out on any colour. */
export function drawTicks(drawing: Drawing, ticks: readonly Tick[]): void {
  if (ticks.length === 0) return;
  const round = { 'stroke-linecap': 'round', 'stroke-linejoin': 'round' };
  const heads = ticks.map(headData).join('');
  const halo = { stroke: '#ffffff', 'stroke-opacity': 0.55, 'stroke-width': 2, ...round };
  drawLines(drawing, ticks, '#ffffff', 3.1, { 'stroke-opacity': 0.55, 'stroke-linecap': 'round' });
  drawShape(drawing, 'path', { d: heads, fill: 'none', ...halo });
  drawLines(drawing, ticks, TICK_INK, 1.1, { 'stroke-linecap': 'round' });
  drawShape(drawing, 'path', { d: heads, fill: TICK_INK });
}

/** A stroke to the right about (x, y), for the legend. */
export function referenceTick(x: number, y: number, lengthPx: number): Tick {
  return [x - lengthPx / 2, y, x + lengthPx / 2, y];
}

/** A small triangle whose point is the tip. */
function headData([tailX, tailY, tipX, tipY]: Tick): string {
  const length = Math.hypot(tipX - tailX, tipY - tailY);
  const [ux, uy] = [(tipX - tailX) / length, (tipY - tailY) / length];
  const long = Math.min(5.5, 0.62 * length);
  const half = 0.42 * long;
  const [baseX, baseY] = [tipX - long * ux, tipY - long * uy];
  const corner = (side: number) =>
    `${shortNumber(baseX - side * half * uy)} ${shortNumber(baseY + side * half * ux)}`;
  return `M${shortNumber(tipX)} ${shortNumber(tipY)}L${corner(1)}L${corner(-1)}Z`;
}
