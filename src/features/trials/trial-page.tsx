import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import type { Crop } from '#shared/catalogue.ts';
import type { TrialDetail } from '#shared/trial.ts';
import { AnalysisView } from '#src/components/analysis-view.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { ManagementList } from '#src/components/management-list.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useTrialWords } from '#src/components/trial-words.ts';
import { UrlTabs, useUrlTab } from '#src/components/url-tabs.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { VersionHistory } from '#src/components/version-history.tsx';
import { catalogueQuery, findCrop, findRegion, findTrait, type Catalogue } from '#src/catalogue-query.ts';
import { paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { readAnalysisChoice, TrialChoices } from './trial-choices.tsx';
import { trialAnalysisQuery, trialQuery } from './trial-queries.ts';

/** One published trial: what it can tell apart, how it lay, and who published it. */
export function TrialPage() {
  const { trialId = '' } = useParams();
  const trial = useQuery(trialQuery(trialId));
  const catalogue = useQuery(catalogueQuery);
  if (trial.isError) return <QueryErrorState query={trial} />;
  if (catalogue.isError) return <QueryErrorState query={catalogue} />;
  if (!trial.data || !catalogue.data) return <Skeleton lines={8} />;
  return <LoadedTrial trial={trial.data} catalogue={catalogue.data} />;
}

type LoadedTrialProps = { trial: TrialDetail; catalogue: Catalogue };

function LoadedTrial({ trial, catalogue }: LoadedTrialProps) {
  const { t } = useTranslation('trials');
  const tabs = [
    { id: 'reading', label: t('page.viewReading') },
    { id: 'analysis', label: t('page.viewAnalysis') },
    { id: 'history', label: t('page.viewHistory') },
  ];
  const tab = useUrlTab(tabs);
  const crop = findCrop(catalogue, trial.cropId);
  return (
    <>
      <TrialHeading trial={trial} catalogue={catalogue} />
      {trial.state === 'withdrawn' && (
        <p className="mb-5 rounded-lg border-l-4 border-stop bg-card px-5 py-3">{t('page.withdrawn')}</p>
      )}
      <UrlTabs label={t('page.view')} tabs={tabs} />
      <div className="pt-5">
        {tab === 'history' ? (
          <div className="flex flex-col gap-7">
            <section className="flex flex-col gap-3">
              <h2>{t('page.history')}</h2>
              <VersionHistory versions={trial.versions} />
            </section>
            <ManagementList trial={trial} />
          </div>
        ) : (
          crop && <TrialReading trial={trial} crop={crop} isAnalysis={tab === 'analysis'} />
        )}
      </div>
    </>
  );
}

function TrialHeading({ trial, catalogue }: LoadedTrialProps) {
  const { t } = useTranslation('trials');
  const format = useFormat();
  const words = useTrialWords();
  const crop = findCrop(catalogue, trial.cropId);
  const region = findRegion(catalogue, trial.regionId);
  const published = trial.versions.find((version) => version.number === trial.version);
  const state = published
    ? t(published.authorName === null ? 'page.publishedUnnamed' : 'page.published', {
        version: published.number,
        date: format.date(published.at),
        author: published.authorName,
      })
    : t('page.notPublished');
  return (
    <PageHeading
      title={t('page.title', { site: trial.siteName, season: trial.season })}
      above={
        <>
          <Link to={paths.trials}>{t('title')}</Link>
          {crop && ` · ${format.name(crop.name)}`}
          {region && ` · ${format.name(region.name)}`}
        </>
      }
      below={
        <>
          {trial.name} · {t('page.entries', { count: trial.entries })} ·{' '}
          {trial.kind === 'summary' ? t('kind.summary') : words.design(trial.design)}
          <br />
          {state}
        </>
      }
    />
  );
}

type TrialReadingProps = { trial: TrialDetail; crop: Crop; isAnalysis: boolean };

function TrialReading({ trial, crop, isAnalysis }: TrialReadingProps) {
  const { t } = useTranslation('trials');
  const format = useFormat();
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const cautionItems = useCautionItems();
  const choice = readAnalysisChoice(search, trial.traitSlugs, isAnalysis ? 'analysis' : 'reading');
  const analysis = useQuery(trialAnalysisQuery(trial.id, choice));
  const traits = crop.traits.filter((trait) => trial.traitSlugs.includes(trait.slug));
  const trait = findTrait(crop, analysis.data?.traitSlug ?? choice.trait);
  const choices = (
    <TrialChoices
      traits={traits}
      choice={choice}
      hasComparison={trial.kind === 'plots'}
      alpha={choice.alpha ?? analysis.data?.alpha ?? trial.alpha}
    />
  );
  if (analysis.isPending || analysis.isError || !trait) {
    return (
      <>
        {choices}
        {analysis.isError ? <QueryErrorState query={analysis} /> : <Skeleton lines={10} />}
      </>
    );
  }
  return (
    <AnalysisView
      analysis={analysis.data}
      traitName={format.name(trait.name)}
      unit={trait.unit}
      hasLetters={isAnalysis}
      {...(isAnalysis && {
        entry: search.get('entry'),
        onEntry: (entry: string | null) => patch({ entry }),
      })}
    >
      {choices}
      <CautionList title={t('page.cautions')} items={cautionItems(analysis.data.cautions)} />
    </AnalysisView>
  );
}
