import { describe, expect, it } from 'vitest';
import type { Quantity } from '../../src/figures/quantity.js';
import {
  numberText,
  plainNumber,
  quantityText,
  superscript,
  unitText,
} from '../../src/render/number-format.js';

function figure(
  value: number | null,
  low: number | null = null,
  high: number | null = null,
  unit: Quantity['unit'] = 'J',
): Quantity {
  return { value, low, high, unit, basis: 'measured' };
}

describe('numberText', () => {
  it.each([
    [1.234e24, 'J', '1.23 × 10²⁴ J'],
    [8.3e31, 'J', '83.0 × 10³⁰ J'],
    [-2.5e-7, '1/Mm', '−250 × 10⁻⁹ Mm⁻¹'],
    [1500, 'G', '1500 G'],
    [12345, 'Mm^2', '12\u2009300 Mm²'],
    [0.02, '1', '0.0200'],
    [0, 'A', '0 A'],
    [999.96e3, 'A', '1000 × 10³ A'],
    [Number.NaN, 'A', '—'],
  ])('%d %s', (value, unit, text) => {
    expect(numberText(value, unit)).toBe(text);
  });
});

describe('quantityText', () => {
  it('rounds value and interval at the same digit, the second of half the interval', () => {
    expect(quantityText(figure(3.2123e24, 3.0512e24, 3.3777e24))).toEqual({
      value: '3.21',
      interval: '3.05 to 3.38',
      unit: '× 10²⁴ J',
    });
    expect(quantityText(figure(-1234.4, -1310, -1160, 'G'))).toEqual({
      value: '−1234',
      interval: '−1310 to −1160',
      unit: 'G',
    });
  });

  it('keeps the power of the value for the interval', () => {
    expect(quantityText(figure(9e22, 2e22, 3e24))).toEqual({
      value: '90',
      interval: '20 to 3000',
      unit: '× 10²¹ J',
    });
  });

  it('does not round the near end of a wide interval to zero', () => {
    expect(quantityText(figure(2.3e24, 4e22, 11.2e24)).interval).toBe('0.04 to 11.20');
  });

  it('cuts a value lost in its own interval where the interval says', () => {
    expect(quantityText(figure(0.0123, -5.02, 5.11, 'Mm')).value).toBe('0.0');
    expect(quantityText(figure(0, -5.02, 5.11, 'Mm'))).toMatchObject({
      value: '0.0',
      interval: '−5.0 to 5.1',
    });
  });

  it('takes the power of the interval for a value next to nothing beside it', () => {
    expect(quantityText(figure(1e-17, -0.011, 0.011, '1/Mm'))).toEqual({
      value: '0.000',
      interval: '−0.011 to 0.011',
      unit: 'Mm⁻¹',
    });
  });

  it('never writes a minus before nothing but zeros', () => {
    expect(quantityText(figure(-0.004, -3, 3, 'Mm')).value).toBe('0.0');
  });

  it('shows what cannot be had as a dash, and no interval where there is none', () => {
    expect(quantityText(figure(null))).toEqual({ value: '—', interval: '', unit: '' });
    expect(quantityText(figure(Number.NaN, 0, 1))).toMatchObject({ value: '—' });
    expect(quantityText(figure(5e9, null, null, 'A'))).toEqual({
      value: '5.00',
      interval: '',
      unit: '× 10⁹ A',
    });
    expect(quantityText(figure(0, 0, 0, 'Mx'))).toEqual({
      value: '0',
      interval: '0 to 0',
      unit: 'Mx',
    });
  });

  it('reads back to the value within its last digit, over all sizes', () => {
    for (let power = -12; power <= 36; power++) {
      const value = 1.2345 * 10 ** power;
      const text = quantityText(figure(value, 0.9 * value, 1.1 * value));
      const scale = /10([⁰¹²³⁴⁵⁶⁷⁸⁹⁻]+)/.exec(text.unit)?.[1] ?? '⁰';
      const digits = [...scale].map((sign) => '⁰¹²³⁴⁵⁶⁷⁸⁹⁻'.indexOf(sign));
      const exponent = Number(digits.map((digit) => (digit === 10 ? '-' : digit)).join(''));
      const read = Number(text.value.replace('\u2009', '')) * 10 ** exponent;
      expect(Math.abs(read / value - 1)).toBeLessThan(0.02);
      expect(Math.abs(exponent % 3)).toBe(0);
    }
  });
});

it('writes superscripts, units and plain numbers', () => {
  expect(superscript(-120)).toBe('⁻¹²⁰');
  expect(unitText('mA/m^2')).toBe('mA/m²');
  expect(unitText('1')).toBe('');
  expect(plainNumber(-0.5)).toBe('−0.5');
  expect(plainNumber(0.1 + 0.2)).toBe('0.3');
});
