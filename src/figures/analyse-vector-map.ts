import { DataError } from '../errors.js';
import { acuteAngle } from '../field/disambiguation/acute-angle.js';
import { azimuthAgreement } from '../field/disambiguation/azimuth-agreement.js';
import { type MinimumEnergyResult, minimumEnergy } from '../field/disambiguation/minimum-energy.js';
import type { VectorField, VectorNoise } from '../field/vector-field.js';
import type { PatchOptions } from '../geometry/make-patch.js';
import type { LocalPatch } from '../geometry/patch.js';
import type { VectorMap } from '../geometry/vector-map.js';
import {
  type CameraVectorPatch,
  makeVectorPatch,
  type VectorPatch,
} from '../geometry/vector-patch.js';
import { estimateNoise } from '../grid/noise.js';
import { analyseVector, type VectorAnalysis } from './analyse-vector.js';

/** How the 180 degree ambiguity of the azimuth is resolved. */
export type Disambiguation = 'minimum-energy' | 'acute';

/** How a vector map is worked out, all optional. */
export interface VectorAnalysisOptions extends PatchOptions {
  /** 1-sigma noise [G] of the line-of-sight (or radial) component where the map has no errors. */
  readonly noiseG?: number;
  readonly sides?: 'open' | 'periodic';
  readonly id?: string;
  readonly disambiguation?: Disambiguation;
}

/** A vector region with its patch, its field and the choices that were made. */
export interface VectorMapAnalysis extends VectorAnalysis {
  readonly patch: LocalPatch;
  readonly field: VectorField;
  readonly noiseG: number;
  readonly noiseBasis: 'measured' | 'assumed';
  readonly horizontalNoiseG: number;
  readonly sides: 'open' | 'periodic';
}

/** Median of a Rayleigh distribution over its parameter: sqrt(2 ln 2). */
const RAYLEIGH_MEDIAN = Math.sqrt(2 * Math.LN2);
/** A pixel is weak below this many deviations of its transverse noise (see minimumEnergy). */
const WEAK_DEVIATIONS = 2;

function median(values: number[]): number {
  values.sort((a, b) => a - b);
  return values.length === 0 ? Number.NaN : values[values.length >> 1];
}

function rootMeanSquare(values: Float64Array): number {
  let sum = 0;
  let count = 0;
  for (const value of values) {
    if (Number.isNaN(value)) continue;
    sum += value * value;
    count++;
  }
  return Math.sqrt(sum / count);
}

/**
 * Noise of the transverse field [G] from quiet pixels: where the component along the line of sight is
 * noise, two noisy components make a Rayleigh distribution.
 */
function transverseNoise(patch: CameraVectorPatch, lineOfSightG: number): number {
  const los = patch.patch.field.values.data;
  const quiet: number[] = [];
  patch.transverseG.forEach((value, i) => {
    if (Math.abs(los[i]) < 3 * lineOfSightG && !Number.isNaN(value)) quiet.push(value);
  });
  return median(quiet) / RAYLEIGH_MEDIAN;
}

interface Noise {
  readonly components: VectorNoise;
  readonly horizontalG: number;
  readonly verticalG: number;
  /** Of the component that the base map holds. */
  readonly baseG: number;
  readonly transverseG: number;
  readonly words: string;
}

/** Noise of a camera patch without error maps: isotropic across the line of sight, another along it. */
function cameraNoise(patch: CameraVectorPatch, alongG: number): Noise {
  const acrossG = transverseNoise(patch, alongG);
  if (!Number.isFinite(acrossG))
    throw new DataError(
      'has too few quiet pixels to estimate the transverse noise from: give error maps',
    );
  const { x, y, z } = patch.patch.toObserver;
  const mix = (n: Float64Array) =>
    n.map((cosine) => Math.hypot(cosine * alongG, Math.sqrt(1 - cosine * cosine) * acrossG));
  const components = { x: mix(x), y: mix(y), z: mix(z) };
  return {
    components,
    horizontalG: rootMeanSquare(components.x),
    verticalG: rootMeanSquare(components.z),
    baseG: alongG,
    transverseG: acrossG,
    words: `${alongG.toPrecision(3)} G along and ${acrossG.toPrecision(3)} G across the line of sight, from quiet pixels`,
  };
}

/** Noise of each component: from the error maps, else from the map's quiet pixels. */
function noiseOf(patch: VectorPatch, baseG: number): Noise {
  if (patch.errors) {
    const { x, y, z } = patch.errors;
    const horizontalG = Math.hypot(rootMeanSquare(x), rootMeanSquare(y)) / Math.SQRT2;
    return {
      components: patch.errors,
      horizontalG,
      verticalG: rootMeanSquare(z),
      baseG,
      transverseG: horizontalG,
      words: 'from the error maps',
    };
  }
  if (patch.kind === 'camera') return cameraNoise(patch, baseG);
  const { nx, ny } = patch.patch;
  const of = (axis: 'x' | 'y' | 'z') => estimateNoise(patch.field[axis].values.data, nx, ny);
  const components = { x: of('x'), y: of('y'), z: of('z') };
  const horizontalG = Math.hypot(components.x, components.y) / Math.SQRT2;
  return {
    components,
    horizontalG,
    verticalG: components.z,
    baseG,
    transverseG: horizontalG,
    words: `${components.z.toPrecision(3)} G vertical and ${horizontalG.toPrecision(3)} G horizontal, from quiet pixels`,
  };
}

/** Warns of azimuths that lie across the current-free field: counted from another axis, most likely. */
function axisFlags(patch: CameraVectorPatch, reference: VectorField, leastG: number): string[] {
  const { meanCosine, turnDeg } = azimuthAgreement(patch, reference, leastG);
  if (!(meanCosine < 0)) return [];
  return [
    `the azimuths lie ${Math.abs(turnDeg).toFixed(0)} degrees from the potential field on average: they are probably counted from another axis, see --azimuth-zero; do not trust the currents before that is settled`,
  ];
}

/** The field with its ambiguity resolved, and what that says. */
function resolve(
  patch: VectorPatch,
  noise: Noise,
  way: Disambiguation,
): { readonly field: VectorField; readonly changed?: number; readonly flags: string[] } {
  if (patch.kind === 'heliographic') return { field: patch.field, flags: [] };
  if (patch.field)
    return { field: patch.field, flags: ['the map itself says which way the azimuth points'] };
  const weakG = WEAK_DEVIATIONS * noise.transverseG;
  if (way === 'acute') {
    const { field, reference } = acuteAngle(patch);
    return {
      field,
      flags: [
        '180 degree ambiguity resolved by the acute angle to the potential field',
        ...axisFlags(patch, reference, 2 * weakG),
      ],
    };
  }
  const found: MinimumEnergyResult = minimumEnergy(patch, { weakG });
  const share = (value: number) => `${(100 * value).toPrecision(2)} %`;
  return {
    field: found.field,
    changed: found.changedFieldFraction,
    flags: [
      `180 degree ambiguity resolved by minimum energy (Metcalf 1994): of ${found.strongPixels} pixels above ${weakG.toPrecision(3)} G ${share(found.changedFraction)} changed from the acute angle, ${share(found.turnedFraction)} turned from the map; functional ${found.startFunctional.toPrecision(3)} to ${found.functional.toPrecision(3)} G/Mm`,
      ...axisFlags(patch, found.reference, 2 * weakG),
    ],
  };
}

/**
 * Works out one region of a vector map: patch, noise, disambiguation, figures. Throws GeometryError when
 * the patch asked for is not on the disk, DataError when the map has too little in it.
 */
export function analyseVectorMap(
  map: VectorMap,
  options: VectorAnalysisOptions = {},
): VectorMapAnalysis {
  const { base } = map;
  const baseG = options.noiseG ?? estimateNoise(base.values, base.nx, base.ny);
  if (!Number.isFinite(baseG))
    throw new DataError('has too few quiet pixels to estimate the noise from: give --noise GAUSS');
  const vectorPatch = makeVectorPatch(map, options);
  const { patch } = vectorPatch;
  const noise = noiseOf(vectorPatch, baseG);
  const { field, changed, flags } = resolve(
    vectorPatch,
    noise,
    options.disambiguation ?? 'minimum-energy',
  );
  const sides = options.sides ?? 'open';
  const mu = Math.max(0.17, patch.center.mu);
  const cellMm2 = Math.max(
    patch.pixelMm ** 2,
    base.pixelMm ** 2 / (map.kind === 'camera' ? mu : 1),
  );
  const analysis = analyseVector(
    {
      patch,
      field,
      noise: noise.components,
      verticalNoise: { deviationG: noise.verticalG, cellMm2, pixelDeviationG: noise.verticalG },
      horizontalNoiseG: noise.horizontalG,
      ...(changed !== undefined && { changedFieldFraction: changed }),
      flags: [...base.warnings, ...vectorPatch.warnings, `noise ${noise.words}`, ...flags],
    },
    { sides, ...(options.id !== undefined && { id: options.id }) },
  );
  return {
    ...analysis,
    patch,
    field,
    noiseG: noise.baseG,
    noiseBasis: options.noiseG === undefined ? 'measured' : 'assumed',
    horizontalNoiseG: noise.horizontalG,
    sides,
  };
}
