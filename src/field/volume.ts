import type { Grid2 } from '../grid/grid.js';
import { type ModeVolumeJob, modeVolume } from '../grid/mode-volume.js';
import { paddedSpectrum, type Sides } from './potential.js';

/**
 * The magnetic field [G] on a grid above a patch: `x` west, `y` north, `z` up. Sample (i, j) of level n is
 * element `i + nx * (j + ny * n)`: x runs fastest, then y, then the level. Samples lie `stepMm` apart, the
 * first on the patch's first pixel; level n is `heightsMm[n]` above the surface.
 */
export interface FieldVolume<A extends Float32Array | Float64Array = Float32Array | Float64Array> {
  readonly nx: number;
  readonly ny: number;
  readonly stepMm: number;
  readonly heightsMm: Float64Array;
  readonly x: A;
  readonly y: A;
  readonly z: A;
}

export interface VolumeOptions {
  /** What lies beyond the patch: nothing (zeros to twice its sides) or the patch again. */
  readonly sides?: Sides;
  /** Constant of the linear force-free field [1/Mm]; 0, the default, for the current-free one. */
  readonly alphaPerMm?: number;
  /** Every how many pixels a sample is taken; 1 for all. Samples are those of the full volume. */
  readonly every?: number;
  /** True to take the mean field (of the padded map) out; else it is the same at all heights. */
  readonly withoutMean?: boolean;
  /** Threads to use; by default as many as the machine runs, but one for a small volume. */
  readonly threads?: number;
}

/** What all modes left out may sum to, over the largest field of the map. */
const SINGLE_TOLERANCE = 3e-6;
const DOUBLE_TOLERANCE = 3e-10;

/**
 * The current-free or linear force-free field above a map at the heights given [Mm, not below 0], in
 * single precision: no component is off by more than 1e-5 of the largest field of the map. NaN counts as
 * zero. Throws RangeError for heights or an alpha that cannot be, or a volume beyond 4 GiB.
 */
export function potentialVolume(
  radial: Grid2<'G'>,
  heightsMm: Float64Array,
  options: VolumeOptions = {},
): FieldVolume<Float32Array> {
  const job = volumeJob(radial, heightsMm, options, SINGLE_TOLERANCE);
  const field = modeVolume(job, 'single', options.threads);
  return describe(job, field as { x: Float32Array; y: Float32Array; z: Float32Array });
}

/** The same in double precision, to 1e-9 of the largest field of the map. */
export function potentialVolumeDouble(
  radial: Grid2<'G'>,
  heightsMm: Float64Array,
  options: VolumeOptions = {},
): FieldVolume<Float64Array> {
  const job = volumeJob(radial, heightsMm, options, DOUBLE_TOLERANCE);
  const field = modeVolume(job, 'double', options.threads);
  return describe(job, field as { x: Float64Array; y: Float64Array; z: Float64Array });
}

function describe<A extends Float32Array | Float64Array>(
  { nx, ny, pixel, stride, heights }: ModeVolumeJob,
  { x, y, z }: { readonly x: A; readonly y: A; readonly z: A },
): FieldVolume<A> {
  return { nx, ny, stepMm: pixel * stride, heightsMm: heights, x, y, z };
}

function volumeJob(
  radial: Grid2<'G'>,
  heightsMm: Float64Array,
  options: VolumeOptions,
  tolerance: number,
): ModeVolumeJob {
  const { sides = 'open', alphaPerMm = 0, every = 1, withoutMean = false } = options;
  const [ny, nx] = radial.values.shape;
  if (!(Number.isInteger(every) && every >= 1)) throw new RangeError(`every ${every} pixels`);
  if (!heightsMm.every((height) => height >= 0 && Number.isFinite(height))) {
    throw new RangeError('a height below 0, or none');
  }
  const spectrum = paddedSpectrum(radial, sides);
  const longest = Math.max(spectrum.nx, spectrum.ny) * radial.pixelMm;
  if (!(Math.abs(alphaPerMm) < (2 * Math.PI) / longest)) {
    throw new RangeError(`alpha ${alphaPerMm} 1/Mm is not below the smallest wavenumber`);
  }
  return {
    spectrum,
    pixel: radial.pixelMm,
    alpha: alphaPerMm,
    mean: withoutMean ? 0 : spectrum.re[0] / (spectrum.nx * spectrum.ny),
    heights: heightsMm,
    nx: Math.ceil(nx / every),
    ny: Math.ceil(ny / every),
    stride: every,
    tolerance: tolerance * largestField(radial),
  };
}

function largestField(radial: Grid2<'G'>): number {
  let largest = 0;
  for (const value of radial.values.data) if (Math.abs(value) > largest) largest = Math.abs(value);
  return largest;
}
