import { expect, test } from 'vitest';
import type { QualityRule } from '#shared/money.ts';
import { readQualityOutlook } from '#shared/quality-outlook.ts';
import { current, withLevels } from '#tests/shared/money-questions.ts';
import { atOnePrice, gapOf, seed } from '#tests/shared/money-questions.ts';

const rule: QualityRule = { traitSlug: 'protein', side: 'at-least', limit: 12, perTonne: 10 };
const levels = [{ traitSlug: 'protein', mean: 12.2, spread: 0.6, trials: 4 }];
const [{ traits }] = withLevels(atOnePrice(250, { candidate: seed(60), current: seed(50) }), gapOf(0.2), {
  protein: { estimate: 0.5, se: 0.4, df: 9 },
});
const basis = { currentVarietyId: current, usualYield: null, levels };

/** The trait's gap pulled back, with the standard errors given beside it. */
function pulledBack(shrunkenSe?: { region: number; ownSeason: number }): typeof traits {
  return traits.map((trait) => ({
    ...trait,
    gap: trait.gap && { ...trait.gap, shrunken: 0.3, ...(shrunkenSe && { shrunkenSe }) },
  }));
}

test('mean and standard error are those of one distribution: the gap pulled back, with what is left to know of it', () => {
  const outlook = readQualityOutlook(pulledBack({ region: 0.2, ownSeason: 0.33 }), basis, {
    qualityRules: [rule],
  });
  expect(outlook).toMatchObject([
    {
      ownSeason: { estimate: 0.3, se: 0.33, df: 9 },
      region: { estimate: 0.3, se: 0.2, df: 9 },
    },
  ]);
});

test('copies from before that was told keep the wider standard errors of the plain gap', () => {
  const outlook = readQualityOutlook(pulledBack(), basis, { qualityRules: [rule] });
  expect(outlook).toMatchObject([
    { ownSeason: { estimate: 0.3, se: 0.4 }, region: { estimate: 0.3, se: 0.4 } },
  ]);
});

test('a level from four trials is predicted for a fifth field, one that the grower knows is not', () => {
  const fromTrials = readQualityOutlook(traits, basis, { qualityRules: [rule] });
  // s² (1 + 1/n), the variance of a further value about a mean of n.
  expect(fromTrials).toMatchObject([{ level: 12.2, spread: 0.6 * Math.sqrt(1.25) }]);
  const known = readQualityOutlook(traits, basis, {
    qualityRules: [rule],
    currentLevels: { protein: 11.8 },
  });
  expect(known).toMatchObject([{ level: 11.8, spread: 0.6 }]);
});

test('what was not measured on both, or in fewer than three trials, is unknown', () => {
  const rules = { qualityRules: [rule] };
  expect(readQualityOutlook([], basis, rules)).toBe('unknown');
  const few = { ...basis, levels: [{ traitSlug: 'protein', mean: 12.2, spread: null, trials: 2 }] };
  expect(readQualityOutlook(traits, few, rules)).toBe('unknown');
  expect(readQualityOutlook(traits, basis, {})).toEqual([]);
});
