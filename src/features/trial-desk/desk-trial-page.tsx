import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import type { Crop } from '#shared/catalogue.ts';
import type { TrialDetail } from '#shared/trial.ts';
import { catalogueQuery, findCrop, findTrait } from '#src/catalogue-query.ts';
import { AnalysisView } from '#src/components/analysis-view.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { Field } from '#src/components/field.tsx';
import { ManagementList } from '#src/components/management-list.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Select } from '#src/components/select.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { nameTrait } from '#shared/trait-sentences.ts';
import { useTrialWords } from '#src/components/trial-words.ts';
import { UrlTabs, useUrlTab } from '#src/components/url-tabs.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { VersionHistory } from '#src/components/version-history.tsx';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { deskAnalysisQuery, deskTrialQuery } from './desk-queries.ts';
import { PlotDesk } from './plot-desk.tsx';
import { PublishSteps } from './publish-steps.tsx';

/** A trial on the desk: the working copy with its analysis, its plots and its history. */
export function DeskTrialPage() {
  const { trialId = '' } = useParams();
  const trial = useQuery(deskTrialQuery(trialId));
  const catalogue = useQuery(catalogueQuery);
  if (trial.isError) return <QueryErrorState query={trial} />;
  if (catalogue.isError) return <QueryErrorState query={catalogue} />;
  if (!trial.data || !catalogue.data) return <Skeleton lines={8} />;
  const crop = findCrop(catalogue.data, trial.data.cropId);
  return (
    <>
      <DeskHeading trial={trial.data} crop={crop} />
      {crop && <DeskParts trial={trial.data} crop={crop} />}
    </>
  );
}

function DeskHeading({ trial, crop }: { trial: TrialDetail; crop: Crop | undefined }) {
  const { t } = useTranslation(['desk', 'trials']);
  const format = useFormat();
  const words = useTrialWords();
  return (
    <>
      <PageHeading
        title={t('trials:page.title', { site: trial.siteName, season: trial.season })}
        above={
          <>
            <Link to={paths.trialDesk}>{t('desk:trial.above')}</Link>
            {crop && ` · ${format.name(crop.name)}`}
          </>
        }
        below={
          <>
            {trial.name} · {t('trials:page.entries', { count: trial.entries })} ·{' '}
            {trial.kind === 'summary' ? t('trials:kind.summary') : words.design(trial.design)} ·{' '}
            <strong>{words.state(trial.state)}</strong>
          </>
        }
        actions={<PublishSteps trial={trial} />}
      />
      <p className="mb-4 max-w-prose text-sm text-faded">
        {trial.version === null ? (
          t('desk:trial.neverPublished')
        ) : (
          <>
            {t('desk:trial.draftNote')} {t('desk:trial.behind', { version: trial.version })}{' '}
            <Link to={fillPath(paths.trial, { trialId: trial.id })}>{t('desk:trial.readerPage')}</Link>
          </>
        )}
      </p>
    </>
  );
}

function DeskParts({ trial, crop }: { trial: TrialDetail; crop: Crop }) {
  const { t } = useTranslation(['desk', 'trials']);
  const tabs = [
    { id: 'analysis', label: t('desk:trial.tabAnalysis') },
    { id: 'plots', label: t('desk:trial.tabPlots') },
    { id: 'history', label: t('desk:trial.tabHistory') },
  ];
  const tab = useUrlTab(tabs);
  return (
    <>
      <UrlTabs label={t('desk:trial.tabs')} tabs={tabs} />
      <div className="pt-5">
        {tab === 'history' ? (
          <div className="flex flex-col gap-7">
            <section className="flex flex-col gap-3">
              <h2>{t('trials:page.history')}</h2>
              <VersionHistory versions={trial.versions} />
            </section>
            <ManagementList trial={trial} />
          </div>
        ) : (
          <WorkingCopy trial={trial} crop={crop} hasPlots={tab === 'plots'} />
        )}
      </div>
    </>
  );
}

type WorkingCopyProps = { trial: TrialDetail; crop: Crop; hasPlots: boolean };

function WorkingCopy({ trial, crop, hasPlots }: WorkingCopyProps) {
  const { t } = useTranslation('desk');
  const language = useLanguage();
  const format = useFormat();
  const cautionItems = useCautionItems();
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const asked = search.get('trait') ?? 'yield';
  const slug = trial.traitSlugs.includes(asked) ? asked : (trial.traitSlugs[0] ?? 'yield');
  const analysis = useQuery(deskAnalysisQuery(trial.id, slug));
  const traits = crop.traits.filter((trait) => trial.traitSlugs.includes(trait.slug));
  const trait = findTrait(crop, analysis.data?.traitSlug ?? slug);
  return (
    <div className="flex flex-col gap-6">
      <Field label={t('trial.trait')} className="max-w-xs">
        <Select
          value={slug}
          onChange={(event) => patch({ trait: event.target.value })}
          options={traits.map((one) => ({ value: one.slug, label: nameTrait(one, language) }))}
        />
      </Field>
      {analysis.isPending && <Skeleton lines={10} />}
      {analysis.isError && <QueryErrorState query={analysis} />}
      {analysis.data && trait && hasPlots && (
        <PlotDesk trial={trial} analysis={analysis.data} unit={trait.unit} />
      )}
      {analysis.data && trait && !hasPlots && (
        <AnalysisView
          analysis={analysis.data}
          traitName={format.name(trait.name)}
          unit={trait.unit}
          hasLetters
          entry={search.get('entry')}
          onEntry={(entry) => patch({ entry })}
        >
          <CautionList title={t('trial.cautions')} items={cautionItems(analysis.data.cautions)} />
        </AnalysisView>
      )}
    </div>
  );
}
