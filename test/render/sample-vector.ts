import {
  CURRENT_PER_GAUSS_PER_MEGAMETRE,
  currentNoise,
  verticalCurrent,
} from '../../src/currents/vertical-current.js';
import { makeVectorField } from '../../src/field/vector-field.js';
import { makeGrid } from '../../src/grid/grid.js';
import type { RegionPicture, VectorMaps } from '../../src/render/region-picture.js';
import { normalNoise } from '../support/random.js';
import { barePicture, type SampleOptions, type Spot } from './sample-patch.js';

/** A spot with the alpha [1/Mm] of its own current. */
export interface TwistedSpot extends Spot {
  readonly alphaPerMm: number;
}

/** A bipole whose spots are twisted in opposite senses, with a sheared inversion line between them. */
export const TWISTED_SPOTS: readonly TwistedSpot[] = [
  { peakG: 2100, x: 0.62, y: 0.55, radius: 0.08, alphaPerMm: 0.12 },
  { peakG: 700, x: 0.72, y: 0.4, radius: 0.1, alphaPerMm: -0.2 },
  { peakG: -1900, x: 0.42, y: 0.5, radius: 0.085, alphaPerMm: 0.08 },
  { peakG: -600, x: 0.3, y: 0.64, radius: 0.09, alphaPerMm: 0 },
  { peakG: -1100, x: 0.535, y: 0.56, radius: 0.035, alphaPerMm: 0.3 },
];

export interface SampleVectorOptions extends SampleOptions {
  readonly horizontalNoiseG?: number;
  readonly spots: readonly TwistedSpot[];
}

/**
 * Horizontal field of round spots Bz = P exp(-(r/s)^2): a swirl alpha P s^2 (1 - exp(-(r/s)^2)) / 2r,
 * whose curl is alpha Bz exactly (Stokes on circles), and an outward part, which has no curl.
 */
function horizontalField({ nx, ny, spots }: SampleVectorOptions, pixelMm: number) {
  const [bx, by] = [new Float64Array(nx * ny), new Float64Array(nx * ny)];
  const short = Math.min(nx, ny);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      for (const { peakG, x: cx, y: cy, radius, alphaPerMm } of spots) {
        const [dx, dy] = [x + 0.5 - cx * nx, y + 0.5 - cy * ny];
        const distance = Math.hypot(dx, dy);
        if (distance === 0) continue;
        const [size, share] = [radius * short, distance / (radius * short)];
        const fall = Math.exp(-(share ** 2));
        const outward = 0.9 * peakG * share * fall;
        const swirl = (alphaPerMm * pixelMm * peakG * size ** 2 * (1 - fall)) / (2 * distance);
        bx[x + nx * y] += (outward * dx - swirl * dy) / distance;
        by[x + nx * y] += (outward * dy + swirl * dx) / distance;
      }
    }
  }
  return { bx, by };
}

/** The maps of a vector picture of `options`, current and alpha taken from the noisy field as a run would. */
export function sampleVectorMaps(
  { patch, radialField }: RegionPicture,
  options: SampleVectorOptions,
): VectorMaps {
  const { nx, ny, pixelMm } = patch;
  const noiseG = options.horizontalNoiseG ?? options.noiseG ?? 12;
  const { bx, by } = horizontalField(options, pixelMm);
  const noise = normalNoise(11);
  const bz = radialField.values.data;
  for (let i = 0; i < bz.length; i++) {
    bx[i] += Number.isNaN(bz[i]) ? Number.NaN : noiseG * noise();
    by[i] += Number.isNaN(bz[i]) ? Number.NaN : noiseG * noise();
  }
  const field = makeVectorField(bx, by, bz, nx, ny, pixelMm);
  const currentDensity = verticalCurrent(field);
  const alphaLeastG = 4 * noiseG;
  const alpha = currentDensity.values.data.map((density, i) =>
    Math.abs(bz[i]) < alphaLeastG ? Number.NaN : density / CURRENT_PER_GAUSS_PER_MEGAMETRE / bz[i],
  );
  return {
    horizontal: { x: field.x, y: field.y },
    horizontalNoiseG: noiseG,
    currentDensity,
    currentNoise: currentNoise(field, { x: noiseG, y: noiseG, z: noiseG }),
    alpha: makeGrid(alpha, nx, ny, '1/Mm', pixelMm),
    alphaLeastG,
  };
}

/** A vector picture without figures. */
export function bareVectorPicture(
  options: SampleVectorOptions,
  change: Partial<RegionPicture> = {},
): RegionPicture {
  const bare = barePicture(options);
  return { ...bare, vector: sampleVectorMaps(bare, options), ...change };
}
