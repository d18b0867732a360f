import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions, MoneyResult } from '#shared/money.ts';
import { findTurningPoints, type TurningPoint } from '#shared/turning-points.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

type TurningPointsProps = {
  candidate: CandidateResult;
  result: MoneyResult;
  estimate: number;
  money: MoneyAssumptions;
  unit: string;
  decimals: number;
};

/** What, changed alone, would turn the answer. */
export function TurningPoints({ candidate, result, estimate, money, unit, decimals }: TurningPointsProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const { pays, points } = findTurningPoints(result, estimate);
  const say = ({ kind, side, value }: TurningPoint): string => {
    const isUnder = side === 'under';
    if (kind === 'price') {
      const price = format.moneyPer(value, money.currency, 't');
      return t(isUnder ? 'story.priceUnder' : 'story.priceOver', { price });
    }
    if (kind === 'gap') {
      const gap = format.gap(value, unit, decimals);
      return t(isUnder ? 'story.gapUnder' : 'story.gapOver', { gap });
    }
    const amount = format.moneyPer(value, money.currency, 'ha');
    return t(isUnder ? 'story.seedUnder' : 'story.seedOver', { amount, name: candidate.varietyName });
  };
  if (points.length === 0) return <p>{t('story.turnNone')}</p>;
  return (
    <>
      <p>{pays ? t('story.turnPays') : t('story.turnCosts')}</p>
      <ul className="list-disc pl-5">
        {points.map((point) => (
          <li key={point.kind}>{say(point)}</li>
        ))}
      </ul>
    </>
  );
}
