// Finds and compiles the WebAssembly module of the transforms: the one place in grid that reads a
// file. The module is made from src/grid/kernel by scripts/build-kernels.mjs.
import { readFileSync } from 'node:fs';

/** What the module exports: functions of addresses in bytes, counts and factors. */
export interface FftExports {
  readonly setScratch: (a: number, b: number, c: number, row: number, odd: number) => void;
  readonly forwardEvenRows: (
    plan: number,
    nx: number,
    values: number,
    turn: number,
    tiles: number,
    tileBytes: number,
  ) => void;
  readonly inverseEvenRows: (
    plan: number,
    nx: number,
    values: number,
    turn: number,
    gain: number,
    tiles: number,
    tileBytes: number,
  ) => void;
  readonly forwardOddRows: (
    plan: number,
    nx: number,
    values: number,
    tiles: number,
    tileBytes: number,
  ) => void;
  readonly inverseOddRows: (
    plan: number,
    nx: number,
    values: number,
    gain: number,
    tiles: number,
    tileBytes: number,
  ) => void;
  readonly transformTiles: (
    plan: number,
    tiles: number,
    tileBytes: number,
    from: number,
    to: number,
  ) => void;
  readonly readRows: (
    tiles: number,
    tileBytes: number,
    count: number,
    columns: number,
    pitch: number,
    re: number,
    im: number,
  ) => void;
  readonly readEdges: (
    tile: number,
    from: number,
    count: number,
    ny: number,
    last: number,
    pitch: number,
    re: number,
    im: number,
  ) => void;
  readonly writeRowsSwapped: (
    tiles: number,
    tileBytes: number,
    count: number,
    columns: number,
    pitch: number,
    re: number,
    im: number,
  ) => void;
}

/** Beside this file once built; below dist when the sources run as they are (tests). */
const PLACES = ['./fft.wasm', '../../dist/grid/fft.wasm'];

let compiled: WebAssembly.Module | null | undefined;

/**
 * The compiled module, or null where it cannot be had: no WebAssembly SIMD, sources not built, or
 * the portable transform asked for by SPOTJOULE_KERNEL=portable. Compiled once, at the first call.
 */
export function kernelModule(): WebAssembly.Module | null {
  if (compiled === undefined) compiled = compile();
  return compiled;
}

function compile(): WebAssembly.Module | null {
  if (process.env.SPOTJOULE_KERNEL === 'portable') return null;
  for (const place of PLACES) {
    const bytes = readIfThere(new URL(place, import.meta.url));
    if (bytes) return WebAssembly.validate(bytes) ? new WebAssembly.Module(bytes) : null;
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
