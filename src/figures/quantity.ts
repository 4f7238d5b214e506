/** What a figure rests on; one sentence each in the README. */
export type Basis = 'measured' | 'extrapolated' | 'prior' | 'assumed' | 'sequence';

/** A figure with its 1-sigma (16/84 %) interval; `value` null where it cannot be had (a flag says why). */
export interface Quantity {
  readonly value: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly unit: string;
  readonly basis: Basis;
}

/** Keys of the quick look, in the order they are shown. */
export const QUANTITY_KEYS = [
  'positive_flux',
  'negative_flux',
  'unsigned_flux',
  'net_flux',
  'flux_imbalance',
  'peak_positive_field',
  'peak_negative_field',
  'strong_field_area',
  'potential_energy',
  'free_energy',
  'free_energy_ceiling',
  'total_energy',
  'upward_current',
  'downward_current',
  'net_current_positive',
  'net_current_negative',
  'peak_current_density',
  'force_free_alpha',
  'inversion_line_length',
  'strong_gradient_line_length',
  'gradient_weighted_line_length',
  'near_line_flux',
  'inductance',
  'lundquist_number',
] as const;

export type QuantityKey = (typeof QUANTITY_KEYS)[number];
