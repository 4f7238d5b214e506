// The main job on a map of the invented station on Marrow Hill: figures to the terminal, picture to a folder.
import { spawnSync } from 'node:child_process';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

const root = fileURLToPath(new URL('..', import.meta.url));
const map = join('fixtures', 'marrow-hill', 'mh-1-20310514.fits');
const args = ['quicklook', map, '--region-id', 'MH-1', '--out', 'spotjoule-out'];
console.log(`$ spotjoule ${args.join(' ')}\n`);
const run = spawnSync(process.execPath, [join(root, 'dist', 'cli', 'main.js'), ...args], {
  cwd: root,
  stdio: 'inherit',
});
if (run.status === 0)
  console.log(`The picture lies in ${join('spotjoule-out', 'mh-1-20310514.png')}`);
process.exit(run.status ?? 1);
