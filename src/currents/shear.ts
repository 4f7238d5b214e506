import type { InversionLine } from '../field/inversion-line.js';
import { fieldArrays, noiseAt, type VectorField, type VectorNoise } from '../field/vector-field.js';
import { bilinear } from '../grid/gradient.js';
import type { Grid2 } from '../grid/grid.js';
import { type Interval, intervalFromDraws } from '../grid/interval.js';
import { seededNormalFill } from '../grid/random.js';

/** From this shear on [deg] a piece of the line counts as sheared. */
export const SHEARED_FROM_DEG = 45;
/** A horizontal field below this many deviations of its noise has no direction to speak of. */
const SIGNAL_DEVIATIONS = 3;
const DRAWS = 64;

/** Shear of the horizontal field along the inversion line. */
export interface LineShear {
  /** Mean angle [deg] between the measured and the current-free horizontal field, by length. */
  readonly meanDeg: Interval;
  /** The same with the field's strength as weight too. */
  readonly weightedDeg: Interval;
  /** Length [Mm] with shear above 45 degrees. */
  readonly shearedMm: Interval;
  /** Length [Mm] along which the horizontal field stands above its noise, so that shear is known. */
  readonly knownMm: number;
}

interface Sample {
  readonly stepMm: number;
  readonly bx: number;
  readonly by: number;
  readonly px: number;
  readonly py: number;
  readonly sigma: number;
}

/** Unsigned angle [deg], 0 to 180, between two horizontal vectors; NaN where one is zero. */
export function shearAngleDeg(bx: number, by: number, px: number, py: number): number {
  const sizes = Math.hypot(bx, by) * Math.hypot(px, py);
  if (!(sizes > 0)) return Number.NaN;
  return (Math.acos(Math.min(1, Math.max(-1, (bx * px + by * py) / sizes))) * 180) / Math.PI;
}

/** Fields at the middle of every segment of the lines; missing and weak ones are left out. */
function sampleLines(
  lines: readonly InversionLine[],
  field: VectorField,
  potential: { readonly x: Grid2<'G'>; readonly y: Grid2<'G'> },
  noise: VectorNoise,
): Sample[] {
  const { nx, ny, pixelMm, bx, by } = fieldArrays(field);
  const samples: Sample[] = [];
  for (const { x, y } of lines) {
    for (let i = 0; i + 1 < x.length; i++) {
      const at = [0.5 * (x[i] + x[i + 1]), 0.5 * (y[i] + y[i + 1])] as const;
      const read = (values: Float64Array) => bilinear(values, nx, ny, at[0], at[1]);
      const pixel = Math.round(at[0]) + nx * Math.round(at[1]);
      const sigma = Math.hypot(noiseAt(noise.x, pixel), noiseAt(noise.y, pixel)) / Math.SQRT2;
      const sample = {
        stepMm: pixelMm * Math.hypot(x[i + 1] - x[i], y[i + 1] - y[i]),
        bx: read(bx),
        by: read(by),
        px: read(potential.x.values.data),
        py: read(potential.y.values.data),
        sigma,
      };
      if (Math.hypot(sample.bx, sample.by) >= SIGNAL_DEVIATIONS * sigma) samples.push(sample);
    }
  }
  return samples;
}

/** Sums over the samples with errors added from `errors`, two a sample. */
function sumShear(samples: readonly Sample[], errors: Float64Array) {
  let [length, angle, weight, weighted, sheared] = [0, 0, 0, 0, 0];
  samples.forEach(({ stepMm, bx, by, px, py, sigma }, i) => {
    const ux = bx + sigma * errors[2 * i];
    const uy = by + sigma * errors[2 * i + 1];
    const shear = shearAngleDeg(ux, uy, px, py);
    if (Number.isNaN(shear)) return;
    const size = stepMm * Math.hypot(ux, uy);
    length += stepMm;
    angle += stepMm * shear;
    weight += size;
    weighted += size * shear;
    if (shear >= SHEARED_FROM_DEG) sheared += stepMm;
  });
  return { length, mean: angle / length, weighted: weighted / weight, sheared };
}

/**
 * Shear angle (Hagyard et al. 1984, Sol. Phys. 91, 115) along inversion lines: between the measured
 * horizontal field and the current-free one with the same Bz, and the length where it exceeds 45
 * degrees. Intervals from seeded draws of the noise, independent from segment to segment. All NaN or
 * zero without a line.
 */
export function measureShear(
  lines: readonly InversionLine[],
  field: VectorField,
  potential: { readonly x: Grid2<'G'>; readonly y: Grid2<'G'> },
  noise: VectorNoise,
  seed = 1,
): LineShear {
  const samples = sampleLines(lines, field, potential, noise);
  const errors = new Float64Array(2 * samples.length);
  const value = sumShear(samples, errors);
  const fill = seededNormalFill(seed);
  const draws = Array.from({ length: DRAWS }, () => {
    fill(errors);
    return sumShear(samples, errors);
  });
  const interval = (of: (sums: typeof value) => number) =>
    intervalFromDraws(of(value), draws.map(of));
  const sheared = interval(({ sheared: length }) => length);
  return {
    meanDeg: interval(({ mean }) => mean),
    weightedDeg: interval(({ weighted }) => weighted),
    shearedMm: {
      ...sheared,
      low: Math.max(0, sheared.low),
      high: Math.min(value.length, sheared.high),
    },
    knownMm: value.length,
  };
}
