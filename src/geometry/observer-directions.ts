import { columnVectors, type TargetGrid } from './patch-to-image.js';

/** Unit vectors to the observer in each pixel's own frame: x west, y north along the patch, z up. */
export function observerDirections(grid: TargetGrid): {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
} {
  const { nx, ny, frame, view } = grid;
  const x = new Float64Array(nx * ny);
  const y = new Float64Array(nx * ny);
  const z = new Float64Array(nx * ny);
  const columns = columnVectors(grid, 1);
  const d = view.distanceRadii;
  const observer = [d * frame.west[2], d * frame.north[2], d * frame.up[2]] as const;
  for (let j = 0; j < ny; j++) {
    const sine = ((j + 0.5 - ny / 2) * grid.pixelMm) / frame.radiusMm;
    directionLine(columns, Math.max(-1, Math.min(1, sine)), ...observer, nx * j, x, y, z);
  }
  return { x, y, z };
}

/** One row of `observerDirections`, from `at` on; the observer at (ow, on, ou) in patch axes. */
function directionLine(
  columns: Float64Array,
  sine: number,
  ow: number,
  on: number,
  ou: number,
  at: number,
  x: Float64Array,
  y: Float64Array,
  z: Float64Array,
): void {
  const cosine = Math.sqrt(1 - sine * sine);
  for (let i = 0; 2 * i < columns.length; i++) {
    const sinPhi = columns[2 * i];
    const cosPhi = columns[2 * i + 1];
    // Towards the observer in patch axes, then along the axes at this pixel.
    const w = ow - cosine * sinPhi;
    const n = on - sine;
    const u = ou - cosine * cosPhi;
    const length = Math.sqrt(w * w + n * n + u * u);
    const radial = w * sinPhi + u * cosPhi;
    x[at + i] = (w * cosPhi - u * sinPhi) / length;
    y[at + i] = (n * cosine - radial * sine) / length;
    z[at + i] = (radial * cosine + n * sine) / length;
  }
}
