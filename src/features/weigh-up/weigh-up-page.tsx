import { memo, useDeferredValue, useMemo } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useParams } from 'react-router-dom';
import type { Crop } from '#shared/catalogue.ts';
import { readMoneyBasis } from '#shared/money-basis.ts';
import { reckonCandidates } from '#shared/reckon-candidates.ts';
import { storedUnits } from '#shared/reader-units.ts';
import type { Caution } from '#shared/caution.ts';
import type { CurrentLevel, MoneyAssumptions } from '#shared/money.ts';
import type { CandidateResult, UsedTrial } from '#shared/weigh-up.ts';
import { catalogueQuery, findCrop, findTrait } from '#src/catalogue-query.ts';
import { CropUnits, useUnitChoice } from '#src/chosen-units.tsx';
import { BestOfListAnswer } from '#src/components/best-of-list.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { EvidenceTrials } from '#src/components/evidence-trials.tsx';
import { FoldedSection } from '#src/components/folded-section.tsx';
import { MethodNotes } from '#src/components/method-notes.tsx';
import { Unanswered } from '#src/components/no-verdict.tsx';
import { OtherTraits } from '#src/components/other-traits.tsx';
import { UnitSwitch } from '#src/components/unit-switch.tsx';
import { WeighingProgress } from '#src/components/weighing-progress.tsx';
import { useFirstPaintDone } from '#src/first-paint.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useCautionItems } from '#src/use-caution-items.ts';
import { usePrinting } from '#src/use-printing.ts';
import { CandidateStrip, StoryOnPaper } from './candidate-strip.tsx';
import { DecisionPanel } from './decision-panel.tsx';
import { FarmPanel } from './farm-panel.tsx';
import { HandOver } from './hand-over.tsx';
import { MoneyPanel } from './money-panel.tsx';
import { OnPaperLine, PricesOnPaper } from './on-paper-line.tsx';
import { QuestionPanel } from './question-panel.tsx';
import { TickOffStep } from './tick-off.tsx';
import { useMoneyForm } from './use-money-form.ts';
import { useMoneySaving } from './use-money-saving.ts';
import { TableView } from './table-view.tsx';
import { AnswerHead, answerLayout, mainColumn, VerdictAlone, type AnswerProps } from './verdict-alone.tsx';
import { useWeighUpView, WeighUpHeading } from './weigh-up-heading.tsx';
import { WaysInPage } from './ways-in-page.tsx';
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
      <OnPaperLine result={result} />
      <WeighUpHeading weighUp={question} result={result} />
      {result.answer === 'no-trials' || !crop ? (
        <NoTrialsAnswer weighUp={question} result={result} />
      ) : (
        <WeighedPage key={question.id} weighUp={question} result={result} crop={crop} />
      )}
    </CropUnits>
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

/** The whole answer; when the document has just been loaded, the verdict alone before it. */
function WeighedPage(props: AnswerProps & { crop: Crop }) {
  const isWhole = useFirstPaintDone();
  const view = useWeighUpView();
  return isWhole || view === 'table' ? <WeighedAnswer {...props} /> : <VerdictAlone {...props} />;
}

/** One and the same, so that nothing is drawn anew for it. */
const noLevels: readonly CurrentLevel[] = [];

function WeighedAnswer({ weighUp, result, crop }: AnswerProps & { crop: Crop }) {
  const { t } = useTranslation('verdicts');
  const cautionItems = useCautionItems();
  const view = useWeighUpView();
  const money = useMoneyForm(weighUp, crop);
  const saving = useMoneySaving(money);
  // The panels beside say it a moment after the first figure that is typed has been answered.
  const hasUnsaved = useDeferredValue(money.isDirty);
  const practicalMargin = findTrait(crop, 'yield')?.practicalMargin ?? null;
  const candidates = useMemo(
    () =>
      reckonCandidates(
        result.candidates,
        readMoneyBasis(weighUp, result),
        money.assumptions,
        practicalMargin,
      ),
    [result, weighUp, money.assumptions, practicalMargin],
  );
  const { currentVarietyId, currentVarietyName: currentName } = weighUp;
  const varieties = useMemo(
    () => [
      { id: currentVarietyId, name: currentName },
      ...result.candidates.map(({ varietyId, varietyName }) => ({ id: varietyId, name: varietyName })),
    ],
    [currentVarietyId, currentName, result],
  );
  if (view === 'table') {
    const isStop = ({ severity }: Caution) => severity === 'stop';
    return (
      <>
        <CautionList title={t('stopTitle')} items={cautionItems(result.cautions.filter(isStop))} />
        <TableView
          candidates={candidates}
          currentName={currentName}
          money={money.assumptions}
          cautions={result.cautions.filter((caution) => !isStop(caution))}
          hasUnsaved={money.isDirty}
        />
      </>
    );
  }
  return (
    <div className={answerLayout}>
      <AnswerColumn
        {...{ weighUp, result, crop, candidates }}
        assumptions={money.assumptions}
        areaHectares={money.areaHectares}
      />
      <div
        id="money"
        className="scroll-mt-2 lg:sticky lg:top-4 lg:max-h-[calc(100dvh-2rem)] lg:overflow-y-auto print:hidden"
      >
        <MoneyPanel
          weighUp={weighUp}
          crop={crop}
          levels={result.currentLevels ?? noLevels}
          varieties={varieties}
          money={money}
          saving={saving}
        />
      </div>
      <BesideMoney weighUp={weighUp} result={result} hasUnsaved={hasUnsaved} />
    </div>
  );
}

type AnswerColumnProps = AnswerProps & {
  crop: Crop;
  /** Reckoned with the assumptions on the page. */
  candidates: readonly CandidateResult[];
  assumptions: MoneyAssumptions;
  areaHectares: number;
};

/** The answer itself: drawn anew once for a figure that is typed, and not again while its field is being checked. */
const AnswerColumn = memo(function AnswerColumn(props: AnswerColumnProps) {
  const { weighUp, result, crop, candidates, assumptions, areaHectares } = props;
  const currentName = weighUp.currentVarietyName;
  return (
    <div className={mainColumn}>
      <AnswerHead weighUp={weighUp} result={result} candidates={candidates} />
      <UnderHead weighUp={weighUp} result={result} />
      <CandidateStrip
        candidates={candidates}
        currentName={currentName}
        money={assumptions}
        areaHectares={areaHectares}
      />
      <PricesOnPaper money={assumptions} />
      <Unpriced weighUp={weighUp} result={result} crop={crop} />
      <StoryOnPaper
        candidates={candidates}
        currentName={currentName}
        money={assumptions}
        areaHectares={areaHectares}
      />
    </div>
  );
});

/** Between verdict and figures: the ways on, and which of the list can be the best. No price bears on them. */
const UnderHead = memo(function UnderHead({ weighUp, result }: AnswerProps) {
  const chooseUnit = useUnitChoice();
  const { currentVarietyId: currentId, currentVarietyName: currentName } = weighUp;
  return (
    <>
      <div className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 print:hidden">
        <WaysInPage />
        <UnitSwitch onChoose={chooseUnit} />
      </div>
      {result.best && <BestOfListAnswer best={result.best} currentId={currentId} currentName={currentName} />}
    </>
  );
});

/** Under the figures: cautions and other traits as they came, on which no price bears. */
const Unpriced = memo(function Unpriced({ weighUp, result, crop }: AnswerProps & { crop: Crop }) {
  const { t } = useTranslation('verdicts');
  const cautionItems = useCautionItems();
  const cautions = [
    ...result.cautions.filter(({ severity }) => severity !== 'stop'),
    ...result.candidates.flatMap((candidate) => candidate.cautions),
  ];
  return (
    <>
      <div id="cautions" className="scroll-mt-2">
        <CautionList title={t('cautionsTitle')} items={cautionItems(cautions)} mayBreak />
      </div>
      <div id="traits" className="scroll-mt-2 print:order-2">
        <OtherTraits
          candidates={result.candidates}
          traits={crop.traits}
          currentName={weighUp.currentVarietyName}
        />
      </div>
    </>
  );
});

/** What hangs on no price, and so is not drawn anew with every figure that is typed. */
const BesideMoney = memo(function BesideMoney({
  weighUp,
  result,
  hasUnsaved,
}: AnswerProps & { hasUnsaved: boolean }) {
  const { t } = useTranslation('method');
  return (
    <div className="flex min-w-0 flex-col gap-4 lg:gap-6 print:mt-3 print:block">
      <QuestionPanel weighUp={weighUp} hasUnsaved={hasUnsaved} />
      <FarmPanel weighUp={weighUp} hasUnsaved={hasUnsaved} />
      <HandOver weighUpId={weighUp.id} hasUnsaved={hasUnsaved} />
      <DecisionPanel weighUp={weighUp} result={result} hasUnsaved={hasUnsaved} />
      <FoldedSection id="method" title={t('title')} isOnPaper>
        <MethodNotes result={result} />
        <details>
          <summary className="tap-target flex items-center font-semibold text-action underline underline-offset-4">
            {t('showTrials', { count: result.trials.length })}
          </summary>
          <OwnEvidence weighUp={weighUp} result={result} />
        </details>
      </FoldedSection>
    </div>
  );
});

/** The trials, each with the way to its page and out of the figures. */
function OwnEvidence({ weighUp, result }: AnswerProps) {
  const isPrinting = usePrinting();
  return (
    <EvidenceTrials
      result={result}
      linkTrial={(trialId, words) => <Link to={fillPath(paths.trial, { trialId })}>{words}</Link>}
      {...(!isPrinting && { stepOf: (trial: UsedTrial) => <TickOffStep weighUp={weighUp} trial={trial} /> })}
    />
  );
}
