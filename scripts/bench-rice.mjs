// Time to read a 4096 x 4096 map of RICE_1 32-bit integers (a full-disk archive file), against CFITSIO's
// funpack on the same file in the same run. Makes the file, an invented disk with spots and noise in
// hundredths of a gauss, in a temporary folder with fpack; needs `npm run build` first.
// Usage: node scripts/bench-rice.mjs [repeats]
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { performance } from 'node:perf_hooks';
import { readFitsFile, readImage, writeFits } from '../dist/fits/index.js';

const SIDE = 4096;
const BLANK = -2147483648;
const repeats = Number(process.argv[2] ?? 7);

/** Uniform numbers in [0, 1) from a linear congruential generator (Numerical Recipes constants, from memory). */
function makeRandom(seed) {
  let state = seed >>> 0;
  return () => {
    state = (Math.imul(state, 1664525) + 1013904223) >>> 0;
    return state / 2 ** 32;
  };
}

/** Disk of radius 0.47 of the side, 40 spots of up to 2000 G, noise of 10 G; units 0.01 G. */
function makeMap() {
  const random = makeRandom(2031);
  const values = new Int32Array(SIDE * SIDE);
  const radius2 = (0.47 * SIDE) ** 2;
  for (let y = 0; y < SIDE; y++) {
    for (let x = 0; x < SIDE; x++) {
      const r2 = (x - SIDE / 2) ** 2 + (y - SIDE / 2) ** 2;
      // four uniform numbers: variance 1/3, close enough to normal
      const noise = (random() + random() + random() + random() - 2) * Math.sqrt(3);
      values[x + SIDE * y] = r2 > radius2 ? BLANK : Math.round(1000 * noise);
    }
  }
  for (let spot = 0; spot < 40; spot++) addSpot(values, random);
  return values;
}

function addSpot(values, random) {
  const cx = Math.round(SIDE * (0.2 + 0.6 * random()));
  const cy = Math.round(SIDE * (0.3 + 0.4 * random()));
  const width = 10 + 30 * random();
  const peak = 200_000 * (2 * random() - 1);
  const reach = Math.ceil(4 * width);
  for (let y = cy - reach; y <= cy + reach; y++) {
    for (let x = cx - reach; x <= cx + reach; x++) {
      const at = x + SIDE * y;
      const field = peak * Math.exp(-((x - cx) ** 2 + (y - cy) ** 2) / (2 * width * width));
      if (values[at] !== BLANK) values[at] += Math.round(field);
    }
  }
}

function median(numbers) {
  const sorted = [...numbers].sort((a, b) => a - b);
  return sorted[Math.floor(sorted.length / 2)];
}

function milliseconds(work) {
  const start = performance.now();
  work();
  return performance.now() - start;
}

function report(name, times) {
  const spread = `${Math.min(...times).toFixed(0)} to ${Math.max(...times).toFixed(0)}`;
  console.log(
    `${name.padEnd(44)} median ${median(times).toFixed(0)} ms (${spread}, ${times.length} runs)`,
  );
  return median(times);
}

function run(command, args) {
  const done = spawnSync(command, args, { encoding: 'utf8' });
  if (done.error !== undefined || done.status !== 0) {
    throw new Error(`${command} ${args.join(' ')}: ${done.error?.message ?? done.stderr}`);
  }
}

function main(folder) {
  const plain = join(folder, 'plain.fits');
  const packed = join(folder, 'packed.fits');
  const unpacked = join(folder, 'unpacked.fits');
  const values = makeMap();
  const shape = [SIDE, SIDE];
  writeFileSync(plain, writeFits([{ values, shape, cards: [], bscale: 0.01, blank: BLANK }]));
  if (spawnSync('fpack', ['-V']).error !== undefined) {
    console.log('fpack and funpack are absent: no compressed file to read, nothing measured');
    return;
  }
  run('fpack', ['-r', '-C', '-O', packed, plain]);
  console.log(
    `${SIDE} x ${SIDE} int32, RICE_1 by rows, ${(statSync(packed).size / 1e6).toFixed(1)} MB`,
  );

  const ours = [];
  const theirs = [];
  for (let i = 0; i < repeats; i++) {
    let image;
    ours.push(
      milliseconds(() => {
        const file = readFitsFile(packed);
        image = readImage(file, 1);
      }),
    );
    check(image, values);
    rmSync(unpacked, { force: true });
    theirs.push(milliseconds(() => run('funpack', ['-C', '-O', unpacked, packed])));
  }
  console.log(`first read, nothing compiled yet: ${ours[0].toFixed(0)} ms`);
  const own = report('spotjoule, file to physical values', ours);
  const reference = report('funpack -C, file to file (process included)', theirs);
  console.log(`ratio ${(own / reference).toFixed(2)}; wanted: at most 1000 ms`);
  if (own > 1000) process.exitCode = 1;
}

/** Every pixel against what was written: a fast wrong answer is no answer. */
function check(image, values) {
  for (let i = 0; i < values.length; i++) {
    const wanted = values[i] === BLANK ? Number.NaN : 0.01 * values[i];
    if (!Object.is(image.values[i] + 0, wanted + 0))
      throw new Error(`pixel ${i} is ${image.values[i]}`);
  }
}

const folder = mkdtempSync(join(tmpdir(), 'spotjoule-bench-'));
try {
  main(folder);
} finally {
  rmSync(folder, { recursive: true });
}
