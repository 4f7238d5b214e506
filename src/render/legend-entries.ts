import { gridStepDeg } from './coordinate-grid.js';
import { CURRENT_DEVIATIONS } from './dead-zone.js';
import { isSupposed } from './figures-table.js';
import type { LegendColumns, LegendEntry } from './legend.js';
import type { MapContent } from './map-panel.js';
import { numberText, plainNumber, unitText } from './number-format.js';
import type { RegionPicture } from './region-picture.js';
import type { LiveMaps, PanelContent } from './vector-panels.js';

/** What the legend must explain for this map: only what is drawn, and what is missing. */
export function legendEntries(
  picture: RegionPicture,
  content: MapContent,
  panels: readonly PanelContent[],
  live: LiveMaps | undefined,
): LegendColumns {
  const hasMissing = content.hasMissing || panels.some((panel) => panel.hasMissing);
  const step = plainNumber(gridStepDeg(picture.patch, content.frame));
  return [
    [
      ...inversionEntries(content),
      ...currentEntries(picture, content),
      ...tickEntries(content),
      ...fieldLineEntries(picture, content),
    ],
    [
      ...(content.poles.length > 0 ? [entry('poles', 'Strongest field, both signs')] : []),
      ...(hasMissing ? [entry('hatch', 'No data, or beyond the limb')] : []),
      ...deadEntries(picture, live),
      entry('grid', `Stonyhurst grid, every ${step}°`),
    ],
  ];
}

function inversionEntries({ inversion, ticks }: MapContent): readonly LegendEntry[] {
  if (inversion.plain.length + inversion.strong.length === 0) {
    return [entry('none', 'No polarity inversion line found')];
  }
  const line = entry('line', 'Polarity inversion line');
  if (inversion.strong.length === 0) return [line, entry('none', 'No strong-gradient part')];
  return [line, entry(ticks ? 'slim' : 'strong', 'Strong-gradient part of the line')];
}

function currentEntries(picture: RegionPicture, content: MapContent): readonly LegendEntry[] {
  if (!content.current) return [entry('none', 'No current map')];
  const { levels } = content.current;
  if (levels.length === 0) {
    const text = picture.vector
      ? 'No electric current above noise'
      : 'No electric current in the map';
    return [entry('none', text)];
  }
  const basis = picture.region.quantities.peak_current_density?.basis;
  const supposed = !picture.vector && basis !== undefined && isSupposed(basis);
  const note = picture.vector ? ', measured, smoothed' : supposed ? `, ${basis}` : '';
  const unit = unitText('mA/m^2');
  const list = (sign: string) => levels.map((level) => sign + plainNumber(level)).join(', ');
  return [
    { sample: 'up', text: `Current up ${list('+')} ${unit}${note}`, supposed },
    { sample: 'down', text: `Current down ${list('−')} ${unit}${note}`, supposed },
  ];
}

/** What the lines show and how many of them: with an alpha of the user's, as an assumption. */
function fieldLineEntries(picture: RegionPicture, content: MapContent): readonly LegendEntry[] {
  const { closed, open } = content.fieldLines;
  const all = closed.length + open.length;
  const supposed = picture.region.quantities.force_free_alpha?.basis === 'assumed';
  const note = supposed ? ', assumed alpha' : '';
  const entries: LegendEntry[] = [];
  if (closed.length > 0) {
    const text = `Field line with both feet in the patch (${closed.length} of ${all})${note}`;
    entries.push({ sample: 'closed', text, supposed });
  }
  if (open.length > 0) {
    const text = `Field line that leaves it (${open.length} of ${all})${note}`;
    entries.push({ sample: 'leaving', text, supposed });
  }
  return entries;
}

/** The strength that a stroke of the length shown stands for, and where strokes begin. */
function tickEntries({ ticks }: MapContent): readonly LegendEntry[] {
  if (!ticks) return [];
  const { referenceG, referencePx, leastG, shortestG } = ticks;
  const least = numberText(leastG, 'G', 2);
  if (ticks.ticks.length === 0)
    return [entry('none', `No horizontal field above noise (${least})`)];
  const short = shortestG > leastG ? `, equally short up to ${numberText(shortestG, 'G', 2)}` : '';
  const text = `Horizontal field ${plainNumber(referenceG)} G; drawn from ${least}${short}`;
  return [{ sample: 'tick', text, supposed: false, tickPx: referencePx }];
}

/** What the grey of the current and alpha panels means. */
function deadEntries(
  { vector }: RegionPicture,
  live: LiveMaps | undefined,
): readonly LegendEntry[] {
  if (!vector || !live) return [];
  const current = numberText(CURRENT_DEVIATIONS * live.current.noise, 'mA/m^2', 2);
  const field = numberText(vector.alphaLeastG, 'G', 2);
  const text = `Below noise, or at an edge: current under ${CURRENT_DEVIATIONS} deviations (mostly ${current}), alpha under a field of ${field}`;
  return [entry('dead', text)];
}

function entry(sample: LegendEntry['sample'], text: string): LegendEntry {
  return { sample, text, supposed: false };
}
