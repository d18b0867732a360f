import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  currencySign,
  decimalsFor,
  formatArea,
  formatMoney,
  formatMoneyPer,
  formatNumber,
  formatPercent,
  formatPValue,
  formatQuantity,
  sayChance,
} from '#shared/format-number.ts';
import { judgeMoney } from '#shared/money-verdict.ts';

// Expected strings: common practice of the two languages; spaces are U+00A0 before units and U+202F in French thousands and before %.
describe('figures', () => {
  it('writes decimals and thousands as the language does', () => {
    expect(formatNumber(1250.5, 'en', { decimals: 2 })).toBe('1,250.50');
    expect(formatNumber(1250.5, 'fr', { decimals: 2 })).toBe('1\u202f250,50');
  });

  it('uses a true minus sign and signs gaps', () => {
    expect(formatNumber(-0.38, 'en', { decimals: 2 })).toBe('\u22120.38');
    expect(formatNumber(0.38, 'fr', { decimals: 2, isSigned: true })).toBe('+0,38');
  });

  it('gives no sign to what rounds to zero', () => {
    expect(formatNumber(-0.004, 'en', { decimals: 2, isSigned: true })).toBe('0.00');
    expect(formatNumber(-0.004, 'en', { decimals: 2 })).toBe('0.00');
  });

  it('keeps figure and unit on one line', () => {
    expect(formatQuantity(4.32, 't/ha', 'fr', { decimals: 2 })).toBe('4,32\u00a0t/ha');
    expect(formatQuantity(13.5, '%', 'fr', { decimals: 1 })).toBe('13,5\u202f%');
    expect(formatQuantity(3, '', 'en')).toBe('3');
    expect(formatQuantity(95, 'd', 'en')).toBe('95\u00a0d');
    expect(formatQuantity(95, 'd', 'fr')).toBe('95\u00a0j');
    expect(formatPercent(28, 'en')).toBe('28%');
    expect(formatArea(120, 'en')).toBe('120\u00a0ha');
    expect(formatArea(12.5, 'fr')).toBe('12,5\u00a0ha');
    expect(formatArea(296.526, 'en', 'ac')).toBe('296.5\u00a0ac');
    expect(formatArea(100.0000001, 'en', 'ac')).toBe('100\u00a0ac');
  });
});

describe('money', () => {
  it('puts the sign of the currency where the language has it', () => {
    expect(formatMoney(8760, 'CAD', 'en')).toBe('$8,760');
    expect(formatMoney(8760, 'CAD', 'fr')).toBe('8\u202f760\u00a0$');
    expect(formatMoneyPer(-28.4, 'CAD', 'ha', 'en')).toBe('\u2212$28/ha');
    expect(formatMoneyPer(73, 'CAD', 'ha', 'fr', { isSigned: true })).toBe('+73\u00a0$/ha');
    expect(formatMoneyPer(7.8925, 'CAD', 'bu', 'en')).toBe('$7.89/bu');
    expect(formatMoneyPer(7.8925, 'CAD', 'bu', 'fr')).toBe('7,89\u00a0$/bo');
    expect(formatMoney(148, 'EUR', 'fr', { decimals: 2 })).toBe('148,00\u00a0€');
    expect(currencySign('CAD', 'en')).toBe('$');
  });
});

describe('decimals that a standard error supports', () => {
  it.each([
    [0.15, 't/ha', 2],
    [0.4, 't/ha', 2],
    [1, 't/ha', 1],
    [12, 't/ha', 0],
    [0.004, 't/ha', 2],
    [0.1, 't/ha', 2],
    [0.5, 'cm', 0],
    [null, 't/ha', 2],
    [0, 'kg/hL', 1],
  ])('SE %s %s: %s decimals', (standardError, unit, decimals) => {
    expect(decimalsFor(standardError, unit)).toBe(decimals);
  });
});

describe('p-values', () => {
  it.each([
    [0, '<\u00a00.001'],
    [0.00099, '<\u00a00.001'],
    [0.0024, '0.0024'],
    [0.0312, '0.031'],
    [0.421, '0.42'],
    [0.9999, '>\u00a00.99'],
    [0.04996, '0.04996'],
    [0.05, '0.050'],
    [0.009999, '0.009999'],
  ])('%s is written %s', (p, written) => {
    expect(formatPValue(p, 'en')).toBe(written);
  });

  it('has the French comma', () => {
    expect(formatPValue(1e-12, 'fr')).toBe('<\u00a00,001');
  });
});

describe('chances', () => {
  it.each([
    [0, 'fewer', 1],
    [0.0099, 'fewer', 1],
    [0.01, 'whole', 1],
    [0.912, 'whole', 91],
    [0.99, 'whole', 99],
    [0.9901, 'more', 99],
    [1, 'more', 99],
  ] as const)('%s is said as %s %s', (probability, key, count) => {
    expect(sayChance(probability)).toEqual({ key, count });
  });

  it('never says a number that belongs to another verdict', () => {
    fc.assert(
      fc.property(fc.double({ min: 0.01, max: 0.99, noNaN: true }), (chance) => {
        expect(judgeMoney(sayChance(chance).count / 100)).toBe(judgeMoney(chance));
      }),
      { examples: [[0.9499], [0.0501], [0.7999], [0.2001], [0.95], [0.2]] },
    );
  });
});
