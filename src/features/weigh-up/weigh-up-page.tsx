import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useParams } from 'react-router-dom';
import type { Crop } from '#shared/catalogue.ts';
import { readMoneyBasis } from '#shared/money-basis.ts';
import { reckonCandidates } from '#shared/reckon-candidates.ts';
import { storedUnits } from '#shared/reader-units.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { catalogueQuery, findCrop, findTrait } from '#src/catalogue-query.ts';
import { CropUnits, useUnitChoice } from '#src/chosen-units.tsx';
import { BestOfListAnswer } from '#src/components/best-of-list.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { EvidenceTrials } from '#src/components/evidence-trials.tsx';
import { MethodNotes } from '#src/components/method-notes.tsx';
import { Unanswered } from '#src/components/no-verdict.tsx';
import { OtherTraits } from '#src/components/other-traits.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { UnitSwitch } from '#src/components/unit-switch.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { VerdictHeadline } from '#src/components/verdict-headline.tsx';
import { WeighingProgress } from '#src/components/weighing-progress.tsx';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useCautionItems } from '#src/use-caution-items.ts';
import { CandidateStrip } from './candidate-strip.tsx';
import { DecisionPanel } from './decision-panel.tsx';
import { FarmPanel } from './farm-panel.tsx';
import { HandOver } from './hand-over.tsx';
import { MoneyPanel } from './money-panel.tsx';
import { QuestionPanel } from './question-panel.tsx';
import { TickOffStep } from './tick-off.tsx';
import { useMoneyForm } from './use-money-form.ts';
import { useMoneySaving } from './use-money-saving.ts';
import { weighUpQuery } from './weigh-up-queries.ts';

/** A grower's question answered: who is really ahead, whether it pays, and where the evidence stops. */
export function WeighUpPage() {
  const { weighUpId = '' } = useParams();
  const weighUp = useQuery(weighUpQuery(weighUpId));
  const catalogue = useQuery(catalogueQuery);
  if (weighUp.isError) return <QueryErrorState query={weighUp} />;
  if (catalogue.isError) return <QueryErrorState query={catalogue} />;
  if (!weighUp.data || !catalogue.data) return <WeighingProgress lines={10} />;
  const { weighUp: question, result } = weighUp.data;
  const crop = findCrop(catalogue.data, question.cropId);
  return (
    <CropUnits bushelWeightLb={crop?.bushelWeightLb ?? storedUnits.bushelWeightLb}>
      <WeighUpHeading weighUp={question} result={result} />
      {result.answer === 'no-trials' || !crop ? (
        <NoTrialsAnswer weighUp={question} result={result} />
      ) : (
        <WeighedAnswer key={question.id} weighUp={question} result={result} crop={crop} />
      )}
    </CropUnits>
  );
}

type AnswerProps = { weighUp: WeighUp; result: WeighUpResult };

function WeighUpHeading({ weighUp, result }: AnswerProps) {
  const { t } = useTranslation(['weigh-up', 'verdicts', 'method']);
  const format = useFormat();
  const from = Math.min(...result.seasons);
  const to = Math.max(...result.seasons);
  const isWeighed = result.answer === 'weighed';
  const figures = {
    trials: t('verdicts:trialCount', { count: result.trials.length }),
    sites: t('method:sites', { count: result.sites }),
    from,
    to,
    date: format.date(result.computedAt),
  };
  const below = isWeighed
    ? t(from === to ? 'weigh-up:page.belowOneSeason' : 'weigh-up:page.below', figures)
    : t('weigh-up:page.belowNoTrials', {
        from: weighUp.seasonFrom,
        to: weighUp.seasonTo,
        date: figures.date,
      });
  return (
    <PageHeading
      title={t('weigh-up:page.title', {
        crop: format.name(weighUp.cropName),
        region: format.name(weighUp.regionName),
        current: weighUp.currentVarietyName,
      })}
      above={
        <>
          <Link to={paths.weighUps}>{t('weigh-up:page.back')}</Link>
          {' · '}
          {t('weigh-up:page.above', {
            grower: weighUp.growerName,
            farm: weighUp.farmName,
            area: format.area(weighUp.areaHectares),
          })}
        </>
      }
      below={below}
      actions={
        isWeighed && (
          <a
            href="#hand-over"
            className="tap-target inline-flex items-center rounded-md border border-action bg-action px-4 py-2 font-semibold text-on-action no-underline hover:underline"
          >
            {t('weigh-up:page.handOver')}
          </a>
        )
      }
    />
  );
}

function NoTrialsAnswer({ weighUp, result }: AnswerProps) {
  const { t } = useTranslation('verdicts');
  const cautionItems = useCautionItems();
  return (
    <div className="flex max-w-prose flex-col gap-6">
      <Unanswered
        result={result}
        canTakeBack
        crop={weighUp.cropName}
        region={weighUp.regionName}
        from={weighUp.seasonFrom}
        to={weighUp.seasonTo}
      />
      <CautionList title={t('cautionsTitle')} items={cautionItems(result.cautions)} />
      {result.leftOut.length > 0 && <OwnEvidence weighUp={weighUp} result={result} />}
      <FarmPanel weighUp={weighUp} hasUnsaved={false} />
      <DecisionPanel weighUp={weighUp} result={result} hasUnsaved={false} />
    </div>
  );
}

function WeighedAnswer({ weighUp, result, crop }: AnswerProps & { crop: Crop }) {
  const { t } = useTranslation(['verdicts', 'method']);
  const cautionItems = useCautionItems();
  const chooseUnit = useUnitChoice();
  const money = useMoneyForm(weighUp);
  const saving = useMoneySaving(money);
  const candidates = reckonCandidates(
    result.candidates,
    readMoneyBasis(weighUp, result),
    money.assumptions,
    findTrait(crop, 'yield')?.practicalMargin ?? null,
  );
  const currentName = weighUp.currentVarietyName;
  // What stops the whole evidence is read before the verdict, not after it.
  const stops = result.cautions.filter(({ severity }) => severity === 'stop');
  const cautions = [
    ...result.cautions.filter(({ severity }) => severity !== 'stop'),
    ...candidates.flatMap((candidate) => candidate.cautions),
  ];
  const varieties = [
    { id: weighUp.currentVarietyId, name: currentName },
    ...candidates.map(({ varietyId, varietyName }) => ({ id: varietyId, name: varietyName })),
  ];
  return (
    <div className="grid items-start gap-8 lg:grid-cols-[minmax(0,1fr)_20rem]">
      <div className="flex min-w-0 flex-col gap-8">
        <CautionList title={t('verdicts:stopTitle')} items={cautionItems(stops)} />
        <VerdictHeadline candidates={candidates} currentName={currentName} />
        <UnitSwitch onChoose={chooseUnit} />
        {result.best && (
          <BestOfListAnswer
            best={result.best}
            currentId={weighUp.currentVarietyId}
            currentName={currentName}
          />
        )}
        <CandidateStrip
          candidates={candidates}
          currentName={currentName}
          money={money.assumptions}
          areaHectares={money.areaHectares}
        />
        <CautionList title={t('verdicts:cautionsTitle')} items={cautionItems(cautions)} />
        <OtherTraits candidates={candidates} traits={crop.traits} currentName={currentName} />
      </div>
      <div className="lg:sticky lg:top-4 lg:max-h-[calc(100dvh-2rem)] lg:overflow-y-auto">
        <MoneyPanel weighUp={weighUp} varieties={varieties} money={money} saving={saving} />
      </div>
      <div className="flex min-w-0 flex-col gap-8">
        <QuestionPanel weighUp={weighUp} hasUnsaved={money.form.formState.isDirty} />
        <FarmPanel weighUp={weighUp} hasUnsaved={money.form.formState.isDirty} />
        <HandOver weighUpId={weighUp.id} hasUnsaved={money.form.formState.isDirty} />
        <DecisionPanel weighUp={weighUp} result={result} hasUnsaved={money.form.formState.isDirty} />
        <section className="flex flex-col gap-4">
          <h2>{t('method:title')}</h2>
          <MethodNotes result={result} />
          <details>
            <summary className="tap-target flex items-center font-semibold text-action underline underline-offset-4">
              {t('method:showTrials', { count: result.trials.length })}
            </summary>
            <OwnEvidence weighUp={weighUp} result={result} />
          </details>
        </section>
      </div>
    </div>
  );
}

/** The trials, each with the way to its page and out of the figures. */
function OwnEvidence({ weighUp, result }: AnswerProps) {
  return (
    <EvidenceTrials
      result={result}
      linkTrial={(trialId, words) => <Link to={fillPath(paths.trial, { trialId })}>{words}</Link>}
      stepOf={(trial) => <TickOffStep weighUp={weighUp} trial={trial} />}
    />
  );
}
