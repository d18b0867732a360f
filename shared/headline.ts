import type { Language } from './account.ts';
import { saySeasons } from './say-seasons.ts';
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
  /** Chance that it pays, of the one candidate a sentence is about. */
  chance: number | null;
  /** Most site-years among the candidates named. */
  siteYears: number;
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

function describeAhead(candidate: CandidateResult): HeadlinePart {
  const chance = candidate.money?.chancePays ?? null;
  return {
    key: chance === null ? 'aheadUnknown' : chance >= paysFrom ? 'aheadPays' : 'aheadBut',
    names: [candidate.varietyName],
    chance,
    siteYears: candidate.siteYears,
    isLead: true,
  };
}

/**
 * What a weigh-up says, sentence by sentence, in the order of importance: who is really ahead and whether that pays,
 * then what is open, level, behind, and what cannot be said. Every candidate is named exactly once.
 */
export function buildHeadline(candidates: readonly CandidateResult[]): HeadlinePart[] {
  const ahead = candidates.filter((candidate) => candidate.verdict === 'ahead').map(describeAhead);
  const lead: HeadlinePart[] =
    ahead.length > 0 ? ahead : [{ key: 'noneAhead', names: [], chance: null, siteYears: 0, isLead: true }];
  const groups = groupOrder.flatMap((key): HeadlinePart[] => {
    const members = candidates.filter((candidate) => groupOf(candidate) === key);
    if (members.length === 0) return [];
    return [
      {
        key,
        names: members.map((member) => member.varietyName),
        chance: null,
        siteYears: Math.max(...members.map((member) => member.siteYears)),
        isLead: false,
      },
    ];
  });
  return [...lead, ...groups];
}

type HeadlineKey =
  | `verdicts:headline.${HeadlinePart['key']}`
  | 'verdicts:trialCount'
  | `verdicts:seasons.${'fewer' | 'whole' | 'more'}`;

/** Turns a part of the headline into its sentence. */
export function sayHeadline(
  { key, names, chance, siteYears }: HeadlinePart,
  current: string,
  language: Language,
  say: Say<HeadlineKey>,
): string {
  return say(`verdicts:headline.${key}`, {
    names: new Intl.ListFormat(language, { type: 'conjunction' }).format(names),
    count: names.length,
    current,
    seasons: chance === null ? '' : saySeasons(chance, say),
    trials: say('verdicts:trialCount', { count: siteYears }),
  });
}
