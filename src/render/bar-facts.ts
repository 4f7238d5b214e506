import type { ColourBarFacts } from './colour-bar.js';
import { fieldLimit, LIMIT_QUANTILE } from './map-layer.js';
import { plainNumber, unitText } from './number-format.js';
import type { RegionPicture } from './region-picture.js';
import type { LiveMaps } from './vector-panels.js';

/** What the colour bars say: that of the field and, with a vector map, of the current and of alpha. */
export function barFacts(
  picture: RegionPicture,
  live: LiveMaps | undefined,
): readonly [ColourBarFacts, ...ColourBarFacts[]] {
  const field: ColourBarFacts = {
    scale: 'field',
    title: 'Radial field (G)',
    negative: '− inward',
    positive: 'outward +',
    ...limitFacts(fieldLimit(picture.radialField), 'G', LIMIT_QUANTILE, 'the pixels'),
  };
  if (!live) return [field];
  const { current, alpha } = live;
  return [
    field,
    {
      scale: 'current',
      title: `Vertical current density (${unitText('mA/m^2')})`,
      negative: '− down',
      positive: 'up +',
      ...limitFacts(current.limit, 'mA/m^2', current.share, 'what is above noise'),
    },
    {
      scale: 'alpha',
      title: `Alpha (${unitText('1/Mm')})`,
      negative: '− left-handed',
      positive: 'right-handed +',
      ...limitFacts(alpha.limit, '1/Mm', alpha.share, 'what is not grey'),
    },
  ];
}

function limitFacts(limit: number, unit: string, share: number, what: string) {
  const percent = plainNumber(100 * share);
  const note = `Limits ±${plainNumber(limit)} ${unitText(unit)} hold ${percent} % of ${what}; stronger ones take the end colours.`;
  return { limit, note };
}
