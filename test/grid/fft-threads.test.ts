import { spawn } from 'node:child_process';
import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { afterEach, describe, expect, test } from 'vitest';
import { inverseRealFft2, realFft2, setTransformThreads } from '../../src/grid/fft.js';
import { randomNumbers } from './random-numbers.js';

afterEach(() => setTransformThreads(1));

describe.each([
  [640, 512],
  [405, 481],
])('%i x %i', (nx, ny) => {
  test('gives the same bits whatever the number of threads', () => {
    const values = randomNumbers(nx, nx * ny);
    const spectrum = realFft2(values, nx, ny);
    const back = inverseRealFft2(spectrum);
    for (const threads of [2, 3]) {
      setTransformThreads(threads);
      // Often enough that the helpers have started and take part.
      for (let i = 0; i < 30; i++) {
        const again = realFft2(values, nx, ny);
        expect(Buffer.compare(bytes(again.re), bytes(spectrum.re))).toBe(0);
        expect(Buffer.compare(bytes(again.im), bytes(spectrum.im))).toBe(0);
        expect(Buffer.compare(bytes(inverseRealFft2(again)), bytes(back))).toBe(0);
      }
    }
  });
});

function bytes(values: Float64Array): Uint8Array {
  return new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
}

test('changing sizes and small maps do not disturb the helpers', () => {
  const sizes: [number, number][] = [
    [512, 400],
    [16, 12],
    [401, 450],
    [800, 600],
    [512, 400],
  ];
  const alone = sizes.map(([nx, ny]) => realFft2(randomNumbers(nx, nx * ny), nx, ny));
  setTransformThreads(2);
  for (let i = 0; i < 4; i++) {
    sizes.forEach(([nx, ny], j) => {
      const { re } = realFft2(randomNumbers(nx, nx * ny), nx, ny);
      expect(Buffer.compare(bytes(re), bytes(alone[j].re))).toBe(0);
    });
  }
});

test('only 1 to 16 threads can be asked for', () => {
  for (const threads of [0, 17, 1.5, Number.NaN]) {
    expect(() => setTransformThreads(threads)).toThrow(RangeError);
  }
});

/** A process of the built transforms that has used two threads. */
function start(afterwards: string) {
  const built = new URL('../../dist/grid/fft.js', import.meta.url);
  expect(existsSync(fileURLToPath(built)), 'built by npm run build').toBe(true);
  const script = `
    import { realFft2, setTransformThreads } from '${built.href}';
    setTransformThreads(2);
    const values = new Float64Array(512 * 512).fill(1);
    for (let i = 0; i < 20; i++) realFft2(values, 512, 512);
    console.log('done');
    await new Promise((resume) => setTimeout(resume, 50));
    ${afterwards}`;
  return spawn(process.execPath, ['--input-type=module', '-e', script], {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
}

test('helpers do not keep a process alive', async () => {
  const child = start('');
  const code = await new Promise((resolve) => child.on('close', resolve));
  expect(code).toBe(0);
}, 20_000);

test('an interrupt ends a process in the middle of its transforms', async () => {
  const child = start('for (;;) realFft2(values, 512, 512);');
  child.stdout.once('data', () => setTimeout(() => child.kill('SIGINT'), 300));
  const signal = await new Promise((resolve) => child.on('close', (_, name) => resolve(name)));
  expect(signal).toBe('SIGINT');
}, 20_000);
