import type { Trait } from '#shared/catalogue.ts';
import {
  defaultUsualVariances,
  poolErrorVariances,
  type EvidenceNetwork,
  type NetworkCell,
  type UsualVariances,
} from '#server/stats/engine.ts';
import type { Evidence, EvidenceMean, EvidenceTrial } from './evidence.ts';
import { groupBy } from './group-by.ts';

/** The trait that money and the headline verdict are about. */
export const yieldSlug = 'yield';

/** Which traits are weighed together; a list names them. */
export type TraitChoice = 'all' | 'yield' | 'all-but-yield' | readonly string[];

function isChosen(slug: string, chosen: TraitChoice): boolean {
  if (typeof chosen !== 'string') return chosen.includes(slug);
  return chosen === 'all' || (slug === yieldSlug) === (chosen === 'yield');
}

/** Lays the evidence out as the engine takes it: trials by id, entries by variety id, numeric traits only. */
export function layOutNetwork(evidence: Evidence, traits: TraitChoice): EvidenceNetwork {
  const yieldTrait = evidence.traits.find((trait) => trait.slug === yieldSlug);
  const yieldFits = new Map(
    evidence.fits.filter((fit) => fit.traitId === yieldTrait?.id).map((fit) => [fit.versionId, fit]),
  );
  const { cvLimitPercent } = evidence.crop;
  const weakVersions = new Set(
    [...yieldFits.values()].flatMap((fit) => ((fit.cvPercent ?? 0) > cvLimitPercent ? [fit.versionId] : [])),
  );
  return {
    names: Object.fromEntries(evidence.varieties.map((variety) => [variety.id, variety.name])),
    trials: evidence.trials.map((trial) => ({
      trial: trial.trialId,
      site: trial.siteId,
      siteName: trial.siteName,
      season: trial.season,
      inRegion: trial.inRegion,
      kind: trial.kind,
      plotSize: trial.isStrips ? 'field-strips' : 'small-plots',
      // A trial whose yields scatter too widely is doubtful in its other traits as well.
      cvPercent: yieldFits.get(trial.versionId)?.cvPercent ?? null,
      entryP: yieldFits.get(trial.versionId)?.entryP ?? null,
      management: readManagement(trial),
    })),
    traits: evidence.traits
      .filter((trait) => trait.kind === 'numeric' && isChosen(trait.slug, traits))
      .map((trait) => ({
        trait: trait.slug,
        better: trait.direction,
        practicalMargin: trait.practicalMargin ?? 0,
        usual: usualVariancesOf(trait, evidence),
        cells: layOutCells(evidence, trait.id, weakVersions),
        cvLimitPercent,
      })),
  };
}

/** The organisation's own where they were estimated; else only yield has values that are usual for the crop. */
function usualVariancesOf(trait: Trait, { usual, crop }: Evidence): UsualVariances | null {
  const own = usual.find((one) => one.traitId === trait.id);
  if (own !== undefined) {
    return { site: own.site, year: own.season, rest: own.rest, source: 'own-trials' };
  }
  if (trait.slug !== yieldSlug) return null;
  return { ...defaultUsualVariances(crop.typicalYield), source: 'crop-default' };
}

/** What was said of practices that change the ranking of varieties. */
function readManagement({ management }: EvidenceTrial): Record<string, string> {
  return Object.fromEntries(
    ['fungicide', 'irrigated'].flatMap((practice) => {
      const said = management[practice];
      return said === undefined || said === '' ? [] : [[practice, String(said)] as const];
    }),
  );
}

function layOutCells(evidence: Evidence, traitId: string, weakVersions: ReadonlySet<string>): NetworkCell[] {
  const trialOf = new Map(evidence.trials.map((trial) => [trial.versionId, trial.trialId]));
  const errors = poolErrors(evidence, traitId, weakVersions);
  const own = evidence.means.filter((mean) => mean.traitId === traitId);
  const cells = groupBy(own, (mean) => `${mean.versionId} ${mean.varietyId}`);
  return [...cells.values()].flatMap((labels) => joinLabels(labels, trialOf, errors));
}

type PooledError = { factor: number; df: number };

/** By version, what pooling over the trials makes of its error variance; weak trials have no part in it. */
function poolErrors(
  evidence: Evidence,
  traitId: string,
  weakVersions: ReadonlySet<string>,
): ReadonlyMap<string, PooledError> {
  const known = evidence.fits.flatMap(({ traitId: of, versionId, residualMs: ms, residualDf: df }) =>
    of === traitId && ms !== null && ms > 0 && df !== null && df > 0 && !weakVersions.has(versionId)
      ? [{ versionId, ms, df }]
      : [],
  );
  const { trials } = poolErrorVariances(known);
  return new Map(
    known.map(({ versionId, ms, df }, j) => {
      const pooled = trials[j] ?? { ms, df };
      return [versionId, { factor: pooled.ms / ms, df: pooled.df }];
    }),
  );
}

/** One cell a variety and trial: a variety sown under two labels counts with the average of both. */
function joinLabels(
  labels: readonly EvidenceMean[],
  trialOf: ReadonlyMap<string, string>,
  errors: ReadonlyMap<string, PooledError>,
): NetworkCell[] {
  const [first] = labels;
  const trial = first === undefined ? undefined : trialOf.get(first.versionId);
  if (first === undefined || trial === undefined) return [];
  const n = labels.length;
  const mean = labels.reduce((sum, label) => sum + label.mean, 0) / n;
  const pooled = errors.get(first.versionId);
  const variance = labels.some((label) => label.variance === null)
    ? null
    : (labels.reduce((sum, label) => sum + (label.variance ?? 0), 0) / n ** 2) * (pooled?.factor ?? 1);
  return [{ entry: first.varietyId, trial, mean, variance, df: pooled?.df ?? first.df }];
}
