// The compiled module: what the host (fft-kernel.ts, fft-threads.ts) may call.
export { setScratch } from './scratch';
export { runUnit } from './units';
