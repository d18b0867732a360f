import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import type { Crop } from '#shared/catalogue.ts';
import { estimateUsual } from '#shared/usual-variance.ts';
import { callApi, type ReplyOf } from '#src/api-client.ts';
import { catalogueQuery, type Catalogue } from '#src/catalogue-query.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { Field } from '#src/components/field.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Progress } from '#src/components/progress.tsx';
import { Select } from '#src/components/select.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useMe } from '#src/session.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { usualVariancesQuery } from './desk-queries.ts';
import { UsualOfTraitView } from './usual-of-trait.tsx';

/** How much varieties usually move, by crop and trait: what weigh-ups lean on, with the step that estimates it anew. */
export function UsualVariancesPage() {
  const { t } = useTranslation('desk');
  const catalogue = useQuery(catalogueQuery);
  const isAgronomist = useMe().role === 'agronomist';
  return (
    <>
      <PageHeading
        title={t('usual.title')}
        above={isAgronomist && <Link to={paths.trialDesk}>{t('title')}</Link>}
        below={t('usual.lead')}
      />
      {catalogue.isPending && <Skeleton />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {catalogue.data && <ChosenCrop catalogue={catalogue.data} canEstimate={isAgronomist} />}
    </>
  );
}

function ChosenCrop({ catalogue, canEstimate }: { catalogue: Catalogue; canEstimate: boolean }) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const crop = catalogue.crops.find(({ slug }) => slug === search.get('crop'));
  return (
    <div className="flex flex-col gap-6">
      <Field label={t('usual.crop')} className="max-w-xs">
        <Select
          value={crop?.slug ?? ''}
          onChange={(event) => patch({ crop: event.target.value })}
          placeholder={t('usual.chooseCrop')}
          options={catalogue.crops.map(({ slug, name }) => ({ value: slug, label: format.name(name) }))}
        />
      </Field>
      {crop && canEstimate && <EstimateStep key={crop.id} crop={crop} />}
      {crop && <UsualOfCropView crop={crop} />}
    </div>
  );
}

/** Estimates all traits of the crop at once, and says of each what came of it. */
function EstimateStep({ crop }: { crop: Crop }) {
  const { t } = useTranslation('desk');
  const errorText = useErrorText();
  const client = useQueryClient();
  const estimating = useMutation({
    mutationFn: () => callApi(estimateUsual, { body: { cropId: crop.id } }),
    onSuccess: () =>
      Promise.all(
        [usualVariancesQuery.queryKey, ['weigh-up'], ['candidates']].map((queryKey) =>
          client.invalidateQueries({ queryKey }),
        ),
      ),
  });
  return (
    <div className="flex max-w-prose flex-col gap-3">
      <Button
        tone="main"
        className="self-start"
        isBusy={estimating.isPending}
        onClick={() => estimating.mutate()}
      >
        {t('usual.estimate')}
      </Button>
      {estimating.isPending && <Progress label={t('usual.estimating')} />}
      {estimating.isError && <ErrorState message={errorText(estimating.error)} />}
      {estimating.data && <Outcomes crop={crop} reply={estimating.data} />}
    </div>
  );
}

function Outcomes({ crop, reply }: { crop: Crop; reply: ReplyOf<typeof estimateUsual> }) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const nameOf = (slug: string): string => {
    const trait = crop.traits.find((one) => one.slug === slug);
    return trait ? format.name(trait.name) : slug;
  };
  const { needs, outcomes } = reply;
  const estimated = outcomes.filter(({ outcome }) => outcome === 'estimated');
  return (
    <ul role="status" className="flex flex-col gap-1">
      {estimated.length > 0 && (
        <li>
          {t('usual.estimated', { traits: estimated.map(({ traitSlug }) => nameOf(traitSlug)).join(', ') })}
        </li>
      )}
      {outcomes.map(({ traitSlug, outcome, ...counts }) =>
        outcome === 'estimated' ? null : (
          <li key={traitSlug}>
            {t(outcome === 'not-enough' ? 'usual.notEnough' : 'usual.notFitted', {
              trait: nameOf(traitSlug),
              ...counts,
              needEnvironments: needs.environments,
              needSeasons: needs.seasons,
              needEntries: needs.entries,
            })}
          </li>
        ),
      )}
    </ul>
  );
}

function UsualOfCropView({ crop }: { crop: Crop }) {
  const { t } = useTranslation('desk');
  const usual = useQuery(usualVariancesQuery);
  if (usual.isPending) return <Skeleton lines={8} />;
  if (usual.isError) return <QueryErrorState query={usual} />;
  const measured = usual.data.find(({ cropId }) => cropId === crop.id)?.traits ?? [];
  if (measured.length === 0) return <p>{t('usual.noTraits')}</p>;
  return measured.map((one) => {
    const trait = crop.traits.find(({ slug }) => slug === one.traitSlug);
    return trait && <UsualOfTraitView key={trait.id} trait={trait} usual={one} />;
  });
}
