import type { Language } from '#shared/language.ts';
import type { ReaderUnits } from '#shared/reader-units.ts';
import type { CopyAnswerProps } from './copy-answer.tsx';
import type { CopySentences } from './open-copy-sentences.ts';

/** Where the page holds the answer, and the data of its script. */
export const answerId = 'answer';
export const dataId = 'copy-data';

/** What the script needs to take the answer over. */
export type CopyScriptData = {
  language: Language;
  units: ReaderUnits;
  sentences: CopySentences;
  answer: CopyAnswerProps;
};

/** Namespaces of the sentences in the answer. */
export const answerNamespaces = ['common', 'copy', 'drawings', 'verdicts'] as const;

/** JSON that can stand inside a script element: no text in it can end the element or begin a comment. */
export const writeScriptData = (data: CopyScriptData): string =>
  JSON.stringify(data).replaceAll('<', '\\u003c');
