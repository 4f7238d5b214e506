// Finds and compiles the WebAssembly module of the transforms: the one place in grid that reads a
// file. The module is made from src/grid/kernel by scripts/build-kernels.mjs.
import { readFileSync } from 'node:fs';

/** What the module exports; see src/grid/kernel/units.ts and scratch.ts. */
export interface FftExports {
  readonly setScratch: (a: number, b: number, c: number, row: number, odd: number) => void;
  readonly runUnit: (job: number, phase: number, unit: number) => void;
}

/** Beside this file once built; below dist when the sources run as they are (tests). */
const PLACES = ['./fft.wasm', '../../dist/grid/fft.wasm'];

let bytes: Uint8Array<ArrayBuffer> | null | undefined;
let compiled: WebAssembly.Module | undefined;

/**
 * The compiled module, or null where it cannot be had: no WebAssembly SIMD, sources not built, or
 * the portable transform asked for by SPOTJOULE_KERNEL=portable. Compiled once, at the first call.
 */
export function kernelModule(): WebAssembly.Module | null {
  bytes ??= findBytes();
  if (bytes === null) return null;
  compiled ??= new WebAssembly.Module(bytes);
  return compiled;
}

/** The same module for a memory that threads share. Only where `kernelModule` gave one. */
export function sharedKernelModule(): WebAssembly.Module {
  const shared = bytes!.slice();
  // Import "env" "memory", a memory with a maximum: the next byte tells whether it is shared.
  const name = new TextEncoder().encode('\x03env\x06memory\x02');
  const at = shared.findIndex((_, i) => name.every((byte, j) => shared[i + j] === byte));
  if (at < 0 || shared[at + name.length] !== 1) throw new Error('the kernels import no memory');
  shared[at + name.length] = 3;
  return new WebAssembly.Module(shared);
}

function findBytes(): Uint8Array<ArrayBuffer> | null {
  if (process.env.SPOTJOULE_KERNEL === 'portable') return null;
  for (const place of PLACES) {
    const found = readIfThere(new URL(place, import.meta.url));
    if (found) return WebAssembly.validate(found) ? found : null;
  }
  return null;
}

function readIfThere(url: URL): Uint8Array<ArrayBuffer> | undefined {
  try {
    return new Uint8Array(readFileSync(url));
  } catch {
    // Not built, or not in this place: the caller goes on to the next.
    return undefined;
  }
}
