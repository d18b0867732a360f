import type { Language } from '#shared/language.ts';
import type { ReaderUnits } from '#shared/reader-units.ts';
import type { CopyAnswerProps } from './copy-answer.tsx';
import type { CopySentences } from './copy-page-inputs.ts';

/** What the script needs to take the answer over; it asks for it, so that the page itself is half as long. */
export type CopyScriptData = {
  language: Language;
  units: ReaderUnits;
  sentences: CopySentences;
  answer: CopyAnswerProps;
};

/** Namespaces of the sentences in the answer. */
export const answerNamespaces = ['common', 'copy', 'drawings', 'verdicts'] as const;
