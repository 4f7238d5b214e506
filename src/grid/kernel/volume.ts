// The compiled module of field volumes: what the host (volume-kernel.ts) may call.
export { runLevel32, runLevel64 } from './volume-level';
