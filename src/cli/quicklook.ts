import { basename, join } from 'node:path';
import { UsageError } from '../errors.js';
import { numberText } from '../render/number-format.js';
import { regionSummary } from '../report/summary.js';
import { quickLookCsv } from '../report/table.js';
import type { ComponentOptions } from './component-options.js';
import { DONE, FAILED, PARTLY, USAGE } from './exit-codes.js';
import { faultLine, printable } from './faults.js';
import { type Look, lookAtMap, lookAtVector } from './look.js';
import { makeOutputFolder, writeTogether } from './output.js';
import { type PictureDrawer, startPictureDrawer } from './picture-drawer.js';
import type { ReadingOptions } from './reading-options.js';

/** Options of the command as commander gives them. */
export interface QuickLookArguments extends ReadingOptions, ComponentOptions {
  readonly center?: { readonly lonDeg: number; readonly latDeg: number };
  readonly extent?: number;
  readonly pixel?: number;
  readonly allowLimb?: boolean;
  readonly noise?: number;
  readonly alpha?: number;
  readonly sides: 'open' | 'periodic';
  readonly radial: 'potential' | 'mu';
  readonly regionId?: string;
  readonly out: string;
  readonly json?: boolean;
  readonly maps?: boolean;
  readonly volume?: boolean;
  readonly levels?: number;
  readonly top?: number;
  readonly every?: number;
  readonly lines?: number;
  readonly disambiguation?: 'minimum-energy' | 'acute';
  readonly picture: boolean;
  readonly debug?: boolean;
}

/** Name of the results of a file: its own without folder and endings. */
export function resultName(path: string): string {
  return (
    basename(path)
      .replace(/\.gz$/i, '')
      .replace(/\.(fits?|fts)(\.fz)?$/i, '') || 'map'
  );
}

/** Two files whose results would overwrite each other are a wrong command line. */
function checkNames(files: readonly string[]): void {
  const seen = new Map<string, string>();
  for (const file of files) {
    const other = seen.get(resultName(file));
    if (other !== undefined)
      throw new UsageError(
        `${other} and ${file} would write the same results: run them with different --out`,
      );
    seen.set(resultName(file), file);
  }
}

/** A map's results: what is printed and what is written. */
interface Results {
  readonly look: Look;
  readonly files: readonly { readonly path: string; readonly content: string | Uint8Array }[];
}

async function finish(
  look: Look,
  options: QuickLookArguments,
  drawer: PictureDrawer | undefined,
): Promise<Results> {
  const { document, file } = look;
  const base = join(options.out, resultName(file));
  const files: { path: string; content: string | Uint8Array }[] = [
    { path: `${base}.json`, content: `${JSON.stringify(document, null, 2)}\n` },
    { path: `${base}.csv`, content: quickLookCsv(document) },
  ];
  if (drawer) {
    const lines = options.lines !== undefined && { fieldLines: await fieldLines(look, options) };
    files.push({ path: `${base}.png`, content: await drawer.draw({ ...look.picture, ...lines }) });
  }
  if (options.maps) files.push({ path: `${base}-maps.fits`, content: await look.maps() });
  if (options.volume)
    files.push({ path: `${base}-volume.fits`, content: await volumeFile(look, options) });
  return { look, files };
}

async function fieldLines({ surface }: Look, options: QuickLookArguments) {
  const { regionFieldLines } = await import('../figures/region-volume.js');
  return regionFieldLines(surface, options.lines ?? 0, options.alpha ?? 0);
}

async function volumeFile(
  { surface, map, document }: Look,
  options: QuickLookArguments,
): Promise<Uint8Array> {
  const { regionVolume } = await import('../figures/region-volume.js');
  const { volumeCube } = await import('../report/volume-cube.js');
  const { levels, top, every, alpha = 0 } = options;
  const volume = regionVolume(surface, {
    ...(levels !== undefined && { levels }),
    ...(top !== undefined && { topMm: top }),
    ...(every !== undefined && { every }),
    alphaPerMm: alpha,
  });
  return volumeCube(volume, alpha, surface, map, document.tool.version);
}

/** Options that only mean something beside others. */
function checkVolumeOptions({
  volume,
  levels,
  top,
  every,
  lines,
  picture,
}: QuickLookArguments): void {
  for (const [name, value] of Object.entries({ levels, top, every })) {
    if (value !== undefined && !volume) throw new UsageError(`--${name} is for --volume`);
    if (name !== 'top' && value !== undefined && !Number.isInteger(value))
      throw new UsageError(`--${name} ${value} is not a whole number`);
  }
  if (lines === undefined) return;
  if (!Number.isInteger(lines)) throw new UsageError(`--lines ${lines} is not a whole number`);
  if (!picture)
    throw new UsageError('--lines are drawn on the picture, which --no-picture leaves out');
}

/** Options that only mean something with or without components. */
function checkVectorOptions({ component, disambiguation, alpha }: QuickLookArguments): void {
  if (!component && disambiguation !== undefined)
    throw new UsageError('--disambiguation is for vector maps, given by --component');
  if (component && alpha !== undefined)
    throw new UsageError('--alpha is for line-of-sight maps: a vector map measures it');
}

function useColour(): boolean {
  return process.stdout.isTTY === true && !process.env.NO_COLOR && process.env.TERM !== 'dumb';
}

function print({ look, files }: Results, json: boolean): void {
  const { document, figures, noiseG, noiseBasis, file } = look;
  if (json) {
    process.stdout.write(`${JSON.stringify(document)}\n`);
    return;
  }
  const basis = noiseBasis === 'measured' ? 'from quiet pixels' : 'given';
  const context = {
    source: printable(basename(file)),
    observed: document.source.observed,
    noise: `${numberText(noiseG, 'G')} (${basis})`,
    files: files.map(({ path }) => printable(path)),
  };
  process.stdout.write(
    regionSummary({ ...figures, id: printable(figures.id) }, context, useColour()),
  );
}

/**
 * The quick look of each file, or of the one vector map that the components make: results written whole
 * or not at all, then printed; a fault takes one line on stderr and never harms the other files. Gives
 * the exit code.
 */
export async function runQuickLook(
  files: readonly string[],
  options: QuickLookArguments,
): Promise<number> {
  if (options.out === '') throw new UsageError('--out names no folder');
  if (options.regionId?.trim() === '') throw new UsageError('--region-id names no region');
  checkNames(files);
  checkVolumeOptions(options);
  checkVectorOptions(options);
  const { component } = options;
  const tasks = component
    ? [{ file: component[0].file, look: () => lookAtVector(component, options) }]
    : files.map((file) => ({ file, look: () => lookAtMap(file, options) }));
  const drawer = options.picture ? startPictureDrawer() : undefined;
  let failures = 0;
  let isUsage = true;
  for (const { file, look } of tasks) {
    try {
      const results = await finish(look(), options, drawer);
      makeOutputFolder(options.out);
      await writeTogether(results.files);
      print(results, options.json === true);
    } catch (error) {
      failures++;
      isUsage &&= error instanceof UsageError;
      process.stderr.write(`${faultLine(error, file, options.debug === true)}\n`);
    }
  }
  await drawer?.close();
  if (failures === 0) return DONE;
  if (failures < tasks.length) return PARTLY;
  return isUsage ? USAGE : FAILED;
}
