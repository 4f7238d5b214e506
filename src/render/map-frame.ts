import type { Rect } from './drawing.js';

/** Where the map lies in the picture and how patch pixels map to it; north up, west right. */
export interface MapFrame extends Rect {
  readonly nx: number;
  readonly ny: number;
}

/** Largest blow-up of one patch pixel. */
const MAX_ZOOM = 24;

/**
 * Size of an nx x ny map in a box: a whole-number zoom from 3 up, any factor below; never less than
 * 8 px on the short side.
 */
export function mapSize(nx: number, ny: number, boxWidth: number, boxHeight: number) {
  const free = Math.min(boxWidth / nx, boxHeight / ny);
  const zoom = free >= 3 ? Math.min(MAX_ZOOM, Math.floor(free)) : free;
  return {
    width: Math.max(8, Math.min(boxWidth, Math.round(nx * zoom))),
    height: Math.max(8, Math.min(boxHeight, Math.round(ny * zoom))),
  };
}

/** True when one patch pixel fills at least 3 x 3 picture pixels and is shown as a square. */
export function isBlocky(frame: MapFrame): boolean {
  return frame.width >= 3 * frame.nx;
}

/** Picture x of a patch column; pixel centres are integers. */
export function toPictureX(frame: MapFrame, x: number): number {
  return frame.x + ((x + 0.5) * frame.width) / frame.nx;
}

/** Picture y (down) of a patch row (up). */
export function toPictureY(frame: MapFrame, y: number): number {
  return frame.y + frame.height - ((y + 0.5) * frame.height) / frame.ny;
}

/** Patch column and row of a place in the picture. */
export function toPatch(frame: MapFrame, px: number, py: number): { x: number; y: number } {
  return {
    x: ((px - frame.x) * frame.nx) / frame.width - 0.5,
    y: ((frame.y + frame.height - py) * frame.ny) / frame.height - 0.5,
  };
}
