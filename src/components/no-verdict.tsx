import { useTranslation } from 'react-i18next';
import {
  tellNoTrials,
  tellUnanswered,
  type NoVerdictWords,
  type UnansweredQuestion,
} from '#shared/no-verdict-sentences.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

/** A region without trials gets no verdict: said calmly, with why and what helps. */
export function NoVerdict(question: UnansweredQuestion) {
  const { t } = useTranslation(['verdicts']);
  return <NoVerdictCard {...tellNoTrials(question, t, useFormat())} />;
}

type UnansweredProps = UnansweredQuestion & {
  result: WeighUpResult;
  /** Whether the list of trials left out, with the way back into the figures, stands below. */
  canTakeBack: boolean;
};

/** Why a weigh-up has no answer: the region has no trials, or the advisor ticked off all it has. */
export function Unanswered({ result, canTakeBack, ...question }: UnansweredProps) {
  const { t } = useTranslation(['verdicts']);
  return <NoVerdictCard {...tellUnanswered(question, result.leftOut, canTakeBack, t, useFormat())} />;
}

function NoVerdictCard({ title, why, next }: NoVerdictWords) {
  return (
    <section className="max-w-prose rounded-lg border border-edge bg-card px-5 py-5">
      <h2 className="mb-2">{title}</h2>
      <p>{why}</p>
      {next !== null && <p className="mt-2">{next}</p>}
    </section>
  );
}
