// Makes a fresh clone ready: installs the pinned packages where they are missing or out of step
// with the lock file, then compiles src/ to dist/. Safe to run again; does nothing twice.
import { execFileSync, spawnSync } from 'node:child_process';
import { cpSync, existsSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { buildKernels } from './build-kernels.mjs';

const root = join(dirname(fileURLToPath(import.meta.url)), '..');

/** True when every package the lock file pins is installed at that version. */
function installed() {
  const lock = JSON.parse(readFileSync(join(root, 'package-lock.json'), 'utf8'));
  const marker = join(root, 'node_modules', '.package-lock.json');
  if (!existsSync(marker)) return false;
  const have = JSON.parse(readFileSync(marker, 'utf8')).packages;
  return Object.entries(lock.packages).every(
    ([path, entry]) => path === '' || entry.optional || have[path]?.version === entry.version,
  );
}

if (!installed()) {
  console.error('setup: installing the pinned packages (npm ci)');
  const npm = spawnSync('npm', ['ci', '--no-audit', '--no-fund', '--loglevel=error'], {
    cwd: root,
    stdio: ['ignore', 'ignore', 'inherit'],
    shell: process.platform === 'win32',
  });
  if (npm.status !== 0) process.exit(npm.status ?? 1);
}
// Clears dist of what an older build left, but for the compiled kernels, which take long to make.
const dist = join(root, 'dist');
if (existsSync(dist)) {
  for (const entry of readdirSync(dist, { recursive: true, withFileTypes: true })) {
    const kernel = /\.wasm(\.sources)?$/.test(entry.name);
    if (!entry.isDirectory() && !kernel) rmSync(join(entry.parentPath ?? entry.path, entry.name));
  }
}
await buildKernels();
execFileSync(process.execPath, [join(root, 'node_modules/typescript/bin/tsc'), '-p', root], {
  stdio: 'inherit',
});
for (const schema of ['quicklook.schema.json']) {
  cpSync(join(root, 'src/report', schema), join(root, 'dist/report', schema));
}
