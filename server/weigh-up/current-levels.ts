import type { CurrentLevel } from '#shared/money.ts';
import type { TraitWeighing } from '#server/stats/engine.ts';
import type { Evidence } from './evidence.ts';

/** From this many trials on, their spread tells how a level moves between fields and seasons. Common practice. */
const fewestForSpread = 3;

/**
 * What the current variety gave in the trials that each trait's gaps rest on: premiums depend on levels, not on gaps
 * alone. The plain mean of its means, and their standard deviation, the little noise of the plots in it included.
 */
export function listCurrentLevels(
  { traits, trials, means }: Pick<Evidence, 'traits' | 'trials' | 'means'>,
  weighings: readonly TraitWeighing[],
  currentVarietyId: string,
): CurrentLevel[] {
  const trialOf = new Map(trials.map(({ versionId, trialId }) => [versionId, trialId]));
  return weighings.flatMap(({ trait: traitSlug, trials: used }): CurrentLevel[] => {
    const traitId = traits.find(({ slug }) => slug === traitSlug)?.id;
    const byTrial = new Map<string, number[]>();
    for (const one of means) {
      const trial = trialOf.get(one.versionId);
      if (one.traitId !== traitId || one.varietyId !== currentVarietyId) continue;
      if (trial !== undefined && used.includes(trial)) {
        byTrial.set(trial, [...(byTrial.get(trial) ?? []), one.mean]);
      }
    }
    // A variety sown under two labels counts once a trial.
    const levels = [...byTrial.values()].map(average);
    if (levels.length === 0) return [];
    const mean = average(levels);
    return [{ traitSlug, mean, spread: measureSpread(levels, mean), trials: levels.length }];
  });
}

const average = (values: readonly number[]): number =>
  values.reduce((sum, value) => sum + value, 0) / values.length;

function measureSpread(levels: readonly number[], mean: number): number | null {
  if (levels.length < fewestForSpread) return null;
  return Math.sqrt(levels.reduce((sum, level) => sum + (level - mean) ** 2, 0) / (levels.length - 1));
}
