import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { marrowHillFiles } from '../scripts/marrow-hill.mjs';
import { MARROW_HILL } from './support/command.js';

it('the Marrow Hill fixtures are what their script makes, bit for bit', () => {
  const files = Object.entries(marrowHillFiles());
  expect(files.length).toBeGreaterThan(0);
  for (const [name, bytes] of files)
    expect(Buffer.compare(readFileSync(join(MARROW_HILL, name)), bytes), name).toBe(0);
});
