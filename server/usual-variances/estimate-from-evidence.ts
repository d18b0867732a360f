import {
  estimateUsualVariances,
  type NoUsualEstimate,
  type TrialCell,
  type TraitEvidence,
  type UsualEstimate,
} from '#server/stats/engine.ts';
import { layOutNetwork } from '#server/weigh-up/evidence-network.ts';
import type { Evidence } from '#server/weigh-up/evidence.ts';

export type TraitOutcome = { traitSlug: string; estimate: UsualEstimate | NoUsualEstimate };

/** Usual variances of each measured trait from all trials of a crop, those that scatter too widely left out. Pure. */
export function estimateFromEvidence(evidence: Evidence): TraitOutcome[] {
  const network = layOutNetwork(evidence, 'all');
  const trials = new Map(network.trials.map((trial) => [trial.trial, trial]));
  return network.traits.map((trait) => ({
    traitSlug: trait.trait,
    estimate: estimateUsualVariances(collectCells(trait, trials)),
  }));
}

type Places = ReadonlyMap<string, { site: string; season: number; cvPercent: number | null }>;

function collectCells({ cells, cvLimitPercent }: TraitEvidence, trials: Places): TrialCell[] {
  return cells.flatMap(({ entry, trial, mean, variance }) => {
    const at = trials.get(trial);
    if (at === undefined || variance === null) return [];
    const isWeak = at.cvPercent !== null && cvLimitPercent !== null && at.cvPercent > cvLimitPercent;
    return isWeak ? [] : [{ entry, trial, site: at.site, year: at.season, mean, variance }];
  });
}
