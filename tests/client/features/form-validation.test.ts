import { describe, expect, it } from 'vitest';
import type { Crop } from '#shared/catalogue.ts';
import type { GrowerCopyLine } from '#shared/grower-copy.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { fieldIssues } from '#src/field-issues.ts';
import { importForm } from '#src/features/trial-desk/import-fieldset.tsx';
import { stateOfCopy } from '#src/features/weigh-up/copy-list.tsx';
import { moneyForm, toAssumptions, toMoneyDraft } from '#src/features/weigh-up/money-form.ts';
import { newWeighUpForm } from '#src/features/weigh-up/new-weigh-up-form.ts';
import { matchesSearch } from '#src/features/weigh-up/weigh-up-filter.ts';
import { assumptions, buildWeighUp, currentId, idOf } from '#tests/client/support/weigh-up-factory.ts';

/** Paths and reasons of what a schema refuses. */
function refusals(schema: typeof moneyForm | typeof newWeighUpForm | typeof importForm, value: unknown) {
  const parsed = schema.safeParse(value);
  return parsed.success ? [] : parsed.error.issues.map((issue) => issue.path.join('.'));
}

const farm = {
  growerName: 'Maren Oske',
  farmName: 'Tallow Farm',
  areaHectares: 120,
  usualYield: null,
  priceLow: 255,
  priceMiddle: 290,
  priceHigh: 340,
};

describe('the form of a new weigh-up', () => {
  it('takes what fits and names each field that does not', () => {
    expect(refusals(newWeighUpForm, farm)).toEqual([]);
    expect(refusals(newWeighUpForm, { ...farm, growerName: '  ', areaHectares: null })).toEqual([
      'growerName',
      'areaHectares',
    ]);
    expect(refusals(newWeighUpForm, { ...farm, areaHectares: Number.NaN })).toEqual(['areaHectares']);
    expect(refusals(newWeighUpForm, { ...farm, areaHectares: -1 })).toEqual(['areaHectares']);
    expect(refusals(newWeighUpForm, { ...farm, priceLow: 300 })).toEqual(['priceMiddle']);
  });
});

describe('why a field is refused', () => {
  const reasons = (value: unknown): Record<string, string> => {
    const parsed = newWeighUpForm.safeParse(value, fieldIssues);
    const issues = parsed.success ? [] : parsed.error.issues;
    return Object.fromEntries(issues.map(({ path, message }) => [path.join('.'), message]));
  };

  it('is said by what is wrong with it, not by every way in which it might be', () => {
    expect(reasons({ ...farm, growerName: ' ', farmName: 'x'.repeat(1000), areaHectares: null })).toEqual({
      growerName: 'required',
      farmName: 'too-long',
      areaHectares: 'required',
    });
    expect(reasons({ ...farm, areaHectares: 0 })).toEqual({ areaHectares: 'not-over-zero' });
    expect(reasons({ ...farm, areaHectares: Number.NaN })).toEqual({ areaHectares: 'not-a-figure' });
    expect(reasons({ ...farm, areaHectares: 1e12 })).toEqual({ areaHectares: 'too-high' });
    // What a schema says itself stays.
    expect(reasons({ ...farm, priceLow: 300 })).toEqual({ priceMiddle: 'price-order' });
  });
});

describe('the money form', () => {
  const crop = { traits: [], standardMoisturePercent: 16 };
  const draft = toMoneyDraft(buildWeighUp(), crop);
  const seedDraft = draft.seedCosts[currentId];
  if (seedDraft === undefined) throw new Error('the current variety has a line');

  it('refuses a price that does not cover its own haulage and drying', () => {
    expect(refusals(moneyForm, draft)).toEqual([]);
    expect(refusals(moneyForm, { ...draft, haulagePerTonne: 250 })).toEqual(['priceLow']);
    expect(refusals(moneyForm, { ...draft, harvestPerTonne: 240 })).toEqual(['priceLow']);
    const discount = { traitSlug: 'protein', side: 'under', limit: 11, perTonne: -240 } as const;
    expect(refusals(moneyForm, { ...draft, qualityRules: [discount] })).toEqual(['priceLow']);
    const wet = { ...seedDraft, harvestMoisturePercent: 26 };
    const seedCosts = { ...draft.seedCosts, [currentId]: wet };
    expect(refusals(moneyForm, { ...draft, seedCosts, dryingPerPoint: 24 })).toEqual(['priceLow']);
  });

  it('names each figure that nobody means', () => {
    const rule = { traitSlug: 'protein', side: 'under', limit: null, perTonne: Number.NaN } as const;
    const absurd = { ...seedDraft, germinationPercent: 0, mortalityPercent: 100, targetPlantsM2: -3 };
    const typed = { ...draft, qualityRules: [rule], seedCosts: { [currentId]: absurd } };
    expect(refusals(moneyForm, typed)).toEqual([
      'qualityRules.0.limit',
      'qualityRules.0.perTonne',
      ...['targetPlantsM2', 'germinationPercent', 'mortalityPercent'].map(
        (part) => `seedCosts.${currentId}.${part}`,
      ),
    ]);
  });

  it('gives back what was saved, whatever it holds and whatever it leaves out', () => {
    const full: MoneyAssumptions = {
      ...assumptions,
      ...{ harvestPerTonne: 6, dryingPerPoint: 2, standardMoisturePercent: 16 },
      qualityRules: [{ traitSlug: 'protein', side: 'at-least', limit: 23, perTonne: 8 }],
      currentLevels: { protein: 22.4 },
      seedCosts: {
        ...assumptions.seedCosts,
        [currentId]: {
          ...{ basis: 'saved', seedPerHectare: null, treatmentPerHectare: 11, royaltyPerHectare: 0 },
          ...{ targetPlantsM2: 85, thousandKernelWeightG: 235, germinationPercent: 94, mortalityPercent: 10 },
          ...{ cleaningPerTonne: 60, harvestMoisturePercent: 17, strawPerHectare: 0 },
        },
      },
    };
    const protein = { slug: 'protein', kind: 'numeric' } as Crop['traits'][number];
    const saved = buildWeighUp({ assumptions: full });
    const form = moneyForm.parse(toMoneyDraft(saved, { ...crop, traits: [protein] }));
    expect(toAssumptions(form, full)).toEqual(full);
    const plain = moneyForm.parse(draft);
    expect(toAssumptions(plain, assumptions)).toEqual({ ...assumptions, standardMoisturePercent: 16 });
  });

  it('keeps an open seed cost open and an unnamed treatment at nothing', () => {
    const open = { ...seedDraft, seedPerHectare: null, treatmentPerHectare: null, royaltyPerHectare: null };
    const bare = { ...open, seedPerHectare: 90 };
    const form = moneyForm.parse({ ...draft, seedCosts: { [idOf(2)]: open, [idOf(3)]: bare } });
    const { seedCosts } = toAssumptions(form, assumptions);
    expect(seedCosts[idOf(2)]).toBeUndefined();
    expect(seedCosts[idOf(3)]).toEqual({ seedPerHectare: 90, treatmentPerHectare: 0, royaltyPerHectare: 0 });
  });
});

describe('the import form', () => {
  const fields = { crop: 'field-pea', site: 'brasque', season: '2026', design: 'rcbd', name: 'Late series' };

  it('reads a typed season and refuses text in its place', () => {
    expect(importForm.parse(fields)).toMatchObject({ season: 2026, trait: 'yield', unit: 'as-stored' });
    expect(refusals(importForm, { ...fields, season: 'last' })).toEqual(['season']);
    expect(refusals(importForm, { ...fields, crop: '', design: '' })).toEqual(['crop', 'design']);
  });
});

describe('lists of a weigh-up', () => {
  it('finds every word in either language, accents and case aside', () => {
    const line = {
      ...buildWeighUp({ growerName: 'Élise Tremblay' }),
      candidates: 2,
      decision: null,
      archivedAt: null,
    };
    expect(matchesSearch(line, 'elise POIS')).toBe(true);
    expect(matchesSearch(line, 'elise barley')).toBe(false);
    expect(matchesSearch(line, '')).toBe(true);
  });

  it('calls a copy revoked before expired, and expired from the very moment', () => {
    const copy: GrowerCopyLine = {
      id: idOf(50),
      language: 'fr',
      createdAt: '2026-12-01T09:00:00.000Z',
      expiresAt: '2027-12-01T09:00:00.000Z',
      revokedAt: null,
      openings: 0,
      lastOpenedAt: null,
      laterChanges: [],
      mail: null,
    };
    expect(stateOfCopy(copy, new Date('2027-11-30T00:00:00Z'))).toBe('active');
    expect(stateOfCopy(copy, new Date(copy.expiresAt))).toBe('expired');
    expect(stateOfCopy({ ...copy, revokedAt: copy.createdAt }, new Date('2028-01-01'))).toBe('revoked');
  });
});
