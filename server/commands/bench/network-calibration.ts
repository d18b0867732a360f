import {
  chanceAbove,
  weighCandidates,
  type CandidateWeighing,
  type TraitWeighing,
} from '#server/stats/engine.ts';
import { normalCdf } from '#server/stats/distributions/normal.ts';
import { Bins, Tally, type ReliabilityBin, type Share } from './chance-bins.ts';
import { currentName, drawWorld, type World, type WorldPlan } from './network-world.ts';

export interface CoverageResult {
  readonly plan: WorldPlan;
  /** 95 % intervals of single gaps for the region's average */
  readonly region: Share;
  /** 95 % intervals for the grower's own next season */
  readonly ownSeason: Share;
  /** questions about one planned pair with a false `ahead` or `behind` among equal varieties */
  readonly falsePair: Share;
  /** questions about all others against the current variety, with at least one */
  readonly falseFamily: Share;
}

function weighAll(world: World, kind: 'named' | 'best'): TraitWeighing {
  const candidates = [...world.truth.keys()].filter((name) => name !== currentName);
  return weighCandidates(world.network, {
    current: currentName,
    candidates,
    kind: candidates.length === 1 ? 'pair' : kind,
    askedInSeason: 2025,
    withoutSensitivity: true,
  }).traits[0]!;
}

const isBold = ({ verdict }: CandidateWeighing): boolean => verdict === 'ahead' || verdict === 'behind';

/** Share of gaps in one further site-year that the interval would hold. */
function holdsNextSeason(row: CandidateWeighing, gap: number, variance: number): number {
  const { low, high } = row.gap!.ownSeason;
  const sd = Math.sqrt(variance);
  return normalCdf((high - gap) / sd) - normalCdf((low - gap) / sd);
}

/**
 * Coverage and false verdicts of the weigh-up's own engine among equal varieties. Entries are fixed in the model, so
 * neither figure depends on how much varieties really differ.
 */
export function measureCoverage(plan: WorldPlan, runs: number, seed: number): CoverageResult {
  const region = new Tally();
  const ownSeason = new Tally();
  const falsePair = new Tally();
  const falseFamily = new Tally();
  for (let run = 0; run < runs; run++) {
    const world = drawWorld({ ...plan, entrySd: 0 }, seed + 7919 * run);
    const rows = weighAll(world, 'named').candidates.filter(({ gap }) => gap !== null);
    if (rows.length === 0) continue;
    const mean = (value: (row: CandidateWeighing) => number): number =>
      rows.reduce((sum, row) => sum + value(row), 0) / rows.length;
    region.add(mean(({ gap }) => (gap!.regionAlone.low <= 0 && gap!.regionAlone.high >= 0 ? 1 : 0)));
    ownSeason.add(mean((row) => holdsNextSeason(row, 0, world.ownSeasonVariance)));
    falsePair.add(mean(({ gap, verdict }) => (verdict !== 'thin' && gap!.p < 0.05 ? 1 : 0)));
    falseFamily.add(rows.some(isBold) ? 1 : 0);
  }
  return {
    plan,
    region: region.share(),
    ownSeason: ownSeason.share(),
    falsePair: falsePair.share(),
    falseFamily: falseFamily.share(),
  };
}

export interface ReliabilityResult {
  readonly plan: WorldPlan;
  /** one planned candidate, by its estimate and by its shrunken gap */
  readonly single: readonly ReliabilityBin[];
  readonly singleShrunken: readonly ReliabilityBin[];
  /** the best of the list, by its shrunken gap */
  readonly picked: readonly ReliabilityBin[];
  /** mean lead of the best of the list over the current variety: true, by the estimate, by the shrunken gap, t/ha */
  readonly lead: { readonly truth: Share; readonly estimate: Share; readonly shrunken: Share };
}

/**
 * Chance that a candidate clears a break-even gap on the grower's own land next season: as stated, and as it is true.
 * One planned candidate by its estimate and by its shrunken gap, the best of the list by its shrunken gap.
 */
export function measureReliability(
  plan: WorldPlan,
  runs: number,
  seed: number,
  breakEven = 0.1,
): ReliabilityResult {
  const single = new Bins();
  const singleShrunken = new Bins();
  const picked = new Bins();
  const truth = new Tally();
  const estimate = new Tally();
  const shrunken = new Tally();
  for (let run = 0; run < runs; run++) {
    const world = drawWorld(plan, seed + 7919 * run);
    const rows = weighAll(world, 'named').candidates.filter(({ gap }) => gap !== null);
    if (rows.length === 0) continue;
    const trueGap = (row: CandidateWeighing): number =>
      world.truth.get(row.candidate)! - world.truth.get(currentName)!;
    const comesTrue = (row: CandidateWeighing): number =>
      normalCdf((trueGap(row) - breakEven) / Math.sqrt(world.ownSeasonVariance));
    const [planned] = rows;
    single.add(chanceAbove(planned!.gap!, breakEven, 'own-season'), comesTrue(planned!));
    singleShrunken.add(chanceAbove(planned!.gap!, breakEven, 'own-season', true), comesTrue(planned!));
    const best = rows.reduce((a, b) => (b.gap!.estimate > a.gap!.estimate ? b : a));
    picked.add(chanceAbove(best.gap!, breakEven, 'own-season', true), comesTrue(best));
    truth.add(trueGap(best));
    estimate.add(best.gap!.estimate);
    shrunken.add(best.gap!.shrunken.estimate);
  }
  return {
    plan,
    single: single.list(),
    singleShrunken: singleShrunken.list(),
    picked: picked.list(),
    lead: { truth: truth.share(), estimate: estimate.share(), shrunken: shrunken.share() },
  };
}
