// Levels of a volume done by several threads, which claim them one by one, lowest (dearest) first. A
// level depends on no other and each is written by one thread, so results do not depend on how many
// there are. Helpers end with their job and never keep a process alive.
import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { VolumeExports } from './volume-module.js';

const MOST_THREADS = 8;
/**
 * When helpers hold a level longer than this, this thread does what is left itself: should a helper be
 * but slow, both write the same numbers.
 */
const PATIENCE_MS = 3000;
/** Words of the control block: the next level, then a flag for each level done. */
const NEXT = 0;
const FLAGS = 1;

/** What a helper runs. It is handed over as text: sources and built files then need no second file. */
const HELPER = `
const { workerData } = require('node:worker_threads');
const { module, memory, control, levels, job, scratch, name } = workerData;
const run = new WebAssembly.Instance(module, { env: { memory } }).exports[name];
for (;;) {
  const level = Atomics.add(control, ${NEXT}, 1);
  if (level >= levels) break;
  run(job, level, scratch);
  Atomics.store(control, ${FLAGS} + level, 1);
  Atomics.notify(control, ${FLAGS} + level);
}`;

/** A job in shared memory: which function does a level, and the scratch space of each thread. */
export interface SharedJob {
  readonly module: WebAssembly.Module;
  readonly memory: WebAssembly.Memory;
  readonly name: 'runLevel32' | 'runLevel64';
  readonly job: number;
  readonly levels: number;
  readonly scratch: readonly number[];
}

/** Threads for a volume where the caller names none: as many as the machine runs at once, up to 8. */
export function volumeThreads(): number {
  return Math.min(MOST_THREADS, availableParallelism());
}

/** Runs all levels with a thread for each scratch space, this one among them. */
export function runLevels({ module, memory, name, job, levels, scratch }: SharedJob): void {
  const control = new Int32Array(new SharedArrayBuffer(4 * (FLAGS + levels)));
  for (const space of scratch.slice(1)) {
    const workerData = { module, memory, control, levels, job, scratch: space, name };
    const helper = new Worker(HELPER, { eval: true, workerData, execArgv: [] });
    // A helper that fails leaves its levels to this thread.
    helper.on('error', () => {});
    helper.unref();
  }
  const exports = new WebAssembly.Instance(module, { env: { memory } }).exports;
  const run = (exports as unknown as VolumeExports)[name];
  for (;;) {
    const level = Atomics.add(control, NEXT, 1);
    if (level >= levels) break;
    run(job, level, scratch[0]);
    Atomics.store(control, FLAGS + level, 1);
  }
  let patience = PATIENCE_MS;
  for (let level = 0; level < levels; level++) {
    if (Atomics.wait(control, FLAGS + level, 0, patience) !== 'timed-out') continue;
    patience = 0;
    run(job, level, scratch[0]);
  }
}
