import { useTranslation } from 'react-i18next';
import type { CandidateResult, WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { CautionList } from '#src/components/caution-list.tsx';
import { VerdictHeadline } from '#src/components/verdict-headline.tsx';
import { useCautionItems } from '#src/use-caution-items.ts';

export type AnswerProps = { weighUp: WeighUp; result: WeighUpResult };

/** The columns of a weighed answer, and the parts of the first one. */
export const answerLayout = 'grid items-start gap-8 lg:grid-cols-[minmax(0,1fr)_20rem] print:block';
export const mainColumn = 'flex min-w-0 flex-col gap-8 print:gap-2';

/** The head of the answer where it stands in the whole one, with the candidates as the server has just reckoned them. */
export function VerdictAlone({ weighUp, result }: AnswerProps) {
  return (
    <div className={answerLayout}>
      <div className={mainColumn}>
        <AnswerHead result={result} candidates={result.candidates} weighUp={weighUp} />
      </div>
    </div>
  );
}

type AnswerHeadProps = AnswerProps & { candidates: readonly CandidateResult[] };

/** What stops the whole evidence is read before the verdict, not after it. */
export function AnswerHead({ weighUp, result, candidates }: AnswerHeadProps) {
  const { t } = useTranslation('verdicts');
  const cautionItems = useCautionItems();
  const stops = result.cautions.filter(({ severity }) => severity === 'stop');
  return (
    <>
      <CautionList title={t('stopTitle')} items={cautionItems(stops)} />
      <VerdictHeadline candidates={candidates} currentName={weighUp.currentVarietyName} />
    </>
  );
}
