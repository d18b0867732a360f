import { readdirSync, readFileSync } from 'node:fs';
import i18next, { type TOptions } from 'i18next';
import type { Language } from '#shared/account.ts';

const folder = new URL('../../locales/', import.meta.url);

function readLanguage(language: Language): Record<string, Record<string, unknown>> {
  const files = readdirSync(new URL(`${language}/`, folder)).filter((name) => name.endsWith('.json'));
  return Object.fromEntries(
    files.map((name) => [
      name.replace('.json', ''),
      JSON.parse(readFileSync(new URL(`${language}/${name}`, folder), 'utf8')),
    ]),
  );
}

const sentences = i18next.createInstance();
await sentences.init({
  resources: { en: readLanguage('en'), fr: readLanguage('fr') },
  interpolation: { escapeValue: false },
});

/** What the product says in a language: browser tests find things by the words that a person reads. */
export function say(language: Language, key: string, values: TOptions = {}): string {
  const text = sentences.getFixedT(language)(key, values);
  if (typeof text !== 'string' || text === key.split(':').at(-1)) throw new Error(`no sentence for ${key}`);
  return text;
}
