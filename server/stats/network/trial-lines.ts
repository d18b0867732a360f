import { intervalAround } from './network-gap.ts';
import type { NetworkCell, NetworkTrial, TrialLine } from './weigh-question.ts';

/** Cells of one trait by trial, with the trial they stand in. */
export interface TrialTable {
  readonly trial: NetworkTrial;
  readonly cells: ReadonlyMap<string, NetworkCell>;
  readonly mean: number;
}

export function tabulateTrials(trials: readonly NetworkTrial[], cells: readonly NetworkCell[]): TrialTable[] {
  const byTrial = new Map<string, Map<string, NetworkCell>>();
  for (const cell of cells) {
    const entries = byTrial.get(cell.trial) ?? new Map<string, NetworkCell>();
    byTrial.set(cell.trial, entries.set(cell.entry, cell));
  }
  return trials.flatMap((trial) => {
    const entries = byTrial.get(trial.trial);
    if (entries === undefined) return [];
    let sum = 0;
    for (const { mean } of entries.values()) sum += mean;
    return [{ trial, cells: entries, mean: sum / entries.size }];
  });
}

/** A line for each trial in which both stood; the variance of their gap there is v_candidate + v_current. */
export function drawTrialLines(
  tables: readonly TrialTable[],
  candidate: string,
  current: string,
  level: number,
): TrialLine[] {
  return tables.flatMap(({ trial, cells, mean }) => {
    const a = cells.get(candidate);
    const b = cells.get(current);
    if (a?.variance == null || b?.variance == null) return [];
    const estimate = a.mean - b.mean;
    const se = Math.sqrt(a.variance + b.variance);
    const df = a.df ?? null;
    const [low, high] = intervalAround(estimate, se, df ?? Infinity, level);
    return [
      {
        trial: trial.trial,
        site: trial.site,
        siteName: trial.siteName,
        season: trial.season,
        trialMean: mean,
        estimate,
        se,
        df,
        interval: { low, high, level },
      },
    ];
  });
}
