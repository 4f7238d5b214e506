import { inPatchAxes, type LocalVectors } from './patch-axes.js';
import type { TargetGrid } from './patch-to-image.js';

/** Unit vectors to the observer in each pixel's own frame: x west, y north along the patch, z up. */
export function observerDirections(grid: TargetGrid): LocalVectors {
  const { x, y, z } = inPatchAxes(grid, [0, 0, grid.view.distanceRadii]);
  // From the Sun's centre so far; the pixel lies one radius up.
  for (let i = 0; i < x.length; i++) {
    const ahead = z[i] - 1;
    const length = Math.sqrt(x[i] * x[i] + y[i] * y[i] + ahead * ahead);
    x[i] /= length;
    y[i] /= length;
    z[i] = ahead / length;
  }
  return { x, y, z };
}
