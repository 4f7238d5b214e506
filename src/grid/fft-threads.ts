// Transforms by several threads, on asking: a phase is a row of independent units, which this thread
// and its helpers claim one by one, so that results do not depend on how many there are. The helpers
// share the module's memory and sleep between phases; they never keep a process alive.
// Beside kernel-loader.ts, the only file of grid that knows the machine it runs on.
import { Worker } from 'node:worker_threads';
import type { Kernel, Phase } from './fft-kernel.js';
import type { FftLayout } from './fft-layout.js';
import { type FftExports, sharedKernelModule } from './kernel-loader.js';

/** Maps with fewer points are left to one thread: waking the helpers would take longer. */
const LEAST_POINTS = 384 * 384;
const MOST_THREADS = 16;
/** A helper that holds a unit longer than this has died. */
const PATIENCE_MS = 20_000;

/** Words of the control block that all threads see; the scratch addresses of each helper follow. */
const EPOCH = 0;
const NEXT = 1;
const UNITS = 2;
const READY = 3;
const PHASE = 4;
const JOB = 5;
const FLAGS = 6;
const WORDS = 16;
/** Claims from here on are void: no phase is open. */
const CLOSED = 2 ** 30;

/** What a helper runs. It is handed over as text: sources and built files then need no second file. */
const HELPER = `
const { workerData } = require('node:worker_threads');
const { module, memory, control, scratch } = workerData;
const { setScratch, runUnit } = new WebAssembly.Instance(module, { env: { memory } }).exports;
for (let epoch = 0; ; ) {
  Atomics.wait(control, ${EPOCH}, epoch);
  epoch = Atomics.load(control, ${EPOCH});
  for (;;) {
    const unit = Atomics.add(control, ${NEXT}, 1);
    if (unit >= Atomics.load(control, ${UNITS})) break;
    let ready;
    while ((ready = Atomics.load(control, ${READY})) <= unit) Atomics.wait(control, ${READY}, ready, 1);
    setScratch(...control.subarray(scratch, scratch + 5));
    runUnit(control[${JOB}], control[${PHASE}], unit);
    const flags = new Int32Array(memory.buffer, control[${FLAGS}], unit + 1);
    Atomics.store(flags, unit, 1);
    Atomics.notify(flags, unit);
  }
}`;

interface Team {
  readonly kernel: Kernel;
  readonly control: Int32Array<SharedArrayBuffer>;
  readonly helpers: readonly Worker[];
}

let wanted = 1;
let team: Team | undefined;

/**
 * How many threads, this one included, share a transform of at least 384 x 384 points (1 .. 16; at
 * first 1). Results are the same to the last bit. A helper takes about 30 ms to start, in the
 * background, and a second copy of the spectrum is held; it pays for a run of many transforms.
 */
export function setTransformThreads(threads: number): void {
  if (!(Number.isInteger(threads) && threads >= 1 && threads <= MOST_THREADS)) {
    throw new RangeError(`setTransformThreads: ${threads} is not an integer within 1 .. 16`);
  }
  if (threads === wanted) return;
  wanted = threads;
  for (const helper of team?.helpers ?? []) void helper.terminate();
  team = undefined;
}

/** The number of threads that should share a map of this size. */
export function threadsFor(nx: number, ny: number): number {
  return nx * ny < LEAST_POINTS ? 1 : wanted;
}

/** This thread's instance of the module whose memory is shared, with the helpers started. */
export function sharedKernel(): Kernel {
  team ??= assemble(wanted);
  return team.kernel;
}

function assemble(threads: number): Team {
  const module = sharedKernelModule();
  const memory = new WebAssembly.Memory({ initial: 1, maximum: 65536, shared: true });
  const instance = new WebAssembly.Instance(module, { env: { memory } });
  const control = new Int32Array(new SharedArrayBuffer(4 * (WORDS + 5 * threads)));
  control[NEXT] = CLOSED;
  const helpers = Array.from({ length: threads - 1 }, (_, i) => {
    const workerData = { module, memory, control, scratch: WORDS + 5 * i };
    const helper = new Worker(HELPER, { eval: true, workerData, execArgv: [] });
    helper.unref();
    return helper;
  });
  return {
    kernel: { exports: instance.exports as unknown as FftExports, memory },
    control,
    helpers,
  };
}

/** Runs one phase to its end together with the helpers that are awake by then. */
export function runShared({ exports, memory }: Kernel, layout: FftLayout, work: Phase): void {
  const { control } = team!;
  const { units, phase, copyIn, copyOut } = work;
  const flags = new Int32Array(memory.buffer, layout.flagsAt, units).fill(0);
  layout.scratchAt.slice(1).forEach((scratch, i) => {
    control.set(scratch, WORDS + 5 * i);
  });
  Atomics.store(control, PHASE, phase);
  Atomics.store(control, JOB, layout.jobAt);
  Atomics.store(control, FLAGS, layout.flagsAt);
  Atomics.store(control, READY, copyIn ? 0 : units);
  Atomics.store(control, UNITS, units);
  // Opens the phase: a helper that claims a unit from now on sees all of the above.
  Atomics.store(control, NEXT, 0);
  Atomics.add(control, EPOCH, 1);
  Atomics.notify(control, EPOCH);
  if (copyIn) {
    for (let unit = 0; unit < units; unit++) {
      copyIn(unit);
      Atomics.store(control, READY, unit + 1);
    }
  }
  for (let finished = 0; finished < units; ) {
    if (Atomics.load(flags, finished) === 1) {
      copyOut?.(finished);
      finished++;
      continue;
    }
    const unit = Atomics.add(control, NEXT, 1);
    if (unit < units) {
      exports.runUnit(layout.jobAt, phase, unit);
      Atomics.store(flags, unit, 1);
    } else {
      awaitUnit(flags, finished);
    }
  }
  Atomics.store(control, NEXT, CLOSED);
}

function awaitUnit(flags: Int32Array<ArrayBufferLike>, unit: number): void {
  for (let tries = 0; tries < 2000; tries++) if (Atomics.load(flags, unit) === 1) return;
  if (Atomics.wait(flags as Int32Array, unit, 0, PATIENCE_MS) === 'timed-out') {
    throw new Error('a thread of the transform does not answer');
  }
}
