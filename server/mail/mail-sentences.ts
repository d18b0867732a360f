import { createInstance, type i18n } from 'i18next';
import { languages, type Language } from '#shared/language.ts';
import { addSentenceFormats } from '#shared/sentence-formats.ts';
import enMail from '#locales/en/mail.json' with { type: 'json' };
import frMail from '#locales/fr/mail.json' with { type: 'json' };

/** The sentences of mail in one language, with figures and dates written as on the pages. */
export function openMailSentences(language: Language): i18n {
  const sentences = createInstance();
  void sentences.init({
    lng: language,
    supportedLngs: [...languages],
    fallbackLng: false,
    resources: { en: { mail: enMail }, fr: { mail: frMail } },
    defaultNS: 'mail',
    // The sentences are there already, so nothing need be waited for.
    initAsync: false,
    interpolation: { escapeValue: false },
  });
  addSentenceFormats(sentences.services.formatter);
  return sentences;
}
