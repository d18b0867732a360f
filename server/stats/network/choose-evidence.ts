import type { TrialCell } from './network-cell.ts';
import { environmentKey } from './cell-codes.ts';
import { frameNetwork } from './network-frame.ts';
import { tabulateTrials, type TrialTable } from './trial-lines.ts';
import type { NetworkTrial, TraitEvidence, WeighQuestion } from './weigh-question.ts';
import type { LeftOutTrial } from './weigh-result.ts';

/** The trials and cells of one trait that a question rests on, and what was left out of it and why. */
export interface ChosenEvidence {
  readonly tables: readonly TrialTable[];
  readonly cells: readonly TrialCell[];
  readonly leftOut: readonly (LeftOutTrial & { readonly about: NetworkTrial })[];
  /** entries with cells that no chain of trials leads to from the current variety */
  readonly unconnected: ReadonlySet<string>;
}

/** Trials of the question's seasons. */
export function selectTrials(trials: readonly NetworkTrial[], { seasons }: WeighQuestion): NetworkTrial[] {
  return trials.filter(
    ({ season }) => seasons === undefined || (season >= seasons.from && season <= seasons.to),
  );
}

function reasonToLeaveOut(
  trial: NetworkTrial,
  trait: TraitEvidence,
  question: WeighQuestion,
  hasError: boolean,
): LeftOutTrial['reason'] | null {
  if (question.setAside?.includes(trial.trial) === true) return 'set-aside';
  if (!hasError) return 'no-variance';
  const isWeak =
    trial.cvPercent !== null && trait.cvLimitPercent !== null && trial.cvPercent > trait.cvLimitPercent;
  return isWeak && question.keepWeakTrials !== true ? 'weak-cv' : null;
}

/** Environments of the part that the entry stands in. */
function connectedTo(
  cells: readonly TrialCell[],
  entry: string,
): { trials: Set<string>; entries: Set<string> } {
  const trials = new Set<string>();
  const entries = new Set<string>();
  if (cells.length === 0) return { trials, entries };
  const frame = frameNetwork(cells);
  const part = frame.entryPart[frame.entries.indexOf(entry)];
  frame.environments.forEach(({ key }, j) => frame.environmentPart[j] === part && trials.add(key));
  frame.entries.forEach((name, i) => frame.entryPart[i] === part && entries.add(name));
  return { trials, entries };
}

/** Cells with an error, from trials that are neither set aside, too weak nor cut off from the current variety. */
export function chooseEvidence(
  trials: readonly NetworkTrial[],
  trait: TraitEvidence,
  question: WeighQuestion,
): ChosenEvidence {
  const leftOut: (LeftOutTrial & { about: NetworkTrial })[] = [];
  const usable = trait.cells.filter(({ variance }) => variance !== null);
  const all = tabulateTrials(trials, trait.cells);
  const withError = new Set(usable.map(({ trial }) => trial));
  const kept = all.filter(({ trial }) => {
    const reason = reasonToLeaveOut(trial, trait, question, withError.has(trial.trial));
    if (reason !== null) leftOut.push({ trial: trial.trial, reason, about: trial });
    return reason === null;
  });
  const place = new Map(kept.map(({ trial }) => [trial.trial, trial]));
  const cells = usable.flatMap(({ entry, trial, mean, variance }): TrialCell[] => {
    const at = place.get(trial);
    return at === undefined || variance === null
      ? []
      : [{ entry, site: at.site, year: at.season, trial, mean, variance }];
  });
  const connected = connectedTo(cells, question.current);
  const unconnected = new Set(cells.flatMap(({ entry }) => (connected.entries.has(entry) ? [] : [entry])));
  for (const { trial } of kept)
    if (!connected.trials.has(trial.trial))
      leftOut.push({ trial: trial.trial, reason: 'not-connected', about: trial });
  return {
    tables: kept.filter(({ trial }) => connected.trials.has(trial.trial)),
    cells: cells.filter((cell) => connected.trials.has(environmentKey(cell))),
    leftOut,
    unconnected,
  };
}
