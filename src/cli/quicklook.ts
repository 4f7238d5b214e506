import { basename, join } from 'node:path';
import { UsageError } from '../errors.js';
import type { MapAnalysis, MapAnalysisOptions } from '../figures/analyse-map.js';
import type { SolarMap } from '../geometry/solar-map.js';
import { numberText } from '../render/number-format.js';
import type { QuickLookDocument } from '../report/document.js';
import { quickLook } from '../report/quick-look.js';
import { regionSummary } from '../report/summary.js';
import { quickLookCsv } from '../report/table.js';
import type { ComponentOptions } from './component-options.js';
import { DONE, FAILED, PARTLY } from './exit-codes.js';
import { faultLine } from './faults.js';
import { makeOutputFolder, writeTogether } from './output.js';
import { type PictureDrawer, startPictureDrawer } from './picture-drawer.js';
import { type ReadingOptions, readingOptions } from './reading-options.js';

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

function analysisOptions(options: QuickLookArguments): MapAnalysisOptions {
  return {
    ...(options.center && { center: options.center }),
    ...(options.extent !== undefined && { extentMm: options.extent }),
    ...(options.pixel !== undefined && { pixelMm: options.pixel }),
    ...(options.allowLimb && { allowLimb: true }),
    ...(options.noise !== undefined && { noiseG: options.noise }),
    ...(options.alpha !== undefined && { alphaPerMm: options.alpha }),
    ...(options.regionId !== undefined && { id: options.regionId }),
    sides: options.sides,
    radialMethod: options.radial,
  };
}

/** A file's results: what is printed and what is written. */
interface Results {
  readonly document: QuickLookDocument;
  readonly analysis: MapAnalysis;
  readonly files: readonly { readonly path: string; readonly content: string | Uint8Array }[];
}

/** The viewing directions are not drawn: spare the second thread a copy of three maps. */
const NOTHING = new Float64Array(0);
const NOT_DRAWN = { x: NOTHING, y: NOTHING, z: NOTHING };

async function work(
  file: string,
  options: QuickLookArguments,
  drawer: PictureDrawer | undefined,
): Promise<Results> {
  const { document, map, analysis } = quickLook(file, {
    reading: readingOptions(options),
    analysis: analysisOptions(options),
  });
  const { version } = document.tool;
  const base = join(options.out, resultName(file));
  const files: { path: string; content: string | Uint8Array }[] = [
    { path: `${base}.json`, content: `${JSON.stringify(document, null, 2)}\n` },
    { path: `${base}.csv`, content: quickLookCsv(document) },
  ];
  if (drawer) {
    const content = await drawer.draw({
      source: basename(file),
      observed: map.observed,
      toolVersion: version,
      region: analysis.figures,
      patch: { ...analysis.patch, toObserver: NOT_DRAWN },
      radialField: analysis.radialField,
      currentDensity: analysis.currentDensity,
      inversionLines: analysis.inversionLines,
      ...(options.lines !== undefined && { fieldLines: await fieldLines(analysis, options) }),
    });
    files.push({ path: `${base}.png`, content });
  }
  if (options.maps) {
    const { regionMaps } = await import('../report/maps.js');
    files.push({ path: `${base}-maps.fits`, content: regionMaps(analysis, map, version) });
  }
  if (options.volume) {
    const content = await volumeFile(analysis, map, version, options);
    files.push({ path: `${base}-volume.fits`, content });
  }
  return { document, analysis, files };
}

async function fieldLines(analysis: MapAnalysis, options: QuickLookArguments) {
  const { regionFieldLines } = await import('../figures/region-volume.js');
  return regionFieldLines(analysis, options.lines ?? 0, options.alpha ?? 0);
}

async function volumeFile(
  analysis: MapAnalysis,
  map: SolarMap,
  version: string,
  options: QuickLookArguments,
): Promise<Uint8Array> {
  const { regionVolume } = await import('../figures/region-volume.js');
  const { volumeCube } = await import('../report/volume-cube.js');
  const { levels, top, every, alpha = 0 } = options;
  const volume = regionVolume(analysis, {
    ...(levels !== undefined && { levels }),
    ...(top !== undefined && { topMm: top }),
    ...(every !== undefined && { every }),
    alphaPerMm: alpha,
  });
  return volumeCube(volume, alpha, analysis, map, version);
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

function useColour(): boolean {
  return process.stdout.isTTY === true && !process.env.NO_COLOR && process.env.TERM !== 'dumb';
}

function print({ document, analysis, files }: Results, file: string, json: boolean): void {
  if (json) {
    process.stdout.write(`${JSON.stringify(document)}\n`);
    return;
  }
  const basis = analysis.noiseBasis === 'measured' ? 'from quiet pixels' : 'given';
  const context = {
    source: basename(file),
    observed: document.source.observed,
    noise: `${numberText(analysis.noiseG, 'G')} (${basis})`,
    files: files.map(({ path }) => path),
  };
  process.stdout.write(regionSummary(analysis.figures, context, useColour()));
}

/**
 * The quick look of each file: results written whole or not at all, then printed; a fault takes one
 * line on stderr and never harms the other files. Gives the exit code.
 */
export async function runQuickLook(
  files: readonly string[],
  options: QuickLookArguments,
): Promise<number> {
  checkNames(files);
  checkVolumeOptions(options);
  const drawer = options.picture ? startPictureDrawer() : undefined;
  let failures = 0;
  for (const file of files) {
    try {
      const results = await work(file, options, drawer);
      makeOutputFolder(options.out);
      await writeTogether(results.files);
      print(results, file, options.json === true);
    } catch (error) {
      failures++;
      process.stderr.write(`${faultLine(error, file, options.debug === true)}\n`);
    }
  }
  await drawer?.close();
  if (failures === 0) return DONE;
  return failures === files.length ? FAILED : PARTLY;
}
