import { useTranslation } from 'react-i18next';
import type { Trait } from '#shared/catalogue.ts';
import { reachesBeyondRegion } from '#shared/evidence-reach.ts';
import type { CandidateResult, TraitVerdict } from '#shared/weigh-up.ts';
import { VerdictMark } from './beam.tsx';
import { DataTable, type Column } from './data-table.tsx';
import { nameTrait } from './trait-name.ts';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

/** The trait that the strip shows; the others stand here. */
const headlineTrait = 'yield';

type OtherTraitsProps = {
  candidates: readonly CandidateResult[];
  traits: readonly Trait[];
  currentName: string;
};

/** Each further trait with its own verdict; ratings as medians. On a phone every trait becomes a card. */
export function OtherTraits({ candidates, traits, currentName }: OtherTraitsProps) {
  const { t } = useTranslation('verdicts');
  const language = useLanguage();
  const format = useFormat();
  const verdictOf = (candidate: CandidateResult, trait: Trait) =>
    candidate.traits.find((verdict) => verdict.traitSlug === trait.slug);
  const rows = traits.filter(
    (trait) =>
      trait.slug !== headlineTrait &&
      candidates.some((candidate) => (verdictOf(candidate, trait)?.siteYears ?? 0) > 0),
  );
  const verdicts = candidates.flatMap((candidate) => candidate.traits);
  const level = verdicts.find((verdict) => verdict.gap)?.gap?.region.level;
  const columns: Column<Trait>[] = [
    { id: 'trait', header: t('traits.trait'), cell: (trait) => nameTrait(trait, language) },
    ...candidates.map((candidate): Column<Trait> => ({
      id: candidate.varietyId,
      header: candidate.varietyName,
      cell: (trait) => (
        <TraitCell verdict={verdictOf(candidate, trait)} trait={trait} currentName={currentName} />
      ),
    })),
    {
      id: 'trials',
      header: t('traits.trials'),
      align: 'end',
      cell: (trait) =>
        format.number(
          Math.max(...candidates.map((candidate) => verdictOf(candidate, trait)?.siteYears ?? 0)),
        ),
    },
  ];
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('traits.title', { current: currentName })}</h2>
      {rows.length === 0 ? (
        <p className="text-faded">{t('traits.empty')}</p>
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

type TraitCellProps = { verdict: TraitVerdict | undefined; trait: Trait; currentName: string };

function TraitCell({ verdict, trait, currentName }: TraitCellProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  if (!verdict || verdict.siteYears === 0) return <span className="text-faded">{t('traits.none')}</span>;
  if (verdict.kind === 'ordinal') {
    const score = (value: number | null) =>
      value === null ? '–' : format.number(value, { decimals: Number.isInteger(value) ? 0 : 1 });
    return t('traits.median', {
      candidate: score(verdict.medianCandidate),
      current: currentName,
      medianCurrent: score(verdict.medianCurrent),
    });
  }
  if (verdict.gap === null) return <span className="text-faded">{t('traits.none')}</span>;
  const { estimate, se, region } = verdict.gap;
  const decimals = format.decimals(se, trait.unit);
  return (
    <>
      <span className="block font-semibold">{format.gap(estimate, trait.unit, decimals)}</span>
      {verdict.verdict === null ? (
        <span className="block text-sm">{t('traits.differs')}</span>
      ) : (
        <VerdictMark verdict={verdict.verdict} className="text-sm" />
      )}
      {verdict.verdict !== 'thin' && (
        <span className="block text-sm text-faded">
          {t('traits.fromTo', format.ends(region, trait.unit, decimals))}
        </span>
      )}
    </>
  );
}
