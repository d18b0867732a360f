import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { formatNumber } from '#shared/format-number.ts';
import { parseNumber } from '#shared/parse-number.ts';

describe('reading figures', () => {
  it.each([
    ['1 250,50', 1250.5, 1250.5],
    ['1\u202f250,50', 1250.5, 1250.5],
    ['1,250.50', 1250.5, 1250.5],
    ['1.250,50', 1250.5, 1250.5],
    ['1,250', 1250, 1.25],
    ['1,25', 1.25, 1.25],
    ['12.5', 12.5, 12.5],
    ['1,250,000', 1250000, 1250000],
    ['-0,4', -0.4, -0.4],
    ['\u22120.4', -0.4, -0.4],
    ['+3', 3, 3],
    [',5', 0.5, 0.5],
    ['290', 290, 290],
  ])('%s', (text, english, french) => {
    expect(parseNumber(text, 'en')).toBe(english);
    expect(parseNumber(text, 'fr')).toBe(french);
  });

  it.each(['abc', '12a', '1.2.3', '1,25,3', '--4', '.', '1e5', '12.34,567,8'])('refuses %s', (text) => {
    expect(parseNumber(text, 'en')).toBeNaN();
    expect(parseNumber(text, 'fr')).toBeNaN();
  });

  it('takes nothing typed for nothing', () => {
    expect(parseNumber('  ', 'fr')).toBeNull();
  });

  it('reads back what is written, in both languages', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -999_999_999, max: 999_999_999 }),
        fc.constantFrom('en' as const, 'fr' as const),
        (hundredths, language) => {
          const value = hundredths / 100;
          expect(parseNumber(formatNumber(value, language, { decimals: 2 }), language)).toBeCloseTo(value, 9);
        },
      ),
    );
  });
});
