import { readdirSync, readFileSync } from 'node:fs';
import { dirname, join, relative } from 'node:path';
import { describe, expect, it } from 'vitest';

const SRC = new URL('../src/', import.meta.url).pathname;

/** What each folder may import beside itself: data flows file -> map -> patch -> field -> figures -> report. */
const MAY_IMPORT: Readonly<Record<string, readonly string[]>> = {
  grid: [],
  fits: ['grid'],
  geometry: ['grid', 'fits'],
  field: ['grid', 'geometry'],
  currents: ['grid', 'geometry', 'field'],
  energy: ['grid', 'geometry', 'field', 'currents'],
  figures: ['grid', 'geometry', 'field', 'currents', 'energy'],
  render: ['grid', 'geometry', 'field', 'figures'],
  report: ['grid', 'fits', 'geometry', 'figures', 'render'],
  cli: ['grid', 'fits', 'geometry', 'field', 'currents', 'energy', 'figures', 'render', 'report'],
};
const PURE = ['grid', 'field', 'currents', 'energy', 'figures'];
/** Finds the compiled transform beside the code, starts its second thread, loads the fallback when wanted: where grid touches Node. */
const READS_DISK = [
  'grid/kernel-loader.ts',
  'grid/fft-threads.ts',
  'grid/portable-fft.ts',
  'grid/volume-module.ts',
  'grid/volume-threads.ts',
];

const files = readdirSync(SRC, { recursive: true, encoding: 'utf8' }).filter(
  (file) => file.endsWith('.ts') && !file.startsWith('grid/kernel/'),
);

function imports(file: string): string[] {
  const text = readFileSync(join(SRC, file), 'utf8');
  return [...text.matchAll(/(?:from|import)\s*\(?\s*'([^']+)'/g)].map((match) => match[1]);
}

describe('folders', () => {
  it.each(files)('%s imports only what its folder may', (file) => {
    const folder = file.split('/')[0];
    if (!file.includes('/'))
      return expect(['index.ts', 'units.ts', 'constants.ts', 'errors.ts']).toContain(file);
    expect(Object.keys(MAY_IMPORT)).toContain(folder);
    for (const target of imports(file).filter((name) => name.startsWith('.'))) {
      const path = relative(SRC, join(SRC, dirname(file), target));
      const other = path.split('/')[0];
      if (['units.js', 'constants.js', 'errors.js'].includes(path) || other === folder) continue;
      expect(MAY_IMPORT[folder], `${file} imports ${path}`).toContain(other);
    }
  });

  it.each(files.filter((file) => PURE.includes(file.split('/')[0])))(
    '%s is pure: no disk, no clock, no console',
    (file) => {
      if (READS_DISK.includes(file)) return;
      expect(imports(file).filter((name) => name.startsWith('node:'))).toEqual([]);
      expect(readFileSync(join(SRC, file), 'utf8')).not.toMatch(
        /\b(console|process)\.|Date\.now|Math\.random/,
      );
    },
  );

  it.each(files.filter((file) => !file.startsWith('cli/')))(
    '%s neither prints nor exits',
    (file) => {
      expect(readFileSync(join(SRC, file), 'utf8')).not.toMatch(/console\.\w+\(|process\.exit/);
    },
  );
});
