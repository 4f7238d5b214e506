#!/usr/bin/env node
import { Command, CommanderError, InvalidArgumentError, Option } from 'commander';
import { parseAzimuthZero } from '../geometry/azimuth-zero.js';
import { toolVersion } from '../report/tool-version.js';
import { dateArgument, hduArgument, numberArgument, positionArgument } from './arguments.js';
import { checkInputs, componentArgument } from './component-options.js';
import { DONE, FAILED, USAGE } from './exit-codes.js';
import { faultLine } from './faults.js';
import type { QuickLookArguments } from './quicklook.js';
import type { ReadingOptions } from './reading-options.js';

const EXIT_CODES = `
Exit codes: 0 all done; 1 failed; 2 wrong command line; 3 finished, but some of several files failed.`;

/** What says where a map lies and what it shows, for files that do not say so themselves. */
function addReadingOptions(command: Command): Command {
  return command
    .option('--hdu <hdu>', 'read this HDU: its number, from 0, or its name', hduArgument)
    .option('--plane <n>', 'plane of a cube, from 0', numberArgument('a plane', 0, 1e6))
    .option('--date <utc>', 'when the map was taken, for one that does not say', dateArgument)
    .option('--at <lon,lat>', 'Stonyhurst position of the image centre [deg]', positionArgument)
    .option(
      '--pixel-scale <arcsec>',
      'size of a pixel [arcsec]',
      numberArgument('a size', 1e-3, 3600),
    )
    .option('--unit <unit>', 'unit of the map: G, kG, mT, T or Mx/cm^2');
}

function quicklookCommand(): Command {
  const command = new Command('quicklook')
    .description('figures and picture of one active region from a magnetogram in FITS')
    .argument('[file...]', 'FITS files, also gzipped or tile-compressed');
  addReadingOptions(command)
    .option(
      '--component <name=file[#hdu][:plane]>',
      'instead of files: one component of a vector map, and again for each; names are east or west, north or south, radial; or strength, inclination, azimuth, ambiguity; or error- and one of these',
      componentArgument,
    )
    .option(
      '--azimuth-zero <direction>',
      'where azimuth is zero, and which way it counts: +x, -x, +y, -y of the image or north, east, south, west on the sky, then ,cw or ,ccw (default: +y,ccw)',
      parseAzimuthZero,
    )
    .addOption(
      new Option(
        '--disambiguation <way>',
        'how the 180 degree ambiguity of the azimuth is resolved (default: minimum-energy)',
      ).choices(['minimum-energy', 'acute']),
    )
    .option('--center <lon,lat>', 'Stonyhurst position of the patch centre [deg]', positionArgument)
    .option('--extent <Mm>', 'side of the patch [Mm]', numberArgument('a length', 1, 3000))
    .option('--pixel <Mm>', 'pixel of the patch [Mm]', numberArgument('a length', 0.01, 100))
    .option('--allow-limb', 'take patches beyond 70 degrees from disk centre, flagged')
    .option(
      '--noise <gauss>',
      'noise of a pixel instead of the estimate',
      numberArgument('a field', 0, 1e5),
    )
    .option('--alpha <per-Mm>', 'fix the force-free alpha [1/Mm]', numberArgument('alpha', -10, 10))
    .addOption(
      new Option('--sides <kind>', 'what lies beyond the patch')
        .choices(['open', 'periodic'])
        .default('open'),
    )
    .addOption(
      new Option('--radial <way>', 'from line of sight to radial')
        .choices(['potential', 'mu'])
        .default('potential'),
    )
    .option('--region-id <name>', 'name of the region instead of its position')
    .option('--out <dir>', 'folder for the results', 'spotjoule-out')
    .option('--json', 'print one JSON document a file instead of the summary')
    .option('--maps', 'also write the maps of the patch as FITS')
    .option('--volume', 'also write the field above the patch as FITS cubes')
    .option('--levels <n>', 'levels of the volume', numberArgument('a number of levels', 1, 1024))
    .option(
      '--top <Mm>',
      'height of its highest level [Mm]',
      numberArgument('a height', 0.01, 3000),
    )
    .option(
      '--every <n>',
      'take every n-th pixel into the volume',
      numberArgument('a number of pixels', 1, 64),
    )
    .option('--lines <n>', 'draw so many field lines', numberArgument('a number of lines', 1, 2000))
    .option('--no-picture', 'do not draw the picture')
    .addHelpText('after', EXIT_CODES)
    .action(async (files: string[], options: QuickLookArguments) => {
      checkInputs(files, options);
      const { runQuickLook } = await import('./quicklook.js');
      process.exitCode = await runQuickLook(files, { ...options, debug: isDebug() });
    });
  return command;
}

function headerCommand(): Command {
  const command = new Command('header')
    .description('what the reader understood of a file: where to look when one is refused')
    .argument('<file>', 'FITS file');
  addReadingOptions(command)
    .addHelpText('after', EXIT_CODES)
    .action(async (file: string, options: ReadingOptions) => {
      const { runHeader } = await import('./header.js');
      process.exitCode = await runHeader(file, options);
    });
  return command;
}

function isDebug(): boolean {
  return program.opts<{ debug?: boolean }>().debug === true || process.argv.includes('--debug');
}

const program = new Command('spotjoule')
  .description('Energy and electric currents of solar active regions, from magnetograms')
  .version(toolVersion())
  .option('--debug', 'show the stack trace of a fault')
  .addHelpText('after', EXIT_CODES);

for (const command of [quicklookCommand(), headerCommand()]) {
  command.addOption(new Option('--debug').hideHelp());
  program.addCommand(command);
}
for (const command of [program, ...program.commands]) {
  command.exitOverride().configureOutput({
    // One line, whatever commander puts into its messages.
    outputError: (text, write) =>
      write(
        `spotjoule: ${text
          .replace(/^error: /, '')
          .trim()
          .replace(/\s*\n\s*/g, ' ')}\n`,
      ),
  });
}

process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  // The reader of a pipe may leave early (`| head`): that is no fault.
  if (error.code === 'EPIPE') process.exit(DONE);
  process.stderr.write(`spotjoule: standard output cannot be written (${error.code})\n`);
  process.exit(FAILED);
});

try {
  await program.parseAsync();
} catch (error) {
  if (error instanceof CommanderError || error instanceof InvalidArgumentError) {
    process.exitCode = error instanceof CommanderError && error.exitCode === 0 ? DONE : USAGE;
  } else {
    process.stderr.write(`${faultLine(error, undefined, isDebug())}\n`);
    process.exitCode = (error as { code?: unknown }).code === 'UsageError' ? USAGE : FAILED;
  }
}
