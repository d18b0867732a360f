import { createInstance, type i18n } from 'i18next';
import { addSentenceFormats } from '#shared/sentence-formats.ts';
import errors from '#locales/en/errors.json' with { type: 'json' };
import problems from '#locales/en/problems.json' with { type: 'json' };

/** The product's own sentences for a command's output, in English. */
export async function openSentences(): Promise<i18n> {
  const sentences = createInstance();
  await sentences.init({
    lng: 'en',
    resources: { en: { errors, problems } },
    interpolation: { escapeValue: false },
  });
  addSentenceFormats(sentences.services.formatter);
  return sentences;
}
