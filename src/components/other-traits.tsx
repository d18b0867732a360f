import { useTranslation } from 'react-i18next';
import type { Trait } from '#shared/catalogue.ts';
import { reachesBeyondRegion } from '#shared/evidence-reach.ts';
import { findOtherTraits, nameTrait, sayDirection, tellTrait, verdictOn } from '#shared/trait-sentences.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictMark } from './beam.tsx';
import { DataTable, type Column } from './data-table.tsx';
import { TraitCards } from './trait-cards.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

/** With more candidates a table is wider than the page that it stands on. */
const mostColumns = 5;

type OtherTraitsProps = {
  candidates: readonly CandidateResult[];
  traits: readonly Trait[];
  currentName: string;
};

/** Each further trait with its own verdict; ratings as medians and counts. On a phone every trait becomes a card. */
export function OtherTraits({ candidates, traits, currentName }: OtherTraitsProps) {
  const { t } = useTranslation(['verdicts']);
  const language = useLanguage();
  const format = useFormat();
  const trialsOf = (trait: Trait) =>
    Math.max(...candidates.map((candidate) => verdictOn(candidate, trait)?.siteYears ?? 0));
  const rows = findOtherTraits(traits, candidates);
  const verdicts = candidates.flatMap((candidate) => candidate.traits);
  const level = verdicts.find((verdict) => verdict.gap)?.gap?.region.level;
  const isTable = candidates.length <= mostColumns;
  const nameOf = (trait: Trait) => (
    <>
      {nameTrait(trait, language)}
      <span
        className={`text-sm font-normal text-faded ${isTable ? 'block @max-[44rem]:ml-2 @max-[44rem]:inline' : 'ml-2'}`}
      >
        {[t('trialCount', { count: trialsOf(trait) }), sayDirection(trait, t)]
          .filter((words) => words !== null)
          .join(' · ')}
      </span>
    </>
  );
  const cellOf = (candidate: CandidateResult, trait: Trait) => (
    <TraitCell candidate={candidate} trait={trait} currentName={currentName} />
  );
  const columns: Column<Trait>[] = [
    { id: 'trait', header: t('traits.trait'), cell: nameOf },
    ...candidates.map((candidate): Column<Trait> => ({
      id: candidate.varietyId,
      header: candidate.varietyName,
      cell: (trait) => cellOf(candidate, trait),
    })),
  ];
  return (
    // A table fits onto one sheet, and stays whole there.
    <section className={`flex flex-col gap-3 print:gap-1 ${isTable ? 'print:break-inside-avoid' : ''}`}>
      <h2>{t('traits.title', { current: currentName })}</h2>
      {rows.length === 0 ? (
        <p className="text-faded">{t('traits.empty')}</p>
      ) : !isTable ? (
        <TraitCards traits={rows} candidates={candidates} nameOf={nameOf} cellOf={cellOf} />
      ) : (
        <DataTable
          caption={t('traits.caption', { current: currentName })}
          columns={columns}
          rows={rows}
          rowKey={(trait) => trait.id}
        />
      )}
      {level !== undefined && (
        <p className="text-sm text-faded">
          {t(candidates.some(reachesBeyondRegion) ? 'traits.noteSites' : 'traits.note', {
            level: format.percent(level * 100),
          })}
        </p>
      )}
      {rows.some((trait) => trait.kind === 'ordinal') && (
        <p className="text-sm text-faded">{t('traits.ratingNote')}</p>
      )}
    </section>
  );
}

type TraitCellProps = { candidate: CandidateResult; trait: Trait; currentName: string };

function TraitCell({ candidate, trait, currentName }: TraitCellProps) {
  const { t } = useTranslation(['verdicts']);
  const format = useFormat();
  const words = tellTrait(verdictOn(candidate, trait), trait, currentName, t, format);
  if (words.kind === 'none') return <span className="text-faded">{words.text}</span>;
  if (words.kind === 'rating') {
    return (
      <>
        <span className="block">{words.text}</span>
        {words.counts !== null && <span className="block text-sm text-faded">{words.counts}</span>}
      </>
    );
  }
  return (
    <span className="flex flex-wrap items-baseline gap-x-2 @max-[44rem]:justify-end">
      <span className="font-semibold whitespace-nowrap">{words.gap}</span>
      {words.verdict === null ? (
        <span className="text-sm">{t('traits.differs')}</span>
      ) : (
        <VerdictMark verdict={words.verdict} className="self-center text-sm" />
      )}
      {words.range !== null && <span className="block w-full text-sm text-faded">{words.range}</span>}
    </span>
  );
}
