/** What a figure rests on; one sentence each in the README. */
export type Basis = 'measured' | 'extrapolated' | 'prior' | 'assumed' | 'sequence';

export type QuantityUnit =
  | 'Mx'
  | 'G'
  | 'Mm'
  | 'Mm^2'
  | 'J'
  | 'A'
  | 'mA/m^2'
  | '1/Mm'
  | 'H'
  | 'G^2/m'
  | '1';

/** A figure with its 1-sigma (16/84 %) interval; all null where it cannot be had (a flag says why). */
export interface Quantity {
  readonly value: number | null;
  readonly low: number | null;
  readonly high: number | null;
  readonly unit: QuantityUnit;
  readonly basis: Basis;
}

/**
 * The figures of the quick look in the order they are shown, with unit, plain name and the sign that the
 * law gives them (0: either); `vector` marks those that need all three components.
 */
export const QUANTITY_FACTS = {
  positive_flux: { sign: 1, unit: 'Mx', label: 'positive flux' },
  negative_flux: { sign: -1, unit: 'Mx', label: 'negative flux' },
  unsigned_flux: { sign: 1, unit: 'Mx', label: 'unsigned flux' },
  net_flux: { sign: 0, unit: 'Mx', label: 'net flux' },
  flux_imbalance: { sign: 0, unit: '1', label: 'flux imbalance' },
  peak_positive_field: { sign: 1, unit: 'G', label: 'peak positive field' },
  peak_negative_field: { sign: -1, unit: 'G', label: 'peak negative field' },
  strong_field_area: { sign: 1, unit: 'Mm^2', label: 'strong-field area' },
  potential_energy: { sign: 1, unit: 'J', label: 'potential energy' },
  free_energy: { sign: 1, unit: 'J', label: 'free energy' },
  free_energy_ceiling: { sign: 1, unit: 'J', label: 'free-energy ceiling' },
  total_energy: { sign: 1, unit: 'J', label: 'total energy' },
  upward_current: { sign: 1, unit: 'A', label: 'upward current' },
  downward_current: { sign: -1, unit: 'A', label: 'downward current' },
  net_current_positive: { sign: 0, unit: 'A', label: 'net current, positive' },
  net_current_negative: { sign: 0, unit: 'A', label: 'net current, negative' },
  peak_current_density: { sign: 1, unit: 'mA/m^2', label: 'peak current density' },
  force_free_alpha: { sign: 0, unit: '1/Mm', label: 'force-free alpha' },
  inversion_line_length: { sign: 1, unit: 'Mm', label: 'inversion line' },
  strong_gradient_line_length: { sign: 1, unit: 'Mm', label: 'strong-gradient line' },
  gradient_weighted_line_length: { sign: 1, unit: 'G', label: 'gradient-weighted line' },
  near_line_flux: { sign: 1, unit: 'Mx', label: 'near-line flux' },
  inductance: { sign: 1, unit: 'H', label: 'inductance' },
  lundquist_number: { sign: 1, unit: '1', label: 'Lundquist number' },
  unsigned_current: { sign: 1, unit: 'A', label: 'unsigned current', vector: true },
  neutralization_positive: { sign: 1, unit: '1', label: 'neutralization, positive', vector: true },
  neutralization_negative: { sign: 1, unit: '1', label: 'neutralization, negative', vector: true },
  current_helicity_mean: { sign: 0, unit: 'G^2/m', label: 'mean current helicity', vector: true },
  shear_line_length: { sign: 1, unit: 'Mm', label: 'sheared line', vector: true },
  virial_energy: { sign: 0, unit: 'J', label: 'virial energy', vector: true },
  virial_origin_change: { sign: 1, unit: '1', label: 'virial change with origin', vector: true },
  net_force_x: { sign: 0, unit: '1', label: 'net force, west', vector: true },
  net_force_y: { sign: 0, unit: '1', label: 'net force, north', vector: true },
  net_force_z: { sign: 0, unit: '1', label: 'net force, up', vector: true },
  disambiguation_flux_fraction_changed: {
    sign: 1,
    unit: '1',
    label: 'changed by disambiguation',
    vector: true,
  },
} as const satisfies Record<
  string,
  { sign: -1 | 0 | 1; unit: QuantityUnit; label: string; vector?: true }
>;

export type QuantityKey = keyof typeof QUANTITY_FACTS;
export type Quantities = Partial<Record<QuantityKey, Quantity>>;
export const QUANTITY_KEYS = Object.keys(QUANTITY_FACTS) as readonly QuantityKey[];

/** Those that a line-of-sight map gives; the others need all three components. */
export const LINE_OF_SIGHT_KEYS = QUANTITY_KEYS.filter((key) => !('vector' in QUANTITY_FACTS[key]));

/**
 * A quantity of its key's unit. Noise may carry an estimate or its interval across zero where the law
 * allows one sign only: both end at zero then, but for measured ones, whose mean over many maps would
 * suffer. Null throughout where a number is not finite.
 */
export function quantity(
  key: QuantityKey,
  value: number,
  low: number,
  high: number,
  basis: Basis,
): Quantity {
  const { unit, sign } = QUANTITY_FACTS[key];
  if (![value, low, high].every(Number.isFinite))
    return { value: null, low: null, high: null, unit, basis };
  const lawful = (number: number) => (basis !== 'measured' && sign * number < 0 ? 0 : number);
  return {
    value: lawful(value),
    low: lawful(Math.min(low, value)),
    high: lawful(Math.max(high, value)),
    unit,
    basis,
  };
}

/** A quantity with a symmetric interval of one `sigma`. */
export function withSigma(key: QuantityKey, value: number, sigma: number, basis: Basis): Quantity {
  return quantity(key, value, value - sigma, value + sigma, basis);
}
