import { chooseEvidence, type ChosenEvidence } from './choose-evidence.ts';
import { compareWithCurrent, judgeAgainstCurrent } from './compare-with-current.ts';
import { standAgainstBest } from './compare-with-best.ts';
import { estimateEffects, estimateEntries, type EntryEstimates } from './entry-estimates.ts';
import { answersFor, gradeEvidence, type EvidenceTier } from './evidence-tier.ts';
import { cautionCandidate, cautionEvidence } from './evidence-cautions.ts';
import { fitNetwork, type NetworkFit } from './fit-network.ts';
import { fitGapLine } from './gap-line.ts';
import { judgeGap } from './judge-gap.ts';
import { interactionTerms } from './network-cell.ts';
import { frameNetwork, type NetworkFrame } from './network-frame.ts';
import { synthesisePair, type PairSynthesis } from './pair-synthesis.ts';
import { shrinkEffects } from './shrunken-effects.ts';
import { countSiteYearsToSettle } from './site-years-to-settle.ts';
import { analyseStability, type EntryStability } from './stability.ts';
import { drawTrialLines, type TrialTable } from './trial-lines.ts';
import { scaleVariances, totalVariance } from './interaction-variances.ts';
import { commonFactor, type VariancePenalty } from './variance-penalty.ts';
import type {
  CandidateGap,
  EvidenceNetwork,
  NetworkTrial,
  TraitEvidence,
  TraitVerdict,
  TrialLine,
  WeighQuestion,
} from './weigh-question.ts';
import type { BestStanding, CandidateWeighing, TraitWeighing } from './weigh-result.ts';

const LEVEL = 0.95;
const PENALTY = 3;
/** Usual variances are taken as right up to one common factor, whose standard deviation is a doubling. */
const FACTOR_SPREAD = Math.LN2;

/** A fit of the chosen cells, estimates of current variety and candidates, and the candidates' gaps. */
interface Weighed {
  readonly fit: NetworkFit;
  readonly estimates: EntryEstimates;
  readonly gaps: ReadonlyMap<string, CandidateGap>;
}

function choosePenalty(trait: TraitEvidence, factor: number): VariancePenalty | null {
  if (trait.usual === null || interactionTerms.some((term) => !(trait.usual![term] > 0))) return null;
  return { nu: PENALTY, usual: scaleVariances(trait.usual, factor), spread: FACTOR_SPREAD };
}

/** Positions of the candidates that have cells. */
function findMembers(frame: NetworkFrame, question: WeighQuestion): number[] {
  return question.candidates.flatMap((candidate) => {
    const at = frame.entries.indexOf(candidate);
    return at < 0 ? [] : [at];
  });
}

function weighCells(frame: NetworkFrame, trait: TraitEvidence, question: WeighQuestion): Weighed | null {
  const fit = fitNetwork(frame, choosePenalty(trait, 1));
  if (fit.outcome === 'not-fitted') return null;
  const members = findMembers(frame, question);
  const estimates = estimateEntries(fit, [frame.entries.indexOf(question.current), ...members]);
  const [site, year, rest] = fit.point.theta;
  const usualEntry =
    trait.usual?.entry ?? totalVariance(trait.usual ?? { site: site!, year: year!, rest: rest! });
  const shrunken = shrinkEffects(fit, estimateEffects(frame, fit.point), usualEntry);
  const positions = members.map((_, index) => index + 1);
  const gaps = compareWithCurrent(estimates, shrunken, positions, 0, question.kind !== 'pair', LEVEL);
  return { fit, estimates, gaps: new Map(members.map((at, index) => [frame.entries[at]!, gaps[index]!])) };
}

/** Verdicts, were the usual variances another factor of what they are; a candidate without gap has none. */
function judgeWithFactor(ground: TraitGround, factor: number): ReadonlyMap<string, TraitVerdict> {
  const { frame, trait, question } = ground;
  const penalty = question.withoutSensitivity === true ? null : choosePenalty(trait, factor);
  const near = ground.weighed?.fit.point.theta;
  const fit = frame && penalty && fitNetwork(frame, penalty, undefined, near);
  if (frame === null || fit === null || fit.outcome === 'not-fitted') return new Map();
  const members = findMembers(frame, question);
  const base = frame.entries.indexOf(question.current);
  const names = members.map((at) => frame.entries[at]!);
  const estimates = estimateEntries(fit, [base, ...members]);
  const verdicts = judgeAgainstCurrent(
    estimates,
    members.map((_, index) => index + 1),
    0,
    question.kind !== 'pair',
    LEVEL,
    (interval, index) => {
      const tier = gradePair(ground, names[index]!);
      return judgeGap(interval, trait.better, marginOf(ground, names[index]!), answersFor(tier));
    },
  );
  return new Map(names.map((name, index) => [name, verdicts[index]!]));
}

/** What stays the same for all candidates of a trait. */
interface TraitGround {
  readonly network: EvidenceNetwork;
  readonly trait: TraitEvidence;
  readonly question: WeighQuestion;
  readonly evidence: ChosenEvidence;
  readonly frame: NetworkFrame | null;
  readonly weighed: Weighed | null;
  readonly sites: number;
  readonly seasons: readonly number[];
  readonly stability: ReadonlyMap<string, EntryStability>;
}

function gradeCandidate(ground: TraitGround, siteYears: number): EvidenceTier {
  return gradeEvidence({
    siteYears,
    environments: ground.evidence.tables.length,
    sites: ground.sites,
    seasons: ground.seasons.length,
    entries: ground.frame?.entries.length ?? 0,
    hasUsual: choosePenalty(ground.trait, 1) !== null,
  });
}

function marginOf({ trait, question }: TraitGround, candidate: string): number {
  return Math.max(trait.practicalMargin, question.margins?.[trait.trait]?.[candidate] ?? 0);
}

function countStanding({ evidence }: TraitGround, entry: string): number {
  return evidence.tables.filter(({ cells }) => cells.has(entry)).length;
}

/** Tier of a candidate against the current variety: the side that stood in fewer trials counts. */
function gradePair(ground: TraitGround, candidate: string): EvidenceTier {
  return gradeCandidate(
    ground,
    Math.min(countStanding(ground, candidate), countStanding(ground, ground.question.current)),
  );
}

function settle(ground: TraitGround, gap: CandidateGap, verdict: TraitVerdict): number | null {
  const fit = ground.weighed?.fit;
  if (fit === undefined || (verdict !== 'open' && verdict !== 'thin')) return null;
  const [site, year, rest] = fit.point.theta;
  const { v } = fit.frame;
  return countSiteYearsToSettle({
    estimate: gap.estimate,
    se: gap.se,
    df: gap.df,
    level: LEVEL,
    components: { site: site!, year: year!, rest: rest! },
    cellVariance: v.reduce((sum, x) => sum + x, 0) / v.length,
    entries: fit.frame.entries.length,
    sites: ground.sites,
    seasons: ground.seasons.length,
    environments: ground.evidence.tables.length,
    penalty: fit.penalty,
  });
}

function synthesise(lines: readonly TrialLine[]): PairSynthesis | null {
  const effects = lines.flatMap(({ estimate, se }) => (se > 0 ? [{ estimate, variance: se * se }] : []));
  return effects.length < 2 ? null : synthesisePair(effects);
}

/** The candidate with the best estimate, where the question is about the best of a list. */
function findLeader({ question, trait, weighed }: TraitGround): string | null {
  if (question.kind !== 'best' || weighed === null) return null;
  const sign = trait.better === 'lower' ? -1 : 1;
  const ranked = [...weighed.gaps].sort(([, a], [, b]) => sign * (b.estimate - a.estimate));
  const [name, gap] = ranked[0] ?? [null, null];
  return gap !== null && sign * gap.estimate > 0 ? name : null;
}

/** Verdicts with the usual variances halved and doubled. */
interface Sensitivity {
  readonly half: ReadonlyMap<string, TraitVerdict>;
  readonly double: ReadonlyMap<string, TraitVerdict>;
}

function weighOne(
  ground: TraitGround,
  candidate: string,
  leader: string | null,
  varied: Sensitivity,
): CandidateWeighing {
  const { question, trait, evidence, network, weighed } = ground;
  const lines = drawTrialLines(evidence.tables, candidate, question.current, LEVEL);
  const siteYears = countStanding(ground, candidate);
  const tier = gradePair(ground, candidate);
  const gap = weighed?.gaps.get(candidate) ?? null;
  const margin = marginOf(ground, candidate);
  const verdict = gap === null ? 'thin' : judgeGap(gap.region, trait.better, margin, answersFor(tier));
  const half = varied.half.get(candidate);
  const double = varied.double.get(candidate);
  const sensitivity = half === undefined || double === undefined ? null : { half, double };
  const isUnconnected = evidence.unconnected.has(candidate);
  const sign = trait.better === 'lower' ? -1 : 1;
  return {
    candidate,
    verdict,
    gap,
    noGapBecause:
      gap !== null ? null : isUnconnected ? 'disconnected' : siteYears === 0 ? 'no-trials' : 'not-fitted',
    tier,
    siteYears,
    sharedSiteYears: lines.length,
    ledIn: lines.filter(({ estimate }) => sign * estimate > 0).length,
    siteYearsToSettle: gap === null ? null : settle(ground, gap, verdict),
    sensitivity,
    trials: lines,
    synthesis: synthesise(lines),
    gapLine: fitGapLine(lines),
    stability: ground.stability.get(candidate) ?? null,
    cautions: cautionCandidate({
      candidate,
      question,
      names: network.names,
      tables: evidence.tables,
      shared: lines.length,
      isConnected: !isUnconnected,
      leansOnUsual: tier === 'one-season' || tier === 'supported',
      isSensitive: sensitivity !== null && (sensitivity.half !== verdict || sensitivity.double !== verdict),
      leads:
        candidate === leader && gap !== null
          ? {
              count: question.listSize ?? ground.frame?.entries.length ?? 0,
              estimate: gap.estimate,
              shrunken: gap.shrunken.estimate,
            }
          : null,
    }),
  };
}

/** Current variety and candidates against the best of them; whom the evidence is too thin to judge stays out of it. */
function standings(ground: TraitGround): BestStanding[] | null {
  const { question, trait, weighed, frame } = ground;
  if (question.kind !== 'best' || trait.better === 'neutral' || weighed === null || frame === null)
    return null;
  const positions = weighed.estimates.chosen.flatMap((at, position) => {
    const tier = gradeCandidate(ground, countStanding(ground, frame.entries[at]!));
    return answersFor(tier) ? [position] : [];
  });
  return standAgainstBest(weighed.estimates, positions, trait.better, LEVEL);
}

function measureStability(tables: readonly TrialTable[]): Map<string, EntryStability> {
  const means = tables.flatMap(({ trial, cells }) =>
    [...cells.values()].map(({ entry, mean }) => ({ entry, environment: trial.trial, mean })),
  );
  const result = new Set(means.map(({ entry }) => entry)).size < 2 ? null : analyseStability(means);
  return new Map(result?.outcome === 'analysed' ? result.entries.map((row) => [row.entry, row]) : []);
}

/** Weighs the candidates of a question in one trait. `trials` are those of the question's seasons. */
export function weighTrait(
  network: EvidenceNetwork,
  trials: readonly NetworkTrial[],
  trait: TraitEvidence,
  question: WeighQuestion,
): TraitWeighing {
  const evidence = chooseEvidence(trials, trait, question);
  const frame = evidence.cells.length === 0 ? null : frameNetwork(evidence.cells);
  const used = evidence.tables.map(({ trial }) => trial);
  const ground: TraitGround = {
    network,
    trait,
    question,
    evidence,
    frame,
    weighed: frame && weighCells(frame, trait, question),
    sites: new Set(used.map(({ site }) => site)).size,
    seasons: [...new Set(used.map(({ season }) => season))].sort((a, b) => a - b),
    stability: measureStability(evidence.tables),
  };
  const varied = { half: judgeWithFactor(ground, 0.5), double: judgeWithFactor(ground, 2) };
  const leader = findLeader(ground);
  const fit = ground.weighed?.fit ?? null;
  const theta = fit?.point.theta;
  const components = theta ? { site: theta[0]!, year: theta[1]!, rest: theta[2]! } : null;
  return {
    trait: trait.trait,
    comparison: question.kind !== 'pair' && question.candidates.length > 1 ? 'dunnett' : 'lsd',
    trials: used.map(({ trial }) => trial),
    leftOut: evidence.leftOut.map(({ trial, reason }) => ({ trial, reason })),
    sites: ground.sites,
    seasons: ground.seasons,
    entries: frame?.entries.length ?? 0,
    fit:
      fit && components
        ? {
            penalty: fit.penalty?.nu ?? 0,
            components,
            usual: fit.penalty?.usual ?? null,
            usualFactor: fit.penalty && commonFactor(fit.penalty, fit.point.theta),
            logLik: fit.point.logLik,
            iterations: fit.iterations,
          }
        : null,
    candidates: question.candidates.map((candidate) => weighOne(ground, candidate, leader, varied)),
    best: standings(ground),
    cautions: cautionEvidence({
      question,
      trait,
      trials: used,
      leftOut: evidence.leftOut,
      components,
      tier: gradeCandidate(ground, used.length),
    }),
  };
}
