import { UsageError } from '../errors.js';
import { type FieldLine, traceFieldLines } from '../field/field-lines.js';
import { geometricHeights, uniformHeights } from '../field/heights.js';
import { seedsByFlux } from '../field/line-seeds.js';
import { type Sides, transformSize } from '../field/potential.js';
import { type FieldVolume, potentialVolume } from '../field/volume.js';
import type { Grid2 } from '../grid/grid.js';

export type { FieldLine } from '../field/field-lines.js';
export type { FieldVolume } from '../field/volume.js';

/** What a region's volume needs of its analysis. */
export interface VolumeSource {
  readonly radialField: Grid2<'G'>;
  readonly sides: Sides;
}

/** The volume a user may ask for; all optional. */
export interface RegionVolumeOptions {
  /** Number of levels, equally far apart from the surface on. */
  readonly levels?: number;
  /** Height of the highest level [Mm]; half the patch's shorter side by default. */
  readonly topMm?: number;
  /** Every how many pixels of the patch a sample is taken. */
  readonly every?: number;
  /** Force-free alpha [1/Mm]; the current-free field without it. */
  readonly alphaPerMm?: number;
}

export const DEFAULT_LEVELS = 32;
/** Largest volume that is written: writing it takes three times as much memory. */
const MOST_BYTES = 512 * 2 ** 20;
const BYTES_PER_SAMPLE = 3 * 4;

/** Volumes that lines are traced in have at most so many samples a side, and levels. */
const LINE_SAMPLES = 256;
const LINE_LEVELS = 64;

/**
 * The current-free (or, with alpha, linear force-free) field above a region at equally spaced heights [G].
 * Throws UsageError where that would be too large, or alpha is beyond what the patch allows.
 */
export function regionVolume(
  { radialField, sides }: VolumeSource,
  options: RegionVolumeOptions = {},
): FieldVolume<Float32Array> {
  const { levels = DEFAULT_LEVELS, every = 1, alphaPerMm = 0 } = options;
  const [ny, nx] = radialField.values.shape;
  const samples = Math.ceil(nx / every) * Math.ceil(ny / every) * levels;
  const bytes = BYTES_PER_SAMPLE * samples;
  if (bytes > MOST_BYTES) {
    throw new UsageError(
      `a volume of ${Math.ceil(nx / every)} x ${Math.ceil(ny / every)} x ${levels} takes ${Math.round(bytes / 2 ** 20)} MiB, more than ${MOST_BYTES / 2 ** 20}: fewer --levels, or --every N pixels`,
    );
  }
  checkAlpha(radialField, sides, alphaPerMm);
  const topMm = options.topMm ?? 0.5 * Math.min(nx, ny) * radialField.pixelMm;
  return potentialVolume(radialField, uniformHeights(levels, topMm), { sides, every, alphaPerMm });
}

/**
 * Field lines of a region from `count` places that each stand for the same unsigned flux, traced in the
 * current-free (or linear force-free) field up to the length of the patch's longer side. Coordinates in
 * Mm from the patch's first pixel. The same region gives the same lines.
 */
export function regionFieldLines(
  { radialField, sides }: VolumeSource,
  count: number,
  alphaPerMm = 0,
): FieldLine[] {
  checkAlpha(radialField, sides, alphaPerMm);
  const [ny, nx] = radialField.values.shape;
  if (Math.min(nx, ny) < 4) return [];
  const every = Math.min(
    Math.ceil(Math.max(nx, ny) / LINE_SAMPLES),
    Math.floor((Math.min(nx, ny) - 1) / 2),
  );
  const stepMm = every * radialField.pixelMm;
  const topMm = Math.max(nx, ny) * radialField.pixelMm;
  const levels = Math.min(LINE_LEVELS, 1 + Math.floor(topMm / stepMm));
  const heights = geometricHeights(levels, topMm, Math.min(stepMm, topMm / (levels - 1)));
  const volume = potentialVolume(radialField, heights, { sides, every, alphaPerMm });
  return traceFieldLines(volume, seedsByFlux(volume, count));
}

function checkAlpha(field: Grid2<'G'>, sides: Sides, alphaPerMm: number): void {
  const [ny, nx] = field.values.shape;
  const side = Math.max(transformSize(nx, sides), transformSize(ny, sides)) * field.pixelMm;
  const limit = (2 * Math.PI) / side;
  if (Math.abs(alphaPerMm) < limit) return;
  throw new UsageError(
    `alpha ${alphaPerMm} 1/Mm is too large for a field volume of this patch: below ${limit.toPrecision(2)} with ${sides} sides`,
  );
}
