import type { Grid2 } from '../grid/grid.js';

/** Why a patch pixel has no value. */
export const PIXEL_GOOD = 0;
export const PIXEL_MISSING = 1; // blank or NaN in the source
export const PIXEL_OFF_LIMB = 2;
export const PIXEL_OUTSIDE_IMAGE = 3;

/** Where a patch lies on the Sun; angles in degrees, mu the cosine of the foreshortening angle. */
export interface PatchCenter {
  readonly stonyhurstLongitudeDeg: number;
  readonly stonyhurstLatitudeDeg: number;
  readonly carringtonLongitudeDeg: number;
  readonly mu: number;
}

/**
 * A region on an equal-area grid (Lambert cylindrical about the region's centre), x west and y
 * north at the centre. `field` is NaN exactly where `mask` is not PIXEL_GOOD.
 */
export interface LocalPatch {
  readonly nx: number;
  readonly ny: number;
  readonly pixelMm: number;
  readonly center: PatchCenter;
  /** Radius of the sphere the grid lies on [Mm]; the nominal solar radius where absent. */
  readonly sphereRadiusMm?: number;
  /** What `field` holds: the component along the line of sight, or already the radial one. */
  readonly component: 'line-of-sight' | 'radial';
  readonly field: Grid2<'G'>;
  /** nx * ny, PIXEL_* codes. */
  readonly mask: Uint8Array;
  /**
   * Unit vector from the pixel to the observer in the pixel's own frame: x west, y north along the
   * patch axes, z radially out, so z is the cosine mu. nx * ny each, given off the limb too.
   */
  readonly toObserver: {
    readonly x: Float64Array;
    readonly y: Float64Array;
    readonly z: Float64Array;
  };
}
