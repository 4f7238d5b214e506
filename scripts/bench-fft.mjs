// Times the real two-dimensional transform of this project beside ndarray-fft, SciPy and FFTW where
// they are present. Prints a Markdown table, with --json FILE also writes the numbers.
//   node scripts/setup.mjs && node scripts/bench-fft.mjs [--json FILE] [--sizes 256,512] [--rounds 3]
// Every yardstick runs once in each round, so that a busy moment of the machine hits all alike; a
// figure is the median over all rounds, with the least beside it.
import { execFileSync } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { cpus, tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';
import * as transforms from '../dist/grid/fft.js';
import { portableInverseRealFft2, portableRealFft2 } from '../dist/grid/portable-fft.js';

const reference = join(dirname(fileURLToPath(import.meta.url)), 'reference');
const { values: options } = parseArgs({
  options: {
    json: { type: 'string' },
    sizes: { type: 'string', default: '256,512,1024,2048' },
    rounds: { type: 'string', default: '3' },
  },
});
const sizes = options.sizes.split(',').map(Number);
const PYTHON = '/usr/bin/python3';

/** Repeats in one round: about a second for the fast ones. */
const repeatsFor = (n) => Math.max(5, Math.min(60, Math.round(3e7 / (n * n))));

/** Pairs of forward and inverse times in milliseconds of functions that take nothing. */
function time(repeats, forward, inverse) {
  const times = [];
  for (let i = -2; i < repeats; i++) {
    const start = performance.now();
    forward();
    const middle = performance.now();
    inverse();
    if (i >= 0) times.push(middle - start, performance.now() - middle);
  }
  return times;
}

function randomMap(n) {
  const values = new Float64Array(n * n);
  let state = n;
  for (let i = 0; i < values.length; i++) {
    state = (state * 48271) % 2147483647;
    values[i] = state / 2 ** 30 - 1;
  }
  return values;
}

function ours(n, threads) {
  transforms.setTransformThreads?.(threads);
  const values = randomMap(n);
  const spectrum = transforms.emptySpectrum(n, n);
  const back = new Float64Array(n * n);
  return time(
    repeatsFor(n),
    () => transforms.realFft2(values, n, n, spectrum),
    () => transforms.inverseRealFft2(spectrum, back),
  );
}

/** New arrays for every result: what a caller pays who keeps no arrays to reuse. */
function oursFresh(n) {
  transforms.setTransformThreads?.(1);
  const values = randomMap(n);
  let spectrum;
  return time(
    repeatsFor(n),
    () => {
      spectrum = transforms.realFft2(values, n, n);
    },
    () => transforms.inverseRealFft2(spectrum),
  );
}

function portable(n) {
  const values = randomMap(n);
  let spectrum;
  return time(
    n > 1024 ? 2 : 5,
    () => {
      spectrum = portableRealFft2(values, n, n);
    },
    () => portableInverseRealFft2(spectrum),
  );
}

/** Times that another program prints: N, then pairs. */
function outside(command, args, n) {
  const said = execFileSync(command, [...args, String(repeatsFor(n)), String(n)], {
    encoding: 'utf8',
  });
  const line = said.split('\n').find((each) => each.startsWith(`${n} `));
  return line.split(' ').slice(1).map(Number);
}

function scipyPresent() {
  if (!existsSync(PYTHON)) return false;
  try {
    execFileSync(PYTHON, ['-c', 'import scipy.fft'], { stdio: 'ignore' });
    return true;
  } catch {
    return false;
  }
}

/** FFTW's timing program, compiled where there are a compiler and its header. */
function buildFftw(folder) {
  const program = join(folder, 'fftw');
  try {
    const source = join(reference, 'fftw.c');
    execFileSync('cc', ['-O2', source, '-o', program, '-lfftw3', '-lm'], { stdio: 'ignore' });
    return program;
  } catch {
    return undefined;
  }
}

function summary(times) {
  const column = (which) => times.filter((_, i) => i % 2 === which).sort((a, b) => a - b);
  const of = (sorted) => ({ medianMs: sorted[sorted.length >> 1], leastMs: sorted[0] });
  return { forward: of(column(0)), inverse: of(column(1)) };
}

const folder = mkdtempSync(join(tmpdir(), 'bench-fft-'));
const runners = { 'this project, arrays reused': (n) => ours(n, 1) };
if (transforms.setTransformThreads) {
  runners['this project, arrays reused, 2 threads'] = (n) => ours(n, 2);
}
runners['this project, new arrays'] = oursFresh;
if (scipyPresent()) {
  const script = join(reference, 'time-fft.py');
  runners['SciPy rfft2, 1 worker'] = (n) => outside(PYTHON, [script], n);
} else console.error('SciPy is not here: left out');
const fftw = buildFftw(folder);
if (fftw) runners['FFTW, measured plan'] = (n) => outside(fftw, [], n);
else console.error('FFTW or a C compiler is not here: left out');
runners['ndarray-fft'] = portable;

const collected = {};
for (const n of sizes) {
  const times = Object.fromEntries(Object.keys(runners).map((name) => [name, []]));
  for (let round = 0; round < Number(options.rounds); round++) {
    for (const [name, run] of Object.entries(runners)) {
      if (name !== 'ndarray-fft' || round === 0) times[name].push(...run(n));
    }
  }
  collected[n] = Object.fromEntries(
    Object.entries(times).map(([name, each]) => [name, summary(each)]),
  );
}
rmSync(folder, { recursive: true });

const show = ({ medianMs, leastMs }) => `${medianMs.toPrecision(3)} (${leastMs.toPrecision(3)})`;
const machine = `${cpus()[0].model}, ${cpus().length} cores, Node ${process.versions.node}`;
console.log(
  `${machine}; ${transforms.transformKernel()} kernels; median (least) of milliseconds\n`,
);
console.log(
  `| real transform | ${sizes.flatMap((n) => [`${n} forward`, 'inverse']).join(' | ')} |`,
);
console.log(`|---|${'---|'.repeat(2 * sizes.length)}`);
for (const name of Object.keys(runners)) {
  const cells = sizes.flatMap((n) => {
    const { forward, inverse } = collected[n][name];
    return [show(forward), show(inverse)];
  });
  console.log(`| ${name} | ${cells.join(' | ')} |`);
}
if (options.json) {
  const report = { machine, date: new Date().toISOString().slice(0, 10), sizes: collected };
  writeFileSync(options.json, `${JSON.stringify(report, null, 2)}\n`);
}
