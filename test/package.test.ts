import { execFileSync, spawnSync } from 'node:child_process';
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { MARROW_HILL, ROOT, scratchFolder } from './support/command.js';

const MAP = join(MARROW_HILL, 'mh-1-20310514-small.fits');

it('packs to an archive that installs and runs elsewhere, as command and as library', () => {
  const there = scratchFolder();
  const run = (command: string, args: string[]) =>
    execFileSync(command, args, {
      cwd: there,
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'pipe'],
    });
  // dist/ is built: --ignore-scripts keeps npm from building it again under the other tests.
  const [{ filename, files }] = JSON.parse(
    execFileSync('npm', ['pack', '--json', '--ignore-scripts', '--pack-destination', there], {
      cwd: ROOT,
      encoding: 'utf8',
      stdio: ['ignore', 'pipe', 'ignore'],
    }),
  ) as { filename: string; files: { path: string }[] }[];
  const paths = files.map(({ path }) => path);
  for (const needed of [
    'LICENSE',
    'README.md',
    'package.json',
    'dist/index.js',
    'dist/index.d.ts',
    'dist/report/quicklook.schema.json',
    'dist/grid/fft.wasm',
    'dist/grid/volume.wasm',
  ])
    expect(paths).toContain(needed);
  expect(
    paths.filter((path) => !/^(dist\/|README\.md$|LICENSE$|package\.json$)/.test(path)),
  ).toEqual([]);

  writeFileSync(join(there, 'package.json'), '{"name":"elsewhere","private":true,"type":"module"}');
  run('npm', [
    'install',
    '--prefer-offline',
    '--no-audit',
    '--no-fund',
    '--loglevel=error',
    `./${filename}`,
  ]);
  const command = spawnSync(join(there, 'node_modules', '.bin', 'spotjoule'), ['quicklook', MAP], {
    cwd: there,
    encoding: 'utf8',
  });
  expect(command.stderr).toBe('');
  expect(command.stdout).toMatch(/potential energy/);
  expect(
    readFileSync(join(there, 'spotjoule-out', 'mh-1-20310514-small.png'))
      .subarray(1, 4)
      .toString(),
  ).toBe('PNG');

  writeFileSync(
    join(there, 'use.js'),
    `import { quickLook } from 'spotjoule';
     import schema from 'spotjoule/schema/quicklook.json' with { type: 'json' };
     const { document } = quickLook(process.argv[2], { analysis: { alphaPerMm: 0.01 } });
     console.log(schema.title, document.regions[0].quantities.free_energy.basis);`,
  );
  expect(run(process.execPath, ['--no-warnings', 'use.js', MAP])).toBe(
    'spotjoule quick look assumed\n',
  );
}, 180_000);
