import { Worker } from 'node:worker_threads';
import type { RegionPicture } from '../render/region-picture.js';

/** What the thread gives back: the PNG, or what went wrong. */
export type PictureAnswer = { readonly content: Uint8Array } | { readonly fault: string };

/** Draws pictures, one at a time, in a second thread. */
export interface PictureDrawer {
  readonly draw: (picture: RegionPicture) => Promise<Uint8Array>;
  readonly close: () => Promise<void>;
}

/**
 * Starts the drawing thread at once, so that it loads while the first map is worked out: a fifth of a
 * second less to wait. It does not keep the process alive.
 */
export function startPictureDrawer(): PictureDrawer {
  const worker = new Worker(new URL('./picture-worker.js', import.meta.url));
  worker.unref();
  const draw = (picture: RegionPicture) =>
    new Promise<Uint8Array>((resolve, reject) => {
      worker.ref();
      const settle = (finish: () => void) => {
        // By name: Node hears its own events of the thread through listeners too.
        for (const event of ['message', 'error', 'exit']) worker.removeAllListeners(event);
        worker.unref();
        finish();
      };
      worker.once('message', (answer: PictureAnswer) =>
        settle(() =>
          'content' in answer
            ? resolve(answer.content)
            : reject(new Error(`the picture could not be drawn: ${answer.fault}`)),
        ),
      );
      worker.once('error', (error) => settle(() => reject(error)));
      worker.once('exit', (code) =>
        settle(() => reject(new Error(`the drawing thread ended with code ${code}`))),
      );
      worker.postMessage(picture);
    });
  return { draw, close: async () => void (await worker.terminate()) };
}
