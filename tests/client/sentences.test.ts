import { z } from 'zod';
import { describe, expect, it } from 'vitest';
import { errorCodes } from '#shared/error-codes.ts';
import { moneyAssumptions } from '#shared/money.ts';
import { changeLanguage, i18n, loadSentences } from '#src/i18n.ts';

describe('figures in sentences', () => {
  it.each([
    ['en', '28.0% \u22120.40\u00a0t/ha <\u00a00.001 1 December 2026 1,250'],
    ['fr', '28,0\u202f% \u22120,40\u00a0t/ha <\u00a00,001 1er décembre 2026 1\u202f250'],
  ] as const)('are written by our own formats (%s)', async (language, written) => {
    await changeLanguage(language);
    const sentence =
      '{{cv, percent(decimals: 1)}} {{gap, gap(decimals: 2; unit: t/ha)}} {{p, pvalue}} {{on, date}} {{n, number}}';
    const values = { cv: 28.04, gap: -0.4, p: 0.0001, on: '2026-12-01', n: 1250 };
    expect(i18n.services.interpolator.interpolate(sentence, values, language, {})).toBe(written);
  });
});

describe('the language of the page', () => {
  it('is said on <html> and remembered in this browser', async () => {
    await changeLanguage('fr');
    expect(document.documentElement.lang).toBe('fr');
    expect(localStorage.getItem('gavelrow.language')).toBe('fr');
    expect(i18n.t('nav.weighUps')).toBe('Pesées');
    await changeLanguage('en');
    expect(document.documentElement.lang).toBe('en');
    expect(i18n.t('nav.weighUps')).toBe('Weigh-ups');
  });
});

describe('sentences that do not come', () => {
  it('fail as a missing network does, instead of leaving keys on the page', async () => {
    await expect(loadSentences(['no-such-namespace'])).rejects.toMatchObject({ code: 'offline' });
  });

  it('are fetched for the present language where another one had them', async () => {
    await changeLanguage('en');
    await loadSentences(['drawings'], 'fr');
    expect(i18n.hasResourceBundle('fr', 'drawings')).toBe(true);
    expect(i18n.language).toBe('en');
  });
});

describe('refusals', () => {
  it.each(['en', 'fr'] as const)('have a sentence for every code (%s)', async (language) => {
    await changeLanguage(language);
    const missing = [...errorCodes, 'offline', 'unreadable-reply', 'unexpected'].filter(
      (code) => !i18n.exists(`errors:${code}`),
    );
    expect(missing).toEqual([]);
  });

  it('have a sentence for each kind of issue that zod raises over a form', () => {
    const form = z.object({
      empty: z.string().min(1),
      long: z.string().max(1),
      email: z.email(),
      count: z.number().int(),
      role: z.enum(['a', 'b']),
      alpha: z.union([z.literal(0.01), z.literal(0.05)]),
      even: z.number().multipleOf(2),
    });
    const typed = { empty: '', long: 'xx', email: 'x', count: Number.NaN, role: 'c', alpha: 1, even: 3 };
    const codes = form.safeParse(typed).error?.issues.map((issue) => issue.code) ?? [];
    expect(codes).toHaveLength(7);
    expect(codes.filter((code) => !i18n.exists(`errors:fields.${code}`))).toEqual([]);
  });

  it('have a sentence for the reasons of our own schemas', () => {
    const typed = {
      currency: 'CAD',
      priceLow: 300,
      priceMiddle: 290,
      priceHigh: 340,
      haulagePerTonne: 400,
      dryingPerTonne: 0,
      seedCosts: {},
      priceSheetDate: null,
    };
    const reasons = moneyAssumptions.safeParse(typed).error?.issues.map((issue) => issue.message) ?? [];
    expect(reasons).toContain('price-order');
    expect(reasons.filter((reason) => !i18n.exists(`errors:fields.${reason}`))).toEqual([]);
  });
});
