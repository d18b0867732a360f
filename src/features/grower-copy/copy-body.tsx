import { useTranslation } from 'react-i18next';
import type { LaterChange, OpenedCopy } from '#shared/grower-copy.ts';
import { dialling } from '#shared/dialling.ts';
import { answerId } from '#shared/page-exchange.ts';
import { writeUnitParameter } from '#shared/reader-units.ts';
import { BoundWords } from '#src/components/bound-words.tsx';
import { CautionList, type CautionItem } from '#src/components/caution-list.tsx';
import { EvidenceTrials } from '#src/components/evidence-trials.tsx';
import { MethodNotes } from '#src/components/method-notes.tsx';
import { Unanswered } from '#src/components/no-verdict.tsx';
import { OtherTraits } from '#src/components/other-traits.tsx';
import { useReaderUnits } from '#src/components/reader-units-context.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import { CopyAddress, CopyCode } from './copy-way-back.tsx';
import { CopyUnits } from './copy-units.tsx';

type CopyBodyProps = {
  copy: OpenedCopy;
  /** The whole address that it was opened by, its secret last. */
  link: string;
  /** The answer as its own root, which the script takes over; null where there is none. */
  answerHtml: string | null;
};

/** The copy as it was frozen, answer first. */
export function CopyBody({ copy, link, answerHtml }: CopyBodyProps) {
  const { t } = useTranslation(['copy', 'verdicts']);
  const { weighUp } = copy.snapshot;
  return (
    <>
      <CopyHeading copy={copy} link={link} />
      {/* On paper the first sheet is the answer with its cautions; traits, stories and method go on behind it. */}
      <div className="flex flex-col gap-7 print:gap-1.5">
        <CautionList title={t('verdicts:changes.title')} items={useLaterChanges(copy.laterChanges)} />
        {answerHtml === null ? (
          <Unanswered
            result={copy.snapshot.result}
            canTakeBack={false}
            crop={weighUp.cropName}
            region={weighUp.regionName}
            from={weighUp.seasonFrom}
            to={weighUp.seasonTo}
          />
        ) : (
          <WeighedCopy copy={copy} answerHtml={answerHtml} />
        )}
        <WhoToAsk copy={copy} link={link} />
      </div>
    </>
  );
}

/** What the copy is about, for its heading and the browser's tab. */
export function useCopyTitle({ snapshot: { weighUp } }: OpenedCopy): string {
  const { t } = useTranslation('copy');
  const format = useFormat();
  return t('title', {
    crop: format.name(weighUp.cropName),
    region: format.name(weighUp.regionName),
    current: weighUp.currentVarietyName,
  });
}

function CopyHeading({ copy, link }: Pick<CopyBodyProps, 'copy' | 'link'>) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const title = useCopyTitle(copy);
  const { weighUp, advisorName, madeAt } = copy.snapshot;
  return (
    <div className="mb-5 print:mb-1 print:pr-[28mm]">
      <CopyCode link={link} />
      <p className="text-sm text-faded">
        {t('for', {
          grower: weighUp.growerName,
          farm: weighUp.farmName,
          area: format.area(weighUp.areaHectares),
          advisor: advisorName,
          date: format.date(madeAt),
        })}
      </p>
      <h1>
        <BoundWords text={title} />
      </h1>
      <CopyUnits hasBushel={copy.snapshot.format !== 1} />
    </div>
  );
}

/** What became of the trials since: the frozen figures stay, and the reader is told. */
function useLaterChanges(laterChanges: readonly LaterChange[]): CautionItem[] {
  const { t } = useTranslation('verdicts');
  return laterChanges.map(({ trialId, siteName, season, change }) => ({
    id: trialId,
    severity: 'warning',
    text: t(`changes.${change}`, { site: siteName, season }),
  }));
}

function WeighedCopy({ copy, answerHtml }: { copy: OpenedCopy; answerHtml: string }) {
  const { t } = useTranslation(['copy', 'verdicts']);
  const cautionItems = useCautionItems();
  const { weighUp, result, traits } = copy.snapshot;
  // What stops the whole evidence is read before the verdict, not after it.
  const stops = result.cautions.filter(({ severity }) => severity === 'stop');
  const cautions = [
    ...result.cautions.filter(({ severity }) => severity !== 'stop'),
    ...result.candidates.flatMap((candidate) => candidate.cautions),
  ];
  return (
    <>
      <CautionList title={t('verdicts:stopTitle')} items={cautionItems(stops)} />
      <div id={answerId} className="print:contents" dangerouslySetInnerHTML={{ __html: answerHtml }} />
      <CautionList title={t('verdicts:cautionsTitle')} items={cautionItems(cautions)} mayBreak />
      <div className="print:order-2">
        <OtherTraits
          candidates={result.candidates}
          traits={traits}
          currentName={weighUp.currentVarietyName}
        />
      </div>
      <details className="print:order-4">
        <summary className="tap-target py-2.5 text-lg font-bold">{t('copy:howTitle')}</summary>
        <div className="mt-2 flex flex-col gap-5 print:mt-0 print:gap-1.5">
          <MethodNotes result={result} />
          <EvidenceTrials result={result} isStill />
        </div>
      </details>
    </>
  );
}

function WhoToAsk({ copy: { snapshot, expiresAt }, link }: Pick<CopyBodyProps, 'copy' | 'link'>) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  return (
    <footer className="border-t border-rule pt-4 print:order-1 print:break-inside-avoid print:pt-1">
      <h2>{t('question')}</h2>
      <p>
        {t('ask', { advisor: snapshot.advisorName })}{' '}
        <a href={`mailto:${snapshot.advisorEmail}`} className="tap-target inline-flex items-center">
          {snapshot.advisorEmail}
        </a>
        {snapshot.advisorPhone !== null && (
          <>
            {' '}
            <span className="inline-block">
              {t('orCall')}{' '}
              <a href={dialling(snapshot.advisorPhone)} className="tap-target inline-flex items-center">
                {snapshot.advisorPhone}
              </a>
            </span>
          </>
        )}
      </p>
      <PaperLinks />
      <CopyAddress link={link} />
      <p className="mt-2 text-sm text-faded print:mt-0">
        {t('frozen', { date: format.date(snapshot.madeAt), until: format.date(expiresAt) })}
      </p>
    </footer>
  );
}

const papers = ['a4', 'letter'] as const;

/** The copy on paper, in the language and the units that it is read in: plain links to the same address. */
function PaperLinks() {
  const { t } = useTranslation('copy');
  const lang = useLanguage();
  const unit = writeUnitParameter(useReaderUnits().yieldUnit);
  return (
    <p className="flex flex-wrap items-center gap-x-3 print:hidden">
      {t('onPaper')}
      {papers.map((paper) => (
        <a
          key={paper}
          href={`?${new URLSearchParams({ paper, lang, unit }).toString()}`}
          className="tap-target inline-flex items-center"
        >
          {t(`paper.${paper}`)}
        </a>
      ))}
    </p>
  );
}
