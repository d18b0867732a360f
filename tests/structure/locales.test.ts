import { readdirSync, readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { describe, expect, test } from 'vitest';

const folder = fileURLToPath(new URL('../../locales/', import.meta.url));
const files = readdirSync(`${folder}/en`).sort();

/** One sentence by its key, `a.b.c`. */
function flatten(value: unknown, path: readonly string[] = []): [string, string][] {
  if (typeof value === 'string') return [[path.join('.'), value]];
  if (typeof value !== 'object' || value === null) throw new Error(`${path.join('.')} is no text`);
  return Object.entries(value).flatMap(([key, inner]) => flatten(inner, [...path, key]));
}

function read(language: string, file: string): Map<string, string> {
  return new Map(flatten(JSON.parse(readFileSync(`${folder}/${language}/${file}`, 'utf8'))));
}

/**
 * Plural forms differ by language, so keys are compared without them, and each language must have the forms that its
 * own rules ask for. Nothing here is counted in millions, for which French has a form of its own.
 */
const pluralSuffix = /_(zero|one|two|few|many|other)$/;
const withoutPlural = (key: string) => key.replace(pluralSuffix, '');
const placeholders = (text: string) =>
  [
    ...new Set(
      [...text.matchAll(/\{\{\s*-?\s*([\w.]+)/g), ...text.matchAll(/<\/?(\w+)>/g)].map((match) => match[1]),
    ),
  ].sort();

test('both languages have the same files', () => {
  expect(readdirSync(`${folder}/fr`).sort()).toEqual(files);
});

describe.each(files)('%s', (file) => {
  const english = read('en', file);
  const french = read('fr', file);

  test('has the same keys in both languages', () => {
    const keysOf = (texts: Map<string, string>) => [...new Set([...texts.keys()].map(withoutPlural))].sort();
    expect(keysOf(french)).toEqual(keysOf(english));
  });

  test.each([
    ['en', english],
    ['fr', french],
  ] as const)('has every plural form of %s', (language, texts) => {
    const rules = new Intl.PluralRules(language);
    const forms = [...new Set(Array.from({ length: 1000 }, (_, count) => rules.select(count)))];
    const counted = [...texts.keys()].filter((key) => pluralSuffix.test(key)).map(withoutPlural);
    const missing = [...new Set(counted)].flatMap((key) =>
      forms.filter((form) => !texts.has(`${key}_${form}`)).map((form) => `${key}_${form}`),
    );
    expect(missing).toEqual([]);
  });

  test('has the same placeholders in both languages', () => {
    const differing = [...english].filter(([key, text]) => {
      const other = french.get(key);
      return other !== undefined && placeholders(text).join() !== placeholders(other).join();
    });
    expect(differing.map(([key]) => key)).toEqual([]);
  });

  test('breaks no line of French before its high punctuation', () => {
    const loose = [...french].filter(([, text]) => /[^:] [;:!?%»]|« /.test(text));
    expect(loose).toEqual([]);
  });

  test('ends no line between a statistic and its figure', () => {
    const loose = [...english, ...french].filter(([, text]) => /(?<![\p{L}\d])[pFWI] \{\{/u.test(text));
    expect(loose).toEqual([]);
  });

  test('has no empty text', () => {
    const empty = [...english, ...french].filter(([, text]) => text.trim() === '');
    expect(empty).toEqual([]);
  });
});
