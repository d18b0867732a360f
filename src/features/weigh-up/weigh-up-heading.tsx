import { useEffect, useRef } from 'react';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { Button } from '#src/components/button.tsx';
import { SectionLink } from '#src/components/folded-section.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { paths } from '#src/paths.ts';
import { readChoice, useUrlPatch } from '#src/url-state.ts';

/** How the answer is shown, as the address says it. */
const views = ['full', 'table'] as const;

/** The view that the address asks for: the whole page, or the one in large type. */
export function useWeighUpView(): (typeof views)[number] {
  const [search] = useSearchParams();
  return readChoice(search, 'view', views);
}

type WeighUpHeadingProps = { weighUp: WeighUp; result: WeighUpResult };

/** What was asked, for whom and on what it rests, with the ways to hand it over and to turn the tablet round. */
export function WeighUpHeading({ weighUp, result }: WeighUpHeadingProps) {
  const { t } = useTranslation(['weigh-up', 'verdicts', 'method']);
  const format = useFormat();
  const from = Math.min(...result.seasons);
  const to = Math.max(...result.seasons);
  const isWeighed = result.answer === 'weighed';
  const isTable = useWeighUpView() === 'table' && isWeighed;
  const figures = {
    trials: t('verdicts:trialCount', { count: result.trials.length }),
    sites: t('method:sites', { count: result.sites }),
    from,
    to,
    date: format.date(result.computedAt),
  };
  const restsOn = t(from === to ? 'weigh-up:page.belowOneSeason' : 'weigh-up:page.below', figures);
  const tickedOff = result.leftOut.filter(({ reason }) => reason === 'ticked-off').length;
  const below = isWeighed
    ? [restsOn, ...(tickedOff > 0 ? [t('weigh-up:page.tickedOff', { count: tickedOff })] : [])].join(' · ')
    : t('weigh-up:page.belowNoTrials', {
        from: weighUp.seasonFrom,
        to: weighUp.seasonTo,
        date: figures.date,
      });
  const title = t('weigh-up:page.title', {
    crop: format.name(weighUp.cropName),
    region: format.name(weighUp.regionName),
    current: weighUp.currentVarietyName,
  });
  // Turned round at the table, the grower's lines come first: what they rest on stands on the full page, and on paper.
  if (isTable) {
    const onPaper = <span className="hidden print:inline">{below}</span>;
    return <PageHeading title={title} below={onPaper} actions={<Steps />} />;
  }
  return (
    <PageHeading
      title={title}
      above={
        <>
          <span className="print:hidden">
            <Link to={paths.weighUps}>{t('weigh-up:page.back')}</Link>
            {' · '}
          </span>
          {t('weigh-up:page.above', {
            grower: weighUp.growerName,
            farm: weighUp.farmName,
            area: format.area(weighUp.areaHectares),
          })}
        </>
      }
      below={below}
      actions={isWeighed && <Steps />}
    />
  );
}

function Steps() {
  const { t } = useTranslation('weigh-up');
  const patch = useUrlPatch();
  const view = useWeighUpView();
  const turn = useRef<HTMLButtonElement>(null);
  const shown = useRef(view);
  // Whoever turns round by key goes on from the way back: what they stood on is gone.
  useEffect(() => {
    if (shown.current !== view) turn.current?.focus({ preventScroll: true });
    shown.current = view;
  }, [view]);
  if (view === 'table') {
    return (
      <Button ref={turn} onClick={() => patch({ view: null })}>
        {t('table.close')}
      </Button>
    );
  }
  return (
    <>
      <Button ref={turn} onClick={() => patch({ view: 'table' }, { isStep: true })}>
        {t('table.open')}
      </Button>
      <SectionLink
        id="hand-over"
        className="tap-target inline-flex items-center rounded-md border border-action bg-action px-4 py-2 font-semibold text-on-action no-underline hover:underline"
      >
        {t('page.handOver')}
      </SectionLink>
    </>
  );
}
