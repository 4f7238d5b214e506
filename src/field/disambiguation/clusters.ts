import { type Lattice, pixelEnergy, turnPixel } from './lattice.js';

/** Pairs of neighbours in the order they are joined, the most alike first. */
function orderPairs(lattice: Lattice, random: () => number) {
  const { pixels, used, width, tx, ty, tz } = lattice;
  const first = new Int32Array(2 * pixels.length);
  const second = new Int32Array(2 * pixels.length);
  const key = new Float64Array(2 * pixels.length);
  // Between 0 and 1: from agreement in gauss to agreement whatever the strength. Chance is mixed in
  // so that no two sweeps join alike.
  const power = random();
  let count = 0;
  for (const i of pixels) {
    for (const j of [i + 1, i + width]) {
      if (!used[j]) continue;
      const sum = Math.sqrt((tx[i] + tx[j]) ** 2 + (ty[i] + ty[j]) ** 2 + (tz[i] + tz[j]) ** 2);
      const gap = Math.sqrt((tx[i] - tx[j]) ** 2 + (ty[i] - ty[j]) ** 2 + (tz[i] - tz[j]) ** 2);
      first[count] = i;
      second[count] = j;
      key[count] = ((gap - sum) / (gap + sum + 1e-9) ** power) * random();
      count++;
    }
  }
  return { first, second, order: sortedOrder(key.subarray(0, count)) };
}

/** Steps into which the keys are divided, and room for the index below them: 53 bits in all. */
const KEY_STEPS = 2 ** 28;
const INDEX_ROOM = 2 ** 25;

/** Indices by ascending key (all <= 0); key and index share one number, as sorting those is fast. */
function sortedOrder(key: Float64Array): Uint32Array {
  let lowest = 0;
  for (const value of key) lowest = Math.min(lowest, value);
  const scale = lowest < 0 ? (KEY_STEPS - 1) / lowest : 0;
  const packed = key.map(
    (value, k) => (KEY_STEPS - 1 - Math.floor(value * scale)) * INDEX_ROOM + k,
  );
  packed.sort();
  return Uint32Array.from(packed, (value) => value % INDEX_ROOM);
}

/** Pixels joined into clusters: a forest for finding them and a list through the members of each. */
class Forest {
  readonly next: Int32Array;
  private readonly parent: Int32Array;
  private readonly tail: Int32Array;
  readonly size: Int32Array;

  constructor(length: number) {
    this.parent = Int32Array.from({ length }, (_, i) => i);
    this.tail = Int32Array.from(this.parent);
    this.next = new Int32Array(length).fill(-1);
    this.size = new Int32Array(length).fill(1);
  }

  find(start: number): number {
    const { parent } = this;
    let i = start;
    while (parent[i] !== i) {
      parent[i] = parent[parent[i]];
      i = parent[i];
    }
    return i;
  }

  /** Appends cluster `small` to cluster `large` (both by their roots, which head their lists). */
  join(small: number, large: number): void {
    this.parent[small] = large;
    this.size[large] += this.size[small];
    this.next[this.tail[large]] = small;
    this.tail[large] = this.tail[small];
  }
}

/** Turns every member of the list from `head`. */
function turnAll(lattice: Lattice, head: number, next: Int32Array): void {
  for (let i = head; i >= 0; i = next[i]) turnPixel(lattice, i);
}

/**
 * Turns a cluster if that lowers the functional. `seen` holds for each pixel the last cluster that
 * counted it.
 */
function tryCluster(
  lattice: Lattice,
  head: number,
  next: Int32Array,
  seen: Int32Array,
  mark: number,
): boolean {
  const { width, energy } = lattice;
  const steps = [0, 1, -1, width, -width];
  turnAll(lattice, head, next);
  let change = 0;
  for (let i = head; i >= 0; i = next[i]) {
    for (let k = 0; k < 5; k++) {
      const at = i + steps[k];
      if (seen[at] === mark) continue;
      seen[at] = mark;
      change += pixelEnergy(lattice, at) - energy[at];
    }
  }
  if (change >= 0) {
    turnAll(lattice, head, next);
    return false;
  }
  for (let i = head; i >= 0; i = next[i])
    for (let k = 0; k < 5; k++) energy[i + steps[k]] = pixelEnergy(lattice, i + steps[k]);
  return true;
}

/**
 * Offers whole regions their other reading. Annealing single pixels leaves regions that are wrong as
 * one piece, fenced by a wall that costs more to move than it gains. So neighbours are joined one
 * pair at a time, the most alike (in their present reading, with some chance) first, as in growing
 * a minimum spanning tree; before two clusters join, the smaller is turned if that lowers the
 * functional, so that a region inside a wall is tried as a whole. With `wholePieces` the pieces that
 * nothing joins to others are offered too. Returns the size of the largest cluster turned.
 */
export function turnClusters(lattice: Lattice, random: () => number, wholePieces: boolean): number {
  const { first, second, order } = orderPairs(lattice, random);
  const forest = new Forest(lattice.used.length);
  const seen = new Int32Array(lattice.used.length).fill(-1);
  let mark = 0;
  let largest = 0;
  const offer = (root: number) => {
    if (tryCluster(lattice, root, forest.next, seen, mark++))
      largest = Math.max(largest, forest.size[root]);
  };
  for (const k of order) {
    let small = forest.find(first[k]);
    let large = forest.find(second[k]);
    if (small === large) continue;
    if (forest.size[small] > forest.size[large]) [small, large] = [large, small];
    offer(small);
    forest.join(small, large);
  }
  if (wholePieces) for (const i of lattice.pixels) if (forest.find(i) === i) offer(i);
  return largest;
}

/** Roots and member lists of the connected pieces of a lattice. */
export function connectedPieces(lattice: Lattice): {
  readonly roots: readonly number[];
  readonly next: Int32Array;
} {
  const { pixels, used, width } = lattice;
  const forest = new Forest(used.length);
  for (const i of pixels) {
    for (const j of [i + 1, i + width]) {
      if (!used[j]) continue;
      const [a, b] = [forest.find(i), forest.find(j)];
      if (a === b) continue;
      if (forest.size[a] < forest.size[b]) forest.join(a, b);
      else forest.join(b, a);
    }
  }
  return { roots: Array.from(pixels).filter((i) => forest.find(i) === i), next: forest.next };
}

/** Turns the members of a list and brings the energies in step. */
export function turnPiece(lattice: Lattice, root: number, next: Int32Array): void {
  const { width, energy } = lattice;
  turnAll(lattice, root, next);
  for (let i = root; i >= 0; i = next[i])
    for (const at of [i, i + 1, i - 1, i + width, i - width]) energy[at] = pixelEnergy(lattice, at);
}
