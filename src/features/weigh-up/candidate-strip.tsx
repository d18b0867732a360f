import { memo } from 'react';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import { gapRowOf } from '#shared/gap-rows.ts';
import { sayPulledBackGap } from '#shared/pulled-back-gap.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { CandidateStory, type StoryProps } from '#src/components/candidate-story.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { GapStrip, type GapStripRow } from '#src/components/gap-strip.tsx';
import { SiteLines } from '#src/components/site-lines.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { usePaysIn } from '#src/components/use-seasons.ts';
import { fillPath, paths } from '#src/paths.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { usePrinting } from '#src/use-printing.ts';

/** Unit of yield gaps. */
const unit = 't/ha';

type CandidateStripProps = Pick<StoryProps, 'currentName' | 'money' | 'areaHectares'> & {
  candidates: readonly CandidateResult[];
};

/** One row per candidate on one scale; a row opens to its story, and the address remembers which. */
export function CandidateStrip({ candidates, currentName, money, areaHectares }: CandidateStripProps) {
  const { t } = useTranslation('verdicts');
  const [search] = useSearchParams();
  const openId = search.get('open');
  const patch = useUrlPatch();
  const isPrinting = usePrinting();
  const decimals = useGapDecimals(candidates);
  const rows = candidates.map((candidate): GapStripRow => {
    const isOpen = candidate.varietyId === openId;
    const story = { candidate, currentName, money, areaHectares, unit, decimals };
    return {
      id: candidate.varietyId,
      ...gapRowOf(candidate),
      head: <RowToggle id={candidate.varietyId} name={candidate.varietyName} isOpen={isOpen} patch={patch} />,
      aside: <RowAside candidate={candidate} currency={money.currency} decimals={decimals} />,
      ...(isOpen && !isPrinting && { below: <OpenRow {...story} /> }),
    };
  });
  return (
    <GapStrip
      title={t('gapTitle', { current: currentName })}
      rows={rows}
      currentName={currentName}
      unit={unit}
      decimals={decimals}
    />
  );
}

/** Decimals of every gap of a list, by the first that has one. */
function useGapDecimals(candidates: readonly CandidateResult[]): number {
  const format = useFormat();
  return format.decimals(candidates.find(({ gap }) => gap)?.gap?.se ?? null, unit);
}

/** On paper the list stays whole, and the story of the row that is open has a page of its own. */
export function StoryOnPaper({ candidates, ...ground }: CandidateStripProps) {
  const { t } = useTranslation('weigh-up');
  const [search] = useSearchParams();
  const isPrinting = usePrinting();
  const decimals = useGapDecimals(candidates);
  const candidate = candidates.find(({ varietyId }) => varietyId === search.get('open'));
  if (!isPrinting || candidate === undefined) return null;
  return (
    <section className="break-before-page print:order-2">
      <h2>{t('page.story', { name: candidate.varietyName, current: ground.currentName })}</h2>
      <OpenRow candidate={candidate} {...ground} unit={unit} decimals={decimals} />
    </section>
  );
}

type RowToggleProps = { id: string; name: string; isOpen: boolean; patch: ReturnType<typeof useUrlPatch> };

const RowToggle = memo(function RowToggle({ id, name, isOpen, patch }: RowToggleProps) {
  return (
    <button
      type="button"
      aria-expanded={isOpen}
      onClick={() => patch({ open: isOpen ? null : id }, { isStep: true })}
      className="tap-target -ml-1 flex items-center gap-2 px-1 text-left font-bold hover:underline"
    >
      {name}
      <span aria-hidden="true" className="text-sm text-action print:hidden">
        {isOpen ? '▲' : '▼'}
      </span>
    </button>
  );
});

type RowAsideProps = { candidate: CandidateResult; currency: string; decimals: number };

function RowAside({ candidate, currency, decimals }: RowAsideProps) {
  const { t } = useTranslation(['verdicts']);
  const format = useFormat();
  const paysIn = usePaysIn();
  const { money, verdict, siteYears, cautions } = candidate;
  const hasMoney = money !== null && verdict !== 'thin';
  const pulledBack = sayPulledBackGap(candidate, unit, decimals, t, format);
  return (
    <>
      <span className="block text-lg font-bold whitespace-nowrap">
        {hasMoney
          ? format.moneyPer(money.returnPerHectare, currency, 'ha', { isSigned: true })
          : t('cantSay')}
      </span>
      {hasMoney && money.chancePays !== null && (
        <span className="block text-sm">{paysIn(money.chancePays)}</span>
      )}
      {pulledBack !== null && <span className="block text-sm">{pulledBack}</span>}
      <span className="block text-sm text-faded">{t('siteYears', { count: siteYears })}</span>
      {cautions.length > 0 && (
        <span className="block text-sm text-break-even">{t('cautionCount', { count: cautions.length })}</span>
      )}
    </>
  );
}

/** The row's story, its cautions and a line per trial. */
function OpenRow(story: StoryProps) {
  const { candidate, currentName, decimals } = story;
  return (
    <div className="mt-2 flex flex-col gap-5 border-l-4 border-rule pl-4 print:gap-3 print:border-0 print:pl-0">
      <CandidateStory {...story} />
      <RowEvidence
        name={candidate.varietyName}
        cautions={candidate.cautions}
        trials={candidate.trials}
        currentName={currentName}
        decimals={decimals}
      />
    </div>
  );
}

type RowEvidenceProps = Pick<CandidateResult, 'cautions' | 'trials'> & {
  name: string;
  currentName: string;
  decimals: number;
};

/** No price bears on cautions and trials: they are not drawn anew for one that is typed. */
const RowEvidence = memo(function RowEvidence(props: RowEvidenceProps) {
  const { name, cautions, trials, currentName, decimals } = props;
  const { t } = useTranslation('verdicts');
  const cautionItems = useCautionItems();
  return (
    <>
      <CautionList title={t('story.cautions', { name })} items={cautionItems(cautions)} headingLevel={3} />
      {trials.length === 0 ? (
        <p>{t('story.noShared')}</p>
      ) : (
        <SiteLines
          candidateName={name}
          currentName={currentName}
          trials={trials}
          unit={unit}
          decimals={decimals}
          linkTrial={({ trialId }, words) => <Link to={fillPath(paths.trial, { trialId })}>{words}</Link>}
        />
      )}
    </>
  );
});
