// One job of bench.mjs, printed as JSON: run in a process of its own.
//   volume N LEVELS THREADS MAP     times of volumes, MAP charges or noise (charges plus 200 G of it)
//   volume-memory N LEVELS          peak memory of the job beyond what it returns
//   compare N LEVELS FILE           largest difference from a file of float32 numbers
//   open-energy N                   times with the kernel made anew and at hand
//   lines N LEVELS COUNT            time of field lines
import { closeSync, openSync, readSync } from 'node:fs';
import { potentialEnergy } from '../dist/energy/region-energy.js';
import { traceFieldLines } from '../dist/field/field-lines.js';
import { geometricHeights, uniformHeights } from '../dist/field/heights.js';
import { seedsByFlux } from '../dist/field/line-seeds.js';
import { potentialVolume } from '../dist/field/volume.js';
import { makeGrid } from '../dist/grid/grid.js';

const PIXEL_MM = 0.5;
const CHARGES = [
  [1.2e5, -18, 0, 9],
  [-1.0e5, 16, 5, 7],
  [-0.2e5, 2, -14, 5],
];

/** The map of the yardsticks: three buried charges, N x N pixels of half a megametre. */
function chargeMap(n, noiseG = 0) {
  const data = new Float64Array(n * n);
  let state = 1;
  for (let i = 0; i < data.length; i++) {
    const x = ((i % n) + 0.5 - n / 2) * PIXEL_MM;
    const y = (Math.floor(i / n) + 0.5 - n / 2) * PIXEL_MM;
    for (const [q, cx, cy, d] of CHARGES) {
      data[i] += (q * d) / ((x - cx) ** 2 + (y - cy) ** 2 + d * d) ** 1.5;
    }
    state = (state * 48271) % 2147483647;
    data[i] += noiseG * (state / 2 ** 30 - 1);
  }
  return makeGrid(data, n, n, 'G', PIXEL_MM);
}

const heightsOf = (levels) => uniformHeights(levels, PIXEL_MM * (levels - 1));
const VOLUME = { sides: 'periodic', withoutMean: true };

function timed(count, work) {
  const times = [];
  for (let i = -1; i < count; i++) {
    const start = performance.now();
    work();
    if (i >= 0) times.push(performance.now() - start);
  }
  return times;
}

const jobs = {
  volume(n, levels, threads, map) {
    const field = chargeMap(Number(n), map === 'noise' ? 200 : 0);
    const options = threads === 'default' ? VOLUME : { ...VOLUME, threads: Number(threads) };
    const heights = heightsOf(Number(levels));
    return { ms: timed(3, () => potentialVolume(field, heights, options)) };
  },

  'volume-memory'(n, levels) {
    const field = chargeMap(Number(n));
    potentialVolume(chargeMap(32), heightsOf(4), VOLUME);
    const before = process.memoryUsage().rss;
    const volume = potentialVolume(field, heightsOf(Number(levels)), VOLUME);
    const peak = 1024 * process.resourceUsage().maxRSS;
    const result = 3 * volume.x.byteLength;
    return { beyondResultMiB: (peak - before - result) / 2 ** 20 };
  },

  compare(n, levels, path) {
    const field = chargeMap(Number(n));
    const volume = potentialVolume(field, heightsOf(Number(levels)), VOLUME);
    const file = openSync(path, 'r');
    const plane = new Float32Array(Number(n) * Number(n));
    let [largest, peak] = [0, 0];
    for (const part of [volume.x, volume.y, volume.z]) {
      for (let level = 0; level < Number(levels); level++) {
        readSync(file, plane);
        const first = level * plane.length;
        for (let i = 0; i < plane.length; i++) {
          largest = Math.max(largest, Math.abs(plane[i] - part[first + i]));
          peak = Math.max(peak, Math.abs(plane[i]));
        }
      }
    }
    closeSync(file);
    return { ofPeak: largest / peak };
  },

  'open-energy'(n) {
    const field = chargeMap(Number(n));
    const quiet = { deviationG: 0, cellMm2: 1 };
    const other = makeGrid(new Float64Array(16), 4, 4, 'G', 1);
    const [whole, known] = [[], []];
    let energy;
    for (let i = -2; i < 7; i++) {
      // A map of another size drives the kernel's spectrum out.
      potentialEnergy(other, quiet, 'open');
      const start = performance.now();
      energy = potentialEnergy(field, quiet, 'open');
      const middle = performance.now();
      potentialEnergy(field, quiet, 'open');
      if (i < 0) continue;
      whole.push(middle - start);
      known.push(performance.now() - middle);
    }
    return { joules: energy.joules, whole, known };
  },

  lines(n, levels, count) {
    const field = chargeMap(Number(n));
    const heights = geometricHeights(Number(levels), Number(n) * PIXEL_MM, PIXEL_MM / 2);
    const volume = potentialVolume(field, heights);
    const seeds = seedsByFlux(volume, Number(count));
    const start = performance.now();
    const lines = traceFieldLines(volume, seeds);
    const ms = performance.now() - start;
    return { ms, points: lines.reduce((sum, { points }) => sum + points.length / 3, 0) };
  },
};

const [name, ...args] = process.argv.slice(2);
console.log(JSON.stringify(jobs[name](...args)));
