import { useMemo } from 'react';
import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { MoneyBasis } from '#shared/money-basis.ts';
import type { BestOfList } from '#shared/question-kind.ts';
import { reckonCandidates } from '#shared/reckon-candidates.ts';
import type { CandidateResult, WeighUp } from '#shared/weigh-up.ts';
import { BestOfListAnswer } from '#src/components/best-of-list.tsx';
import { Button } from '#src/components/button.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { VerdictHeadline } from '#src/components/verdict-headline.tsx';
import { CopyCandidates } from './copy-candidates.tsx';
import { listSeeds, readOwnAssumptions, type OwnAssumptions } from './own-assumptions.ts';
import { forgetOwnNumbers, useOwnNumbers } from './own-numbers-fragment.ts';
import { OwnNumbersPanel } from './own-numbers-panel.tsx';

/** What the answer is made of, frozen. The page carries it a second time, as data for its script. */
export type CopyAnswerProps = {
  weighUp: Pick<WeighUp, 'currentVarietyName' | 'areaHectares' | 'assumptions'>;
  basis: MoneyBasis;
  candidates: readonly CandidateResult[];
  /** Of yield for the crop, t/ha; null where none is set. */
  practicalMargin: number | null;
  /** Which of the list can be the best, where that was the question. */
  best: BestOfList | null;
};

/**
 * The answer with its candidates, and the prices that the reader may try: the one part of the copy that its script takes
 * over. The frozen figures stand there until an own number is given, and again when it is taken back.
 */
export function CopyAnswer({ weighUp, basis, candidates, practicalMargin, best }: CopyAnswerProps) {
  const { assumptions: frozen, currentVarietyName: varietyName } = weighUp;
  const { currentVarietyId: varietyId } = basis;
  const numbers = useOwnNumbers();
  const seeds = listSeeds([{ varietyId, varietyName }, ...candidates], frozen);
  const own = readOwnAssumptions(frozen, seeds, numbers);
  const { assumptions } = own;
  const isOwn = assumptions !== frozen;
  const shown = isOwn ? reckonCandidates(candidates, basis, assumptions, practicalMargin) : candidates;
  const priced = useMemo(() => ({ ...weighUp, assumptions }), [weighUp, assumptions]);
  return (
    <div className="flex flex-col gap-7 print:contents">
      <div>
        {/* Always there, so that a screen reader hears it change. */}
        <div role="status">{isOwn && <OwnNumbersMark own={own} frozen={frozen} />}</div>
        <VerdictHeadline candidates={shown} currentName={varietyName} />
      </div>
      {best && <BestOfListAnswer best={best} currentId={varietyId} currentName={varietyName} />}
      <CopyCandidates weighUp={priced} candidates={shown} isOwn={isOwn} />
      <OwnNumbersPanel assumptions={frozen} seeds={seeds} own={numbers} />
    </div>
  );
}

type OwnNumbersMarkProps = { own: OwnAssumptions; frozen: MoneyAssumptions };

/** Says over the answer that its money is the reader's own reckoning, and which numbers it replaces. */
function OwnNumbersMark({ own, frozen: { currency, priceMiddle } }: OwnNumbersMarkProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const write = (value: number, per: 't' | 'ha') => format.pricePer(value, currency, per);
  return (
    <div className="mb-3 rounded-lg border-2 border-action bg-card px-4 py-2">
      {own.price !== null && (
        <p className="font-semibold">
          {t('own.markedPrice', { price: write(own.price, 't'), frozen: write(priceMiddle, 't') })}
        </p>
      )}
      {own.seeds.map(({ seed: { name, varietyName, frozen }, perHectare }) => (
        <p key={name} className="font-semibold">
          {frozen === null
            ? t('own.markedSeedOpen', { name: varietyName, amount: write(perHectare, 'ha') })
            : t('own.markedSeed', {
                name: varietyName,
                amount: write(perHectare, 'ha'),
                frozen: write(frozen, 'ha'),
              })}
        </p>
      ))}
      <p>{t('own.reckoned')}</p>
      <Button tone="quiet" className="-ml-2 print:hidden" onClick={forgetOwnNumbers}>
        {t('own.reset')}
      </Button>
    </div>
  );
}
