import { describe, expect, test } from 'vitest';
import en from '#locales/en/cautions.json' with { type: 'json' };
import fr from '#locales/fr/cautions.json' with { type: 'json' };
import { cautionCodes, cautionValues, type CautionCode } from '#shared/caution.ts';

/** Placeholders that a variant of a sentence may have beyond those that its code always brings. */
const trendValues = ['lsd', 'usual', 'share', 'variety', 'from', 'to'];
const variantValues = ['count', 'site', 'season', 'cv', 'limit', 'regions', ...trendValues];

/** i18next's plural forms and our contexts come after an underscore. */
const codeOf = (key: string): string => key.replace(/_.*$/, '');

const placeholdersOf = (sentence: string): string[] =>
  [...sentence.matchAll(/\{\{\s*([\w]+)/g)].map(([, name]) => name ?? '');

describe.each(Object.entries({ en, fr }))('cautions in %s', (_language, sentences) => {
  test('every code has a sentence, and every sentence a code', () => {
    expect([...new Set(Object.keys(sentences).map(codeOf))].sort()).toEqual([...cautionCodes].sort());
  });

  test.each(Object.entries(sentences))('%s asks only for values that it is given', (key, sentence) => {
    // The test above has seen that each key belongs to a code.
    const given: readonly string[] = [...cautionValues[codeOf(key) as CautionCode], ...variantValues];
    for (const name of placeholdersOf(sentence)) expect(given).toContain(name);
  });
});
