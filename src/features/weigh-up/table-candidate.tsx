import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import { sayPulledBackGap } from '#shared/pulled-back-gap.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictMark } from '#src/components/beam.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { usePaysIn } from '#src/components/use-seasons.ts';

const unit = 't/ha';

export type TableCandidateProps = {
  candidate: CandidateResult;
  currentName: string;
  /** As it is typed now, saved or not. */
  money: MoneyAssumptions;
};

/** A candidate in the grower's three lines: is it real, how much and how sure, what is it worth. */
export function TableCandidate(props: TableCandidateProps) {
  const { varietyName, verdict } = props.candidate;
  return (
    <>
      <h2 className="mb-2 text-3xl md:text-4xl">{varietyName}</h2>
      <ol className="flex flex-col gap-3 text-xl md:gap-6 md:text-2xl">
        <li>
          <VerdictMark verdict={verdict} className="text-2xl md:text-3xl [&_svg]:w-12" />
        </li>
        <li>
          <GapLine {...props} />
        </li>
        <li>
          <WorthLine {...props} />
        </li>
      </ol>
    </>
  );
}

/** The gap in words, and both intervals, each with its level and what it is of. */
function GapLine({ candidate: { gap, verdict, trials }, currentName: current }: TableCandidateProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  if (gap === null) return t('table.none', { current });
  const decimals = format.decimals(gap.se, unit);
  const written = format.gap(gap.estimate, unit, decimals);
  if (verdict === 'thin') return t('table.thin', { gap: written, current });
  // With trials of other regions among them, the interval is not one of the region's average.
  const isBeyondRegion = trials.some(({ inRegion }) => inRegion === false);
  return (
    <>
      <strong className="block font-bold">{t('table.gap', { gap: written, current })}</strong>
      <span className="block text-lg md:text-xl">
        {t(isBeyondRegion ? 'table.regionSites' : 'table.region', format.ends(gap.region, unit, decimals))}
      </span>
      {gap.ownSeason && (
        <span className="block text-lg md:text-xl">
          {t('table.ownSeason', format.ends(gap.ownSeason, unit, decimals))}
        </span>
      )}
    </>
  );
}

/** The return at the middle price, how often it pays, and on how many site-years all of this rests. */
function WorthLine({ candidate, money }: TableCandidateProps) {
  const { gap, money: result, verdict, siteYears } = candidate;
  const { t } = useTranslation(['weigh-up', 'verdicts']);
  const format = useFormat();
  const paysIn = usePaysIn();
  const hasMoney = result !== null && verdict !== 'thin';
  const rest = [
    hasMoney && result.chancePays !== null ? paysIn(result.chancePays) : null,
    sayPulledBackGap(candidate, unit, format.decimals(gap?.se ?? null, unit), t, format),
    t('verdicts:siteYears', { count: siteYears }),
  ].filter((part) => part !== null);
  return (
    <>
      <strong className="block font-bold">
        {hasMoney
          ? t('weigh-up:table.return', {
              amount: format.moneyPer(result.returnPerHectare, money.currency, 'ha', { isSigned: true }),
              price: format.pricePer(money.priceMiddle, money.currency, 't'),
            })
          : t('weigh-up:table.noReturn')}
      </strong>
      <span className="block text-lg md:text-xl">{rest.join(' · ')}</span>
    </>
  );
}
