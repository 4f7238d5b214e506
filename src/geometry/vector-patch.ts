import { type Grid2, makeGrid } from '../grid/grid.js';
import { METRES_PER_MEGAMETRE } from '../units.js';
import { makePatch, type PatchOptions, type PatchResult } from './make-patch.js';
import type { LocalPatch } from './patch.js';
import { inPatchAxes, type LocalVectors } from './patch-axes.js';
import { patchFrame } from './patch-frame.js';
import type { TargetGrid } from './patch-to-image.js';
import { resample } from './resample.js';
import { viewFrame } from './solar-frame.js';
import type { SolarMap } from './solar-map.js';
import type { CameraVectorMap, HeliographicVectorMap, VectorMap } from './vector-map.js';

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

/** The grid that makePatch laid over a map. */
function gridOf(map: SolarMap, patch: LocalPatch): TargetGrid {
  const view = viewFrame(map.observer);
  const { stonyhurstLongitudeDeg, stonyhurstLatitudeDeg } = patch.center;
  const radiusMm = map.observer.solarRadiusM / METRES_PER_MEGAMETRE;
  const frame = patchFrame(view, stonyhurstLongitudeDeg, stonyhurstLatitudeDeg, radiusMm);
  return { frame, view, nx: patch.nx, ny: patch.ny, pixelMm: patch.pixelMm };
}

/** Resamples values on the pixels of the map to the patch. */
function resampler(map: SolarMap, grid: TargetGrid): (values: Float64Array) => Float64Array {
  const { nx, ny, geometry } = map;
  return (values) => resample(grid, { nx, ny, values, geometry }).field;
}

/** Foreshortening beyond this leaves the share of noise as it is there. */
const LEAST_MU = 0.17;

/**
 * Share of a source pixel's variance that a patch pixel keeps: one where it is no larger than the source pixel
 * on the surface, else the areas' ratio.
 */
function varianceShare(map: SolarMap, patch: LocalPatch): (i: number) => number {
  const ratio = map.pixelMm ** 2 / patch.pixelMm ** 2;
  const isSky = map.geometry.frame === 'helioprojective';
  const { z } = patch.toObserver;
  return (i) => Math.min(1, isSky ? ratio / Math.max(LEAST_MU, z[i]) : ratio);
}

/** The error of a variance; interpolation may take a variance below zero beside a steep step. */
const deviation = (variance: number) => Math.sqrt(Math.max(0, variance));

function emptyVectors(size: number): LocalVectors {
  return { x: new Float64Array(size), y: new Float64Array(size), z: new Float64Array(size) };
}

function asGrids({ x, y, z }: LocalVectors, { nx, ny, pixelMm }: LocalPatch): PatchVector {
  const grid = (data: Float64Array) => makeGrid(data, nx, ny, 'G', pixelMm);
  return { x: grid(x), y: grid(y), z: grid(z) };
}

/**
 * West, north and radial are turned about the vertical alone, by the angle between the patch's y axis and solar
 * north in each pixel. They are smooth over the region, so they are resampled as they are and turned after
 * it (a Cartesian detour differs by the square of pixel over solar radius only).
 */
function heliographicPatch(
  map: HeliographicVectorMap,
  found: PatchResult,
): HeliographicVectorPatch {
  const { patch } = found;
  const grid = gridOf(map.base, patch);
  const toPatch = resampler(map.base, grid);
  const { sinB0, cosB0 } = grid.view;
  const pole = inPatchAxes(grid, [0, cosB0, sinB0]);
  const [west, north] = [toPatch(map.westG), toPatch(map.northG)];
  const size = patch.nx * patch.ny;
  const field = { ...emptyVectors(size), z: patch.field.values.data };
  for (let i = 0; i < size; i++) {
    const across = Math.hypot(pole.x[i], pole.y[i]);
    const [sine, cosine] = [pole.x[i] / across, pole.y[i] / across];
    field.x[i] = west[i] * cosine + north[i] * sine;
    field.y[i] = north[i] * cosine - west[i] * sine;
  }
  const errors = map.errors && heliographicErrors(map, patch, toPatch, pole);
  return {
    kind: 'heliographic',
    ...found,
    field: asGrids(field, patch),
    ...(errors && { errors }),
  };
}

function heliographicErrors(
  map: HeliographicVectorMap,
  patch: LocalPatch,
  toPatch: (values: Float64Array) => Float64Array,
  pole: LocalVectors,
): PatchErrors {
  const { westG, northG, radialG } = map.errors!;
  const [west, north, radial] = [westG, northG, radialG].map((error) =>
    toPatch(error.map((value) => value * value)),
  );
  const share = varianceShare(map.base, patch);
  const out = emptyVectors(west.length);
  for (let i = 0; i < west.length; i++) {
    const sine2 = pole.x[i] ** 2 / (pole.x[i] ** 2 + pole.y[i] ** 2);
    const part = share(i);
    out.x[i] = deviation(part * (west[i] * (1 - sine2) + north[i] * sine2));
    out.y[i] = deviation(part * (north[i] * (1 - sine2) + west[i] * sine2));
    out.z[i] = deviation(part * radial[i]);
  }
  return out;
}

/**
 * Angle [rad], counter-clockwise as the observer sees it, from the projection of each pixel's y axis to that of
 * solar north.
 */
function northFromPatchAxis(grid: TargetGrid, { toObserver: n }: LocalPatch): Float64Array {
  const north = inPatchAxes(grid, [0, 1, 0]);
  return north.x.map((nx, i) => {
    const along = nx * n.x[i] + north.y[i] * n.y[i] + north.z[i] * n.z[i];
    return Math.atan2(north.z[i] * n.x[i] - nx * n.z[i], north.y[i] - n.y[i] * along);
  });
}

/**
 * Line-of-sight field, Q and U are resampled, which the ambiguity leaves alone; the azimuth then counts from
 * the patch's own axis.
 */
function cameraPatch(map: CameraVectorMap, found: PatchResult): CameraVectorPatch {
  const { patch } = found;
  const grid = gridOf(map.base, patch);
  const toPatch = resampler(map.base, grid);
  const turn = northFromPatchAxis(grid, patch);
  const transverseG = new Float64Array(turn.length);
  const azimuthRad = new Float64Array(turn.length);
  if (map.resolved) {
    const [north, west] = [toPatch(map.resolved.northG), toPatch(map.resolved.westG)];
    for (let i = 0; i < turn.length; i++) {
      transverseG[i] = Math.hypot(north[i], west[i]);
      azimuthRad[i] = Math.atan2(-west[i], north[i]) + turn[i];
    }
  } else {
    const [q, u] = [toPatch(map.q), toPatch(map.u)];
    for (let i = 0; i < turn.length; i++) {
      transverseG[i] = Math.sqrt(Math.hypot(q[i], u[i]));
      azimuthRad[i] = Math.atan2(u[i], q[i]) / 2 + turn[i];
    }
  }
  const field = map.resolved && resolvedField(patch, transverseG, azimuthRad);
  const errors = map.errors && cameraErrors(map, patch, toPatch, azimuthRad);
  return {
    kind: 'camera',
    ...found,
    transverseG,
    azimuthRad,
    ...(field && { field }),
    ...(errors && { errors }),
  };
}

/**
 * Unit vectors across the line of sight n at azimuth and 90 degrees on from it, in the pixel's own axes: from
 * the projected y axis (-n1 n2, 1 - n2^2, -n2 n3) / s and, to its left, (-n3, 0, n1) / s.
 */
function skyVectors(
  { toObserver }: LocalPatch,
  i: number,
  azimuth: number,
  along: Float64Array,
  across: Float64Array,
): void {
  const [n1, n2, n3] = [toObserver.x[i], toObserver.y[i], toObserver.z[i]];
  const s = Math.sqrt(n1 * n1 + n3 * n3);
  const [cosine, sine] = [Math.cos(azimuth), Math.sin(azimuth)];
  along[0] = (-cosine * n1 * n2 - sine * n3) / s;
  along[1] = cosine * s;
  along[2] = (-cosine * n2 * n3 + sine * n1) / s;
  across[0] = (sine * n1 * n2 - cosine * n3) / s;
  across[1] = -sine * s;
  across[2] = (sine * n2 * n3 + cosine * n1) / s;
}

/** Camera to local components (Gary & Hagyard 1990, Sol. Phys. 126, 21). */
function resolvedField(
  patch: LocalPatch,
  transverseG: Float64Array,
  azimuthRad: Float64Array,
): PatchVector {
  const { toObserver: n } = patch;
  const los = patch.field.values.data;
  const out = emptyVectors(los.length);
  const along = new Float64Array(3);
  const across = new Float64Array(3);
  for (let i = 0; i < los.length; i++) {
    skyVectors(patch, i, azimuthRad[i], along, across);
    out.x[i] = los[i] * n.x[i] + transverseG[i] * along[0];
    out.y[i] = los[i] * n.y[i] + transverseG[i] * along[1];
    out.z[i] = los[i] * n.z[i] + transverseG[i] * along[2];
  }
  return asGrids(out, patch);
}

/** An azimuth of which nothing is known is uniform over 180 degrees: its deviation is pi / sqrt(12). */
const MOST_AZIMUTH_ERROR = Math.PI / Math.sqrt(12);

/** Variances along the line of sight, along the transverse field and across both, and the first two's covariance. */
function sourceVariances(map: CameraVectorMap): readonly Float64Array[] {
  const { strengthG, inclinationRad, azimuthRad } = map.errors!;
  const los = map.base.values;
  const out = [0, 1, 2, 3].map(() => new Float64Array(los.length));
  for (let i = 0; i < los.length; i++) {
    const transverse = map.transverseG[i];
    const strength = Math.hypot(los[i], transverse);
    const cosine = strength === 0 ? 1 : los[i] / strength;
    const sine = strength === 0 ? 0 : transverse / strength;
    const radial = strengthG[i] ** 2;
    const turning = (strength * inclinationRad[i]) ** 2;
    out[0][i] = cosine * cosine * radial + sine * sine * turning;
    out[1][i] = sine * sine * radial + cosine * cosine * turning;
    out[2][i] = (transverse * Math.min(azimuthRad[i], MOST_AZIMUTH_ERROR)) ** 2;
    out[3][i] = sine * cosine * (radial - turning);
  }
  return out;
}

/**
 * Errors of strength, inclination and azimuth, taken as independent, along the patch's axes. The covariance of
 * line-of-sight and transverse field changes its sign with the reading of the azimuth: it counts where the
 * ambiguity is resolved, and drops out of the mean over both readings where not.
 */
function cameraErrors(
  map: CameraVectorMap,
  patch: LocalPatch,
  toPatch: (values: Float64Array) => Float64Array,
  azimuthRad: Float64Array,
): PatchErrors {
  const variances = sourceVariances(map);
  const [losV, alongV, acrossV] = variances.slice(0, 3).map(toPatch);
  const covariance = map.resolved && toPatch(variances[3]);
  const share = varianceShare(map.base, patch);
  const { x, y, z } = patch.toObserver;
  const out = emptyVectors(losV.length);
  const along = new Float64Array(3);
  const across = new Float64Array(3);
  for (let i = 0; i < losV.length; i++) {
    skyVectors(patch, i, azimuthRad[i], along, across);
    const part = share(i);
    [x, y, z].forEach((n, axis) => {
      const mixed = covariance ? 2 * covariance[i] * n[i] * along[axis] : 0;
      const variance =
        losV[i] * n[i] ** 2 + alongV[i] * along[axis] ** 2 + acrossV[i] * across[axis] ** 2 + mixed;
      [out.x, out.y, out.z][axis][i] = deviation(part * variance);
    });
  }
  return out;
}

/**
 * Cuts a local patch with the whole field out of a vector map: the patch of makePatch for the map's base, and on
 * the same grid all components along each pixel's own axes. Throws as makePatch does.
 */
export function makeVectorPatch(map: VectorMap, options: PatchOptions = {}): VectorPatch {
  const found = makePatch(map.base, options);
  return map.kind === 'camera' ? cameraPatch(map, found) : heliographicPatch(map, found);
}
