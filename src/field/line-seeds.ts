import { seededUniform } from '../grid/random.js';
import type { FieldVolume } from './volume.js';

/**
 * Places at the lowest level of a volume where field lines should start, each standing for the same
 * unsigned flux: samples are taken at equal steps of the flux summed along the rows, from a start that
 * the seed sets, and lie anywhere within their cell. x, y [Mm from the first sample] and height [Mm].
 * The same volume, count and seed give the same places. None where there is no flux.
 */
export function seedsByFlux(
  volume: FieldVolume,
  count: number,
  seed = 1,
): [number, number, number][] {
  const { nx, ny, stepMm, heightsMm, z } = volume;
  const next = seededUniform(seed);
  let total = 0;
  for (let i = 0; i < nx * ny; i++) total += Math.abs(z[i]);
  if (!(total > 0 && count >= 1)) return [];
  const seeds: [number, number, number][] = [];
  const step = total / count;
  let wanted = step * next();
  let sum = 0;
  for (let i = 0; i < nx * ny; i++) {
    sum += Math.abs(z[i]);
    for (; sum > wanted && seeds.length < count; wanted += step) {
      const x = within((i % nx) + next() - 0.5, nx);
      const y = within(Math.floor(i / nx) + next() - 0.5, ny);
      seeds.push([x * stepMm, y * stepMm, heightsMm[0]]);
    }
  }
  return seeds;
}

/** A place in samples, kept between the first and the last one. */
function within(place: number, samples: number): number {
  return Math.min(samples - 1, Math.max(0, place));
}
