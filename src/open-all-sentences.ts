import { createInstance, type i18n, type ResourceLanguage } from 'i18next';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';

/** Opens sentences that are all there: nothing is fetched, and nothing of one reader reaches another. */
export function openAllSentences(language: Language, sentences: ResourceLanguage): i18n {
  const opened = createInstance();
  void opened.init({
    ...{ lng: language, supportedLngs: [...languages], fallbackLng: false },
    ...{ resources: { [language]: sentences }, defaultNS: 'common', initAsync: false },
    interpolation: { escapeValue: false },
  });
  addSentenceFormats(opened.services.formatter);
  return opened;
}
