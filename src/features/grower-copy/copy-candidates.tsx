import { memo, useDeferredValue, type ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { reachesBeyondRegion } from '#shared/evidence-reach.ts';
import { gapRowOf, scaleOfRows } from '#shared/gap-rows.ts';
import { sayPulledBackGap } from '#shared/pulled-back-gap.ts';
import type { Scale } from '#shared/gap-scale.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { MoneyVerdictMark, VerdictMark, verdictColours } from '#src/components/beam.tsx';
import { CandidateStory, IntervalSentences, type StoryProps } from '#src/components/candidate-story.tsx';
import { useGapSentence } from '#src/components/gap-strip.tsx';
import { GapAxis, GapLabel, GapTrack } from '#src/components/gap-track.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { usePaysIn, useSeasons } from '#src/components/use-seasons.ts';
import type { CopyAnswerProps } from './copy-answer.tsx';
import { CopyTrialLines } from './copy-trial-lines.tsx';

const unit = 't/ha';

/** On paper, where the browser's style sheets reach into what is folded. */
const hiddenWhereUnfolded = 'supports-[selector(::details-content)]:print:hidden';

type CopyCandidatesProps = {
  weighUp: CopyAnswerProps['weighUp'];
  candidates: readonly CandidateResult[];
  /** The money is reckoned with the reader's own price. */
  isOwn: boolean;
};

/** Every candidate with its beam, verdict and strip on one scale, and its intervals and worth in sentences. */
export function CopyCandidates({ weighUp, candidates, isOwn }: CopyCandidatesProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const scale = scaleOfRows(candidates.map(gapRowOf));
  const decimals = format.decimals(candidates.find(({ gap }) => gap)?.gap?.se ?? null, unit);
  const shown = candidates.find(({ gap, verdict }) => gap && verdict !== 'thin')?.gap;
  const level = (value: number) => format.percent(value * 100);
  const isBeyondRegion = candidates.some(reachesBeyondRegion);
  // What is folded away is told anew a moment after what is seen: a figure that is typed is answered the sooner.
  const told = useDeferredValue(candidates);
  const { assumptions } = useDeferredValue(weighUp);
  return (
    <section aria-label={t('candidates')} className="flex flex-col print:contents">
      <p className="text-sm text-faded print:-mb-9 print:min-h-9 print:w-46">
        {t('axis', { current: weighUp.currentVarietyName, unit: format.unit(unit) })}
      </p>
      <div className="print:mr-58 print:ml-50">
        <GapAxis scale={scale} zeroLabel={weighUp.currentVarietyName} />
      </div>
      {candidates.map((candidate, i) => (
        <CopyCandidate
          key={candidate.varietyId}
          candidate={candidate}
          weighUp={weighUp}
          scale={scale}
          decimals={decimals}
          isOwn={isOwn}
          inFull={
            <InFull
              candidate={told[i] ?? candidate}
              currentName={weighUp.currentVarietyName}
              money={assumptions}
              areaHectares={weighUp.areaHectares}
              unit={unit}
              decimals={decimals}
            />
          }
        />
      ))}
      {shown && (
        <p className="border-t-2 border-ink pt-2 text-sm text-faded">
          {shown.ownSeason
            ? t(isBeyondRegion ? 'keySites' : 'key', {
                regionLevel: level(shown.region.level),
                ownLevel: level(shown.ownSeason.level),
              })
            : t(isBeyondRegion ? 'keySitesWithoutOwn' : 'keyWithoutOwn', {
                regionLevel: level(shown.region.level),
              })}
        </p>
      )}
    </section>
  );
}

type CopyCandidateProps = Omit<CopyCandidatesProps, 'candidates'> & {
  candidate: CandidateResult;
  scale: Scale;
  decimals: number;
  /** The whole story, folded away. */
  inFull: ReactNode;
};

function CopyCandidate({ candidate, weighUp, scale, decimals, isOwn, inFull }: CopyCandidateProps) {
  const { t } = useTranslation(['verdicts', 'copy']);
  const format = useFormat();
  const { currency } = weighUp.assumptions;
  const row = gapRowOf(candidate);
  const sentence = useGapSentence(weighUp.currentVarietyName, unit, decimals)(row);
  const { money, verdict, siteYears } = candidate;
  const hasMoney = money !== null && verdict !== 'thin';
  const paysIn = usePaysIn();
  const pulledBack = sayPulledBackGap(candidate, unit, decimals, t, format);
  return (
    <article className="border-t-2 border-ink py-4 print:contents">
      <div className="print:grid print:break-inside-avoid print:grid-cols-[11.5rem_minmax(0,1fr)_13.5rem] print:items-center print:gap-x-4 print:border-t print:border-rule">
        <div className="flex flex-wrap items-baseline justify-between gap-x-4 print:contents">
          <h2 className="print:self-end">{candidate.varietyName}</h2>
          <p className="text-lg font-bold print:col-start-3 print:self-end print:text-right">
            {hasMoney
              ? format.moneyPer(money.returnPerHectare, currency, 'ha', { isSigned: true })
              : t('cantSay')}
            {hasMoney && isOwn && (
              <span className="block text-right text-sm font-semibold text-action">{t('copy:own.mark')}</span>
            )}
          </p>
        </div>
        <div className="flex flex-wrap gap-x-6 gap-y-1 print:contents">
          <VerdictMark verdict={verdict} className="print:col-start-1 print:row-start-2 print:text-sm" />
          {hasMoney && (
            <MoneyVerdictMark
              verdict={money.verdict}
              className="print:col-start-3 print:row-start-2 print:justify-end print:text-sm"
            />
          )}
        </div>
        <div className="relative py-6 print:col-start-2 print:row-span-3 print:row-start-1 print:pt-2.5 print:pb-0">
          {row.estimate !== null && (
            <GapLabel scale={scale} value={row.estimate} className="top-0.5 font-semibold">
              {format.gap(row.estimate, unit, decimals)}
            </GapLabel>
          )}
          <GapTrack
            scale={scale}
            colour={verdictColours[verdict]}
            estimate={row.estimate}
            region={row.region}
            ownSeason={row.ownSeason}
            breakEven={row.breakEven}
            isThin={verdict === 'thin'}
            sentence={sentence}
          />
          <GapLabel scale={scale} value={0} className="bottom-0.5 text-faded print:hidden">
            {weighUp.currentVarietyName}
          </GapLabel>
        </div>
        <div className="flex flex-col gap-1.5 print:contents">
          {/* On paper the headline and the whole story, which say this again, are on other sheets. */}
          <div className={`flex flex-col gap-1.5 print:col-span-3 ${hiddenWhereUnfolded}`}>
            {verdict === 'thin' && <p>{t('headline.thin', { names: candidate.varietyName, count: 1 })}</p>}
            {verdict !== 'thin' && (
              <IntervalSentences
                gap={candidate.gap}
                trials={candidate.trials}
                unit={unit}
                decimals={decimals}
              />
            )}
            <WorthLines candidate={candidate} weighUp={weighUp} decimals={decimals} />
          </div>
          <p className="text-sm text-faded print:col-start-1 print:row-start-3 print:self-start">
            {t('siteYears', { count: siteYears })}
          </p>
          {hasMoney && money.chancePays !== null && (
            <p className="hidden text-right text-sm print:col-start-3 print:row-start-3 print:block print:self-start">
              {paysIn(money.chancePays)}
              {pulledBack !== null && <span className="block">{pulledBack}</span>}
            </p>
          )}
        </div>
      </div>
      {inFull}
    </article>
  );
}

const InFull = memo(function InFull(story: StoryProps) {
  const { t } = useTranslation('copy');
  const { candidate, currentName, decimals } = story;
  return (
    <details className="mt-2 print:order-3 print:mt-0">
      <summary className="tap-target py-2.5 font-semibold text-action print:border-t-2 print:border-ink print:py-0.5 print:text-lg print:text-ink">
        {t('inFull', { name: candidate.varietyName })}
      </summary>
      <div className="mt-2 flex flex-col gap-5 border-l-2 border-rule pl-4 print:mt-0 print:gap-1.5 print:border-0 print:pl-0">
        <CandidateStory {...story} />
        <CopyTrialLines
          candidateName={candidate.varietyName}
          trials={candidate.trials}
          currentName={currentName}
          unit={unit}
          decimals={decimals}
        />
      </div>
    </details>
  );
});

type WorthLinesProps = Pick<CopyCandidateProps, 'candidate' | 'weighUp' | 'decimals'>;

/** From which gap it pays, how often, and what that is per hectare and on the farm. */
function WorthLines({ candidate, weighUp, decimals }: WorthLinesProps) {
  const { t } = useTranslation(['copy', 'verdicts']);
  const format = useFormat();
  const seasons = useSeasons();
  const { money, verdict } = candidate;
  if (verdict === 'thin') return <p>{t('cantSay')}</p>;
  if (money === null) return <p>{t('noSeedCost')}</p>;
  const { currency, priceMiddle } = weighUp.assumptions;
  const pulledBack = sayPulledBackGap(candidate, unit, decimals, t, format);
  return (
    <>
      {money.chancePays !== null && (
        <p>
          {t('paysFrom', {
            gap: format.gap(money.breakEvenGap, unit, decimals),
            seasons: seasons(money.chancePays),
          })}
        </p>
      )}
      <p>
        {t('worth', {
          price: format.pricePer(priceMiddle, currency, 't'),
          amount: format.moneyPer(money.returnPerHectare, currency, 'ha', { isSigned: true }),
          total: format.money(money.returnPerHectare * weighUp.areaHectares, currency, { isSigned: true }),
          area: format.area(weighUp.areaHectares),
        })}
        {pulledBack !== null && <span className="block">({pulledBack})</span>}
      </p>
    </>
  );
}
