import { columnVectors, type TargetGrid } from './patch-to-image.js';
import type { Vector3 } from './solar-frame.js';

/** A vector a pixel along the pixel's own axes: x west, y north along the patch, z up; nx * ny each. */
export interface LocalVectors {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
}

/** A vector of the observer frame (solar-frame.ts) along the axes of every pixel of a patch. */
export function inPatchAxes(grid: TargetGrid, vector: Readonly<Vector3>): LocalVectors {
  const { nx, ny, frame } = grid;
  const out = {
    x: new Float64Array(nx * ny),
    y: new Float64Array(nx * ny),
    z: new Float64Array(nx * ny),
  };
  const columns = columnVectors(grid, 1);
  const [west, north, up] = [frame.west, frame.north, frame.up].map(
    (axis) => axis[0] * vector[0] + axis[1] * vector[1] + axis[2] * vector[2],
  );
  for (let j = 0; j < ny; j++) {
    const sine = ((j + 0.5 - ny / 2) * grid.pixelMm) / frame.radiusMm;
    localLine(
      columns,
      Math.max(-1, Math.min(1, sine)),
      west,
      north,
      up,
      nx * j,
      out.x,
      out.y,
      out.z,
    );
  }
  return out;
}

/** One row, from `at` on, of the vector (west, north, up) along the axes at the patch's centre. */
function localLine(
  columns: Float64Array,
  sine: number,
  west: number,
  north: number,
  up: number,
  at: number,
  x: Float64Array,
  y: Float64Array,
  z: Float64Array,
): void {
  const cosine = Math.sqrt(1 - sine * sine);
  for (let i = 0; 2 * i < columns.length; i++) {
    const sinPhi = columns[2 * i];
    const cosPhi = columns[2 * i + 1];
    const radial = west * sinPhi + up * cosPhi;
    x[at + i] = west * cosPhi - up * sinPhi;
    y[at + i] = north * cosine - radial * sine;
    z[at + i] = radial * cosine + north * sine;
  }
}
