import type { Grid2 } from '../../grid/grid.js';
import { seededUniform } from '../../grid/random.js';
import { potentialVerticalGradient } from '../potential-gradient.js';
import type { VectorField } from '../vector-field.js';
import { acuteFlips, potentialReference, type ResolvedField } from './acute-angle.js';
import {
  type AmbiguousField,
  type FieldReadings,
  readField,
  resolveField,
} from './ambiguous-field.js';
import { annealPixels } from './annealing.js';
import { connectedPieces, turnClusters, turnPiece } from './clusters.js';
import {
  countPairs,
  type Lattice,
  makeLattice,
  restoreState,
  saveState,
  totalEnergy,
} from './lattice.js';
import { settleWeakPixels } from './weak-pixels.js';

export interface MinimumEnergyOptions {
  /** Transverse field [G] below which a pixel is weak: about twice its noise. */
  readonly weakG: number;
  /** Weight of |div B| against |Jz|; 1 as in Metcalf 1994. */
  readonly lambda?: number;
  /** The same seed gives the same result. */
  readonly seed?: number;
  /** How often to begin anew at most; the lowest functional wins, two that agree end the search. */
  readonly starts?: number;
}

/** A map resolved by minimum energy, and how it went. */
export interface MinimumEnergyResult extends ResolvedField {
  /** Mean of |mu0 Jz| + lambda |div B| over the strong pixels [G/Mm], at the start and at the end. */
  readonly startFunctional: number;
  readonly functional: number;
  /** Share of strong pixels, by number and by transverse field, read otherwise than by the acute angle. */
  readonly changedFraction: number;
  readonly changedFieldFraction: number;
  /** Share of strong pixels, by number, whose azimuth was turned from what the map gave. */
  readonly turnedFraction: number;
  readonly strongPixels: number;
  readonly reference: VectorField;
}

/** Temperatures in units of the transverse field: from where a twentieth of all offers is taken to none. */
const COOLING = { from: 10, to: 0.2, sweeps: 60 };
const REHEATING = { from: 2, to: 0.2, sweeps: 5 };
const FREEZING = { from: 0.05, to: 0.02, sweeps: 4 };
const QUIET_ROUNDS = 2;
/** Two runs whose functionals differ by less than this fraction have found the same state. */
const SAME_STATE = 1e-4;
const MOST_ROUNDS = 10;
/** Turned clusters of up to this many pixels are noise, which another round would only shuffle. */
const SMALL_CLUSTER = 12;
/** A piece of fewer pixels is a speck of noise. */
const LARGE_PIECE = 200;
/** How much worse [fraction] the functional may become when a whole piece is turned to the acute side. */
const PIECE_TOLERANCE = 0.05;

/**
 * Resolves the 180 degree ambiguity by the least sum of |Jz| + lambda |div B| over the pixels of at
 * least `weakG` transverse field (Metcalf 1994, Sol. Phys. 155, 235; Leka et al. 2009, Sol. Phys.
 * 260, 83), with dBz/dz from the current-free field that has the observed line-of-sight component.
 * It starts from the acute angle, anneals single pixels, then by turns offers whole clusters their
 * other reading and anneals again. Weak pixels follow their neighbours. Missing pixels are NaN.
 */
export function minimumEnergy(
  field: AmbiguousField,
  options: MinimumEnergyOptions,
): MinimumEnergyResult {
  const { weakG, lambda = 1, seed = 1, starts = 3 } = options;
  const readings = readField(field);
  const reference = potentialReference(field);
  const acute = acuteFlips(readings, reference);
  const lattice = makeLattice(readings, acute, gradientPerPixel(reference.z), weakG, lambda);
  const pairs = countPairs(lattice) * readings.pixelMm || Number.NaN;
  const startFunctional = totalEnergy(lattice) / pairs;
  const random = seededUniform(seed);
  minimise(lattice, random, starts);
  preferAcute(lattice, readings, reference, random);
  const flips = latticeFlips(lattice, readings, acute);
  settleWeakPixels(readings, flips, weakG);
  return {
    field: resolveField(readings, flips),
    flips,
    startFunctional,
    functional: totalEnergy(lattice) / pairs,
    ...changes(readings, acute, flips, weakG),
    reference,
  };
}

function gradientPerPixel(radial: Grid2<'G'>): Float64Array {
  return potentialVerticalGradient(radial, 'open').map((value) =>
    Number.isNaN(value) ? 0 : value * radial.pixelMm,
  );
}

/** The lowest state of several runs from the same start. */
function minimise(lattice: Lattice, random: () => number, starts: number): void {
  const start = saveState(lattice);
  let best: { readonly energy: number; readonly state: typeof start } | undefined;
  for (let run = 0; run < starts; run++) {
    if (run > 0) restoreState(lattice, start);
    annealPixels(lattice, COOLING, random);
    relax(lattice, random, true);
    const energy = totalEnergy(lattice);
    if (best && Math.abs(energy - best.energy) < SAME_STATE * best.energy) break;
    if (!best || energy < best.energy) best = { energy, state: saveState(lattice) };
  }
  if (best) restoreState(lattice, best.state);
}

/** Clusters and single pixels by turns until only small clusters turn. */
function relax(lattice: Lattice, random: () => number, wholePieces: boolean): void {
  let quiet = 0;
  for (let round = 0; round < MOST_ROUNDS && quiet < QUIET_ROUNDS; round++) {
    quiet = turnClusters(lattice, random, wholePieces) > SMALL_CLUSTER ? 0 : quiet + 1;
    annealPixels(lattice, REHEATING, random);
  }
  turnClusters(lattice, random, wholePieces);
  annealPixels(lattice, FREEZING, random);
}

/** Turns every connected piece that goes against the reference field as a whole; how many there were. */
function turnAgainst(
  lattice: Lattice,
  { nx }: FieldReadings,
  reference: VectorField,
  leastPixels: number,
): number {
  const { roots, next } = connectedPieces(lattice);
  const parts = [reference.x, reference.y, reference.z].map((grid) => grid.values.data);
  const { tx, ty, tz, width, transverseG } = lattice;
  let turned = 0;
  for (const root of roots) {
    let along = 0;
    let pixels = 0;
    for (let i = root; i >= 0; i = next[i]) {
      const p = (i % width) - 1 + nx * (Math.floor(i / width) - 1);
      const product = tx[i] * parts[0][p] + ty[i] * parts[1][p] + tz[i] * parts[2][p];
      along += Math.sign(product) * transverseG[i];
      pixels++;
    }
    if (along >= 0 || pixels < leastPixels) continue;
    turnPiece(lattice, root, next);
    turned++;
  }
  return turned;
}

/**
 * The overall reading of a piece that no used pixel joins to others changes the functional only
 * through the modelled dBz/dz and the view, hence little: where it goes against the reference field
 * as a whole and the other reading costs next to nothing, the reference decides. Specks of noise
 * are turned last, without a new search.
 */
function preferAcute(
  lattice: Lattice,
  readings: FieldReadings,
  reference: VectorField,
  random: () => number,
): void {
  const settle = (leastPixels: number, search: boolean) => {
    const state = saveState(lattice);
    const most = (1 + PIECE_TOLERANCE) * totalEnergy(lattice);
    if (turnAgainst(lattice, readings, reference, leastPixels) === 0) return;
    if (search) relax(lattice, random, false);
    if (totalEnergy(lattice) > most) restoreState(lattice, state);
  };
  settle(LARGE_PIECE, true);
  settle(1, false);
}

/** Which readings the lattice turned from those given; pixels outside it keep `others`. */
function latticeFlips(
  { used, width, tx, ty, tz }: Lattice,
  { nx, ny, transverse }: FieldReadings,
  others: Uint8Array,
): Uint8Array {
  const flips = Uint8Array.from(others);
  for (let y = 0; y < ny; y++) {
    for (let x = 0; x < nx; x++) {
      const p = x + nx * y;
      const q = x + 1 + width * (y + 1);
      if (!used[q]) continue;
      const product =
        tx[q] * transverse[0][p] + ty[q] * transverse[1][p] + tz[q] * transverse[2][p];
      flips[p] = product < 0 ? 1 : 0;
    }
  }
  return flips;
}

function changes(
  { known, transverseG }: FieldReadings,
  acute: Uint8Array,
  flips: Uint8Array,
  weakG: number,
) {
  let [strongPixels, changed, turned, field, changedField] = [0, 0, 0, 0, 0];
  for (let i = 0; i < known.length; i++) {
    if (!known[i] || transverseG[i] < weakG) continue;
    strongPixels++;
    field += transverseG[i];
    turned += flips[i];
    if (flips[i] === acute[i]) continue;
    changed++;
    changedField += transverseG[i];
  }
  return {
    strongPixels,
    changedFraction: changed / strongPixels,
    changedFieldFraction: changedField / field,
    turnedFraction: turned / strongPixels,
  };
}
