import { createInstance, type i18n, type ResourceLanguage } from 'i18next';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';

/**
 * The sentences of a printed copy.
 * @param sentences those of the copy in that language, by namespace
 */
export function openPrintSentences(language: Language, sentences: ResourceLanguage): i18n {
  const opened = createInstance();
  void opened.init({
    lng: language,
    supportedLngs: [...languages],
    fallbackLng: false,
    resources: { [language]: sentences },
    defaultNS: 'print',
    // The sentences are there already, so nothing need be waited for.
    initAsync: false,
    interpolation: { escapeValue: false },
  });
  addSentenceFormats(opened.services.formatter);
  return opened;
}
