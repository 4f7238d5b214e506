import { afterEach, expect, test, vi } from 'vitest';
import { inverseRealFft2, realFft2, transformKernel } from '../../src/grid/fft.js';
import { fftPlan, goodSize } from '../../src/grid/fft-plan.js';
import { randomNumbers } from './random-numbers.js';

// Chooses the kernel, before a test changes the environment.
const kernel = transformKernel();

afterEach(() => {
  vi.unstubAllEnvs();
  vi.resetModules();
});

test('SPOTJOULE_KERNEL=portable gives the same by other means', async () => {
  expect(kernel).toBe('compiled');
  vi.stubEnv('SPOTJOULE_KERNEL', 'portable');
  vi.resetModules();
  const portable = await import('../../src/grid/fft.js');
  expect(portable.transformKernel()).toBe('portable');
  const values = randomNumbers(11, 60 * 48);
  const [a, b] = [portable.realFft2(values, 60, 48), realFft2(values, 60, 48)];
  const scale = Math.max(...b.re);
  expect(Math.max(...a.re.map((v, i) => Math.abs(v - b.re[i]))) / scale).toBeLessThan(1e-12);
  expect(Math.max(...a.im.map((v, i) => Math.abs(v - b.im[i]))) / scale).toBeLessThan(1e-12);
});

test('what was transformed before leaves no trace', () => {
  const values = randomNumbers(3, 21 * 19);
  const first = realFft2(values, 21, 19);
  realFft2(new Float64Array(300 * 200).fill(Number.NaN), 300, 200);
  realFft2(new Float64Array(21 * 32).fill(1e300), 21, 32);
  expect(realFft2(values, 21, 19)).toEqual(first);
  expect(inverseRealFft2(first).some(Number.isNaN)).toBe(false);
});

test('memory grows for a large map and serves a small one afterwards', () => {
  const small = randomNumbers(4, 64);
  const before = realFft2(small, 8, 8);
  const nx = 1536;
  const large = randomNumbers(5, nx * nx);
  const back = inverseRealFft2(realFft2(large, nx, nx));
  let worst = 0;
  for (let i = 0; i < large.length; i++) worst = Math.max(worst, Math.abs(back[i] - large[i]));
  expect(worst).toBeLessThan(5e-15);
  expect(realFft2(small, 8, 8)).toEqual(before);
});

test('NaN spoils the whole spectrum', () => {
  const values = randomNumbers(8, 16 * 12);
  values[37] = Number.NaN;
  const { re, im } = realFft2(values, 16, 12);
  expect(re.every(Number.isNaN)).toBe(true);
  // Modes that are their own mirror have no imaginary part to spoil but through the columns.
  expect(im.filter(Number.isNaN).length).toBeGreaterThan(0.9 * im.length);
});

test('goodSize is the next product of 2, 3 and 5', () => {
  const smooth = (n: number): boolean =>
    n === 1 || [2, 3, 5].some((prime) => n % prime === 0 && smooth(n / prime));
  for (let n = 1; n <= 3000; n++) {
    let expected = n;
    while (!smooth(expected)) expected++;
    expect(goodSize(n)).toBe(expected);
  }
  expect(() => goodSize(0)).toThrow(RangeError);
  expect(() => goodSize(Number.NaN)).toThrow(RangeError);
});

test('plans are kept, but not without end', () => {
  const first = fftPlan(4096);
  expect(fftPlan(4096)).toBe(first);
  for (let n = 100_000; n < 100_010; n++) fftPlan(goodSize(n * 1.1 + 7000 * (n % 10)));
  expect(fftPlan(4096)).not.toBe(first);
  expect(() => fftPlan(0)).toThrow(RangeError);
  expect(() => fftPlan(2 ** 27)).toThrow(RangeError);
});
