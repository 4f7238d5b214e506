// Finds and compiles the WebAssembly module of field volumes, which is made from
// src/grid/kernel/volume*.ts beside that of the transforms.
import { readFileSync } from 'node:fs';
import { transformKernel } from './fft.js';

/** What the module exports; see volume-level.ts and open-sums.ts in src/grid/kernel. */
export interface VolumeExports {
  readonly runLevel32: (job: number, level: number, scratch: number) => void;
  readonly runLevel64: (job: number, level: number, scratch: number) => void;
  readonly openGain: (job: number) => void;
  readonly openSums: (job: number) => void;
}

/** Beside this file once built; below dist when the sources run as they are (tests). */
const PLACES = ['./volume.wasm', '../../dist/grid/volume.wasm'];

let compiled: WebAssembly.Module | null | undefined;

/** The compiled module, or null where the transforms are portable too, or it is not built. */
export function volumeModule(): WebAssembly.Module | null {
  if (transformKernel() === 'portable') return null;
  compiled ??= findModule();
  return compiled;
}

function findModule(): WebAssembly.Module | null {
  for (const place of PLACES) {
    let bytes: Uint8Array<ArrayBuffer>;
    try {
      bytes = new Uint8Array(readFileSync(new URL(place, import.meta.url)));
    } catch {
      // Not built, or not in this place.
      continue;
    }
    return WebAssembly.validate(bytes) ? new WebAssembly.Module(bytes) : null;
  }
  return null;
}
