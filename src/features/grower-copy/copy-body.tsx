import { useTranslation } from 'react-i18next';
import { readMoneyBasis } from '#shared/money-basis.ts';
import type { GrowerCopySnapshot } from '#shared/grower-copy.ts';
import { BestOfListAnswer } from '#src/components/best-of-list.tsx';
import { CautionList, type CautionItem } from '#src/components/caution-list.tsx';
import { EvidenceTrials } from '#src/components/evidence-trials.tsx';
import { MethodNotes } from '#src/components/method-notes.tsx';
import { NoVerdict } from '#src/components/no-verdict.tsx';
import { OtherTraits } from '#src/components/other-traits.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { VerdictHeadline } from '#src/components/verdict-headline.tsx';
import { useCautionItems } from '#src/use-caution-items.ts';
import { CopyCandidates } from './copy-candidates.tsx';
import type { OpenedCopy } from './grower-copy-query.ts';
import { OwnPrice } from './own-price.tsx';

/** The copy as it was frozen, answer first. */
export function CopyBody({ copy }: { copy: OpenedCopy }) {
  const { t } = useTranslation(['copy', 'verdicts']);
  const format = useFormat();
  const { snapshot } = copy;
  const { weighUp } = snapshot;
  return (
    <>
      <PageHeading
        title={t('copy:title', {
          crop: format.name(weighUp.cropName),
          region: format.name(weighUp.regionName),
          current: weighUp.currentVarietyName,
        })}
        above={t('copy:for', {
          grower: weighUp.growerName,
          farm: weighUp.farmName,
          area: format.area(weighUp.areaHectares),
          advisor: snapshot.advisorName,
          date: format.date(snapshot.madeAt),
        })}
      />
      <div className="flex flex-col gap-7">
        <CautionList title={t('verdicts:changes.title')} items={useLaterChanges(copy)} />
        {snapshot.result.answer === 'no-trials' ? (
          <NoVerdict
            crop={weighUp.cropName}
            region={weighUp.regionName}
            from={weighUp.seasonFrom}
            to={weighUp.seasonTo}
          />
        ) : (
          <WeighedCopy snapshot={snapshot} />
        )}
        <WhoToAsk copy={copy} />
      </div>
    </>
  );
}

/** What became of the trials since: the frozen figures stay, and the reader is told. */
function useLaterChanges({ laterChanges }: OpenedCopy): CautionItem[] {
  const { t } = useTranslation('verdicts');
  return laterChanges.map(({ trialId, siteName, season, change }) => ({
    id: trialId,
    severity: 'warning',
    text: t(`changes.${change}`, { site: siteName, season }),
  }));
}

function WeighedCopy({ snapshot }: { snapshot: GrowerCopySnapshot }) {
  const { t } = useTranslation(['copy', 'verdicts']);
  const cautionItems = useCautionItems();
  const { weighUp, result, traits } = snapshot;
  const currentName = weighUp.currentVarietyName;
  // What stops the whole evidence is read before the verdict, not after it.
  const stops = result.cautions.filter(({ severity }) => severity === 'stop');
  const cautions = [
    ...result.cautions.filter(({ severity }) => severity !== 'stop'),
    ...result.candidates.flatMap((candidate) => candidate.cautions),
  ];
  return (
    <>
      <CautionList title={t('verdicts:stopTitle')} items={cautionItems(stops)} />
      <VerdictHeadline candidates={result.candidates} currentName={currentName} />
      {result.best && (
        <BestOfListAnswer best={result.best} currentId={weighUp.currentVarietyId} currentName={currentName} />
      )}
      <CopyCandidates weighUp={weighUp} candidates={result.candidates} />
      <CautionList title={t('verdicts:cautionsTitle')} items={cautionItems(cautions)} />
      <OwnPrice weighUp={weighUp} basis={readMoneyBasis(weighUp, result)} candidates={result.candidates} />
      <OtherTraits candidates={result.candidates} traits={traits} currentName={currentName} />
      <details>
        <summary className="tap-target flex items-center text-lg font-bold">{t('copy:howTitle')}</summary>
        <div className="mt-2 flex flex-col gap-5">
          <MethodNotes result={result} />
          <EvidenceTrials result={result} />
        </div>
      </details>
    </>
  );
}

function WhoToAsk({ copy: { snapshot, expiresAt } }: { copy: OpenedCopy }) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  return (
    <footer className="border-t border-rule pt-4">
      <h2>{t('question')}</h2>
      <p>
        {t('ask', { advisor: snapshot.advisorName })}{' '}
        <a href={`mailto:${snapshot.advisorEmail}`} className="tap-target inline-flex items-center">
          {snapshot.advisorEmail}
        </a>
      </p>
      <p className="mt-2 text-sm text-faded">
        {t('frozen', { date: format.date(snapshot.madeAt), until: format.date(expiresAt) })}
      </p>
    </footer>
  );
}
