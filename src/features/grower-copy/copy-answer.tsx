import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { MoneyBasis } from '#shared/money-basis.ts';
import type { BestOfList } from '#shared/question-kind.ts';
import { reckonCandidates } from '#shared/reckon-candidates.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import type { CandidateResult, WeighUp } from '#shared/weigh-up.ts';
import { BestOfListAnswer } from '#src/components/best-of-list.tsx';
import { Button } from '#src/components/button.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { VerdictHeadline } from '#src/components/verdict-headline.tsx';
import { CopyCandidates } from './copy-candidates.tsx';
import { useOwnPrice } from './own-price-fragment.ts';
import { OwnPricePanel } from './own-price-panel.tsx';

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

/** The frozen assumptions with one price in place of the range: what the grower asks is "at this price". */
export function withPrice(assumptions: MoneyAssumptions, price: number): MoneyAssumptions {
  return { ...assumptions, priceLow: price, priceMiddle: price, priceHigh: price };
}

/**
 * The answer with its candidates, and the price that the reader may try: the one part of the copy that its script takes
 * over. The frozen figures stand there until an own price is given, and again when it is taken back.
 */
export function CopyAnswer({ weighUp, basis, candidates, practicalMargin, best }: CopyAnswerProps) {
  const { assumptions, currentVarietyName } = weighUp;
  const own = useOwnPrice(assumptions.priceMiddle);
  const price = own.price ?? NaN;
  const isOwn = price !== assumptions.priceMiddle && price > findWorstCostPerTonne(assumptions);
  const used = isOwn ? withPrice(assumptions, price) : assumptions;
  const shown = isOwn ? reckonCandidates(candidates, basis, used, practicalMargin) : candidates;
  return (
    <div className="flex flex-col gap-7 print:contents">
      <div>
        {/* Always there, so that a screen reader hears it change. */}
        <div role="status">
          {isOwn && <OwnPriceMark price={price} assumptions={assumptions} onReset={own.reset} />}
        </div>
        <VerdictHeadline candidates={shown} currentName={currentVarietyName} />
      </div>
      {best && (
        <BestOfListAnswer best={best} currentId={basis.currentVarietyId} currentName={currentVarietyName} />
      )}
      <CopyCandidates weighUp={{ ...weighUp, assumptions: used }} candidates={shown} isOwn={isOwn} />
      <OwnPricePanel assumptions={assumptions} own={own} isOwn={isOwn} />
    </div>
  );
}

type OwnPriceMarkProps = { price: number; assumptions: MoneyAssumptions; onReset: () => void };

/** Says over the answer that its money is the reader's own reckoning, and which price it replaces. */
function OwnPriceMark({ price, assumptions: { currency, priceMiddle }, onReset }: OwnPriceMarkProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const write = (value: number) =>
    format.moneyPer(value, currency, 't', Number.isInteger(value) ? {} : { decimals: 2 });
  return (
    <div className="mb-3 rounded-lg border-2 border-action bg-card px-4 py-2">
      <p className="font-semibold">{t('own.marked', { price: write(price), frozen: write(priceMiddle) })}</p>
      <Button tone="quiet" className="-ml-2 print:hidden" onClick={onReset}>
        {t('own.reset')}
      </Button>
    </div>
  );
}
