import type { ComponentSource } from './component-names.js';
import type { SolarMap } from './solar-map.js';

export type { ComponentName, ComponentSource } from './component-names.js';

/** What both kinds of vector map have. */
interface VectorMapBase {
  /**
   * Geometry, observer and date, and as values the component along the line of sight (camera family) or the
   * radial one (heliographic family). A pixel without one of its components is NaN in every array.
   */
  readonly base: SolarMap;
  /** What was read, with the HDU of each. */
  readonly sources: readonly (ComponentSource & { readonly hdu: number })[];
}

/**
 * A vector map in the frame of the camera; nx * ny values each. psi is the azimuth counter-clockwise from
 * solar north on the sky as the observer sees it, known up to 180 degrees.
 */
export interface CameraVectorMap extends VectorMapBase {
  readonly kind: 'camera';
  /** Transverse field Bt [G]. */
  readonly transverseG: Float64Array;
  /** Bt^2 cos 2 psi and Bt^2 sin 2 psi [G^2], which do not change when the azimuth turns by 180 degrees. */
  readonly q: Float64Array;
  readonly u: Float64Array;
  /** Which azimuth is zero and which way it counts, in words. */
  readonly azimuthZero: string;
  /** Transverse components to solar north and west on the sky [G], where an ambiguity map resolves them. */
  readonly resolved?: { readonly northG: Float64Array; readonly westG: Float64Array };
  /** 1-sigma errors of a source pixel. */
  readonly errors?: {
    readonly strengthG: Float64Array;
    readonly inclinationRad: Float64Array;
    readonly azimuthRad: Float64Array;
  };
}

/** A vector map in heliographic components, nx * ny values each [G]. */
export interface HeliographicVectorMap extends VectorMapBase {
  readonly kind: 'heliographic';
  readonly westG: Float64Array;
  readonly northG: Float64Array;
  readonly radialG: Float64Array;
  /** 1-sigma errors of a source pixel. */
  readonly errors?: {
    readonly westG: Float64Array;
    readonly northG: Float64Array;
    readonly radialG: Float64Array;
  };
}

export type VectorMap = CameraVectorMap | HeliographicVectorMap;
