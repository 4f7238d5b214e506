import { parentPort } from 'node:worker_threads';
import { makeGrid } from '../grid/grid.js';
import {
  prepareDrawing,
  type RegionPicture,
  renderRegionPicture,
} from '../render/region-picture.js';
import type { PictureAnswer } from './picture-drawer.js';

// Draws pictures in a thread of its own, which loads fonts and libraries while the main one computes.

/** A picture that crossed into this thread: its grids have lost their methods. */
function revive({ patch, radialField, currentDensity, ...rest }: RegionPicture): RegionPicture {
  const grid = <G extends typeof radialField | NonNullable<typeof currentDensity>>(plain: G) =>
    makeGrid(plain.values.data, patch.nx, patch.ny, plain.unit, plain.pixelMm);
  return {
    ...rest,
    patch: { ...patch, field: grid(patch.field) as typeof patch.field },
    radialField: grid(radialField) as typeof radialField,
    currentDensity: currentDensity && (grid(currentDensity) as typeof currentDensity),
  };
}

async function answer(picture: RegionPicture): Promise<PictureAnswer> {
  try {
    return { content: await renderRegionPicture(revive(picture)) };
  } catch (error) {
    return { fault: error instanceof Error ? (error.stack ?? error.message) : String(error) };
  }
}

const port = parentPort;
if (port) {
  port.on('message', async (picture: RegionPicture) => port.postMessage(await answer(picture)));
  await prepareDrawing();
}
