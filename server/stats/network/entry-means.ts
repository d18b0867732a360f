import type { EntryEffects } from './entry-estimates.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';

export interface EntryMean {
  readonly entry: string;
  /** environments in which the entry stood */
  readonly environments: number;
  /** at the average of all environments of its connected part, each with equal weight */
  readonly estimate: number;
  readonly se: number;
}

/** Means of the chosen entries: effect plus the average environment, m'β, of the entry's connected part. */
export function averageEntries(
  frame: NetworkFrame,
  point: NetworkPoint,
  estimates: EntryEffects,
): EntryMean[] {
  const { chosen, effects, covariance } = estimates;
  const { inverse, beta } = point.system;
  const { w, c } = point.absorption;
  const size = frame.columnCount;
  const keptColumn = new Int32Array(frame.environments.length).fill(-1);
  for (let j = 0; j < frame.cellCount; j++) keptColumn[frame.environment[j]!] = frame.column[j]!;

  const parts = Array.from({ length: frame.partCount }, (_, part) => {
    const members = frame.environments.flatMap((environment, e) =>
      frame.environmentPart[e] === part ? [{ column: keptColumn[e]!, offset: environment.offset }] : [],
    );
    const weights = new Float64Array(size);
    for (const { column } of members) if (column >= 0) weights[column] = 1 / members.length;
    // C⁻¹m, and with it the mean effect and its variance
    const solved = new Float64Array(size);
    let average = 0;
    let variance = 0;
    for (let r = 0; r < size; r++) {
      for (let c = 0; c < size; c++) solved[r]! += inverse[r * size + c]! * weights[c]!;
      average += weights[r]! * beta[r]!;
    }
    for (let r = 0; r < size; r++) variance += weights[r]! * solved[r]!;
    const first = members[0]?.offset ?? 0;
    const level = first + members.reduce((sum, { offset }) => sum + (offset - first), 0) / members.length;
    return { solved, average: average + level, variance };
  });

  return chosen.map((i, r) => {
    const part = parts[frame.entryPart[i]!]!;
    // cov(ĝ_i, m'β) = −h_i'C⁻¹m, h_i the environments' share in the entry's own weights
    let shared = 0;
    for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
      const column = frame.column[j]!;
      if (column < 0) continue;
      shared += (w[j]! / c[i]!) * part.solved[column]!;
    }
    return {
      entry: frame.entries[i]!,
      environments: frame.start[i + 1]! - frame.start[i]!,
      estimate: effects[r]! + part.average,
      se: Math.sqrt(covariance[r * chosen.length + r]! + part.variance - 2 * shared),
    };
  });
}
