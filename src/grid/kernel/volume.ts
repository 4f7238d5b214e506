// The compiled module of field volumes and energies in free space: what the host (volume-kernel.ts,
// open-sums.ts) may call.
export { runLevel32, runLevel64 } from './volume-level';
export { openGain, openSums } from './open-sums';
