import { TESLA_PER_GAUSS } from '../units.js';

const PREFIXES: Readonly<Record<string, number>> = { '': 1, k: 1e3, m: 1e-3, u: 1e-6, n: 1e-9 };

/**
 * Gauss per unit of a BUNIT: G, Gauss, kG, mG, T, Tesla, mT, uT, nT or flux density in Mx/cm^2 (in any
 * common spelling). `undefined` for any other unit.
 */
export function gaussPerUnit(bunit: string): number | undefined {
  const text = bunit.trim().replace(/\s+/g, ' ');
  if (/^mx ?(\/ ?cm|\.?\*? ?cm(\^|\*\*)?\(?-) ?(\^|\*\*)?\(?2\)?$/i.test(text)) return 1;
  if (/^maxwells?( per |\/)(cm|centimet(er|re))\^?2$/i.test(text)) return 1;
  const symbol = /^([kmun]?)(G|T)$/.exec(text);
  const word = /^(kilo|milli|micro|nano|)(gauss|tesla)$/i.exec(text);
  if (!symbol && !word) return undefined;
  const name = symbol?.[2] ?? word![2][0].toUpperCase();
  const prefix = symbol?.[1] ?? (word![1] === 'micro' ? 'u' : word![1].slice(0, 1)).toLowerCase();
  return PREFIXES[prefix] * (name === 'T' ? 1 / TESLA_PER_GAUSS : 1);
}
