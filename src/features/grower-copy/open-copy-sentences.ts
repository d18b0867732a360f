import { createInstance, type i18n, type ResourceLanguage } from 'i18next';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';

/** The sentences of a copy in one language, by namespace. */
export type CopySentences = ResourceLanguage;

/** Opens sentences that are all there: nothing is fetched, and nothing of one reader reaches another. */
export function openCopySentences(language: Language, sentences: CopySentences): i18n {
  const opened = createInstance();
  void opened.init({
    lng: language,
    supportedLngs: [...languages],
    fallbackLng: false,
    resources: { [language]: sentences },
    defaultNS: 'common',
    initAsync: false,
    interpolation: { escapeValue: false },
  });
  addSentenceFormats(opened.services.formatter);
  return opened;
}
