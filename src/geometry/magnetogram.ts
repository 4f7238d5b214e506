import { DataError } from '../errors.js';
import { type FitsFile, imageHdus } from '../fits/file.js';
import type { FitsHdu } from '../fits/hdu.js';
import type { FitsHeader } from '../fits/header.js';
import { numberAt, stringAt } from '../fits/header.js';
import { readAxis } from './axis.js';
import { gaussPerUnit } from './magnetic-unit.js';

/** What the user may say about the map's place in the file and its quantity. */
export interface QuantityOptions {
  /** HDU by number from 0 or by EXTNAME. */
  readonly hdu?: number | string | undefined;
  readonly unit?: string | undefined;
  readonly component?: 'line-of-sight' | 'radial' | undefined;
}

/** What an image's header says it shows. */
export interface Quantity {
  readonly kind: 'magnetic' | 'other' | 'unknown';
  /** What was found, for messages. */
  readonly found: string;
  /** For 'magnetic': the unit's name and size. */
  readonly unit?: string;
  readonly gaussPerUnit?: number;
  readonly component: 'line-of-sight' | 'radial';
}

const DESCRIPTIONS = ['BTYPE', 'CONTENT', 'IMTYPE', 'EXTNAME', 'OBS_TYPE', 'IMGTYP01'] as const;
const WANTED = 'a line-of-sight or radial magnetogram in G, Mx/cm^2 or T was wanted';

/** Descriptions that name something else, whatever the unit. */
const OTHER_QUANTITIES: readonly (readonly [RegExp, string])[] = [
  [/continuum|intensity|intensitygram|white.?light|filtergram/i, 'intensity'],
  [/doppler|velocity/i, 'velocity'],
  [/synoptic|synchronic/i, 'a map of the whole Sun'],
  [/inclination|^binc$/i, 'field inclination'],
  [/azimuth|^bazi$/i, 'field azimuth'],
  [/^bmag$|total field|^field strength$/i, 'total field strength'],
  [/equivalent width|\bEW\b|line ?width|line ?depth/i, 'a line profile'],
  [
    /\b(err|error|uncertaint\w*|sigma|std|mask|bitmap|confid\w*|disambig\w*)\b|_err$/i,
    'not field values',
  ],
];
const OTHER_UNITS =
  /^(dn|adu|counts?|cts|photons?|electrons?|[kcm]?m\/s(ec)?|[kcm]?m s-1|k|kelvin|deg(ree)?s?|rad(ian)?s?|[pnu]?m|angstroms?|%|percent|w\b.*|erg\b.*)(\s*[/ ]\s*(s|sec|pix(el)?)(-1)?)*$/i;

function describe(header: FitsHeader): [string, string][] {
  return DESCRIPTIONS.flatMap((keyword) => {
    const text = stringAt(header, keyword);
    return text === undefined ? [] : [[keyword, text] as [string, string]];
  });
}

/** Whether the axes cover (nearly) all longitudes, or measure latitude by its sine: a whole-Sun map. */
function coversWholeSun(header: FitsHeader): boolean {
  const axis = readAxis(stringAt(header, 'CTYPE1'));
  const frame = axis?.frame ?? 'helioprojective';
  if (frame === 'helioprojective') return false;
  if (/sin/i.test(stringAt(header, 'CUNIT2') ?? '')) return true;
  const span = Math.abs(numberAt(header, 'CDELT1') ?? 0) * (numberAt(header, 'NAXIS1') ?? 0);
  return span >= 300 && span < 400;
}

/** Tells from BUNIT and the descriptive keywords what an image shows; `unit` stands in for BUNIT. */
export function readQuantity(header: FitsHeader, unit?: string): Quantity {
  const descriptions = describe(header);
  const component = descriptions.some(([, text]) => /\bb_?r\b|\bradial\b|\bmr\b/i.test(text))
    ? 'radial'
    : 'line-of-sight';
  for (const [keyword, text] of descriptions) {
    const match = OTHER_QUANTITIES.find(([pattern]) => pattern.test(text));
    if (match) return { kind: 'other', found: `${match[1]} (${keyword} = '${text}')`, component };
  }
  if (coversWholeSun(header))
    return {
      kind: 'other',
      found: `a map of the whole Sun (CTYPE1 = '${stringAt(header, 'CTYPE1')}')`,
      component,
    };
  const keyword = stringAt(header, 'BUNIT') === undefined ? 'IMGUNT01' : 'BUNIT';
  const bunit = stringAt(header, keyword);
  const own = bunit === undefined ? undefined : gaussPerUnit(bunit);
  if (bunit !== undefined && own === undefined && OTHER_UNITS.test(bunit.trim()))
    return { kind: 'other', found: `${keyword} = '${bunit}'`, component };
  const factor = unit === undefined ? own : gaussPerUnit(unit);
  const found = bunit === undefined ? 'no BUNIT' : `BUNIT = '${bunit}'`;
  return factor === undefined
    ? { kind: 'unknown', found, component }
    : { kind: 'magnetic', found, unit: unit ?? bunit ?? 'G', gaussPerUnit: factor, component };
}

/** How well an image suits: named as a magnetogram, magnetic by unit, of unknown unit, not at all. */
function suitability(hdu: FitsHdu, quantity: Quantity): number {
  if (quantity.kind === 'other') return 0;
  const isNamed = describe(hdu.header).some(([, text]) =>
    /magnet|b_?los|\blos\b|longitudinal/i.test(text),
  );
  return (quantity.kind === 'magnetic' ? 2 : 1) + (isNamed ? 0.5 : 0);
}

/** The image HDU of a number from 0 or an EXTNAME. Throws DataError, listing the HDUs, where it is none. */
export function namedHdu(file: FitsFile, wanted: number | string): FitsHdu {
  const isNumber = typeof wanted === 'number' || /^\d+$/.test(wanted);
  const hdu = isNumber
    ? file.hdus[Number(wanted)]
    : file.hdus.find(({ name }) => name.toLowerCase() === wanted.toLowerCase());
  const list = file.hdus.map(({ index, kind, name }) => `${index}${name && ` ${name}`} (${kind})`);
  if (!hdu || !imageHdus(file).includes(hdu))
    throw new DataError(
      `HDU ${wanted} is ${hdu ? 'no image of two axes' : 'not there'}; the file has ${list.join(', ')}`,
      { file: file.name },
    );
  return hdu;
}

/**
 * Index of the HDU that is the magnetogram: the one named by `options.hdu`, else the image whose unit
 * and descriptive keywords suit best. Throws DataError, saying what was found, where the file has no
 * image or plainly shows something else. An image of unknown unit is accepted here.
 */
export function chooseMagnetogramHdu(file: FitsFile, options: QuantityOptions = {}): number {
  const named = options.hdu === undefined ? undefined : namedHdu(file, options.hdu);
  const images = named ? [named] : imageHdus(file);
  if (images.length === 0)
    throw new DataError(`holds no image of two axes; ${WANTED}`, { file: file.name });
  const rated = images.map((hdu) => {
    const quantity = readQuantity(hdu.header, options.unit);
    return { hdu, quantity, score: suitability(hdu, quantity) };
  });
  const best = rated.reduce((a, b) => (b.score > a.score ? b : a));
  if (best.score === 0)
    throw new DataError(`shows ${best.quantity.found}; ${WANTED}`, {
      file: file.name,
      hdu: best.hdu.index,
    });
  return best.hdu.index;
}
