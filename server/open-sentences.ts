import { createInstance, type i18n, type ResourceLanguage } from 'i18next';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';

/**
 * Sentences outside the pages, with figures and dates written as on them.
 * @param sentences of that language, by namespace; all of them are there, so nothing need be waited for
 * @param defaultNS where a key without a namespace is looked for
 */
export function openSentences(language: Language, sentences: ResourceLanguage, defaultNS: string): i18n {
  const opened = createInstance();
  void opened.init({
    lng: language,
    supportedLngs: [...languages],
    fallbackLng: false,
    resources: { [language]: sentences },
    defaultNS,
    initAsync: false,
    interpolation: { escapeValue: false },
  });
  addSentenceFormats(opened.services.formatter);
  return opened;
}
