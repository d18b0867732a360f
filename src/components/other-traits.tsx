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

/** Each further trait with its own verdict; ratings as medians and counts. On a phone every trait becomes a card. */
export function OtherTraits({ candidates, traits, currentName }: OtherTraitsProps) {
  const { t } = useTranslation('verdicts');
  const language = useLanguage();
  const format = useFormat();
  const verdictOf = (candidate: CandidateResult, trait: Trait) =>
    candidate.traits.find((verdict) => verdict.traitSlug === trait.slug);
  const trialsOf = (trait: Trait) =>
    Math.max(...candidates.map((candidate) => verdictOf(candidate, trait)?.siteYears ?? 0));
  const rows = traits.filter(
    (trait) =>
      trait.slug !== headlineTrait &&
      candidates.some((candidate) => (verdictOf(candidate, trait)?.siteYears ?? 0) > 0),
  );
  const verdicts = candidates.flatMap((candidate) => candidate.traits);
  const level = verdicts.find((verdict) => verdict.gap)?.gap?.region.level;
  const columns: Column<Trait>[] = [
    {
      id: 'trait',
      header: t('traits.trait'),
      cell: (trait) => (
        <>
          {nameTrait(trait, language)}
          <span className="block text-sm font-normal text-faded @max-xl:ml-2 @max-xl:inline">
            {t('trialCount', { count: trialsOf(trait) })}
          </span>
        </>
      ),
    },
    ...candidates.map((candidate): Column<Trait> => ({
      id: candidate.varietyId,
      header: candidate.varietyName,
      cell: (trait) => (
        <TraitCell verdict={verdictOf(candidate, trait)} trait={trait} currentName={currentName} />
      ),
    })),
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
  if (verdict.kind === 'ordinal') return <RatingCell verdict={verdict} currentName={currentName} />;
  if (verdict.gap === null) return <span className="text-faded">{t('traits.none')}</span>;
  const { estimate, se, region } = verdict.gap;
  const decimals = format.decimals(se, trait.unit);
  return (
    <span className="flex flex-wrap items-baseline gap-x-2 @max-xl:justify-end">
      <span className="font-semibold whitespace-nowrap">{format.gap(estimate, trait.unit, decimals)}</span>
      {verdict.verdict === null ? (
        <span className="text-sm">{t('traits.differs')}</span>
      ) : (
        <VerdictMark verdict={verdict.verdict} className="self-center text-sm" />
      )}
      {verdict.verdict !== 'thin' && (
        <span className="block w-full text-sm text-faded">
          {t('traits.fromTo', format.ends(region, trait.unit, decimals))}
        </span>
      )}
    </span>
  );
}

/** Both medians, and in how many of the trials that rated both the candidate stood lower or higher. */
function RatingCell({ verdict, currentName: current }: { verdict: TraitVerdict; currentName: string }) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  const score = (value: number | null) =>
    value === null ? '–' : format.number(value, { decimals: Number.isInteger(value) ? 0 : 1 });
  const { medianCandidate, medianCurrent, rated } = verdict;
  return (
    <>
      <span className="block">
        {t('traits.median', {
          candidate: score(medianCandidate),
          current,
          medianCurrent: score(medianCurrent),
        })}
      </span>
      {rated && (
        <span className="block text-sm text-faded">
          {rated.trials === 0
            ? t('traits.neverRated')
            : t('traits.rated', { count: rated.trials, lower: rated.lower, higher: rated.higher })}
        </span>
      )}
    </>
  );
}
