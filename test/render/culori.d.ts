// The parts of culori (which ships no types) that the tests compare with.
declare module 'culori' {
  export interface Colour {
    readonly mode: string;
    readonly [channel: string]: number | string | undefined;
  }
  export interface Rgb extends Colour {
    readonly r: number;
    readonly g: number;
    readonly b: number;
  }
  export interface Oklch extends Colour {
    readonly l: number;
    readonly c: number;
    readonly h: number | undefined;
  }
  export interface Oklab extends Colour {
    readonly l: number;
    readonly a: number;
    readonly b: number;
  }
  export function rgb(colour: Colour): Rgb;
  export function oklch(colour: Colour): Oklch;
  export function oklab(colour: Colour): Oklab;
  export function differenceCiede2000(): (a: Colour, b: Colour) => number;
  export function differenceEuclidean(mode: string): (a: Colour, b: Colour) => number;
  export function filterDeficiencyProt(severity: number): (colour: Colour) => Rgb;
  export function filterDeficiencyDeuter(severity: number): (colour: Colour) => Rgb;
  export function filterDeficiencyTrit(severity: number): (colour: Colour) => Rgb;
  export function wcagContrast(a: string | Colour, b: string | Colour): number;
}
