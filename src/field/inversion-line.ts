/**
 * A piece of the polarity inversion line as joined points in patch pixels (x west, y north, pixel
 * centres on integers); `strong[i]` tells whether the segment from point i to i + 1 is part of the
 * strong-gradient line.
 */
export interface InversionLine {
  readonly x: Float64Array;
  readonly y: Float64Array;
  readonly strong: readonly boolean[];
}
