import { useEffect, useRef, useState, type RefObject } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useForm, type UseFormReturn } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { useNavigate, useSearchParams } from 'react-router-dom';
import type { Crop } from '#shared/catalogue.ts';
import type { CautionCode } from '#shared/caution.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { storedUnits } from '#shared/reader-units.ts';
import type { WeighUpDraft } from '#shared/weigh-up-draft.ts';
import { createWeighUp, type WeighUpInput } from '#shared/weigh-up.ts';
import { callApi } from '#src/api-client.ts';
import { catalogueQuery, type Catalogue } from '#src/catalogue-query.ts';
import { CropUnits } from '#src/chosen-units.tsx';
import { Button } from '#src/components/button.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { NoVerdict } from '#src/components/no-verdict.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import { WeighingProgress } from '#src/components/weighing-progress.tsx';
import { fieldIssues } from '#src/field-issues.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { CandidatePicker } from './candidate-picker.tsx';
import { toFormDraft, typePrices, useDraftSaving, type DraftSaving } from './draft-saving.ts';
import { FarmFields, PriceFields } from './farm-fields.tsx';
import {
  newWeighUpForm,
  toWeighUpInput,
  type NewWeighUpDraft,
  type NewWeighUpForm,
} from './new-weigh-up-form.ts';
import { PairCandidateField } from './pair-candidate-field.tsx';
import {
  lacksTrials,
  partByStanding,
  readQuestion,
  toCandidateQuestion,
  type QuestionDraft,
} from './question-draft.ts';
import { QuestionFields } from './question-fields.tsx';
import { candidatesQuery, draftsQuery, weighUpsQuery, type CandidateQuestion } from './weigh-up-queries.ts';

export type NewWeighUpFormApi = UseFormReturn<NewWeighUpDraft, unknown, NewWeighUpForm>;

/** A new weigh-up on one page: the question, the candidates with their verdicts, the farm. */
export function NewWeighUpPage() {
  const { t } = useTranslation('weigh-up');
  const catalogue = useQuery(catalogueQuery);
  const [search] = useSearchParams();
  // Only the draft that the page was opened with is read; the one it keeps itself stands in its fields already.
  const [openedId] = useState(search.get('draft'));
  const drafts = useQuery({ ...draftsQuery, enabled: openedId !== null, refetchOnMount: 'always' });
  const isOpening = openedId !== null && drafts.isFetching && !drafts.isFetchedAfterMount;
  const opened = drafts.data?.find(({ id }) => id === openedId);
  return (
    <>
      <PageHeading title={t('new.title')} below={t('new.lead')} />
      {(catalogue.isPending || isOpening) && <Skeleton lines={6} />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {catalogue.data && !isOpening && <QuestionForm catalogue={catalogue.data} opened={opened} />}
    </>
  );
}

/** Stores the question. The draft that it was written in goes with it, also one whose first saving is still under way. */
function useCreateWeighUp(kept: DraftSaving) {
  const client = useQueryClient();
  const navigate = useNavigate();
  return useMutation({
    mutationFn: async (body: WeighUpInput) => {
      const draftId = await kept.stop();
      return (await callApi(createWeighUp, { body, query: draftId === null ? {} : { draftId } })).weighUp;
    },
    onError: kept.goOn,
    onSuccess: async (weighUp) => {
      void client.invalidateQueries({ queryKey: draftsQuery.queryKey });
      await client.invalidateQueries({ queryKey: weighUpsQuery.queryKey });
      void navigate(fillPath(paths.weighUp, { weighUpId: weighUp.id }));
    },
  });
}

type QuestionFormProps = { catalogue: Catalogue; opened: WeighUpDraft | undefined };

function QuestionForm({ catalogue, opened: found }: QuestionFormProps) {
  // As it was when the page was opened: what is saved from here must not come back over what is being typed.
  const [opened] = useState(found);
  const { t } = useTranslation('weigh-up');
  const [search] = useSearchParams();
  const draft = readQuestion(search, catalogue);
  const question = toCandidateQuestion(draft);
  const form = useForm<NewWeighUpDraft, unknown, NewWeighUpForm>({
    resolver: zodResolver(newWeighUpForm, fieldIssues),
    defaultValues: toFormDraft(opened?.content),
  });
  useEffect(() => typePrices(form, opened?.content), [form, opened]);
  const kept = useDraftSaving(form, opened);
  return (
    <CropUnits bushelWeightLb={draft.crop?.bushelWeightLb ?? storedUnits.bushelWeightLb}>
      <div className="flex flex-col gap-8">
        <section className="flex flex-col gap-4">
          <h2>{t('new.question')}</h2>
          <QuestionFields draft={draft} catalogue={catalogue} />
        </section>
        {lacksTrials(draft) && draft.crop && draft.region && (
          <NoVerdict
            crop={draft.crop.name}
            region={draft.region.name}
            from={draft.seasonFrom}
            to={draft.seasonTo}
          />
        )}
        {!lacksTrials(draft) && !question && <p className="text-faded">{t('new.candidatesWait')}</p>}
        {question && <CandidatesAndFarm draft={draft} question={question} form={form} kept={kept} />}
      </div>
    </CropUnits>
  );
}

type CandidatesAndFarmProps = {
  draft: QuestionDraft;
  question: CandidateQuestion;
  form: NewWeighUpFormApi;
  kept: DraftSaving;
};

/** The prices of the sheet stand in the form until they are typed over. */
function useSheetPrices(form: NewWeighUpFormApi, defaults: MoneyAssumptions | null): void {
  useEffect(() => {
    if (defaults === null) return;
    for (const name of ['priceLow', 'priceMiddle', 'priceHigh'] as const) {
      if (form.getFieldState(name).isDirty) continue;
      form.resetField(name, { defaultValue: defaults[name] });
    }
  }, [form, defaults]);
}

/** Leads to what comes before everything else that is wrong, with each try: the button stands a screen further down. */
function useFocusOnTry(form: NewWeighUpFormApi): RefObject<HTMLParagraphElement | null> {
  const place = useRef<HTMLParagraphElement>(null);
  const { submitCount } = form.formState;
  useEffect(() => {
    if (submitCount > 0) place.current?.focus();
  }, [submitCount]);
  return place;
}

/** Said here already: what follows from the choice of trials and from where the farm lies. The others wait for the answer. */
const placeCautions: ReadonlySet<CautionCode> = new Set([
  ...(['no-trial-in-region', 'trials-from-elsewhere', 'farm-far', 'farm-unlike-sites'] as const),
  ...(['farm-drier', 'farm-wetter', 'farm-cooler', 'farm-warmer'] as const),
  ...(['farm-lighter-soil', 'farm-heavier-soil', 'farm-other-soil'] as const),
]);

function CandidatesAndFarm({ draft, question, form, kept }: CandidatesAndFarmProps) {
  const { t } = useTranslation('weigh-up');
  const errorText = useErrorText();
  const candidates = useQuery(candidatesQuery(question));
  const creation = useCreateWeighUp(kept);
  const cautionItems = useCautionItems();
  const defaults = candidates.data?.assumptions ?? null;
  useSheetPrices(form, defaults);
  const missing = useFocusOnTry(form);
  if (candidates.isPending) return <WeighingProgress lines={8} />;
  if (candidates.isError) return <QueryErrorState query={candidates} />;
  const { result } = candidates.data;
  const { crop, region } = draft;
  if (result.answer === 'no-trials' && crop && region) {
    return <NoVerdict crop={crop.name} region={region.name} from={draft.seasonFrom} to={draft.seasonTo} />;
  }
  const currentName = crop?.varieties.find(({ id }) => id === draft.currentVarietyId)?.name ?? '';
  const { standingIds, goneIds } = partByStanding(draft.candidateIds, result.candidates);
  const isChosen = standingIds.length > 0;
  return (
    <form
      noValidate
      className="flex flex-col gap-8"
      onSubmit={(event) =>
        void form.handleSubmit((typed) => {
          if (!isChosen) return;
          creation.mutate(
            toWeighUpInput(typed, question, { kind: draft.kind, candidateIds: standingIds }, defaults),
          );
        })(event)
      }
    >
      <section className="flex flex-col gap-3">
        <h2>{t('new.candidates')}</h2>
        {draft.kind !== 'pair' && <p className="text-faded">{t('new.candidatesLead')}</p>}
        <CautionList
          title={t('new.placeCautions')}
          headingLevel={3}
          items={cautionItems(result.cautions.filter(({ code }) => placeCautions.has(code)))}
        />
        {/* Of the question before, the list says nothing about this one's. */}
        {!candidates.isPlaceholderData && <GoneCandidates goneIds={goneIds} crop={crop} />}
        {result.candidates.length === 0 ? (
          <p>{t('new.noCandidates')}</p>
        ) : draft.kind === 'pair' ? (
          <PairCandidateField candidates={result.candidates} chosenId={standingIds[0]} />
        ) : (
          <CandidatePicker
            candidates={result.candidates}
            kind={draft.kind}
            chosenIds={standingIds}
            currentName={currentName}
            varieties={crop?.varieties ?? []}
          />
        )}
        {form.formState.isSubmitted && !isChosen && (
          <p ref={missing} tabIndex={-1} role="alert" className="font-semibold text-stop">
            {t('new.chooseOne')}
          </p>
        )}
      </section>
      <FarmFields form={form} />
      <PriceFields form={form} defaults={defaults} />
      {creation.isError && <ErrorState message={errorText(creation.error)} />}
      <DraftState kept={kept} />
      <Button
        type="submit"
        tone="main"
        isBusy={creation.isPending || candidates.isPlaceholderData}
        className="self-start"
      >
        {creation.isPending ? t('new.creating') : t('new.create')}
      </Button>
    </form>
  );
}

/** Who was kept and is not weighed after all, by name: the address may be older than the trials. */
function GoneCandidates({ goneIds, crop }: { goneIds: readonly string[]; crop: Crop | undefined }) {
  const { t } = useTranslation('weigh-up');
  const language = useLanguage();
  if (goneIds.length === 0) return null;
  const names = goneIds.flatMap((id) => crop?.varieties.find((variety) => variety.id === id)?.name ?? []);
  return (
    <p role="status" className="max-w-prose rounded-lg bg-warning px-4 py-3">
      {t('new.gone', { count: goneIds.length, names: new Intl.ListFormat(language).format(names) })}
    </p>
  );
}

/** Whether what is typed is kept, said where the page is left. */
function DraftState({ kept }: { kept: DraftSaving }) {
  const { t } = useTranslation('record');
  const errorText = useErrorText();
  if (kept.error) return <p role="status">{t('drafts.failed', { reason: errorText(kept.error) })}</p>;
  if (kept.draftId === null) return null;
  return (
    <p role="status" className="text-sm text-faded">
      {t(kept.isKept ? 'drafts.kept' : 'drafts.keeping')}
    </p>
  );
}
