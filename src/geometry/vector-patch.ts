import type { Grid2 } from '../grid/grid.js';
import type { LocalPatch } from './patch.js';

/** Three components [G] on the grid of a patch: x west, y north, z up in each pixel's own frame. */
export interface PatchVector {
  readonly x: Grid2<'G'>;
  readonly y: Grid2<'G'>;
  readonly z: Grid2<'G'>;
}

/**
 * 1-sigma error [G] of the components along a patch pixel's x, y and z, nx * ny each; NaN where the field
 * is missing. Of an ambiguous field it is the mean (in squares) over both readings of the azimuth.
 */
export interface PatchErrors {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly z: Float64Array;
}

/** A patch with the whole field, from a map in the frame of the camera. */
export interface CameraVectorPatch {
  readonly kind: 'camera';
  /** Holds the component along the line of sight. */
  readonly patch: LocalPatch;
  readonly warnings: readonly string[];
  /**
   * Transverse field [G] and its azimuth [rad] in the plane of the sky as the observer sees it,
   * counter-clockwise from the projection of the patch's y axis; known up to 180 degrees unless `field`
   * is there. NaN is missing.
   */
  readonly transverseG: Float64Array;
  readonly azimuthRad: Float64Array;
  /** The field where the map says which way the transverse one points. */
  readonly field?: PatchVector;
  readonly errors?: PatchErrors;
}

/** A patch with the whole field, from a map of heliographic components. */
export interface HeliographicVectorPatch {
  readonly kind: 'heliographic';
  /** Holds the radial component. */
  readonly patch: LocalPatch;
  readonly warnings: readonly string[];
  readonly field: PatchVector;
  readonly errors?: PatchErrors;
}

export type VectorPatch = CameraVectorPatch | HeliographicVectorPatch;
