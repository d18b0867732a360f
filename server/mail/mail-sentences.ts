import type { i18n } from 'i18next';
import type { Language } from '#shared/language.ts';
import enMail from '#locales/en/mail.json' with { type: 'json' };
import frMail from '#locales/fr/mail.json' with { type: 'json' };
import { openSentences } from '#server/open-sentences.ts';

const sentences = { en: { mail: enMail }, fr: { mail: frMail } };

/** The sentences of mail in one language. */
export const openMailSentences = (language: Language): i18n =>
  openSentences(language, sentences[language], 'mail');
