// Compiles the WebAssembly modules: src/grid/kernel/*.ts (AssemblyScript) to dist/grid/fft.wasm, the
// transforms, and dist/grid/volume.wasm, field volumes. Compiling takes some seconds, so a module is
// kept as long as the sources and the compiler stay the same: their hash stands beside it.
import { createHash } from 'node:crypto';
import {
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  renameSync,
  writeFileSync,
} from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = join(dirname(fileURLToPath(import.meta.url)), '..');
const sources = join(root, 'src/grid/kernel');
const options = [
  ...['-O3', '--enable', 'simd', '--runtime', 'stub', '--noAssert', '--importMemory'],
  // A memory with a maximum may also be a shared one (see kernel-loader.ts).
  ...['--maximumMemory', '65536'],
];
const modules = [
  { entry: 'index.ts', file: 'fft.wasm', more: [] },
  { entry: 'volume.ts', file: 'volume.wasm', more: ['--enable', 'threads', '--sharedMemory'] },
];

/** A hash of everything the module is made from. */
function sourceHash() {
  const hash = createHash('sha256');
  const compiler = readFileSync(join(root, 'node_modules/assemblyscript/package.json'), 'utf8');
  hash.update(JSON.stringify([JSON.parse(compiler).version, options, modules]));
  for (const name of readdirSync(sources).sort()) {
    hash.update(`\n${name}\n`).update(readFileSync(join(sources, name)));
  }
  return hash.digest('hex');
}

/** Compiles each module where it is missing or out of step with its sources. */
export async function buildKernels() {
  const hash = sourceHash();
  for (const module of modules) await buildModule(module, hash);
}

async function buildModule({ entry, file, more }, hash) {
  const target = join(root, 'dist/grid', file);
  const stamp = `${target}.sources`;
  if (existsSync(target) && existsSync(stamp) && readFileSync(stamp, 'utf8') === hash) return;
  const { default: asc } = await import('assemblyscript/asc');
  const { error, stdout, stderr, binary } = await compile(asc, [entry, '--outFile', file, ...more]);
  const said = `${stdout.toString()}${stderr.toString()}`.trim();
  if (said) console.error(said);
  if (error || !binary) throw new Error(`AssemblyScript: ${error?.message ?? 'no module made'}`);
  mkdirSync(dirname(target), { recursive: true });
  // Renamed into place: another process may be reading it.
  writeFileSync(`${target}.new`, binary);
  renameSync(`${target}.new`, target);
  writeFileSync(stamp, hash);
}

async function compile(asc, args) {
  let binary;
  const result = await asc.main([...args, ...options], {
    readFile: (name, baseDir) => {
      const path = join(sources, baseDir ?? '.', name);
      return existsSync(path) ? readFileSync(path, 'utf8') : null;
    },
    writeFile: (_name, contents) => {
      binary = contents;
    },
    listFiles: () => [],
  });
  return { ...result, binary };
}

if (process.argv[1] === fileURLToPath(import.meta.url)) await buildKernels();
