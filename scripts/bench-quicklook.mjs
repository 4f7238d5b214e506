// Whole quick look from cold start to finished picture, beside the same job scripted in Python (astropy, SciPy,
// matplotlib), in one run: wall time (median) and peak memory.
//   node scripts/bench-quicklook.mjs [--json FILE]
// Needs the built dist/. The Python yardstick needs Debian's python3-astropy, -scipy and -matplotlib, the
// compressed full disk fpack (libcfitsio-bin); what is missing is said and left out.
import { spawnSync } from 'node:child_process';
import { existsSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { observe, REGIONS, skyPosition } from './marrow-hill.mjs';

const ROOT = fileURLToPath(new URL('..', import.meta.url));
const MAIN = join(ROOT, 'dist', 'cli', 'main.js');
const RUNS = 7;
const folder = mkdtempSync(join(tmpdir(), 'spotjoule-bench-'));

/** Writes this process's peak memory [KiB] to a file when it ends; loaded before the command. */
const PROBE = join(folder, 'probe.mjs');
writeFileSync(
  PROBE,
  `import { writeFileSync } from 'node:fs';
process.on('exit', () => writeFileSync(${JSON.stringify(join(folder, 'rss'))}, String(process.resourceUsage().maxRSS)));`,
);

const median = (values) => [...values].sort((a, b) => a - b)[values.length >> 1];

function time(command, args, runs = RUNS) {
  const seconds = [];
  for (let i = 0; i < runs; i++) {
    const start = process.hrtime.bigint();
    const { status, stderr } = spawnSync(command, args, { cwd: folder, encoding: 'utf8' });
    if (status !== 0) throw new Error(`${command} ${args.join(' ')}: ${stderr}`);
    seconds.push(Number(process.hrtime.bigint() - start) / 1e9);
  }
  return median(seconds);
}

function quickLook(file, runs) {
  const args = [MAIN, 'quicklook', file, '--out', join(folder, 'out')];
  const wall = time(process.execPath, args, runs);
  time(process.execPath, ['--import', PROBE, ...args], 1);
  return { wall, memoryMiB: Number(readFileSync(join(folder, 'rss'), 'utf8')) / 1024 };
}

const has = (command, ...args) => spawnSync(command, args).status === 0;

const cutout = join(folder, 'mh-1-512.fits');
writeFileSync(
  cutout,
  observe({
    regions: [REGIONS['MH-1']],
    n: 512,
    arcsec: 0.5,
    centerArcsec: skyPosition(REGIONS['MH-1']),
    noiseG: 10,
    seed: 1,
    object: 'MH-1',
  }),
);
const disk = join(folder, 'full-disk-4096.fits');
writeFileSync(
  disk,
  observe({
    regions: Object.values(REGIONS),
    n: 4096,
    arcsec: 0.5,
    centerArcsec: [0, 0],
    noiseG: 10,
    seed: 2,
    object: 'Sun',
    wide: true,
  }),
);

const rows = [];
const python = '/usr/bin/python3';
const withPython = has(python, '-c', 'import astropy, scipy, matplotlib');
const script = join(ROOT, 'scripts', 'reference', 'quicklook_job.py');
const cut = quickLook(cutout, RUNS);
const yardstick = withPython
  ? time(python, ['-W', 'ignore', script, cutout, join(folder, 'yardstick.png')])
  : undefined;
rows.push({ job: '512 x 512 cut-out', ...cut, yardstick, limit: 1.5, memoryLimit: 300 });
const packed = has('fpack', '-V') || existsSync('/usr/bin/fpack');
if (packed) {
  spawnSync('fpack', ['-r', disk]);
  rows.push({
    job: '4096 x 4096 full disk, RICE_1 int32',
    ...quickLook(`${disk}.fz`, 3),
    limit: 5,
    memoryLimit: 1.2 * 1024,
  });
} else console.log('fpack is not here: the full disk is read uncompressed');
rows.push({
  job: '4096 x 4096 full disk, int32',
  ...quickLook(disk, 3),
  limit: 5,
  memoryLimit: 1.2 * 1024,
});
if (!withPython)
  console.log('astropy, SciPy and matplotlib are not here: no yardstick for the quick look');

console.log('| job | wall [s] | limit [s] | Python script [s] | peak memory [MiB] | limit [MiB] |');
console.log('|---|---|---|---|---|---|');
for (const row of rows)
  console.log(
    `| ${row.job} | ${row.wall.toFixed(2)} | ${row.limit} | ${row.yardstick?.toFixed(2) ?? ''} | ${row.memoryMiB.toFixed(0)} | ${row.memoryLimit.toFixed(0)} |`,
  );
const at = process.argv.indexOf('--json');
if (at > 0) writeFileSync(process.argv[at + 1], `${JSON.stringify(rows, null, 2)}\n`);
rmSync(folder, { recursive: true, force: true });
