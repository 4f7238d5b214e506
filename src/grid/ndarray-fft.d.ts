declare module 'ndarray-fft' {
  import type { NdArray } from 'ndarray';
  /** In-place complex transform over every axis: direction 1 forward, -1 inverse with 1/N. */
  export default function fft(
    direction: 1 | -1,
    re: NdArray<Float64Array>,
    im: NdArray<Float64Array>,
  ): void;
}
