import { type OklchColour, oklchToSrgb } from './oklab.js';

/** Entries of the diverging scale; odd, so that the middle one is exactly neutral. */
export const COLOUR_COUNT = 511;
const HALF = (COLOUR_COUNT - 1) / 2;

/** Which map a scale is for; no two share a hue. */
export type ScaleName = 'field' | 'current' | 'alpha';

/** The two hues of a scale and the share of the chroma below that both have room for. */
export interface ScaleHues {
  readonly negativeDeg: number;
  readonly positiveDeg: number;
  readonly chromaShare: number;
}

/**
 * Pairs of hues told apart under all common kinds of colour blindness: blue and brown for the field,
 * green and purple for the current, indigo and ochre for alpha.
 */
export const SCALE_HUES: Readonly<Record<ScaleName, ScaleHues>> = {
  field: { negativeDeg: 252, positiveDeg: 50, chromaShare: 1 },
  current: { negativeDeg: 140, positiveDeg: 315, chromaShare: 1 },
  alpha: { negativeDeg: 280, positiveDeg: 86, chromaShare: 0.8 },
};

const ZERO_LIGHTNESS = 0.965;
const LIMIT_LIGHTNESS = 0.33;
const LIMIT_CHROMA = 0.08;

/**
 * The diverging scale as 3 * COLOUR_COUNT sRGB bytes, from the strongest negative to the strongest
 * positive value. Both sides run through the same lightness and chroma, in equal steps of OKLab
 * distance: near white at zero and darkest at the limits, so lightness alone tells strength.
 */
export function divergingScale(name: ScaleName = 'field'): Uint8Array {
  let scale = kept.get(name);
  if (!scale) {
    scale = buildScale(SCALE_HUES[name]);
    kept.set(name, scale);
  }
  return scale;
}

const kept = new Map<ScaleName, Uint8Array>();

function buildScale({ negativeDeg, positiveDeg, chromaShare }: ScaleHues): Uint8Array {
  const side = evenSteps(HALF + 1, chromaShare);
  const bytes = new Uint8Array(3 * COLOUR_COUNT);
  for (let step = 0; step <= HALF; step++) {
    const { lightness, chroma } = oneSide(side[step], chromaShare);
    writeColour(bytes, HALF - step, { lightness, chroma, hueDeg: negativeDeg });
    writeColour(bytes, HALF + step, { lightness, chroma, hueDeg: positiveDeg });
  }
  return bytes;
}

/** Index in the scale of a value for symmetric limits -limit..limit; values beyond take the ends. */
export function colourIndex(value: number, limit: number): number {
  const step = Math.min(HALF, Math.round((HALF * Math.abs(value)) / limit));
  return value < 0 ? HALF - step : HALF + step;
}

/** Lightness and chroma at path parameter u, 0 at zero field and 1 at the limit. */
export function oneSide(
  u: number,
  chromaShare = 1,
): { readonly lightness: number; readonly chroma: number } {
  return {
    lightness: ZERO_LIGHTNESS - (ZERO_LIGHTNESS - LIMIT_LIGHTNESS) * u,
    // Rises as fast from white as the gamut of both hues allows, then falls to the dark end.
    chroma: chromaShare * (LIMIT_CHROMA * u + 0.25 * u * (1 - u) * (1 + 0.3 * u)),
  };
}

/** Path parameters of `count` points at equal OKLab distance along one side. */
function evenSteps(count: number, chromaShare: number): Float64Array {
  const fine = 2000;
  const length = new Float64Array(fine + 1);
  let previous = oneSide(0, chromaShare);
  for (let i = 1; i <= fine; i++) {
    const here = oneSide(i / fine, chromaShare);
    const dL = here.lightness - previous.lightness;
    length[i] = length[i - 1] + Math.hypot(dL, here.chroma - previous.chroma);
    previous = here;
  }
  const out = new Float64Array(count);
  for (let i = 0, k = 0; i < count; i++) {
    const wanted = (length[fine] * i) / (count - 1);
    while (k < fine - 1 && length[k + 1] < wanted) k++;
    out[i] = (k + (wanted - length[k]) / (length[k + 1] - length[k])) / fine;
  }
  return out;
}

function writeColour(bytes: Uint8Array, index: number, colour: OklchColour): void {
  const srgb = oklchToSrgb(colour);
  for (let part = 0; part < 3; part++) {
    bytes[3 * index + part] = Math.round(255 * Math.max(0, Math.min(1, srgb[part])));
  }
}
