import { makeCaution, type Caution } from '#shared/caution.ts';
import type { GapDistribution } from '#shared/money.ts';
import type { BestOfList } from '#shared/question-kind.ts';
import type {
  CandidateResult,
  GapEstimate,
  GapLine,
  TraitVerdict,
  UsedTrial,
  WeighUpResult,
} from '#shared/weigh-up.ts';
import {
  weighCandidates,
  type CandidateGap,
  type CandidateWeighing,
  type EvidenceCaution,
  type TraitWeighing,
  type WeighedCandidates,
} from '#server/stats/engine.ts';
import { engineVersion } from '#server/trials/trial-fit.ts';
import { listCurrentLevels } from './current-levels.ts';
import { layOutNetwork, yieldSlug, type TraitChoice } from './evidence-network.ts';
import type { Evidence } from './evidence.ts';
import { compareRatings } from './ordinal-medians.ts';
import type { Question } from './question.ts';

/** Degrees of freedom beyond this are as good as infinite, which JSON cannot say. */
const mostDf = 1e6;

/**
 * Answers a question from the evidence, all but its money (priceAnswer). Pure apart from the clock: the same versions
 * give the same answer.
 */
export function weighEvidence(evidence: Evidence, question: Question): WeighUpResult {
  const weighed = weighTraits(evidence, question);
  const names = new Map(evidence.varieties.map((variety) => [variety.id, variety.name]));
  const ground = { computedAt: new Date().toISOString(), engineVersion };
  const yields = weighed.traits.find((trait) => trait.trait === yieldSlug);
  if (weighed.answer === 'no-trials' || yields === undefined) {
    return {
      ...ground,
      answer: 'no-trials',
      question: question.kind,
      comparison: 'lsd',
      sites: 0,
      seasons: [],
      trials: [],
      leftOut: [],
      components: null,
      usualFactor: null,
      usualVariancesFrom: null,
      usualVariancesAt: null,
      candidates: [],
      cautions: [...weighed.cautions.map(toCaution), makeCaution('local-advice', 'note', {})],
    };
  }
  return {
    ...ground,
    answer: 'weighed',
    question: question.kind,
    comparison: yields.comparison,
    best: tellBest(question, names, yields),
    sites: yields.sites,
    seasons: [...yields.seasons],
    ...listTrials(evidence, yields),
    components: toDeviations(yields),
    usualFactor: toRatio(yields),
    ...tellUsual(evidence, yields),
    currentLevels: listCurrentLevels(evidence, weighed.traits, question.currentVarietyId),
    candidates: warnOfLeader(
      question.candidateIds
        .flatMap((id) => yields.candidates.find(({ candidate }) => candidate === id) ?? [])
        .map((weighing) => describeCandidate(evidence, question, names, weighed.traits, weighing)),
      question.kind,
      yields.entries,
    ),
    cautions: [
      ...yields.cautions.map(toCaution),
      ...cautionOtherTraits(weighed.traits),
      makeCaution('local-advice', 'note', {}),
    ],
  };
}

/**
 * Asks the engine. The best of a list is picked by yield, so yield is weighed over the whole list; in the other traits,
 * by which nothing was picked, the candidates kept are compared with each other alone.
 */
function weighTraits(evidence: Evidence, question: Question): WeighedCandidates {
  const ask = (traits: TraitChoice, candidates: readonly string[], kind: 'named' | 'pair' | 'best') =>
    weighCandidates(layOutNetwork(evidence, traits), {
      current: question.currentVarietyId,
      ...{ candidates, kind },
      acceptsOtherRegions: question.acceptsOtherRegions,
      askedInSeason: question.askedInSeason,
      margins: { [yieldSlug]: question.margins },
    });
  const { kind, traits, candidateIds, list } = question;
  if (kind !== 'best') return ask(traits, candidateIds, kind === 'pair' ? 'pair' : 'named');
  const yields = ask('yield', list, 'best');
  if (traits === 'yield' || yields.answer === 'no-trials') return yields;
  return { ...yields, traits: [...yields.traits, ...ask('all-but-yield', candidateIds, 'named').traits] };
}

/** Which of the list can be the best, best first; whom the evidence is too thin to judge is named apart. */
function tellBest(
  { kind, currentVarietyId, list }: Question,
  names: ReadonlyMap<string, string>,
  { best }: TraitWeighing,
): BestOfList | null {
  if (kind !== 'best' || best === null || best.length === 0) return null;
  const nameOf = (id: string) => names.get(id) ?? id;
  const judged = new Set(best.map(({ entry }) => entry));
  return {
    standings: best
      .map(({ entry, ...row }) => ({ varietyId: entry, varietyName: nameOf(entry), ...row }))
      .sort((a, b) => b.estimate - a.estimate),
    thin: [currentVarietyId, ...list].filter((id) => !judged.has(id)).map(nameOf),
  };
}

function describeCandidate(
  evidence: Evidence,
  question: Question,
  names: ReadonlyMap<string, string>,
  traits: readonly TraitWeighing[],
  weighing: CandidateWeighing,
): CandidateResult {
  const { candidate: varietyId, gap } = weighing;
  const varietyName = names.get(varietyId) ?? varietyId;
  const { currentVarietyId } = question;
  // What the evidence is too thin to judge, it is too thin to price.
  const isPriced = gap !== null && weighing.verdict !== 'thin';
  return {
    varietyId,
    varietyName,
    verdict: weighing.verdict ?? 'open',
    gap: gap === null ? null : toGapEstimate(gap),
    siteYears: weighing.siteYears,
    sharedSiteYears: weighing.sharedSiteYears,
    moneyGap: isPriced ? toMoneyGap(gap) : null,
    moneyGapInRegion: isPriced ? toMoneyGapInRegion(gap) : null,
    money: null,
    siteYearsToSettle: weighing.siteYearsToSettle,
    sensitivity: weighing.sensitivity,
    gapLine: toGapLine(weighing),
    trials: weighing.trials
      .map(({ trial, siteName, season, trialMean, estimate, interval }) => ({
        trialId: trial,
        siteName,
        season,
        trialMean,
        estimate,
        interval,
      }))
      .sort((a, b) => a.trialMean - b.trialMean),
    traits: describeTraits(evidence, traits, varietyId, currentVarietyId),
    // Who leads is told among the candidates kept: warnOfLeader.
    cautions: weighing.cautions.filter(({ code }) => code !== 'best-of-many').map(toCaution),
  };
}

/**
 * Who leads a list leads by too much: the leader's gap is told beside the one pulled back. One candidate alone leads
 * nothing, unless it was picked as the best.
 * @param entries varieties that the list was made of
 */
function warnOfLeader(
  candidates: CandidateResult[],
  kind: Question['kind'],
  entries: number,
): CandidateResult[] {
  if (candidates.length < 2 && kind !== 'best') return candidates;
  const best = Math.max(...candidates.map((one) => one.gap?.estimate ?? -Infinity));
  return candidates.map((one) => {
    const { gap, varietyName: variety } = one;
    if (gap === null || gap.shrunken === null || gap.estimate !== best || best <= 0) return one;
    const values = { variety, count: entries, estimate: gap.estimate, shrunken: gap.shrunken };
    return { ...one, cautions: [...one.cautions, makeCaution('best-of-many', 'warning', values)] };
  });
}

/**
 * Candidates come from a list, also when one alone is kept, so money rests on the gap pulled back for that. By the plain
 * estimate the chance that it pays is overconfident where trials are few: the calibration in DEVELOPERS.md.
 */
function toMoneyGap({ ownSeason, shrunken }: CandidateGap): GapDistribution {
  return { estimate: shrunken.estimate, se: shrunken.ownSeasonSe, df: Math.min(ownSeason.df, mostDf) };
}

function toMoneyGapInRegion({ df, shrunken }: CandidateGap): GapDistribution {
  return { estimate: shrunken.estimate, se: shrunken.se, df: Math.min(df, mostDf) };
}

function toGapEstimate(gap: CandidateGap): GapEstimate {
  return {
    estimate: gap.estimate,
    se: gap.se,
    df: Math.min(gap.df, mostDf),
    p: gap.pAdjusted,
    region: gap.region,
    ownSeason: { ...gap.ownSeason, df: Math.min(gap.ownSeason.df, mostDf) },
    shrunken: gap.shrunken.estimate,
    shrunkenSe: { region: gap.shrunken.se, ownSeason: gap.shrunken.ownSeasonSe },
  };
}

/** The other traits in the crop's order, each with its own verdict; ratings as medians. */
function describeTraits(
  evidence: Evidence,
  weighed: readonly TraitWeighing[],
  varietyId: string,
  currentId: string,
): TraitVerdict[] {
  return evidence.traits.flatMap((trait): TraitVerdict[] => {
    if (trait.slug === yieldSlug) return [];
    if (trait.kind === 'ordinal') return [compareRatings(evidence, trait, varietyId, currentId)];
    const weighing = weighed
      .find((one) => one.trait === trait.slug)
      ?.candidates.find((one) => one.candidate === varietyId);
    if (weighing === undefined) return [];
    return [
      {
        traitSlug: trait.slug,
        kind: 'numeric',
        verdict: weighing.verdict,
        gap: weighing.gap === null ? null : toGapEstimate(weighing.gap),
        siteYears: weighing.siteYears,
        medianCandidate: null,
        medianCurrent: null,
      },
    ];
  });
}

/** Trials that the figures rest on and those that were left out, each as it stands in the list of trials. */
function listTrials(evidence: Evidence, yields: TraitWeighing): Pick<WeighUpResult, 'trials' | 'leftOut'> {
  const yieldId = evidence.traits.find((trait) => trait.slug === yieldSlug)?.id;
  const fits = new Map(
    evidence.fits.filter((fit) => fit.traitId === yieldId).map((fit) => [fit.versionId, fit]),
  );
  const used = new Map(
    evidence.trials.map(
      ({ trialId, versionId, name, siteName, season, version, sha256 }): [string, UsedTrial] => {
        const fit = fits.get(versionId);
        const figures = { meanYield: fit?.grandMean ?? null, cvPercent: fit?.cvPercent ?? null };
        return [trialId, { trialId, name, siteName, season, version, sha256, ...figures }];
      },
    ),
  );
  return {
    trials: yields.trials.flatMap((trialId) => used.get(trialId) ?? []),
    leftOut: yields.leftOut.flatMap(({ trial, reason }) => {
      const about = used.get(trial);
      return about === undefined ? [] : [{ ...about, reason }];
    }),
  };
}

function toDeviations({ fit }: TraitWeighing): WeighUpResult['components'] {
  if (fit === null) return null;
  const { site, year, rest } = fit.components;
  return { site: Math.sqrt(site), season: Math.sqrt(year), rest: Math.sqrt(rest) };
}

/** As a ratio of standard deviations, as the components are told. */
function toRatio({ fit }: TraitWeighing): number | null {
  return fit?.usualFactor == null ? null : Math.sqrt(fit.usualFactor);
}

function toGapLine({ gapLine }: CandidateWeighing): GapLine | null {
  if (gapLine.outcome === 'not-fitted') return null;
  const { outcome: _, ...line } = gapLine;
  return line;
}

/** Where the usual variances of yield came from, and when they were estimated. */
function tellUsual(
  { usual, traits }: Evidence,
  { fit }: TraitWeighing,
): Pick<WeighUpResult, 'usualVariancesFrom' | 'usualVariancesAt'> {
  if (!fit?.usual) return { usualVariancesFrom: null, usualVariancesAt: null };
  const yieldId = traits.find((trait) => trait.slug === yieldSlug)?.id;
  const own = usual.find((one) => one.traitId === yieldId);
  return own === undefined
    ? { usualVariancesFrom: 'crop-default', usualVariancesAt: null }
    : { usualVariancesFrom: 'own-trials', usualVariancesAt: own.estimatedAt.toISOString() };
}

const toCaution = ({ code, severity, numbers }: EvidenceCaution): Caution => ({
  code,
  severity,
  values: { ...numbers },
});

/** Traits without usual variances rest on the trials alone: said once, however many they are. */
function cautionOtherTraits(traits: readonly TraitWeighing[]): Caution[] {
  const found = traits
    .filter((trait) => trait.trait !== yieldSlug)
    .flatMap((trait) => trait.cautions.filter((caution) => caution.code === 'no-usual-variance'));
  const gravest = found.find((caution) => caution.severity === 'warning') ?? found[0];
  return gravest === undefined ? [] : [toCaution(gravest)];
}
