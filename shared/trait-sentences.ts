import type { Trait } from './catalogue.ts';
import { sayUnit } from './format-number.ts';
import type { Language } from './language.ts';
import type { Say } from './say-sentences.ts';
import type { VerdictCode } from './verdict.ts';
import type { CandidateResult, TraitVerdict } from './weigh-up.ts';
import type { FigureWriter } from './write-figures.ts';

/** The trait that the strip shows; the others are told beside it. */
const headlineTrait = 'yield';

/** A trait as a list offers it: its name and, where it has one, its unit. */
export function nameTrait(trait: Trait, language: Language): string {
  return trait.unit === ''
    ? trait.name[language]
    : `${trait.name[language]} (${sayUnit(trait.unit, language)})`;
}

/** What the trials say of one of a candidate's traits; undefined where they did not measure it. */
export function verdictOn(candidate: CandidateResult, trait: Trait): TraitVerdict | undefined {
  return candidate.traits.find(({ traitSlug, siteYears }) => traitSlug === trait.slug && siteYears > 0);
}

/** Traits besides yield that were measured of at least one of the candidates. */
export function findOtherTraits(traits: readonly Trait[], candidates: readonly CandidateResult[]): Trait[] {
  return traits.filter(
    (trait) => trait.slug !== headlineTrait && candidates.some((candidate) => verdictOn(candidate, trait)),
  );
}

/** A trait of a candidate in words: a gap with its verdict and interval, medians of a rating, or that there is nothing. */
export type TraitWords =
  | { kind: 'none'; text: string }
  /** Medians, and in how many trials the candidate was rated lower or higher; null in copies made before it was told. */
  | { kind: 'rating'; text: string; counts: string | null }
  | {
      kind: 'gap';
      gap: string;
      /** null where a real difference is neither good nor bad in itself. */
      verdict: VerdictCode | null;
      /** The interval of the region's average; null where the trials are too few for one. */
      range: string | null;
    };

/** Which way a trait is better: what its verdicts, and the counts of a rating, are to be read by; null where neither is. */
export function sayDirection(
  { direction }: Pick<Trait, 'direction'>,
  say: Say<`verdicts:traits.${'lower' | 'higher'}IsBetter`>,
): string | null {
  return direction === 'neutral' ? null : say(`verdicts:traits.${direction}IsBetter`);
}

type TraitKey = `verdicts:traits.${'none' | 'median' | 'neverRated' | 'rated' | 'fromTo'}`;

/** Tells one trait of a candidate against the current variety. */
export function tellTrait(
  verdict: TraitVerdict | undefined,
  trait: Trait,
  current: string,
  say: Say<TraitKey>,
  write: FigureWriter,
): TraitWords {
  if (verdict?.kind === 'ordinal') return tellRating(verdict, current, say, write);
  if (!verdict?.gap) return { kind: 'none', text: say('verdicts:traits.none') };
  const { estimate, se, region } = verdict.gap;
  const decimals = write.decimals(se, trait.unit);
  return {
    kind: 'gap',
    gap: write.gap(estimate, trait.unit, decimals),
    verdict: verdict.verdict,
    range:
      verdict.verdict === 'thin'
        ? null
        : say('verdicts:traits.fromTo', write.ends(region, trait.unit, decimals)),
  };
}

function tellRating(
  { medianCandidate, medianCurrent, rated }: TraitVerdict,
  current: string,
  say: Say<TraitKey>,
  write: FigureWriter,
): TraitWords {
  const score = (value: number | null) =>
    value === null ? '–' : write.number(value, { decimals: Number.isInteger(value) ? 0 : 1 });
  const medians = { candidate: score(medianCandidate), current, medianCurrent: score(medianCurrent) };
  const counts =
    rated === undefined
      ? null
      : rated.trials === 0
        ? say('verdicts:traits.neverRated')
        : say('verdicts:traits.rated', { count: rated.trials, lower: rated.lower, higher: rated.higher });
  return { kind: 'rating', text: say('verdicts:traits.median', medians), counts };
}
