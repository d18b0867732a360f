import type { i18n } from 'i18next';
import errors from '#locales/en/errors.json' with { type: 'json' };
import problems from '#locales/en/problems.json' with { type: 'json' };
import { openSentences } from '#server/open-sentences.ts';

/** The product's own sentences for a command's output, in English. */
export const openCommandSentences = (): i18n => openSentences('en', { errors, problems }, 'errors');
