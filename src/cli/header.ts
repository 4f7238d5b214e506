import { imageHdus, readFitsFile } from '../fits/index.js';
import { readSolarMap, type SolarMap } from '../geometry/solar-map.js';
import { estimateNoise } from '../grid/noise.js';
import { numberText } from '../render/number-format.js';
import { DONE, FAILED } from './exit-codes.js';
import { faultLine } from './faults.js';
import { type ReadingOptions, readingOptions } from './reading-options.js';

function line(name: string, value: string): string {
  return `${name.padEnd(22)}${value}`;
}

function degrees(value: number): string {
  return Number.isNaN(value) ? 'not known' : `${value.toFixed(3)} deg`;
}

function mapLines(map: SolarMap): string[] {
  const { observer } = map;
  const { basis } = observer;
  const noise = estimateNoise(map.values, map.nx, map.ny);
  let known = 0;
  let lowest = Number.POSITIVE_INFINITY;
  let highest = Number.NEGATIVE_INFINITY;
  for (const value of map.values) {
    if (Number.isNaN(value)) continue;
    known++;
    if (value < lowest) lowest = value;
    if (value > highest) highest = value;
  }
  return [
    line('magnetogram', `HDU ${map.hdu}, ${map.nx} x ${map.ny} pixels, ${map.component} field`),
    line('observed', map.observed ?? 'not known'),
    line('unit', map.unit),
    line('values', `${numberText(lowest, 'G')} to ${numberText(highest, 'G')}`),
    line('missing', `${map.values.length - known} of ${map.values.length} pixels`),
    line(
      'noise',
      Number.isNaN(noise)
        ? 'too few quiet pixels'
        : `${numberText(noise, 'G')} (1 sigma, from quiet pixels)`,
    ),
    line('geometry', map.geometryName),
    line('pixel', `${map.pixelMm.toPrecision(4)} Mm on the Sun, facing the observer`),
    line('whole disk', map.fullDisk ? 'yes' : 'no'),
    line(
      'observer distance',
      `${(observer.distanceM / 1.495978707e11).toFixed(5)} au (${basis.distance})`,
    ),
    line('observer latitude B0', `${degrees(observer.latitudeDeg)} (${basis.latitude})`),
    line(
      'Stonyhurst longitude',
      `${degrees(observer.stonyhurstLongitudeDeg)} (${basis.stonyhurstLongitude})`,
    ),
    line(
      'Carrington longitude',
      `${degrees(observer.carringtonLongitudeDeg)} (${basis.carringtonLongitude})`,
    ),
    line('solar radius', `${(observer.solarRadiusM / 1e6).toFixed(2)} Mm (${basis.solarRadius})`),
  ];
}

/**
 * Prints what the reader makes of a file: its HDUs, then geometry, observer, unit and noise of the
 * magnetogram, or why there is none. Gives the exit code: 1 where the quick look would refuse it.
 */
export async function runHeader(path: string, options: ReadingOptions): Promise<number> {
  const file = readFitsFile(path);
  const images = imageHdus(file);
  const lines = [line('file', path), ''];
  for (const hdu of file.hdus) {
    const shape = hdu.shape.length > 0 ? hdu.shape.join(' x ') : 'no axes';
    const how = hdu.compression ? `, ${hdu.compression}` : '';
    const name = hdu.name ? `, ${hdu.name}` : '';
    const mark = images.includes(hdu) ? ', an image' : '';
    lines.push(
      line(`HDU ${hdu.index}`, `${hdu.kind}, ${shape}, BITPIX ${hdu.bitpix}${how}${name}${mark}`),
    );
  }
  lines.push('');
  try {
    const map = readSolarMap(file, readingOptions(options));
    lines.push(...mapLines(map));
    for (const warning of [...file.warnings, ...map.warnings]) lines.push(line('note', warning));
    process.stdout.write(`${lines.join('\n')}\n`);
    return DONE;
  } catch (error) {
    for (const warning of file.warnings) lines.push(line('note', warning));
    process.stdout.write(`${lines.join('\n')}\n`);
    process.stderr.write(`${faultLine(error, path, false)}\n`);
    return FAILED;
  }
}
