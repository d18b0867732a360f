import { beforeAll, describe, expect, it } from 'vitest';
import { changeLanguage, i18n, loadSentences, startI18n } from '#src/i18n.ts';

beforeAll(async () => {
  await startI18n();
});

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
