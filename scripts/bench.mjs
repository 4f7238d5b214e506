// Speed and memory of the compute core beside outside yardsticks, in one run: transforms, field volumes,
// open energies, field lines. Prints a Markdown table and writes it, and the numbers, to dist/bench.md and
// dist/bench.json (or to the folder given).
//   npm run bench [-- --rounds 3] [-- --out DIR] [-- --quick]
// Yardsticks: SciPy (Debian's python3-scipy), a SciPy script of volumes beside the repository
// (SPOTJOULE_VOLUME_YARDSTICK, or ../shared/reference/potential_volume.py), FFTW and ndarray-fft through
// bench-fft.mjs. What is missing is said and left out. Every yardstick has its turn in each round, so that
// a busy moment of the machine hits all alike; figures are medians over all rounds.
import { execFileSync, spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { cpus, tmpdir } from 'node:os';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { parseArgs } from 'node:util';

const here = dirname(fileURLToPath(import.meta.url));
const root = join(here, '..');
const PYTHON = '/usr/bin/python3';
const { values: options } = parseArgs({
  options: {
    rounds: { type: 'string', default: '3' },
    out: { type: 'string', default: join(root, 'dist') },
    quick: { type: 'boolean', default: false },
  },
});
const rounds = Number(options.rounds);
const volumeScript =
  process.env.SPOTJOULE_VOLUME_YARDSTICK ??
  join(root, '..', 'shared', 'reference', 'potential_volume.py');
const folder = mkdtempSync(join(tmpdir(), 'spotjoule-bench-'));

const median = (values) => [...values].sort((a, b) => a - b)[values.length >> 1];

/** Runs one job of bench-jobs.mjs in a process of its own, so that each has its own peak of memory. */
function job(...args) {
  const said = execFileSync(process.execPath, [join(here, 'bench-jobs.mjs'), ...args], {
    encoding: 'utf8',
    maxBuffer: 1 << 26,
  });
  return JSON.parse(said);
}

function scipyPresent() {
  return existsSync(PYTHON) && spawnSync(PYTHON, ['-c', 'import scipy.fft']).status === 0;
}

/** The volume yardstick as it is, timed from outside; with a path, its numbers as float32. */
const VOLUME_DRIVER = `
import json, sys, time
sys.path.insert(0, sys.argv[1])
import numpy as np
import potential_volume as yardstick
n, levels = int(sys.argv[2]), int(sys.argv[3])
bz = yardstick.charges(n, 0.5)
times = []
for i in range(3):
    start = time.perf_counter()
    field, energy = yardstick.volume(bz, 0.5, levels, 1, 1)
    times.append(1e3 * (time.perf_counter() - start))
if len(sys.argv) > 4:
    field.tofile(sys.argv[4])
print(json.dumps(times))
`;

function scipyVolume(n, levels, ...path) {
  const args = ['-c', VOLUME_DRIVER, dirname(volumeScript), String(n), String(levels), ...path];
  return JSON.parse(execFileSync(PYTHON, args, { encoding: 'utf8' }));
}

function scipyOpenEnergy(n) {
  const script = join(here, 'reference', 'open_energy.py');
  const said = execFileSync(PYTHON, [script, String(n), '5'], { encoding: 'utf8' });
  const [value, whole, known] = said.trim().split('\n');
  const numbers = (line) => line.split(' ').map(Number);
  return { joules: Number(value), whole: numbers(whole), known: numbers(known) };
}

function volumeRow(n, levels, yardstick) {
  const times = { ours: [], single: [], noise: [], scipy: [] };
  let differences;
  for (let round = 0; round < rounds; round++) {
    times.ours.push(...job('volume', n, levels, 'default', 'charges').ms);
    if (yardstick) {
      const path = join(folder, 'volume.f32');
      times.scipy.push(...scipyVolume(n, levels, ...(round === 0 ? [path] : [])));
      if (round === 0) {
        differences = job('compare', n, levels, path);
        rmSync(path);
      }
    }
    times.single.push(...job('volume', n, levels, '1', 'charges').ms);
    times.noise.push(...job('volume', n, levels, 'default', 'noise').ms);
  }
  const memory = median(
    Array.from({ length: 3 }, () => job('volume-memory', n, levels).beyondResultMiB),
  );
  return {
    job: `potential volume ${n} x ${n} x ${levels}, float32`,
    oursMs: median(times.ours),
    ...(yardstick && { yardstickMs: median(times.scipy), yardstick: 'SciPy script' }),
    oneThreadMs: median(times.single),
    whiteNoiseMs: median(times.noise),
    ...(differences && { largestDifferenceOfPeak: differences.ofPeak }),
    beyondResultMiB: memory,
    target: 0.35,
  };
}

function openEnergyRow(n, scipy) {
  const times = { whole: [], known: [], scipyWhole: [], scipyKnown: [] };
  let ratio;
  for (let round = 0; round < rounds; round++) {
    const ours = job('open-energy', n);
    times.whole.push(...ours.whole);
    times.known.push(...ours.known);
    if (!scipy) continue;
    const theirs = scipyOpenEnergy(n);
    times.scipyWhole.push(...theirs.whole);
    times.scipyKnown.push(...theirs.known);
    ratio = ours.joules / theirs.joules - 1;
  }
  const row = (name, mine, theirs) => ({
    job: `open-boundary energy ${n} x ${n}, ${name}`,
    oursMs: median(mine),
    ...(scipy && { yardstickMs: median(theirs), yardstick: 'SciPy, same kernel' }),
    ...(scipy && { relativeDifference: ratio }),
    target: 0.5,
  });
  return [
    row('from the map', times.whole, times.scipyWhole),
    row('kernel at hand', times.known, times.scipyKnown),
  ];
}

function transformRows() {
  const path = join(folder, 'fft.json');
  const sizes = options.quick ? '512' : '512,1024,2048';
  const args = ['--json', path, '--sizes', sizes, '--rounds', String(rounds)];
  const table = execFileSync(process.execPath, [join(here, 'bench-fft.mjs'), ...args], {
    encoding: 'utf8',
  });
  const rows = Object.entries(JSON.parse(readFileSync(path, 'utf8')).sizes).flatMap(
    ([n, found]) => {
      const ours = found['this project, arrays reused'];
      const scipy = found['SciPy rfft2, 1 worker'];
      return ['forward', 'inverse'].map((way) => ({
        job: `real transform ${n} x ${n}, ${way}`,
        oursMs: ours[way].medianMs,
        ...(scipy && { yardstickMs: scipy[way].medianMs, yardstick: 'SciPy, 1 worker' }),
        target: 1,
      }));
    },
  );
  return { rows, table };
}

function markdown(rows, lines, transforms, machine, date) {
  const number = (value) => (value === undefined ? '' : String(Number(value.toPrecision(3))));
  const remarks = (row) =>
    [
      row.oneThreadMs && `one thread ${number(row.oneThreadMs)} ms`,
      row.whiteNoiseMs && `white noise ${number(row.whiteNoiseMs)} ms`,
      row.largestDifferenceOfPeak !== undefined &&
        `values within ${row.largestDifferenceOfPeak.toExponential(1)} of the peak`,
      row.relativeDifference !== undefined &&
        `value within ${Math.abs(row.relativeDifference).toExponential(1)}`,
      row.beyondResultMiB && `${number(row.beyondResultMiB)} MiB beyond the result`,
    ]
      .filter(Boolean)
      .join('; ');
  const cells = rows.map((row) => {
    const ratio = row.yardstickMs ? row.oursMs / row.yardstickMs : undefined;
    const yardstick = row.yardstickMs
      ? `${number(row.yardstickMs)} (${row.yardstick})`
      : 'not here';
    return `| ${row.job} | ${number(row.oursMs)} | ${yardstick} | ${number(ratio)} | ${row.target} | ${remarks(row)} |`;
  });
  return [
    `${machine}; ${date}; medians of ${rounds} rounds.`,
    '',
    '| job | this project, ms | yardstick, ms | ratio | at most | |',
    '|---|---|---|---|---|---|',
    ...cells,
    '',
    `500 field lines through 256 x 256 x 128 samples: ${number(lines.ms)} ms (at most 1000), ${lines.points} points.`,
    '',
    transforms,
  ].join('\n');
}

const scipy = scipyPresent();
if (!scipy) console.error('SciPy is not here: left out');
const yardstick = scipy && existsSync(volumeScript);
if (scipy && !yardstick) console.error(`no volume yardstick beside the repository: left out`);
const volumes = options.quick
  ? [[256, 64]]
  : [
      [512, 128],
      [1024, 64],
    ];
const transforms = transformRows();
const rows = [
  ...transforms.rows,
  ...volumes.map(([n, levels]) => volumeRow(n, levels, yardstick)),
  ...openEnergyRow(options.quick ? 512 : 1024, scipy),
];
const lineRuns = Array.from({ length: rounds }, () => job('lines', 256, 128, 500));
const lines = { ms: median(lineRuns.map(({ ms }) => ms)), points: lineRuns[0].points };
rmSync(folder, { recursive: true });

const machine = `${cpus()[0].model}, ${cpus().length} cores, Node ${process.versions.node}`;
const date = new Date().toISOString().slice(0, 10);
const text = markdown(rows, lines, transforms.table, machine, date);
console.log(text);
mkdirSync(options.out, { recursive: true });
writeFileSync(join(options.out, 'bench.md'), `${text}\n`);
const report = { machine, date, rounds, rows, fieldLines: lines };
writeFileSync(join(options.out, 'bench.json'), `${JSON.stringify(report, null, 2)}\n`);
