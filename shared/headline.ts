import type { Language } from './account.ts';
import { saySeasonSpan } from './say-seasons.ts';
import type { Say } from './say-sentences.ts';
import type { CandidateResult } from './weigh-up.ts';

/** A sentence of a weigh-up's headline: its key under `verdicts:headline` and what stands in it. */
export type HeadlinePart = {
  key:
    | 'aheadPays'
    | 'aheadBut'
    | 'aheadUnknown'
    | 'noneAhead'
    | 'behind'
    | 'level'
    | 'openAhead'
    | 'openBehind'
    | 'thin';
  names: readonly string[];
  /** Least and greatest chance that those named pay; null where nothing is said of it. */
  chances: { least: number; greatest: number } | null;
  /** Fewest and most site-years among the candidates named. */
  siteYears: { least: number; most: number };
  /** The sentence that stands first and bold. */
  isLead: boolean;
};

/** From this chance on, a candidate that is ahead is said to pay without a "but". */
const paysFrom = 0.8;

type GroupKey = 'openAhead' | 'level' | 'behind' | 'openBehind' | 'thin';
const groupOrder: readonly GroupKey[] = ['openAhead', 'level', 'openBehind', 'behind', 'thin'];

function groupOf(candidate: CandidateResult): GroupKey | null {
  if (candidate.verdict === 'ahead') return null;
  if (candidate.verdict !== 'open') return candidate.verdict;
  return (candidate.gap?.estimate ?? 0) > 0 ? 'openAhead' : 'openBehind';
}

type AheadKey = 'aheadPays' | 'aheadBut' | 'aheadUnknown';
const aheadOrder: readonly AheadKey[] = ['aheadPays', 'aheadBut', 'aheadUnknown'];

function nameAhead({ money }: CandidateResult): AheadKey {
  const chance = money?.chancePays ?? null;
  if (chance === null) return 'aheadUnknown';
  return chance >= paysFrom ? 'aheadPays' : 'aheadBut';
}

function spanChances(members: readonly CandidateResult[]): HeadlinePart['chances'] {
  const chances = members.flatMap(({ money }) => money?.chancePays ?? []);
  return chances.length === 0 ? null : { least: Math.min(...chances), greatest: Math.max(...chances) };
}

function spanSiteYears(members: readonly CandidateResult[]): HeadlinePart['siteYears'] {
  const counts = members.map(({ siteYears }) => siteYears);
  return { least: Math.min(...counts), most: Math.max(...counts) };
}

function describe(
  key: GroupKey | AheadKey,
  members: readonly CandidateResult[],
  isLead: boolean,
): HeadlinePart[] {
  if (members.length === 0) return [];
  return [
    {
      key,
      names: members.map((member) => member.varietyName),
      chances: isLead ? spanChances(members) : null,
      siteYears: spanSiteYears(members),
      isLead,
    },
  ];
}

/**
 * What a weigh-up says, sentence by sentence, in the order of importance: who is really ahead and whether that pays,
 * then what is open, level, behind, and what cannot be said. Every candidate is named exactly once.
 */
export function buildHeadline(candidates: readonly CandidateResult[]): HeadlinePart[] {
  const ahead = candidates.filter((candidate) => candidate.verdict === 'ahead');
  const noneAhead: HeadlinePart = {
    key: 'noneAhead',
    names: [],
    chances: null,
    siteYears: { least: 0, most: 0 },
    isLead: true,
  };
  const lead = aheadOrder.flatMap((key) =>
    describe(
      key,
      ahead.filter((candidate) => nameAhead(candidate) === key),
      true,
    ),
  );
  const groups = groupOrder.flatMap((key) =>
    describe(
      key,
      candidates.filter((candidate) => groupOf(candidate) === key),
      false,
    ),
  );
  return [...(lead.length > 0 ? lead : [noneAhead]), ...groups];
}

type HeadlineKey =
  | `verdicts:headline.${HeadlinePart['key']}`
  | 'verdicts:trialCount'
  | 'verdicts:trialSpan'
  | `verdicts:seasons.${'fewer' | 'whole' | 'more' | 'span'}`;

/** Turns a part of the headline into its sentence. */
export function sayHeadline(
  { key, names, chances, siteYears }: HeadlinePart,
  current: string,
  language: Language,
  say: Say<HeadlineKey>,
): string {
  return say(`verdicts:headline.${key}`, {
    names: new Intl.ListFormat(language, { type: 'conjunction' }).format(names),
    count: names.length,
    current,
    seasons: chances === null ? '' : saySeasonSpan(chances, say),
    trials:
      siteYears.least === siteYears.most
        ? say('verdicts:trialCount', { count: siteYears.most })
        : say('verdicts:trialSpan', { from: siteYears.least, to: siteYears.most }),
  });
}
