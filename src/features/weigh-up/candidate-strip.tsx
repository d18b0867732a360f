import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import { gapRowOf } from '#shared/gap-rows.ts';
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
  const format = useFormat();
  const decimals = format.decimals(candidates.find(({ gap }) => gap)?.gap?.se ?? null, unit);
  const rows = candidates.map((candidate): GapStripRow => {
    const isOpen = candidate.varietyId === openId;
    const story = { candidate, currentName, money, areaHectares, unit, decimals };
    return {
      id: candidate.varietyId,
      ...gapRowOf(candidate),
      head: <RowToggle candidate={candidate} isOpen={isOpen} />,
      aside: <RowAside candidate={candidate} currency={money.currency} />,
      ...(isOpen && { below: <OpenRow {...story} /> }),
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

function RowToggle({ candidate, isOpen }: { candidate: CandidateResult; isOpen: boolean }) {
  const patch = useUrlPatch();
  return (
    <button
      type="button"
      aria-expanded={isOpen}
      onClick={() => patch({ open: isOpen ? null : candidate.varietyId }, { isStep: true })}
      className="tap-target -ml-1 flex items-center gap-2 px-1 text-left font-bold hover:underline"
    >
      {candidate.varietyName}
      <span aria-hidden="true" className="text-sm text-action">
        {isOpen ? '▲' : '▼'}
      </span>
    </button>
  );
}

function RowAside({ candidate, currency }: { candidate: CandidateResult; currency: string }) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const paysIn = usePaysIn();
  const { money, verdict, siteYears, cautions } = candidate;
  const hasMoney = money !== null && verdict !== 'thin';
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
      <span className="block text-sm text-faded">{t('siteYears', { count: siteYears })}</span>
      {cautions.length > 0 && (
        <span className="block text-sm text-break-even">{t('cautionCount', { count: cautions.length })}</span>
      )}
    </>
  );
}

/** The row's story, its cautions and a line per trial. */
function OpenRow(story: StoryProps) {
  const { t } = useTranslation('verdicts');
  const cautionItems = useCautionItems();
  const { candidate, currentName, decimals } = story;
  return (
    <div className="mt-2 flex flex-col gap-5 border-l-4 border-rule pl-4">
      <CandidateStory {...story} />
      <CautionList
        title={t('story.cautions', { name: candidate.varietyName })}
        items={cautionItems(candidate.cautions)}
        headingLevel={3}
      />
      {candidate.trials.length === 0 ? (
        <p>{t('story.noShared')}</p>
      ) : (
        <SiteLines
          candidateName={candidate.varietyName}
          currentName={currentName}
          trials={candidate.trials}
          unit={unit}
          decimals={decimals}
          linkTrial={({ trialId }, words) => <Link to={fillPath(paths.trial, { trialId })}>{words}</Link>}
        />
      )}
    </div>
  );
}
