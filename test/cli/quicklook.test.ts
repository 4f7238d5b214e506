import {
  chmodSync,
  copyFileSync,
  existsSync,
  mkdirSync,
  readdirSync,
  readFileSync,
  writeFileSync,
} from 'node:fs';
import { join } from 'node:path';
import { Ajv2020 } from 'ajv/dist/2020.js';
import sharp from 'sharp';
import { describe, expect, it } from 'vitest';
import { LINE_OF_SIGHT_KEYS } from '../../src/figures/quantity.js';
import { MARROW_HILL, ROOT, scratchFolder, spotjoule, startSpotjoule } from '../support/command.js';

const folder = scratchFolder();
const MAP = join(MARROW_HILL, 'mh-1-20310514.fits');
const SMALL = join(MARROW_HILL, 'mh-1-20310514-small.fits');
const schema = JSON.parse(
  readFileSync(join(ROOT, 'src', 'report', 'quicklook.schema.json'), 'utf8'),
);
const validate = new Ajv2020({ allErrors: true, strict: false }).compile(schema);

/** One line on stderr that names the file, nothing on stdout, no stack trace. */
function expectRefusal(run: ReturnType<typeof spotjoule>, status: number, pattern: RegExp) {
  expect(run.stderr.trimEnd().split('\n')).toHaveLength(1);
  expect(run.stderr).toMatch(pattern);
  expect(run.stderr).not.toMatch(/ at .*\.js|internal fault/);
  expect(run.stdout).toBe('');
  expect(run.status).toBe(status);
}

describe('spotjoule quicklook', () => {
  const run = spotjoule(folder, 'quicklook', MAP, '--region-id', 'MH-1', '--maps');

  it('prints a summary of at most one screen with unit, interval and basis', () => {
    expect(run.stderr).toBe('');
    expect(run.status).toBe(0);
    expect(run.stdout.split('\n').length).toBeLessThanOrEqual(40);
    expect(run.stdout).toMatch(/^MH-1 {2}mh-1-20310514\.fits {2}2031-05-14T08:00:00/);
    expect(run.stdout).toMatch(/unsigned flux +[\d.]+ × 10²¹ Mx +[\d.]+ to [\d.]+ +measured/);
    expect(run.stdout).toMatch(/free energy +~ [\d.]+ × 10\S+ J +[\d.]+ to [\d.]+ +prior/);
    for (const line of run.stdout.split('\n')) expect(line.length).toBeLessThanOrEqual(132);
  });

  it('uses no colour codes into a pipe', () => {
    expect(run.stdout).not.toContain('\u001b');
  });

  it('writes table, document, picture and maps, and no half-written file', () => {
    expect(readdirSync(join(folder, 'spotjoule-out')).sort()).toEqual([
      'mh-1-20310514-maps.fits',
      'mh-1-20310514.csv',
      'mh-1-20310514.json',
      'mh-1-20310514.png',
    ]);
  });

  it('writes JSON that the shipped schema describes, with every figure', () => {
    const document = JSON.parse(
      readFileSync(join(folder, 'spotjoule-out', 'mh-1-20310514.json'), 'utf8'),
    );
    validate(document);
    expect(validate.errors ?? []).toEqual([]);
    expect(document.regions[0].id).toBe('MH-1');
    expect(Object.keys(document.regions[0].quantities).sort()).toEqual(
      [...LINE_OF_SIGHT_KEYS].sort(),
    );
    expect(document.regions[0].center.stonyhurst_latitude).toBeCloseTo(-18, 0);
    expect(document.regions[0].center.stonyhurst_longitude).toBeCloseTo(12, 0);
  });

  it('writes CSV with the unit in each column name, one row a region', () => {
    const lines = readFileSync(join(folder, 'spotjoule-out', 'mh-1-20310514.csv'), 'utf8')
      .trimEnd()
      .split('\r\n');
    expect(lines).toHaveLength(2);
    const names = lines[0].split(',');
    for (const name of [
      'unsigned_flux_Mx',
      'free_energy_low_J',
      'peak_current_density_mA_per_m2',
      'force_free_alpha_per_Mm',
      'strong_field_area_Mm2',
    ])
      expect(names).toContain(name);
  });

  it('draws a picture that sharp can read', async () => {
    const picture = await sharp(join(folder, 'spotjoule-out', 'mh-1-20310514.png')).metadata();
    expect(picture.format).toBe('png');
    expect(picture.width).toBeGreaterThan(900);
  });

  it('prints one JSON document with --json', () => {
    const json = spotjoule(folder, 'quicklook', SMALL, '--json', '--no-picture');
    expect(json.stdout.trimEnd().split('\n')).toHaveLength(1);
    expect(validate(JSON.parse(json.stdout))).toBe(true);
    expect(existsSync(join(folder, 'spotjoule-out', 'mh-1-20310514-small.png'))).toBe(false);
  });

  it('works the strongest region of a whole disk by default, another by --center', () => {
    const disk = join(MARROW_HILL, 'full-disk-20310514.fits');
    const strongest = JSON.parse(
      spotjoule(folder, 'quicklook', disk, '--json', '--no-picture').stdout,
    );
    expect(strongest.regions[0].center.stonyhurst_latitude).toBeCloseTo(-18, -0.7);
    const second = JSON.parse(
      spotjoule(
        folder,
        'quicklook',
        disk,
        '--json',
        '--no-picture',
        '--center',
        '-35,22',
        '--extent',
        '160',
      ).stdout,
    );
    expect(second.regions[0].center.stonyhurst_longitude).toBeCloseTo(-35, 6);
    expect(second.regions[0].patch.nx * second.regions[0].patch.pixel_Mm).toBeCloseTo(160, -1);
  });

  it('draws the pictures of several files, one after the other', () => {
    const run = spotjoule(folder, 'quicklook', SMALL, MAP, '--out', 'several');
    expect(run.stderr).toBe('');
    expect(run.status).toBe(0);
    expect(
      readdirSync(join(folder, 'several')).filter((name) => name.endsWith('.png')),
    ).toHaveLength(2);
  });

  it('gives the same figures twice', () => {
    const once = spotjoule(folder, 'quicklook', SMALL, '--json', '--no-picture').stdout;
    expect(spotjoule(folder, 'quicklook', SMALL, '--json', '--no-picture').stdout).toBe(once);
  });

  it('gives the same figures to 1e-9 where the compiled transform is missing', () => {
    const compiled = JSON.parse(
      spotjoule(folder, 'quicklook', SMALL, '--json', '--no-picture').stdout,
    );
    process.env.SPOTJOULE_KERNEL = 'portable';
    const portable = JSON.parse(
      spotjoule(folder, 'quicklook', SMALL, '--json', '--no-picture').stdout,
    );
    delete process.env.SPOTJOULE_KERNEL;
    for (const key of LINE_OF_SIGHT_KEYS) {
      const [a, b] = [compiled, portable].map(({ regions }) => regions[0].quantities[key].value);
      expect(Math.abs(a - b), key).toBeLessThanOrEqual(1e-9 * Math.abs(a));
    }
  });

  it('gives the same figures from every encoding of a map', () => {
    const reference = JSON.parse(
      spotjoule(folder, 'quicklook', SMALL, '--json', '--no-picture').stdout,
    );
    const encodings = readdirSync(join(MARROW_HILL, 'encodings')).filter((name) =>
      name.includes('.fits'),
    );
    expect(encodings.length).toBeGreaterThanOrEqual(8);
    const paths = encodings.map((name) => join(MARROW_HILL, 'encodings', name));
    const run = spotjoule(folder, 'quicklook', ...paths, '--json', '--no-picture');
    expect(run.stderr).toBe('');
    const documents = run.stdout
      .trimEnd()
      .split('\n')
      .map((line) => JSON.parse(line));
    expect(documents).toHaveLength(encodings.length);
    for (const { source, regions } of documents) {
      // The same stored integers give the same numbers; floats and wider integers are rounded elsewhere, and
      // quantised floats differ by their quantum (a 64th of the noise).
      const rounded = /float|int32/.test(source.path);
      const tolerance = source.path.includes('quantised') ? 2e-3 : rounded ? 2e-4 : 1e-12;
      for (const key of ['unsigned_flux', 'potential_energy', 'peak_positive_field', 'free_energy'])
        expect(
          Math.abs(
            regions[0].quantities[key].value / reference.regions[0].quantities[key].value - 1,
          ),
          `${source.path} ${key}`,
        ).toBeLessThan(tolerance);
    }
  });
});

describe('spotjoule quicklook refuses in one line', () => {
  const empty = scratchFolder();
  const noFits = join(empty, 'notes.txt');
  writeFileSync(noFits, 'the seeing was poor all night\n');
  const half = join(empty, 'half.fits');
  writeFileSync(half, readFileSync(MAP).subarray(0, 60_000));

  it('an unknown option, with exit code 2', () => {
    expectRefusal(
      spotjoule(empty, 'quicklook', MAP, '--aplha', '0.01'),
      2,
      /unknown option '--aplha'.*--alpha/,
    );
  });

  it('a value that is no number, an impossible position, a wrong choice, no file', () => {
    expectRefusal(
      spotjoule(empty, 'quicklook', MAP, '--alpha', 'x'),
      2,
      /--alpha.*wanted alpha, a number/,
    );
    expectRefusal(spotjoule(empty, 'quicklook', MAP, '--center', '20'), 2, /wanted LON,LAT/);
    expectRefusal(spotjoule(empty, 'quicklook', MAP, '--sides', 'shut'), 2, /open, periodic/);
    expectRefusal(spotjoule(empty, 'quicklook', MAP, '--date', '2031-02-30'), 2, /wanted a date/);
    expectRefusal(spotjoule(empty, 'quicklook'), 2, /missing required argument/);
    expectRefusal(spotjoule(empty, 'quikclook', MAP), 2, /unknown command.*quicklook/);
  });

  it('no such file, a directory, text, a truncated file', () => {
    expectRefusal(spotjoule(empty, 'quicklook', 'missing.fits'), 1, /missing\.fits: no such file/);
    expectRefusal(spotjoule(empty, 'quicklook', empty), 1, /is a directory/);
    expectRefusal(spotjoule(empty, 'quicklook', noFits), 1, /notes\.txt: .*FITS/);
    expectRefusal(spotjoule(empty, 'quicklook', half), 1, /half\.fits.*bytes/);
  });

  it('a place off the disk or too near the limb', () => {
    expectRefusal(
      spotjoule(empty, 'quicklook', MAP, '--center', '85,0'),
      1,
      /mh-1-20310514\.fits.*/,
    );
  });

  it('an output folder that cannot be', () => {
    writeFileSync(join(empty, 'taken'), '');
    if (existsSync('/proc/self'))
      expectRefusal(
        spotjoule(empty, 'quicklook', SMALL, '--no-picture', '--out', '/proc/not/here'),
        1,
        /cannot make the output folder: there is no such place/,
      );
    expectRefusal(
      spotjoule(empty, 'quicklook', SMALL, '--no-picture', '--out', 'taken'),
      1,
      /taken: cannot make the output folder/,
    );
  });

  it('a pixel too small to be, an empty name, a unit that is none', () => {
    const tiny = join(empty, 'tiny.fits');
    const bytes = Buffer.from(readFileSync(SMALL));
    for (const keyword of ['CDELT1', 'CDELT2']) {
      const at = bytes.indexOf(`${keyword}  =`);
      bytes.write(`${keyword}  =                1E-09`.padEnd(80), at, 'latin1');
    }
    writeFileSync(tiny, bytes);
    expectRefusal(spotjoule(empty, 'quicklook', tiny), 1, /tiny\.fits.*wanted at least 0\.01/);
    expectRefusal(
      spotjoule(empty, 'quicklook', SMALL, '--region-id', ''),
      2,
      /--region-id names no region/,
    );
    expectRefusal(spotjoule(empty, 'quicklook', SMALL, '--out', ''), 2, /--out names no folder/);
    expectRefusal(spotjoule(empty, 'quicklook', SMALL, '--unit', 'furlong'), 2, /no magnetic unit/);
  });

  it('control characters on the way to the terminal', () => {
    const run = spotjoule(
      folder,
      'quicklook',
      SMALL,
      '--no-picture',
      '--region-id',
      'a\u001b[31mb',
    );
    expect(run.stdout).not.toContain('\u001b');
    expect(run.status).toBe(0);
  });

  it('two files whose results would overwrite each other', () => {
    const other = join(empty, 'other');
    mkdirSync(other);
    copyFileSync(SMALL, join(other, 'mh-1-20310514-small.fits'));
    expectRefusal(
      spotjoule(empty, 'quicklook', SMALL, join(other, 'mh-1-20310514-small.fits')),
      2,
      /same results/,
    );
  });

  it('and leaves nothing behind', () => {
    expect(existsSync(join(empty, 'spotjoule-out'))).toBe(false);
  });

  it('but works the other files, with exit code 3', () => {
    const run = spotjoule(empty, 'quicklook', half, SMALL, '--no-picture', '--json');
    expect(run.status).toBe(3);
    expect(run.stderr.trimEnd().split('\n')).toHaveLength(1);
    expect(JSON.parse(run.stdout).source.path).toBe(SMALL);
    expect(readdirSync(join(empty, 'spotjoule-out')).sort()).toEqual([
      'mh-1-20310514-small.csv',
      'mh-1-20310514-small.json',
    ]);
  });

  it('shows the stack trace with --debug only', () => {
    const run = spotjoule(empty, 'quicklook', 'missing.fits', '--debug');
    expect(run.stderr).toMatch(/ at .*\.js/);
  });

  it.skipIf(process.getuid?.() === 0)(
    'a file that may not be read (left out for root, who may read all)',
    () => {
      const locked = join(empty, 'locked.fits');
      copyFileSync(SMALL, locked);
      chmodSync(locked, 0);
      expectRefusal(spotjoule(empty, 'quicklook', locked), 1, /may not be read/);
    },
  );
});

describe('Ctrl-C', () => {
  it('ends the command and leaves no half-written file', async () => {
    const there = scratchFolder();
    for (const delay of [60, 200, 350, 500]) {
      const child = startSpotjoule(there, 'quicklook', MAP, '--maps');
      const ended = new Promise<void>((resolve) => child.once('exit', () => resolve()));
      await new Promise((resolve) => setTimeout(resolve, delay));
      child.kill('SIGINT');
      await ended;
      const out = join(there, 'spotjoule-out');
      const left = existsSync(out) ? readdirSync(out) : [];
      expect(left.filter((name) => name.endsWith('.part'))).toEqual([]);
      // All files of a run or none.
      expect([0, 4]).toContain(left.length);
    }
  });
});

describe('help', () => {
  it('names the commands and the exit codes', () => {
    const run = spotjoule(folder, '--help');
    expect(run.status).toBe(0);
    expect(run.stdout).toMatch(/quicklook/);
    expect(run.stdout).toMatch(
      /Exit codes: 0 all done; 1 failed; 2 wrong command line; 3 finished/,
    );
    expect(spotjoule(folder, '--version').stdout.trim()).toMatch(/^\d+\.\d+\.\d+$/);
  });
});
