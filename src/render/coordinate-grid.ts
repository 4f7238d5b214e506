import type { LocalPatch } from '../geometry/patch.js';
import {
  patchToStonyhurst,
  sphereRadiusMm,
  stonyhurstToPatch,
} from '../geometry/patch-position.js';
import { RADIANS_PER_DEGREE, wrapDegrees180 } from '../units.js';
import { type Drawing, drawLine, drawLines, drawText, styledWidth } from './drawing.js';
import { type MapFrame, toPatch, toPictureX, toPictureY } from './map-frame.js';
import { plainNumber } from './number-format.js';
import { FRAME_INK, SMALL } from './style.js';

const STEPS_DEG = [0.1, 0.2, 0.5, 1, 2, 5, 10, 15, 30];
/** Lines stand at least this far apart in the picture. */
const LEAST_SPACING_PX = 46;
const POINTS_PER_LINE = 48;

type Coordinate = 'lonDeg' | 'latDeg';

/** Range of one coordinate over the frame, from samples inside and on the edge. */
interface Span {
  readonly low: number;
  readonly high: number;
}

/** Step of the grid in degrees, one for both coordinates, so that the lines stay apart. */
export function gridStepDeg(patch: LocalPatch, frame: MapFrame): number {
  const mmPerPx = (patch.nx * patch.pixelMm) / frame.width;
  const degreesPerPx = mmPerPx / sphereRadiusMm(patch) / RADIANS_PER_DEGREE;
  const wanted = degreesPerPx * LEAST_SPACING_PX;
  return STEPS_DEG.find((step) => step >= wanted) ?? 30;
}

/** Draws meridians and parallels inside the frame; the caller's clip keeps them there. */
export function drawGridLines(drawing: Drawing, patch: LocalPatch, frame: MapFrame): void {
  const step = gridStepDeg(patch, frame);
  const spans = coordinateSpans(patch, frame);
  for (const [along, across] of [
    ['lonDeg', 'latDeg'],
    ['latDeg', 'lonDeg'],
  ] as const) {
    for (const fixed of multiples(spans[along], step)) {
      const lines = traceLine(patch, frame, along, fixed, spans[across]);
      drawLines(drawing, lines, FRAME_INK, 0.8, { 'stroke-opacity': 0.38 });
    }
  }
}

/** Writes longitudes below the frame and latitudes left of it, with a tick at each. */
export function drawGridLabels(drawing: Drawing, patch: LocalPatch, frame: MapFrame): void {
  const step = gridStepDeg(patch, frame);
  let lastRight = Number.NEGATIVE_INFINITY;
  for (const { at, value } of edgeCrossings(patch, frame, 'lonDeg', step)) {
    const text = longitudeText(wrapDegrees180(value));
    const half = styledWidth(text, SMALL) / 2;
    if (at - half < lastRight + 8) continue;
    lastRight = at + half;
    const bottom = frame.y + frame.height;
    drawLine(drawing, [at, bottom, at, bottom + 5], FRAME_INK, 1);
    drawText(drawing, text, at, bottom + 18, SMALL, 'middle');
  }
  let lastTop = Number.POSITIVE_INFINITY;
  for (const { at, value } of edgeCrossings(patch, frame, 'latDeg', step)) {
    if (at > lastTop - 18) continue;
    lastTop = at;
    drawLine(drawing, [frame.x - 5, at, frame.x, at], FRAME_INK, 1);
    drawText(drawing, latitudeText(value), frame.x - 8, at + 4, SMALL, 'end');
  }
}

/** "E20°", "W5.5°", "0°": Stonyhurst longitude is positive to the west; fixed decimals on wish. */
export function longitudeText(degrees: number, decimals?: number): string {
  return directionText(degrees, 'W', 'E', decimals);
}

/** "N20°", "S5.5°", "0°"; fixed decimals on wish. */
export function latitudeText(degrees: number, decimals?: number): string {
  return directionText(degrees, 'N', 'S', decimals);
}

function directionText(
  degrees: number,
  positive: string,
  negative: string,
  decimals: number | undefined,
): string {
  const rounded = Number(degrees.toFixed(decimals ?? 2));
  const letter = degrees < 0 ? negative : positive;
  const size = Math.abs(rounded);
  if (decimals !== undefined) return `${letter}${size.toFixed(decimals)}°`;
  return `${rounded === 0 ? '' : letter}${plainNumber(size)}°`;
}

function coordinateSpans(patch: LocalPatch, frame: MapFrame): Record<Coordinate, Span> {
  const spans = { lonDeg: emptySpan(), latDeg: emptySpan() };
  const steps = 16;
  for (let j = 0; j <= steps; j++) {
    for (let i = 0; i <= steps; i++) {
      const place = placeAt(
        patch,
        frame,
        frame.x + (frame.width * i) / steps,
        frame.y + (frame.height * j) / steps,
      );
      for (const key of ['lonDeg', 'latDeg'] as const) {
        if (!Number.isFinite(place[key])) continue;
        spans[key].low = Math.min(spans[key].low, place[key]);
        spans[key].high = Math.max(spans[key].high, place[key]);
      }
    }
  }
  return spans;
}

function emptySpan(): { low: number; high: number } {
  return { low: Number.POSITIVE_INFINITY, high: Number.NEGATIVE_INFINITY };
}

function placeAt(patch: LocalPatch, frame: MapFrame, px: number, py: number) {
  const { x, y } = toPatch(frame, px, py);
  const [lonDeg, latDeg] = patchToStonyhurst(patch, x, y);
  // Continuous across the far side's meridian: longitudes count on from the patch's centre.
  const middle = patch.center.stonyhurstLongitudeDeg;
  return { lonDeg: middle + wrapDegrees180(lonDeg - middle), latDeg };
}

function multiples(span: Span, step: number): readonly number[] {
  const out: number[] = [];
  // A patch around a pole spans every longitude: more lines than this say nothing.
  for (let k = Math.ceil(span.low / step); k * step <= span.high && out.length < 40; k++) {
    out.push(k * step);
  }
  return out;
}

/** Pieces of the line where `along` equals `fixed`, as x, y pairs in the picture. */
function traceLine(
  patch: LocalPatch,
  frame: MapFrame,
  along: Coordinate,
  fixed: number,
  span: Span,
): readonly number[][] {
  const pieces: number[][] = [];
  let piece: number[] = [];
  const close = () => {
    if (piece.length >= 4) pieces.push(piece);
    piece = [];
  };
  for (let i = 0; i <= POINTS_PER_LINE; i++) {
    const other = span.low + ((span.high - span.low) * i) / POINTS_PER_LINE;
    const at =
      along === 'lonDeg'
        ? stonyhurstToPatch(patch, fixed, other)
        : stonyhurstToPatch(patch, other, fixed);
    const [px, py] = at
      ? [toPictureX(frame, at[0]), toPictureY(frame, at[1])]
      : [Number.NaN, Number.NaN];
    const near =
      Math.abs(px - frame.x - frame.width / 2) < 2 * frame.width &&
      Math.abs(py - frame.y - frame.height / 2) < 2 * frame.height;
    if (near) piece.push(px, py);
    else close();
  }
  close();
  return pieces;
}

/** Places on the lower edge (longitude, left to right) or left edge (latitude, bottom to top). */
function edgeCrossings(patch: LocalPatch, frame: MapFrame, key: Coordinate, step: number) {
  const length = key === 'lonDeg' ? frame.width : frame.height;
  const found: { at: number; value: number }[] = [];
  const sample = (distance: number) =>
    key === 'lonDeg'
      ? placeAt(patch, frame, frame.x + distance, frame.y + frame.height).lonDeg
      : placeAt(patch, frame, frame.x, frame.y + frame.height - distance).latDeg;
  const stride = length / Math.max(8, Math.round(length / 4));
  for (let from = 0; from + stride <= length + 1e-6; from += stride) {
    const [before, after] = [sample(from), sample(from + stride)];
    const value = Math.ceil(Math.min(before, after) / step - 1e-9) * step;
    if (!(value < Math.max(before, after)) || Math.abs(after - before) > 90) continue;
    const distance = from + (stride * (value - before)) / (after - before);
    found.push({
      at: key === 'lonDeg' ? frame.x + distance : frame.y + frame.height - distance,
      value,
    });
  }
  return found;
}
