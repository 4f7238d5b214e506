import type { Drawing } from './drawing.js';
import type { Raster } from './map-layer.js';

/** What a picture is made of: pixels painted below, vector shapes and text above. */
export interface Canvas {
  readonly drawing: Drawing;
  /** Painting is put off until the vector part is on its way to another thread. */
  readonly paints: ((raster: Raster) => void)[];
}
