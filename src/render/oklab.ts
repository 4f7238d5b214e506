// OKLab and OKLCh after B. Ottosson, "A perceptual color space for image processing" (2020), with
// the sRGB transfer curve of IEC 61966-2-1. Matrices from memory; the tests compare with culori.

/** A colour in OKLCh: lightness 0..1, chroma 0..0.4, hue in degrees. */
export interface OklchColour {
  readonly lightness: number;
  readonly chroma: number;
  readonly hueDeg: number;
}

/** sRGB components, each 0..1 when the colour lies in the gamut; not clipped here. */
export type SrgbTriple = readonly [number, number, number];

/** Converts OKLCh to gamma-encoded sRGB; components outside 0..1 mean out of gamut. */
export function oklchToSrgb({ lightness, chroma, hueDeg }: OklchColour): SrgbTriple {
  const hue = (hueDeg * Math.PI) / 180;
  const a = chroma * Math.cos(hue);
  const b = chroma * Math.sin(hue);
  const long = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
  const medium = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
  const short = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
  return [
    encode(4.0767416621 * long - 3.3077115913 * medium + 0.2309699292 * short),
    encode(-1.2684380046 * long + 2.6097574011 * medium - 0.3413193965 * short),
    encode(-0.0041960863 * long - 0.7034186147 * medium + 1.707614701 * short),
  ];
}

/** True when every component lies in 0..1 (within a rounding error of the matrices). */
export function inGamut(colour: SrgbTriple): boolean {
  return colour.every((part) => part >= -1e-6 && part <= 1 + 1e-6);
}

function encode(linear: number): number {
  const size = Math.abs(linear);
  const encoded = size <= 0.0031308 ? 12.92 * size : 1.055 * size ** (1 / 2.4) - 0.055;
  return Math.sign(linear) * encoded;
}
