import { writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { checkInputs, componentArgument, parseComponent } from '../../src/cli/component-options.js';
import { scratchFolder, spotjoule } from '../support/command.js';

const folder = scratchFolder();

describe('NAME=FILE[#HDU][:PLANE]', () => {
  it.each([
    ['strength=a.fits', { name: 'strength', file: 'a.fits' }],
    ['azimuth=a.fits:2', { name: 'azimuth', file: 'a.fits', plane: 2 }],
    ['radial=dir/a.fits#3', { name: 'radial', file: 'dir/a.fits', hdu: 3 }],
    ['error-west=a.fits#ERR:0', { name: 'error-west', file: 'a.fits', hdu: 'ERR', plane: 0 }],
    ['South=a=b:c#1.fits#2:5', { name: 'south', file: 'a=b:c#1.fits', hdu: 2, plane: 5 }],
    ['north=at 12:30:UT.fits', { name: 'north', file: 'at 12:30:UT.fits' }],
    ['ambiguity=a.fits#', { name: 'ambiguity', file: 'a.fits#' }],
  ])('%s', (text, wanted) => {
    expect(parseComponent(text)).toEqual(wanted);
  });
  it('a file of the whole name is taken whole', () => {
    const path = join(folder, 'a#1:2');
    writeFileSync(path, '');
    expect(parseComponent(`west=${path}`)).toEqual({ name: 'west', file: path });
    expect(parseComponent(`west=${path}:3`)).toEqual({ name: 'west', file: path, plane: 3 });
  });
  it.each(['', 'strength', 'strength=', 'strength=:1', 'up=a.fits', '=a.fits', 'a.fits'])(
    "'%s' is refused",
    (text) => {
      expect(() => parseComponent(text)).toThrow(/wanted \S+=FILE\[#HDU\]\[:PLANE\]/);
      expect(() => parseComponent(text)).toThrow(expect.objectContaining({ code: 'UsageError' }));
    },
  );
  it('gathers what is repeated', () => {
    const one = componentArgument('west=a');
    expect(componentArgument('north=b', one).map(({ file }) => file)).toEqual(['a', 'b']);
  });
});

describe('inputs of the quick look', () => {
  const component = [
    { name: 'west', file: 'w' },
    { name: 'north', file: 'n' },
    { name: 'radial', file: 'r' },
  ] as const;
  it('are files or one vector map', () => {
    expect(() => checkInputs(['a.fits'], {})).not.toThrow();
    expect(() => checkInputs([], { component })).not.toThrow();
    expect(() => checkInputs([], {})).toThrow(/missing required argument/);
    expect(() => checkInputs(['a.fits'], { component })).toThrow(/a\.fits beside it/);
    expect(() => checkInputs([], { component: component.slice(1) })).toThrow(
      /north, radial; wanted/,
    );
    const azimuthZero = { from: '-x', clockwise: false } as const;
    expect(() => checkInputs(['a.fits'], { azimuthZero })).toThrow(
      /belongs to --component azimuth/,
    );
  });
  it.each([
    [['--component', 'up=a.fits'], /component 'up=a\.fits' is not understood/],
    [['--component', 'west=a.fits'], /components given: west; wanted/],
    [['--azimuth-zero', '-z', 'a.fits'], /'-z' is no azimuth zero/],
    [['--azimuth-zero', '-x', 'a.fits'], /belongs to --component/],
  ])('%j: one line, exit code 2', (args, reason) => {
    const run = spotjoule(folder, 'quicklook', ...args);
    expect(run.stderr).toMatch(reason);
    expect(run.stderr.trimEnd().split('\n')).toHaveLength(1);
    expect(run.status).toBe(2);
  });
});
