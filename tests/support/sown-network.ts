import type {
  EvidenceNetwork,
  NetworkCell,
  NetworkTrial,
  TraitEvidence,
  WeighQuestion,
} from '#server/stats/network/weigh-question.ts';
import { randomOf } from '#tests/support/random-network.ts';

export interface EvidencePlan {
  /** true means of the entries, t/ha */
  readonly entries: Readonly<Record<string, number>>;
  readonly sites?: number;
  readonly seasons?: readonly number[];
  readonly interactionSd?: number;
  readonly errorVariance?: number;
  readonly seed?: number;
  /** whether an entry stands in a trial */
  readonly stands?: (entry: string, site: number, season: number) => boolean;
}

export const usualYield = { site: 0.03, year: 0.02, rest: 0.08, source: 'crop-default' } as const;

/** A region's trials of one trait, yield, with everything in good order: no caution but those of its layout. */
export function growEvidence(plan: EvidencePlan): EvidenceNetwork {
  const {
    entries,
    sites = 4,
    seasons = [2022, 2023, 2024],
    interactionSd = 0.25,
    errorVariance = 0.05,
    seed = 1,
  } = plan;
  const random = randomOf(seed);
  const trials: NetworkTrial[] = [];
  const cells: NetworkCell[] = [];
  for (const season of seasons)
    for (let s = 0; s < sites; s++) {
      const trial = `S${s}-${season}`;
      trials.push({
        trial,
        site: `S${s}`,
        siteName: `Site ${s}`,
        season,
        inRegion: true,
        kind: 'plots',
        plotSize: s === 0 ? 'field-strips' : 'small-plots',
        cvPercent: 8,
        entryP: 0.001,
        management: { fungicide: 'yes' },
      });
      const level = random.normal(6, 1);
      for (const [entry, mean] of Object.entries(entries)) {
        if (plan.stands?.(entry, s, season) === false) continue;
        const noise = random.normal(0, interactionSd) + random.normal(0, Math.sqrt(errorVariance));
        cells.push({ entry, trial, mean: level + mean + noise, variance: errorVariance, df: 30 });
      }
    }
  const trait: TraitEvidence = {
    trait: 'yield',
    better: 'higher',
    practicalMargin: 0.1,
    usual: usualYield,
    cells,
    cvLimitPercent: 15,
  };
  return { trials, traits: [trait], names: {} };
}

export function changeTrait(network: EvidenceNetwork, change: Partial<TraitEvidence>): EvidenceNetwork {
  return { ...network, traits: network.traits.map((trait) => ({ ...trait, ...change })) };
}

export function changeTrials(
  network: EvidenceNetwork,
  change: (trial: NetworkTrial) => Partial<NetworkTrial>,
): EvidenceNetwork {
  return { ...network, trials: network.trials.map((trial) => ({ ...trial, ...change(trial) })) };
}

export function askAbout(candidates: readonly string[], change: Partial<WeighQuestion> = {}): WeighQuestion {
  return {
    current: 'Now',
    candidates,
    kind: candidates.length === 1 ? 'pair' : 'named',
    askedInSeason: 2025,
    ...change,
  };
}
