import type { MapFrame } from './map-frame.js';

/** A strongest place of one polarity, in picture pixels. */
export interface Pole {
  readonly px: number;
  readonly py: number;
  readonly sign: 1 | -1;
}

const CELL_PX = 12;
const LEAST_DISTANCE_PX = 110;
const POLES_PER_SIGN = 2;
/** A pole is marked from this share of the colour limit up, and of the strongest of its sign. */
const LEAST_OF_LIMIT = 0.3;
const LEAST_OF_STRONGEST = 0.5;

/**
 * The strongest places of each polarity among means over 12 px cells of the displayed field, at most
 * two of a sign and well apart, so that signs can be read without colour.
 */
export function strongestPoles(samples: Float64Array, frame: MapFrame, limit: number): Pole[] {
  const cells = cellMeans(samples, frame.width, frame.height);
  const poles: Pole[] = [];
  for (const sign of [1, -1] as const) {
    const order = cells
      .filter((cell) => sign * cell.mean >= LEAST_OF_LIMIT * limit)
      .sort((a, b) => sign * (b.mean - a.mean));
    const chosen: typeof order = [];
    for (const cell of order) {
      if (chosen.length === POLES_PER_SIGN) break;
      if (Math.abs(cell.mean) < LEAST_OF_STRONGEST * Math.abs(order[0].mean)) break;
      const apart = chosen.every(
        (other) => Math.hypot(other.x - cell.x, other.y - cell.y) >= LEAST_DISTANCE_PX,
      );
      if (apart) chosen.push(cell);
    }
    for (const { x, y } of chosen) {
      poles.push({ px: frame.x + x, py: frame.y + frame.height - y, sign });
    }
  }
  return poles;
}

/** Mean of each whole cell (x, y of its centre, y up); cells with a missing sample are left out. */
function cellMeans(samples: Float64Array, width: number, height: number) {
  const cells: { x: number; y: number; mean: number }[] = [];
  const size = Math.min(CELL_PX, width, height);
  for (let y0 = 0; y0 + size <= height; y0 += size) {
    for (let x0 = 0; x0 + size <= width; x0 += size) {
      let sum = 0;
      for (let y = y0; y < y0 + size; y++) {
        for (let x = x0; x < x0 + size; x++) sum += samples[x + width * y];
      }
      const mean = sum / (size * size);
      if (!Number.isNaN(mean)) cells.push({ x: x0 + size / 2, y: y0 + size / 2, mean });
    }
  }
  return cells;
}
