import { mkdtempSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { Worker } from 'node:worker_threads';
import { build } from 'vite';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { PictureAnswer } from '../../src/cli/picture-drawer.js';
import { renderRegionPicture } from '../../src/render/region-picture.js';
import { BIPOLE_SPOTS, filledPicture } from '../render/sample-patch.js';
import { sampleVectorMaps, TWISTED_SPOTS } from '../render/sample-vector.js';
import { ROOT } from '../support/command.js';

let folder: string;

beforeAll(async () => {
  // Inside node_modules, so that the bundle finds the packages it leaves out.
  folder = mkdtempSync(join(ROOT, 'node_modules', '.picture-worker-test-'));
  await build({
    root: ROOT,
    configFile: false,
    logLevel: 'error',
    build: {
      ssr: join(ROOT, 'src/cli/picture-worker.ts'),
      outDir: folder,
      target: 'node20',
      rollupOptions: { output: { entryFileNames: 'worker.mjs' } },
    },
  });
});

afterAll(() => rmSync(folder, { recursive: true, force: true }));

it('draws line-of-sight and vector pictures to the byte as the main thread does', async () => {
  const options = { nx: 64, ny: 48, spots: TWISTED_SPOTS, horizontalNoiseG: 40 };
  const plain = filledPicture({ ...options, spots: BIPOLE_SPOTS });
  const vector = { ...plain, vector: sampleVectorMaps(plain, options) };
  const worker = new Worker(join(folder, 'worker.mjs'));
  for (const picture of [plain, vector]) {
    const answer = await new Promise<PictureAnswer>((resolve, reject) => {
      worker.once('message', resolve);
      worker.once('error', reject);
      worker.postMessage(picture);
    });
    const wanted = await renderRegionPicture(picture);
    expect('content' in answer && Buffer.compare(answer.content, wanted)).toBe(0);
  }
  await worker.terminate();
});
