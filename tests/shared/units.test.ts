import { describe, expect, test } from 'vitest';
import { toTonnesPerHectare, tonnesPerHectareFactor } from '#shared/units.ts';

describe('yield units', () => {
  // Bushel weights and t/ha per bu/ac: Canada Grains Council (1999) in Alberta Agriculture (2002), Ohio State AGF-503.
  test.each([
    ['wheat, pea, soybean', 60, 0.06725],
    ['barley', 48, 0.0538],
    ['oat, Canada', 34, 0.03811],
    ['oat, United States', 32, 0.03587],
    ['rye, flax, maize', 56, 0.06277],
    ['canola', 50, 0.05604],
  ])('one bushel an acre of %s at %i lb', (_crop, pounds, expected) => {
    expect(tonnesPerHectareFactor('bu/ac', pounds)).toBeCloseTo(expected, 5);
  });

  test('kilograms and quintals keep their digits', () => {
    expect(toTonnesPerHectare(5113, 'kg/ha', 60)).toBe(5.113);
    expect(toTonnesPerHectare(51.13, 'q/ha', 60)).toBe(5.113);
    expect(toTonnesPerHectare(5.113, 't/ha', 60)).toBe(5.113);
  });

  test('0.8922 lb/ac is 1 kg/ha, by way of the bushel', () => {
    // common practice: kg/ha × 0.8922 = lb/ac
    const poundsPerAcre = 1000;
    expect(toTonnesPerHectare(poundsPerAcre / 60, 'bu/ac', 60) * 1000 * 0.8922).toBeCloseTo(poundsPerAcre, 1);
  });
});
