// Where one thread keeps its intermediate values. The host lays the memory out (kernel-memory.ts).

/** Bytes of one point: eight real parts, then eight imaginary parts. */
export const POINT: usize = 128;
/** From the real parts of a point to its imaginary parts. */
export const IMAGINARY: usize = 64;

export namespace scratch {
  /** Three buffers of as many points as the longest transform (or its convolution) plus one. */
  export let a: usize = 0;
  export let b: usize = 0;
  export let c: usize = 0;
  /** Sums and differences of one butterfly of odd radix. */
  export let odd: usize = 0;
}

export function setScratch(a: usize, b: usize, c: usize, odd: usize): void {
  scratch.a = a;
  scratch.b = b;
  scratch.c = c;
  scratch.odd = odd;
}
