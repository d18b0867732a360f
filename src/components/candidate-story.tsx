import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import { sayFrequency } from '#shared/natural-frequency.ts';
import type { Interval } from '#shared/verdict.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { TurningPoints } from './turning-points.tsx';
import { useFormat } from './use-format.ts';
import { useSeasons } from './use-seasons.ts';
import { UsualYieldSentences } from './usual-yield-sentences.tsx';

export type StoryProps = {
  candidate: CandidateResult;
  currentName: string;
  money: MoneyAssumptions;
  areaHectares: number;
  unit: string;
  decimals: number;
};

/** A candidate told in sentences with their numbers: evidence, luck, worth, and what would turn the answer. */
export function CandidateStory(props: StoryProps) {
  const { t } = useTranslation('verdicts');
  const { candidate } = props;
  return (
    <div className="flex max-w-prose flex-col gap-4">
      <Part title={t('story.trials')}>
        <TrialSentences {...props} />
      </Part>
      {candidate.gap && candidate.verdict !== 'thin' && (
        <Part title={t('story.luck')}>
          <p>
            <LuckSentence p={candidate.gap.p} />
          </p>
          <Settle siteYears={candidate.siteYearsToSettle} />
        </Part>
      )}
      <Part title={t('story.worth')}>
        <WorthSentences {...props} />
      </Part>
      {candidate.money && candidate.moneyGap && candidate.verdict !== 'thin' && (
        <Part title={t('story.turn')}>
          <TurningPoints {...props} result={candidate.money} estimate={candidate.moneyGap.estimate} />
        </Part>
      )}
    </div>
  );
}

function Part({ title, children }: { title: string; children: ReactNode }) {
  return (
    <section className="flex flex-col gap-1">
      <h3>{title}</h3>
      {children}
    </section>
  );
}

function TrialSentences({ candidate, currentName: current, unit, decimals }: StoryProps) {
  const { t } = useTranslation('verdicts');
  const { gap, varietyName: name } = candidate;
  const format = useFormat();
  const trials = t('trialCount', { count: candidate.siteYears });
  if (gap === null) return <p>{t('story.noGap', { name, current })}</p>;
  const estimate = format.gap(gap.estimate, unit, decimals);
  if (candidate.verdict === 'thin') return <p>{t('story.thinGap', { gap: estimate, current, trials })}</p>;
  return (
    <>
      <p>
        {t('story.gap', {
          name,
          current,
          gap: estimate,
          trials,
          shared: format.number(candidate.sharedSiteYears),
        })}
      </p>
      <IntervalSentences candidate={candidate} unit={unit} decimals={decimals} />
      <UsualYieldSentences candidate={candidate} unit={unit} decimals={decimals} />
    </>
  );
}

type IntervalSentencesProps = {
  candidate: Pick<CandidateResult, 'gap' | 'trials'>;
  unit: string;
  decimals: number;
};

/** Both intervals in words, each with its level and what it is an interval of. */
export function IntervalSentences({ candidate, unit, decimals }: IntervalSentencesProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const { gap, trials } = candidate;
  if (gap === null) return null;
  // With trials of other regions among them, the interval is not one of the region's average.
  const isBeyondRegion = trials.some(({ inRegion }) => inRegion === false);
  const ends = (interval: Interval) => format.ends(interval, unit, decimals);
  return (
    <>
      <p>{t(isBeyondRegion ? 'story.regionSites' : 'story.region', ends(gap.region))}</p>
      {gap.ownSeason && <p>{t('story.ownSeason', ends(gap.ownSeason))}</p>}
    </>
  );
}

function LuckSentence({ p }: { p: number }) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const { key, count } = sayFrequency(p);
  const number = format.number(count);
  if (key === 'fewer') return t('story.luckFewer', { number });
  return key === 'oneIn' ? t('story.luckOneIn', { number }) : t('story.luckOfHundred', { number });
}

/** Beyond this many further site-years the server says only that there would be more. */
const mostSiteYears = 40;

function Settle({ siteYears }: { siteYears: number | null }) {
  const { t } = useTranslation('verdicts');
  if (siteYears === null) return null;
  return <p>{siteYears > mostSiteYears ? t('story.settleFar') : t('story.settle', { count: siteYears })}</p>;
}

/** Says on which gap the return is reckoned, where that is not the one drawn. */
function ShrunkenSentence({ candidate: { gap, moneyGap, verdict }, unit, decimals }: StoryProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  if (gap === null || moneyGap === null || verdict === 'thin') return null;
  const reckoned = format.gap(moneyGap.estimate, unit, decimals);
  if (reckoned === format.gap(gap.estimate, unit, decimals)) return null;
  return <p>{t('story.shrunken', { gap: reckoned })}</p>;
}

function WorthSentences(props: StoryProps) {
  const { candidate, currentName: current, money, areaHectares } = props;
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const seasons = useSeasons();
  const { money: result, varietyName: name } = candidate;
  if (result === null) return <p>{t('story.noMoney')}</p>;
  const signed = (amount: number) => format.money(amount, money.currency, { isSigned: true });
  const extra = result.extraCostPerHectare;
  const extraWords = Math.abs(extra) < 0.5 ? 'extraSame' : extra > 0 ? 'extraMore' : 'extraLess';
  return (
    <>
      <p>
        {t(`story.${extraWords}`, { name, current, amount: format.money(Math.abs(extra), money.currency) })}
      </p>
      <ShrunkenSentence {...props} />
      {candidate.verdict !== 'thin' && (
        <p>
          {t('story.return', {
            price: format.moneyPer(money.priceMiddle, money.currency, 't'),
            amount: signed(result.returnPerHectare),
            low: signed(result.returnAtLowPrice),
            high: signed(result.returnAtHighPrice),
            total: signed(result.returnPerHectare * areaHectares),
            area: format.area(areaHectares),
          })}
        </p>
      )}
      <p>
        {result.chancePays === null || candidate.verdict === 'thin'
          ? t('story.noChance')
          : t('story.chance', { seasons: seasons(result.chancePays) })}
      </p>
    </>
  );
}
