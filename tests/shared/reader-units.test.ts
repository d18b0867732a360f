import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  fromReader,
  fromReaderPer,
  readerUnit,
  readUnitParameter,
  storedUnits,
  toReader,
  toReaderPer,
  writeUnitParameter,
  type ReaderUnits,
} from '#shared/reader-units.ts';
import { sentenceFormats } from '#shared/sentence-formats.ts';
import { yieldUnits } from '#shared/units.ts';
import { atOnePrice, gapOf, seed, weigh } from '#tests/shared/money-questions.ts';

const inBushelsOf = (bushelWeightLb: number): ReaderUnits => ({ yieldUnit: 'bu/ac', bushelWeightLb });

const anyUnits = fc.record({
  yieldUnit: fc.constantFrom(...yieldUnits),
  bushelWeightLb: fc.double({ min: 20, max: 80, noNaN: true }),
});
const anyFigure = fc.double({ min: -1e6, max: 1e6, noNaN: true });
const anyStored = fc.constantFrom('t/ha', 't', 'ha', '%', 'cm');

describe('yields in the units of the reader', () => {
  // Bushel weights and bushels per tonne: Canada Grains Council (1999) in Alberta Agriculture (2002), Ohio State AGF-503.
  test.each([
    ['wheat, pea, soybean', 60, 36.744, 0.06725],
    ['barley', 48, 45.93, 0.0538],
    ['oat, Canada', 34, 64.842, 0.03811],
    ['oat, United States', 32, 68.894, 0.03587],
    ['rye, flax, maize', 56, 39.368, 0.06277],
    ['canola', 50, 44.092, 0.05604],
  ])('%s at %i lb a bushel', (_crop, pounds, bushelsPerTonne, tonnesPerHectare) => {
    const units = inBushelsOf(pounds);
    expect(toReader(1, 't', units)).toBeCloseTo(bushelsPerTonne, 3);
    expect(fromReader(1, 't/ha', units)).toBeCloseTo(tonnesPerHectare, 5);
    expect(readerUnit('t/ha', units)).toBe('bu/ac');
  });

  test('kilograms and quintals are whole powers of ten', () => {
    expect(toReader(5.113, 't/ha', { ...storedUnits, yieldUnit: 'kg/ha' })).toBe(5113);
    expect(toReader(5.25, 't/ha', { ...storedUnits, yieldUnit: 'q/ha' })).toBe(52.5);
    expect(toReader(5.113, 't/ha', storedUnits)).toBe(5.113);
  });

  test('areas and money follow bushels per acre, and stay metric with the others', () => {
    // 640 acres are a square mile of 1609.344 m
    expect(toReader((1.609344 ** 2 * 100) / 640, 'ha', inBushelsOf(60))).toBeCloseTo(1, 12);
    expect(readerUnit('ha', inBushelsOf(60))).toBe('ac');
    expect(readerUnit('t', inBushelsOf(60))).toBe('bu');
    for (const yieldUnit of ['kg/ha', 'q/ha'] as const) {
      const units = { ...storedUnits, yieldUnit };
      expect([readerUnit('ha', units), readerUnit('t', units)]).toEqual(['ha', 't']);
      expect(toReaderPer(290, 't', units)).toBe(290);
    }
  });

  test('other units stay as they are, and so does a yield that is in the reader’s unit already', () => {
    for (const unit of ['%', 'cm', 'kg/hL', 'bu/ac', 'kg/ha']) {
      expect(toReader(12.5, unit, inBushelsOf(60))).toBe(12.5);
      expect(readerUnit(unit, inBushelsOf(60))).toBe(unit);
    }
  });

  test('there and back again is where it began', () => {
    fc.assert(
      fc.property(anyFigure, anyStored, anyUnits, (figure, unit, units) => {
        const close = Math.abs(figure) * 1e-12 + 1e-300;
        expect(Math.abs(fromReader(toReader(figure, unit, units), unit, units) - figure)).toBeLessThanOrEqual(
          close,
        );
        const money = fromReaderPer(toReaderPer(figure, unit, units), unit, units);
        expect(Math.abs(money - figure)).toBeLessThanOrEqual(close);
      }),
    );
  });

  test('units cancel: yield × price × area is the same money in every unit', () => {
    fc.assert(
      fc.property(anyFigure, anyFigure, anyFigure, anyUnits, (tonnes, price, hectares, units) => {
        const money =
          toReader(tonnes, 't/ha', units) * toReaderPer(price, 't', units) * toReader(hectares, 'ha', units);
        const stored = tonnes * price * hectares;
        // kg/ha and q/ha are no units of trade: their price stays one per tonne.
        const scale = (toReader(1, 't/ha', units) / toReader(1, 't', units)) * toReader(1, 'ha', units);
        expect(Math.abs(money - stored * scale)).toBeLessThanOrEqual(
          Math.abs(stored * scale) * 1e-12 + 1e-300,
        );
        if (units.yieldUnit === 'bu/ac') expect(scale).toBeCloseTo(1, 12);
      }),
    );
  });

  test('certified seed at 3.50 more an acre pays 1 bu/ac at 3.50 a bushel', () => {
    // Whole-crop break-even of extension budgets; domain.md, partial budget.
    const units = inBushelsOf(60);
    const perAcre = (amount: number) => seed(fromReaderPer(amount, 'ha', units));
    const money = atOnePrice(fromReaderPer(3.5, 't', units), {
      candidate: perAcre(13.5),
      current: perAcre(10),
    });
    const result = weigh(money, gapOf(fromReader(2, 't/ha', units)));
    expect(toReader(result.breakEvenGap, 't/ha', units)).toBeCloseTo(1, 12);
    expect(toReaderPer(result.returnPerHectare, 'ha', units)).toBeCloseTo(3.5, 12);
  });
});

describe('a unit in an address', () => {
  test.each(yieldUnits)('%s is read back', (unit) => {
    expect(readUnitParameter(writeUnitParameter(unit))).toBe(unit);
    expect(writeUnitParameter(unit)).not.toContain('/');
  });

  test('anything else is none', () => {
    expect(readUnitParameter('stone-rood')).toBeNull();
    expect(readUnitParameter(null)).toBeNull();
  });
});

describe('figures in sentences', () => {
  const say = (format: string, value: number, readerUnits?: ReaderUnits) =>
    sentenceFormats[format]?.(value, 'en', {
      decimals: 2,
      unit: 't/ha',
      ...(readerUnits && { readerUnits }),
    });

  test('follow the reader’s units, with as many decimals as these bear', () => {
    expect(say('gap', 0.4)).toBe('+0.40\u00a0t/ha');
    expect(say('gap', 0.4, inBushelsOf(60))).toBe('+5.9\u00a0bu/ac');
    expect(say('quantity', 4.3, { ...storedUnits, yieldUnit: 'kg/ha' })).toBe('4,300\u00a0kg/ha');
    expect(say('figure', 4.3, { ...storedUnits, yieldUnit: 'q/ha' })).toBe('43.0');
  });
});
