import type { InteractionVariances } from './network-cell.ts';
import type { TrialTable } from './trial-lines.ts';
import { totalVariance } from './interaction-variances.ts';
import type {
  EvidenceCaution,
  EvidenceCautionCode,
  NetworkTrial,
  TraitEvidence,
  WeighQuestion,
} from './weigh-question.ts';
import type { LeftOutTrial } from './weigh-result.ts';
import type { EvidenceTier } from './evidence-tier.ts';

/** A variety with its newest trial this many seasons back is judged on old evidence. Common practice. */
const OLD_AFTER_SEASONS = 4;
const FEW_SITE_YEARS = 4;
/** Interactions this many times the usual variance are large. */
const LARGE_INTERACTION = 2;
const FEW_LINKS = 2;

const caution = (
  code: EvidenceCautionCode,
  severity: EvidenceCaution['severity'],
  numbers: EvidenceCaution['numbers'] = {},
): EvidenceCaution => ({ code, severity, numbers });

export const cautionNoTrialInRegion: EvidenceCaution = caution('no-trial-in-region', 'stop');

/** Entries that stood with one in some trial and with the other in some trial. */
function findLinks(tables: readonly TrialTable[], candidate: string, current: string): string[] {
  const metBy = (entry: string): Set<string> =>
    new Set(tables.filter(({ cells }) => cells.has(entry)).flatMap(({ cells }) => [...cells.keys()]));
  const byCurrent = metBy(current);
  return [...metBy(candidate)].filter((entry) => byCurrent.has(entry)).sort();
}

export interface CandidateEvidence {
  readonly candidate: string;
  readonly question: WeighQuestion;
  readonly names: Readonly<Record<string, string>>;
  readonly tables: readonly TrialTable[];
  readonly shared: number;
  readonly isConnected: boolean;
  /** whether its verdict leans on the usual variances */
  readonly leansOnUsual: boolean;
  /** whether half or twice the usual variances give another verdict */
  readonly isSensitive: boolean;
  /** set for the leader of a list */
  readonly leads: { readonly count: number; readonly estimate: number; readonly shrunken: number } | null;
}

/** Cautions of one candidate. */
export function cautionCandidate(evidence: CandidateEvidence): EvidenceCaution[] {
  const { candidate, question, names, tables, shared, isConnected, leansOnUsual, isSensitive, leads } =
    evidence;
  const variety = names[candidate] ?? candidate;
  const current = names[question.current] ?? question.current;
  const stood = tables.filter(({ cells }) => cells.has(candidate));
  const found: EvidenceCaution[] = [];
  if (!isConnected) return [caution('disconnected', 'stop', { variety, current })];
  if (stood.length < FEW_SITE_YEARS)
    found.push(
      caution('few-site-years', stood.length < 2 ? 'stop' : 'warning', {
        ...{ variety, count: stood.length },
        ...(leansOnUsual && { context: 'leans' }),
      }),
    );
  const seasons = [...new Set(stood.map(({ trial }) => trial.season))].sort((a, b) => a - b);
  const newest = seasons.at(-1);
  if (newest !== undefined) {
    if (seasons.length === 1) found.push(caution('one-season', 'warning', { variety, season: newest }));
    if (question.askedInSeason - newest >= OLD_AFTER_SEASONS)
      found.push(caution('old-seasons', 'warning', { variety, season: newest }));
  }
  // without a trial of its own there is no gap to be worked out through others
  if (shared === 0 && stood.length > 0) {
    found.push(caution('never-together', 'warning', { variety, current }));
    const links = findLinks(tables, candidate, question.current);
    if (links.length > 0 && links.length <= FEW_LINKS)
      found.push(
        caution('linked-through-check', 'warning', {
          variety,
          current,
          checks: links.map((entry) => names[entry] ?? entry).join(', '),
        }),
      );
  }
  if (isSensitive) found.push(caution('verdict-changes-with-variance', 'warning', { variety }));
  if (leads !== null) found.push(caution('best-of-many', 'warning', { variety, ...leads }));
  return found;
}

/** Kinds of management in which the trials are known to differ. */
function findManagementDifferences(trials: readonly NetworkTrial[]): string[] {
  const seen = new Map<string, Set<string>>();
  for (const { management } of trials)
    for (const [kind, value] of Object.entries(management))
      seen.set(kind, (seen.get(kind) ?? new Set()).add(value));
  return [...seen].flatMap(([kind, values]) => (values.size > 1 ? [kind] : [])).sort();
}

export interface WholeEvidence {
  readonly question: WeighQuestion;
  readonly trait: TraitEvidence;
  /** those that the figures rest on */
  readonly trials: readonly NetworkTrial[];
  readonly leftOut: readonly (LeftOutTrial & { readonly about: NetworkTrial })[];
  readonly components: InteractionVariances | null;
  readonly tier: EvidenceTier;
}

/** Cautions about the evidence as a whole. */
export function cautionEvidence({
  question,
  trait,
  trials,
  leftOut,
  components,
  tier,
}: WholeEvidence): EvidenceCaution[] {
  const found: EvidenceCaution[] = [];
  const limit = trait.cvLimitPercent;
  for (const { reason, about } of leftOut)
    found.push(
      caution('trial-left-out', 'note', {
        site: about.siteName,
        season: about.season,
        context: reason,
        ...(reason === 'weak-cv' &&
          about.cvPercent !== null &&
          limit !== null && { cv: about.cvPercent, limit }),
      }),
    );
  for (const { siteName, season, cvPercent, entryP } of trials) {
    if (cvPercent !== null && limit !== null && cvPercent > limit)
      found.push(caution('trial-weak-cv', 'warning', { site: siteName, season, cv: cvPercent, limit }));
    if (entryP !== null && entryP >= 0.05)
      found.push(caution('trial-f-not-significant', 'note', { site: siteName, season, p: entryP }));
  }
  if (
    components !== null &&
    trait.usual !== null &&
    totalVariance(components) > LARGE_INTERACTION * totalVariance(trait.usual)
  )
    found.push(caution('large-interaction', 'warning', { sd: Math.sqrt(totalVariance(components)) }));
  if (trait.usual === null)
    found.push(caution('no-usual-variance', tier === 'data-alone' ? 'note' : 'warning'));
  else if (tier !== 'data-alone')
    found.push(
      caution('rests-on-usual-variance', tier === 'one-season' ? 'warning' : 'note', {
        context: trait.usual.source,
      }),
    );
  if (question.kind !== 'pair' && question.candidates.length > 1)
    found.push(caution('several-compared', 'note', { count: question.candidates.length }));
  const differences = findManagementDifferences(trials);
  if (differences.length > 0)
    found.push(caution('management-differs', 'warning', { what: differences.join(', ') }));
  if (trials.length > 0 && trials.every(({ plotSize }) => plotSize === 'small-plots'))
    found.push(caution('small-plots', 'note'));
  const summaries = trials.filter(({ kind }) => kind === 'summary').length;
  if (summaries > 0) found.push(caution('summary-trial', 'note', { count: summaries }));
  return found;
}
