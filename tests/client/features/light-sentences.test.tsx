import { readdirSync, readFileSync } from 'node:fs';
import { createInstance, type i18n } from 'i18next';
import { render } from '@testing-library/react';
import { describe, expect, it } from 'vitest';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';
import * as light from '#src/features/grower-copy/light-i18next.ts';
import { I18nextProvider, useTranslation } from '#src/features/grower-copy/light-react-i18next.tsx';

type Texts = { [key: string]: string | Texts };

const readTexts = (language: Language, file: string): Texts =>
  JSON.parse(readFileSync(`locales/${language}/${file}`, 'utf8')) as Texts;

function readAll(language: Language): Record<string, Texts> {
  const files = readdirSync(`locales/${language}`);
  return Object.fromEntries(files.map((file) => [file.replace('.json', ''), readTexts(language, file)]));
}

function openBoth(language: Language): { library: i18n; stand: light.LightI18n } {
  const options = {
    lng: language,
    resources: { [language]: readAll(language) },
    defaultNS: 'common',
    initAsync: false,
    interpolation: { escapeValue: false },
  };
  const library = createInstance();
  void library.init(options);
  const stand = light.createInstance();
  stand.init(options);
  for (const one of [library, stand]) addSentenceFormats(one.services.formatter);
  return { library, stand };
}

/** Every sentence with its path, `headline.behind_one` as `headline.behind`. */
function listSentences(texts: Texts, path: readonly string[] = []): { key: string; text: string }[] {
  return Object.entries(texts).flatMap(([name, text]) =>
    typeof text === 'string'
      ? [{ key: [...path, name].join('.').replace(/_(zero|one|many|other)$/, ''), text }]
      : listSentences(text, [...path, name]),
  );
}

/** Values for a sentence's placeholders, by the format that stands behind them. */
function valuesFor(text: string, count: number): Record<string, unknown> {
  const values = [...text.matchAll(/\{\{(.+?)\}\}/g)].map(([, inner = '']): [string, unknown] => {
    const [name = '', format = ''] = inner.split(',').map((part) => part.trim());
    return [name, format === 'date' ? '2026-12-01' : format === '' ? `<${name}>` : -1234.5678];
  });
  return { ...Object.fromEntries(values), count };
}

describe.each(languages)('the stand-in for the translation library, %s', (language) => {
  const { library, stand } = openBoth(language);

  it('says every sentence of the product as the library does', () => {
    const said = Object.entries(readAll(language)).flatMap(([namespace, texts]) =>
      listSentences(texts).flatMap(({ key, text }) =>
        [0, 1, 2, 17].map((count) => {
          const values = valuesFor(text, count);
          return {
            key,
            library: library.t(`${namespace}:${key}` as 'common:close', values),
            stand: stand.fixT([namespace])(key, values),
          };
        }),
      ),
    );
    expect(said.length).toBeGreaterThan(2000);
    expect(said.filter((one) => one.library !== one.stand)).toEqual([]);
  });

  it.each([
    ['a context', 'cautions:trial-weak-cv', { context: 'named', site: 'Elm', season: 2026, cv: 28 }],
    [
      'a context without a wording of its own',
      'cautions:trial-weak-cv',
      { context: 'none', count: 2, cv: 28 },
    ],
    [
      'a value that overrules a format',
      'cautions:best-of-many',
      { shrunken: 0.314, estimate: 0.5, unit: 'bu/ac', decimals: 0 },
    ],
    ['a missing value', 'verdicts:story.gap', { name: 'Birch' }],
    ['no such key', 'verdicts:no.such.key', {}],
  ] as const)('deals with %s alike', (_case, key, values) => {
    expect(stand.t(key, values)).toBe(library.t(key as 'common:close', values));
    expect(stand.exists(key)).toBe(library.exists(key));
  });
});

function Sample() {
  const { t, i18n } = useTranslation(['copy', 'verdicts']);
  return <p>{[i18n.language, t('question'), t('verdicts:cantSay'), t('cantSay')].join(' | ')}</p>;
}

it('gives components their namespaces in order', () => {
  const { library, stand } = openBoth('fr');
  const { container } = render(
    <I18nextProvider i18n={stand}>
      <Sample />
    </I18nextProvider>,
  );
  const expected = [
    'fr',
    library.t('copy:question'),
    library.t('verdicts:cantSay'),
    library.t('copy:cantSay'),
  ];
  expect(container.textContent).toBe(expected.join(' | '));
});
