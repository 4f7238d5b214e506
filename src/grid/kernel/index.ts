// The compiled module: what src/grid/fft-kernel.ts may call.
export { forwardEvenRows, inverseEvenRows } from './even-rows';
export { forwardOddRows, inverseOddRows } from './odd-rows';
export { setScratch } from './scratch';
export { readEdges, readRows, transformTiles, writeRowsSwapped } from './tiles';
