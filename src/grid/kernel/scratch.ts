// Points, and where one thread keeps its intermediate values. The host lays the memory out
// (fft-kernel.ts).

/** Bytes of one point: eight real parts, then eight imaginary parts. */
export const POINT: usize = 128;
/** From the real parts of a point to its imaginary parts. */
export const IMAGINARY: usize = 64;

/** Types whose sizes are the four offsets within a point: an offset must be known when compiling. */
export class At0 {}
export class At16 {
  a: v128;
}
export class At32 extends At16 {
  b: v128;
}
export class At48 extends At32 {
  c: v128;
}

export namespace scratch {
  /** Two buffers of as many points as the longest transform, or its convolution. */
  export let a: usize = 0;
  export let b: usize = 0;
  /** One such buffer for the sequence of a convolution. */
  export let c: usize = 0;
  /** One such buffer, and a point, for the rows that are being transformed. */
  export let row: usize = 0;
  /** Sums and differences of one butterfly of odd radix. */
  export let odd: usize = 0;
}

export function setScratch(a: usize, b: usize, c: usize, row: usize, odd: usize): void {
  scratch.a = a;
  scratch.b = b;
  scratch.c = c;
  scratch.row = row;
  scratch.odd = odd;
}
