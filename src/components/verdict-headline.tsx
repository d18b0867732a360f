import { useTranslation } from 'react-i18next';
import { buildHeadline, sayHeadline, type HeadlinePart } from '#shared/headline.ts';
import { verdictId } from '#shared/page-exchange.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { useLanguage } from './use-language.ts';

type VerdictHeadlineProps = { candidates: readonly CandidateResult[]; currentName: string };

/** The answer in sentences, before any drawing or figure. */
export function VerdictHeadline({ candidates, currentName }: VerdictHeadlineProps) {
  const say = useHeadlineSentence(currentName);
  const parts = buildHeadline(candidates);
  return (
    // The browser notes when it is first painted: how long a reader waits for the answer is what counts.
    <p
      id={verdictId}
      className="max-w-prose text-lg md:text-xl print:text-base"
      {...{ elementtiming: 'verdict' }}
    >
      {parts.map((part) => {
        const key = `${part.key} ${part.names.join()}`;
        return part.isLead ? (
          <strong key={key} className="font-bold">
            {say(part)}{' '}
          </strong>
        ) : (
          <span key={key}>{say(part)} </span>
        );
      })}
    </p>
  );
}

/** Turns a part of the headline into its sentence. */
export function useHeadlineSentence(current: string): (part: HeadlinePart) => string {
  const { t } = useTranslation(['verdicts']);
  const language = useLanguage();
  return (part) => sayHeadline(part, current, language, t);
}
