import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { QUANTITY_KEYS } from '../src/figures/quantity.js';
import { ROOT, spotjoule } from './support/command.js';

const readme = readFileSync(join(ROOT, 'README.md'), 'utf8');

describe('README', () => {
  it('shows what its first command prints', () => {
    const [, command, output] = readme.match(
      /```sh\nspotjoule (quicklook .*)\n```\n\n```\n([\s\S]*?)```/,
    )!;
    expect(spotjoule(ROOT, ...command.split(' ')).stdout).toBe(output);
  });

  it('explains every figure, every option and every basis', () => {
    for (const key of QUANTITY_KEYS) expect(readme).toContain(`\`${key}\``);
    const help = spotjoule(ROOT, 'quicklook', '--help').stdout;
    const options = [...help.matchAll(/^ {2}(?:-\w, )?(--[\w-]+)/gm)].map((match) => match[1]);
    expect(options.length).toBeGreaterThan(15);
    for (const option of options.filter((name) => name !== '--help'))
      expect(readme).toContain(option);
    for (const basis of ['measured', 'extrapolated', 'prior', 'assumed', 'sequence'])
      expect(readme).toMatch(new RegExp(`^\\| \`${basis}\` \\| [A-Z]`, 'm'));
  });

  it('lists the exit codes that the command names', () => {
    expect(readme).toMatch(
      /Exit codes: 0 all done; 1 failed, trust nothing; 2 wrong command line; 3 finished, but/,
    );
  });
});
