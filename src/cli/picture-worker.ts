import { parentPort } from 'node:worker_threads';
import { type Grid2, type GridUnit, makeGrid } from '../grid/grid.js';
import {
  prepareDrawing,
  type RegionPicture,
  renderRegionPicture,
} from '../render/region-picture.js';
import type { PictureAnswer } from './picture-drawer.js';

// Draws pictures in a thread of its own, which loads fonts and libraries while the main one computes.

/** A picture that crossed into this thread: its grids have lost their methods. */
function revive({ vector, ...rest }: RegionPicture): RegionPicture {
  const { patch, radialField, currentDensity } = rest;
  const grid = <U extends GridUnit>({ values, unit, pixelMm }: Grid2<U>) =>
    makeGrid(values.data, patch.nx, patch.ny, unit, pixelMm);
  return {
    ...rest,
    patch: { ...patch, field: grid(patch.field) },
    radialField: grid(radialField),
    currentDensity: currentDensity && grid(currentDensity),
    vector: vector && {
      ...vector,
      horizontal: { x: grid(vector.horizontal.x), y: grid(vector.horizontal.y) },
      currentDensity: grid(vector.currentDensity),
      currentNoise: grid(vector.currentNoise),
      alpha: grid(vector.alpha),
    },
  };
}

async function answer(picture: RegionPicture): Promise<PictureAnswer> {
  try {
    return { content: await renderRegionPicture(revive(picture)) };
  } catch (error) {
    return { fault: error instanceof Error ? error.message : String(error) };
  }
}

const port = parentPort;
if (port) {
  port.on('message', async (picture: RegionPicture) => port.postMessage(await answer(picture)));
  await prepareDrawing();
}
