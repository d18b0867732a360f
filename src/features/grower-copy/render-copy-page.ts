import { createElement, type ReactNode } from 'react';
import { renderToStaticMarkup, renderToString } from 'react-dom/server';
import { I18nextProvider } from 'react-i18next';
import type { OpenedCopy } from '#shared/grower-copy.ts';
import type { Language } from '#shared/language.ts';
import { readMoneyBasis } from '#shared/money-basis.ts';
import { zoneOfCopy } from '#shared/zone-of-copy.ts';
import { readerUnitsOfCopy } from '#shared/reader-units-of-copy.ts';
import type { YieldUnit } from '#shared/units.ts';
import { ReaderZoneProvider } from '#src/components/reader-zone-context.tsx';
import { ReaderUnitsProvider } from '#src/components/reader-units-context.tsx';
import { openAllSentences } from '#src/open-all-sentences.ts';
import { CopyAnswer, type CopyAnswerProps } from './copy-answer.tsx';
import type { CopyFailure, CopyPageFiles, CopySentences } from './copy-page-inputs.ts';
import { CopyPage, FailedCopyPage } from './copy-page.tsx';
import { answerNamespaces, type CopyScriptData } from './copy-script-data.ts';

// The front door for the server. Without JSX: the compiler takes types over from another project's .ts files alone.

export type { CopyFailure, CopyPageFiles, CopySentences } from './copy-page-inputs.ts';

type SpokenOptions = { language: Language; sentences: CopySentences };
type PageOptions = SpokenOptions & { files: CopyPageFiles };
type WithUnit = { yieldUnit: YieldUnit };
/** The whole address of the copy: printed, it leads back to the page. */
type WithLink = { link: string };

/** The page of a copy as HTML. */
export function renderCopyPage(
  copy: OpenedCopy,
  { language, sentences, files, yieldUnit, link }: PageOptions & WithUnit & WithLink,
): string {
  const units = readerUnitsOfCopy(copy.snapshot, yieldUnit);
  const inLanguage = (part: ReactNode) =>
    createElement(
      I18nextProvider,
      { i18n: openAllSentences(language, sentences) },
      createElement(ReaderZoneProvider, {
        timeZone: zoneOfCopy(copy.snapshot),
        children: createElement(ReaderUnitsProvider, { units, children: part }),
      }),
    );
  const answer = takeAnswer(copy);
  // A root of its own, so that the script finds in it what it would have rendered itself.
  const answerHtml = answer === null ? null : renderToString(inLanguage(createElement(CopyAnswer, answer)));
  return writeDocument(inLanguage(createElement(CopyPage, { copy, link, files, answerHtml })));
}

/** What the script of a copy's page asks for; null where it has nothing to do. */
export function takeCopyScriptData(
  copy: OpenedCopy,
  { language, sentences, yieldUnit }: SpokenOptions & WithUnit,
): CopyScriptData | null {
  const answer = takeAnswer(copy);
  if (answer === null) return null;
  const said = Object.fromEntries(answerNamespaces.map((name) => [name, sentences[name] ?? {}]));
  return { language, units: readerUnitsOfCopy(copy.snapshot, yieldUnit), sentences: said, answer };
}

/** The page for a link that leads to no copy, or for a moment at which none can be read. */
export function renderFailedCopyPage(
  failure: CopyFailure,
  { language, sentences, files }: PageOptions,
): string {
  const page = createElement(FailedCopyPage, { failure, files });
  return writeDocument(createElement(I18nextProvider, { i18n: openAllSentences(language, sentences) }, page));
}

const writeDocument = (page: ReactNode): string => `<!doctype html>${renderToStaticMarkup(page)}`;

/** Of the snapshot what the answer shows, null without trials; cautions are told by the page itself. */
function takeAnswer({ snapshot: { weighUp, result, traits } }: OpenedCopy): CopyAnswerProps | null {
  if (result.answer === 'no-trials') return null;
  const { currentVarietyName, areaHectares, assumptions } = weighUp;
  return {
    weighUp: { currentVarietyName, areaHectares, assumptions },
    basis: readMoneyBasis(weighUp, result),
    candidates: result.candidates.map((candidate) => ({ ...candidate, cautions: [] })),
    best: result.best ?? null,
    practicalMargin: traits.find(({ slug }) => slug === 'yield')?.practicalMargin ?? null,
  };
}
