import { QUANTITY_FACTS, QUANTITY_KEYS } from '../figures/quantity.js';
import type { QuickLookDocument, RegionJson } from './document.js';

type Cell = string | number | null | undefined;

/** A cell of RFC 4180: quoted where it holds a comma, a quote or a line end; empty for what is missing. */
function cell(value: Cell): string {
  const text = value === null || value === undefined ? '' : String(value);
  return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** Unit as it stands in a column name: "mA/m^2" -> "mA_per_m2", "1/Mm" -> "per_Mm". */
function unitSuffix(unit: string): string {
  if (unit === '1') return '';
  return `_${unit.replace(/^1\//, 'per_').replace('/', '_per_').replace('^', '')}`;
}

/** Column names and cells of one region, in the same order for every region. */
function columns(document: QuickLookDocument, region: RegionJson): [string, Cell][] {
  const { center, patch, settings } = region;
  const fixed: [string, Cell][] = [
    ['source', document.source.path],
    ['observed_utc', document.source.observed],
    ['region', region.id],
    ['stonyhurst_longitude_deg', center.stonyhurst_longitude],
    ['stonyhurst_latitude_deg', center.stonyhurst_latitude],
    ['carrington_longitude_deg', center.carrington_longitude],
    ['mu', center.mu],
    ['patch_nx', patch.nx],
    ['patch_ny', patch.ny],
    ['patch_pixel_Mm', patch.pixel_Mm],
    ['radial_field', settings.radial_field],
    ['sides', settings.sides],
    ['noise_G', settings.noise_G],
  ];
  const figures = QUANTITY_KEYS.flatMap((key): [string, Cell][] => {
    const suffix = unitSuffix(QUANTITY_FACTS[key].unit);
    const quantity = region.quantities[key];
    return [
      [`${key}${suffix}`, quantity?.value],
      [`${key}_low${suffix}`, quantity?.low],
      [`${key}_high${suffix}`, quantity?.high],
      [`${key}_basis`, quantity?.basis],
    ];
  });
  return [...fixed, ...figures, ['flags', region.flags.join('; ')]];
}

/** The quick look as CSV (RFC 4180): one row a region, the unit in every column name. */
export function quickLookCsv(document: QuickLookDocument): string {
  const rows = document.regions.map((region) => columns(document, region));
  const header = rows[0]?.map(([name]) => name) ?? [];
  const lines = [header, ...rows.map((row) => row.map(([, value]) => value))];
  return lines.map((line) => `${line.map(cell).join(',')}\r\n`).join('');
}
