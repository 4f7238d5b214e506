import { QUANTITY_FACTS, type Quantity, type QuantityKey } from '../../src/figures/quantity.js';
import { type LocalPatch, PIXEL_GOOD, PIXEL_MISSING } from '../../src/geometry/patch.js';
import { makeGrid } from '../../src/grid/grid.js';
import type { RegionPicture } from '../../src/render/region-picture.js';
import { normalNoise } from '../support/random.js';

/** A round spot of the sample field: peak [G], place and Gaussian radius as shares of the sides. */
export interface Spot {
  readonly peakG: number;
  readonly x: number;
  readonly y: number;
  readonly radius: number;
}

export interface SampleOptions {
  readonly nx: number;
  readonly ny: number;
  readonly spots: readonly Spot[];
  readonly noiseG?: number;
  readonly longitudeDeg?: number;
  readonly latitudeDeg?: number;
  readonly widthMm?: number;
  /** True for a pixel (as shares of the sides) without a value. */
  readonly missing?: (u: number, v: number) => boolean;
}

/** Two-spot region with an overlap of polarities in the middle. */
export const BIPOLE_SPOTS: readonly Spot[] = [
  { peakG: 2100, x: 0.62, y: 0.55, radius: 0.07 },
  { peakG: 700, x: 0.7, y: 0.42, radius: 0.1 },
  { peakG: -1900, x: 0.42, y: 0.5, radius: 0.075 },
  { peakG: -600, x: 0.32, y: 0.62, radius: 0.09 },
  { peakG: -1100, x: 0.535, y: 0.56, radius: 0.03 },
];

/** A radial patch of spots and seeded noise; NaN where `missing` says so. */
export function samplePatch(options: SampleOptions): LocalPatch {
  const { nx, ny, spots, noiseG = 12, missing = () => false } = options;
  const data = new Float64Array(nx * ny);
  const mask = new Uint8Array(nx * ny).fill(PIXEL_GOOD);
  const noise = normalNoise(7);
  const short = Math.min(nx, ny);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      let sum = noiseG * noise();
      for (const spot of spots) {
        const distance = Math.hypot(x + 0.5 - spot.x * nx, y + 0.5 - spot.y * ny) / short;
        sum += spot.peakG * Math.exp(-((distance / spot.radius) ** 2));
      }
      const gone = missing((x + 0.5) / nx, (y + 0.5) / ny);
      data[x + nx * y] = gone ? Number.NaN : sum;
      if (gone) mask[x + nx * y] = PIXEL_MISSING;
    }
  }
  const pixelMm = (options.widthMm ?? 180) / nx;
  const constant = (value: number) => new Float64Array(nx * ny).fill(value);
  return {
    nx,
    ny,
    pixelMm,
    center: {
      stonyhurstLongitudeDeg: options.longitudeDeg ?? -23.4,
      stonyhurstLatitudeDeg: options.latitudeDeg ?? 17.2,
      carringtonLongitudeDeg: 141.3,
      mu: 0.87,
    },
    component: 'radial',
    field: makeGrid(data, nx, ny, 'G', pixelMm),
    mask,
    toObserver: { x: constant(0), y: constant(0), z: constant(1) },
  };
}

/** A picture without analysis, for shapes and sizes an analysis would take long over. */
export function barePicture(
  options: SampleOptions,
  change: Partial<RegionPicture> = {},
): RegionPicture {
  const patch = samplePatch(options);
  const { nx, ny, pixelMm, center } = patch;
  return {
    source: 'marrow-hill-20310504-120000.fits',
    observed: '2031-05-04T12:00:00.000Z',
    toolVersion: '0.1.0',
    region: { id: 'MH-2', center, patch: { nx, ny, pixelMm }, quantities: {}, flags: [] },
    patch,
    radialField: patch.field,
    currentDensity: undefined,
    inversionLines: [],
    ...change,
  };
}

/** A picture with every part filled by hand: made-up figures, one inversion line, a current map. */
export function filledPicture(options: SampleOptions): RegionPicture {
  const bare = barePicture(options);
  const { nx, ny, pixelMm } = bare.patch;
  const bases = ['measured', 'extrapolated', 'prior', 'assumed'] as const;
  const figure = ([key, { unit }]: [string, { unit: Quantity['unit'] }], i: number) => {
    const value = (i % 3 === 0 ? -1 : 1) * 1.2345 * 10 ** i;
    return [
      key,
      { value, low: value - 10 ** (i - 1), high: value + 10 ** (i - 1), unit, basis: bases[i % 4] },
    ];
  };
  const quantities = Object.fromEntries(Object.entries(QUANTITY_FACTS).map(figure)) as Record<
    QuantityKey,
    Quantity
  >;
  const current = bare.patch.field.values.data.map((fieldG) => 0.01 * fieldG);
  const x = Float64Array.from({ length: 20 }, (_, i) => (nx * (i + 2)) / 24);
  return {
    ...bare,
    region: { ...bare.region, quantities, flags: ['made by hand for a test'] },
    currentDensity: makeGrid(current, nx, ny, 'mA/m^2', pixelMm),
    inversionLines: [
      { x, y: x.map((at) => (ny * at) / nx), strong: Array.from(x, (_, i) => i > 6 && i < 14) },
    ],
  };
}
