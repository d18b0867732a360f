import { beforeAll, describe, expect, it } from 'vitest';
import { renderHook } from '@testing-library/react';
import { languages } from '#shared/language.ts';
import { cautionCodes, cautionValues, type Caution, type CautionCode } from '#shared/caution.ts';
import { changeLanguage, i18n, startI18n } from '#src/i18n.ts';
import { useCautionItems } from '#src/use-caution-items.ts';

/** A value that each placeholder may hold. */
const samples: Caution['values'] = {
  count: 3,
  total: 40,
  season: '2024',
  date: '2024-02-01',
  context: '',
  plot: '207',
  regions: [
    { en: 'Lower Velmar', fr: 'Bas-Velmar' },
    { en: 'Upper Velmar', fr: 'Haut-Velmar' },
  ],
};

function sample(code: CautionCode): Caution['values'] {
  const figures = new Set([
    ...['count', 'total', 'cv', 'limit', 'p', 'sd', 'estimate', 'shrunken', 'given', 'expected', 'value'],
    ...['difference', 'distance', 'similar', 'yield', 'from', 'to'],
  ]);
  return Object.fromEntries(
    cautionValues[code].map((name) => [name, samples[name] ?? (figures.has(name) ? 0.25 : 'Tallis')]),
  );
}

beforeAll(startI18n);

describe.each(languages)('cautions in %s', (language) => {
  it.each(cautionCodes)('says %s in full', async (code) => {
    await changeLanguage(language);
    await i18n.loadNamespaces('cautions');
    const { result } = renderHook(() => useCautionItems());
    const [item] = result.current([{ code, severity: 'warning', values: sample(code) }]);
    const text = String(item?.text);
    expect(text).not.toBe(code);
    expect(text.length).toBeGreaterThan(20);
    expect(text).not.toMatch(/\{\{|\}\}|undefined|NaN/);
  });

  it('says the same caution once, and names the trial where it is one of many', async () => {
    await changeLanguage(language);
    await i18n.loadNamespaces('cautions');
    const { result } = renderHook(() => useCautionItems());
    const weak = { cv: 28.4, limit: 15 };
    const named = { ...weak, site: 'Pont-Desserre', season: '2024' };
    const items = result.current([
      { code: 'trial-weak-cv', severity: 'warning', values: named },
      { code: 'trial-weak-cv', severity: 'warning', values: named },
      { code: 'trial-weak-cv', severity: 'warning', values: weak },
    ]);
    expect(items).toHaveLength(2);
    expect(items[0]?.text).toContain('Pont-Desserre');
    expect(items[0]?.text).toContain(language === 'fr' ? '28,4\u202f%' : '28.4%');
  });

  it('names regions in its own language, joined as it joins names', async () => {
    await changeLanguage(language);
    await i18n.loadNamespaces('cautions');
    const { result } = renderHook(() => useCautionItems());
    const values = { context: 'elsewhere', regions: samples.regions ?? [] };
    const [item] = result.current([{ code: 'no-trial-in-region', severity: 'stop', values }]);
    expect(item?.text).toContain(
      language === 'fr' ? 'Bas-Velmar et Haut-Velmar' : 'Lower Velmar and Upper Velmar',
    );
  });
});
