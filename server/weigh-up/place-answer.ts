import { makeCaution, type Caution } from '#shared/caution.ts';
import type { BilingualName } from '#shared/catalogue.ts';
import type {
  CandidateResult,
  GapAtYield,
  GapEstimate,
  GapLine,
  UsedTrial,
  WeighUpResult,
} from '#shared/weigh-up.ts';
import { readGapAt } from '#server/stats/engine.ts';
import type { EvidenceGround, EvidenceTrial } from './evidence.ts';
import type { FarmPlace } from './farm-place.ts';
import { cautionFarm, measureFarmRange } from './farm-range.ts';

/** What is known of the farm, and what the current variety is called. */
export type FarmGround = {
  farm: FarmPlace | null;
  /** t/ha; null where nobody has said, or nobody asks */
  usualYield: number | null;
  currentName: string;
};

/**
 * Holds an answer of weighEvidence against the farm: which trials stood in other regions, how far the farm lies from
 * the sites, and the gap at its usual yield. It costs nothing, so it is no part of the answers that are kept.
 */
export function placeAnswer(
  answer: WeighUpResult,
  { trials }: Pick<EvidenceGround, 'trials'>,
  ground: FarmGround,
): WeighUpResult {
  if (answer.answer === 'no-trials') return answer;
  const byId = new Map(trials.map((trial) => [trial.trialId, trial]));
  const used = answer.trials.flatMap(({ trialId }) => byId.get(trialId) ?? []);
  const sites = [
    ...new Map(used.map(({ siteId, siteName, place }) => [siteId, { ...place, name: siteName }])).values(),
  ];
  const isForeign = used.length > 0 && used.every(({ inRegion }) => !inRegion);
  const mark = <Trial extends UsedTrial>(trial: Trial): Trial => ({ ...trial, ...tellRegion(byId, trial) });
  return {
    ...answer,
    trials: answer.trials.map(mark),
    leftOut: answer.leftOut.map(mark),
    farmRange: ground.farm && measureFarmRange(ground.farm, sites),
    best: isForeign ? null : answer.best,
    candidates: answer.candidates.map(isForeign ? withholdVerdict : keepVerdict).map((candidate) =>
      readAtUsualYield(
        {
          ...candidate,
          isBeyondRegion: used.some(({ inRegion }) => !inRegion),
          trials: candidate.trials.map((trial) => ({
            ...trial,
            inRegion: byId.get(trial.trialId)?.inRegion ?? true,
          })),
        },
        ground,
      ),
    ),
    cautions: [
      ...cautionRegions(used),
      ...(ground.farm === null ? [] : cautionFarm(ground.farm, sites)),
      ...answer.cautions,
    ],
  };
}

const keepVerdict = (candidate: CandidateResult): CandidateResult => candidate;

/**
 * A region without trials gets no verdict, also where trials of other regions were asked for: their estimates are shown,
 * and nothing is judged or priced by them.
 */
function withholdVerdict(candidate: CandidateResult): CandidateResult {
  return {
    ...candidate,
    verdict: 'thin',
    moneyGap: null,
    moneyGapInRegion: null,
    money: null,
    siteYearsToSettle: null,
    traits: candidate.traits.map((trait) => ({ ...trait, verdict: trait.verdict === null ? null : 'thin' })),
  };
}

function tellRegion(
  byId: ReadonlyMap<string, EvidenceTrial>,
  { trialId }: UsedTrial,
): Pick<UsedTrial, 'inRegion' | 'regionName'> {
  const trial = byId.get(trialId);
  return trial === undefined || trial.inRegion
    ? { inRegion: true }
    : { inRegion: false, regionName: trial.regionName };
}

/** Says which other regions the figures come from, and whether from them alone. */
function cautionRegions(used: readonly EvidenceTrial[]): Caution[] {
  const elsewhere = used.filter(({ inRegion }) => !inRegion);
  if (elsewhere.length === 0) return [];
  const named = new Map(
    elsewhere.map(({ regionId, regionName }): [string, BilingualName] => [regionId, regionName]),
  );
  const regions = [...named.values()].sort((a, b) => a.en.localeCompare(b.en, 'en'));
  return elsewhere.length === used.length
    ? [makeCaution('no-trial-in-region', 'stop', { context: 'elsewhere', regions })]
    : [makeCaution('trials-from-elsewhere', 'warning', { count: elsewhere.length, regions })];
}

/**
 * The line takes trials for independent, and so knows nothing of what a season does to a variety everywhere at once.
 * Its level is therefore never told more surely than the model of all trials tells it.
 */
const holdToModel = (line: GapLine, { se, df }: GapEstimate): Parameters<typeof readGapAt>[0] => ({
  ...line,
  outcome: 'fitted',
  gapSe: Math.max(line.gapSe, se),
  df: Math.min(line.df, df),
});

/** The gap where the grower's fields usually yield, and what keeps it from being read there. */
function readAtUsualYield(
  candidate: CandidateResult,
  { usualYield, currentName }: FarmGround,
): CandidateResult {
  const { gap, gapLine, varietyName: variety, verdict } = candidate;
  // What the evidence is too thin to judge, it is too thin to draw a line through.
  if (usualYield === null || verdict === 'thin') return { ...candidate, gapAtUsualYield: null };
  if (!gapLine || gap === null) {
    const caution = makeCaution('no-yield-line', 'note', { variety, current: currentName });
    return { ...candidate, gapAtUsualYield: null, cautions: [...candidate.cautions, caution] };
  }
  const { isCovered: isCarried, interval95, ...read } = readGapAt(holdToModel(gapLine, gap), usualYield);
  const [low, high] = interval95;
  const gapAtUsualYield: GapAtYield = {
    usualYield,
    ...read,
    interval: { low, high, level: 0.95 },
    isCarried,
  };
  if (isCarried) return { ...candidate, gapAtUsualYield };
  const { from, to } = gapLine;
  const caution = makeCaution('usual-yield-outside-trials', 'warning', {
    variety,
    yield: usualYield,
    from,
    to,
  });
  return { ...candidate, gapAtUsualYield, cautions: [...candidate.cautions, caution] };
}
