import { randomUUID } from 'node:crypto';
import type { Trait } from '#shared/catalogue.ts';
import type { Evidence, EvidenceFit, EvidenceMean, EvidenceTrial } from '#server/weigh-up/evidence.ts';
import { seededNormals } from './bench-task.ts';
import { drawPlots, REPLICATES } from './network-world.ts';

/** A region in which a buyer pays by protein as well. */
export interface PremiumPlan {
  readonly sites: number;
  readonly seasons: number;
  readonly entries: number;
  /** of everything by which a variety's yield and protein part from the mean: its own effects and the noise of plots */
  readonly correlation: number;
  /** whether the organisation has estimated usual variances of protein */
  readonly isProteinUsual: boolean;
  /** true interaction variances as a multiple of the usual ones that the engine is told */
  readonly factor: number;
}

/** Standard deviations: yield in t/ha, protein in %. */
interface TraitScale {
  readonly level: number;
  readonly environment: number;
  readonly entry: number;
  readonly site: number;
  readonly season: number;
  readonly rest: number;
  readonly plot: number;
}

const SCALES = {
  yield: { level: 7, environment: 1, entry: 0.3, site: 0.12, season: 0.12, rest: 0.18, plot: 0.35 },
  protein: { level: 12.3, environment: 0.8, entry: 0.4, site: 0.15, season: 0.15, rest: 0.25, plot: 0.3 },
} as const satisfies Record<string, TraitScale>;

/** What a variety does in one further site-year, beside what the field and the season do to all. */
export interface Season {
  /** candidate minus current variety, t/ha */
  readonly gap: number;
  /** protein of both, % */
  readonly current: number;
  readonly candidate: number;
}

/** A drawn region: its evidence as the product lays it out, and what is true of it. */
export interface PremiumWorld {
  readonly evidence: Evidence;
  /** the current variety first */
  readonly varietyIds: readonly string[];
  /** one more season on the grower's own land, of a candidate at a position of `varietyIds` */
  readonly drawSeason: (candidate: number) => Season;
}

const trait = (slug: keyof typeof SCALES, unit: string): Trait => ({
  ...{ id: randomUUID(), slug, unit, name: { en: slug, fr: slug }, kind: 'numeric', direction: 'higher' },
  ...{ practicalMargin: 0.05, scaleMin: null, scaleMax: null },
});

type Pair = readonly [number, number];

/** Draws a region. The same plan and seed give the same region, but for its identifiers. */
export function drawPremiumWorld(plan: PremiumPlan, seed: number): PremiumWorld {
  const normal = seededNormals(seed);
  const { yield: grain, protein } = SCALES;
  /** Yield and protein, correlated, with a standard deviation each. */
  const drawPair = (sdYield: number, sdProtein: number): Pair => {
    const z = normal();
    const other = plan.correlation * z + Math.sqrt(1 - plan.correlation ** 2) * normal();
    return [sdYield * z, sdProtein * other];
  };
  const factor = Math.sqrt(plan.factor);
  const drawTerm = (term: 'site' | 'season' | 'rest'): Pair =>
    drawPair(factor * grain[term], factor * protein[term]);
  const known = new Map<string, Pair>();
  const remember = (key: string, draw: () => Pair): Pair => {
    const effect = known.get(key) ?? draw();
    known.set(key, effect);
    return effect;
  };
  const entryEffect = (k: number): Pair => remember(`${k}`, () => drawPair(grain.entry, protein.entry));
  const sumUp = (pairs: readonly Pair[]): Pair =>
    pairs.reduce<Pair>((sum, pair) => [sum[0] + pair[0], sum[1] + pair[1]], [0, 0]);

  const varietyIds = Array.from({ length: plan.entries }, () => randomUUID());
  const traits = [trait('yield', 't/ha'), trait('protein', '%')];
  const trials: EvidenceTrial[] = [];
  const fits: EvidenceFit[] = [];
  const means: EvidenceMean[] = [];
  for (let y = 0; y < plan.seasons; y++)
    for (let s = 0; s < plan.sites; s++) {
      const trial = describeTrial(s, 2020 + y);
      trials.push(trial);
      const levels = [
        grain.level + grain.environment * normal(),
        protein.level + protein.environment * normal(),
      ];
      const values = varietyIds.map((_, k) =>
        sumUp([
          entryEffect(k),
          remember(`${k} s${s}`, () => drawTerm('site')),
          remember(`${k} y${y}`, () => drawTerm('season')),
          drawTerm('rest'),
        ]),
      );
      const noise = varietyIds.flatMap(() =>
        Array.from({ length: REPLICATES }, () => drawPair(grain.plot, protein.plot)),
      );
      traits.forEach(({ id: traitId }, t) => {
        let plot = 0;
        const own = new Map(varietyIds.map((id, k) => [id, levels[t]! + values[k]![t]!]));
        const drawn = drawPlots(own, () => noise[plot++]![t]!);
        const { ms, df } = drawn;
        fits.push({
          ...{ versionId: trial.versionId, traitId, grandMean: levels[t]!, residualMs: ms, residualDf: df },
          ...{ cvPercent: (100 * Math.sqrt(ms)) / levels[t]!, entryP: null },
        });
        for (const [varietyId, mean] of drawn.means)
          means.push({
            ...{ versionId: trial.versionId, traitId, varietyId, mean, variance: ms / REPLICATES, df },
          });
      });
    }
  const square = (scale: TraitScale) => ({
    ...{ site: scale.site ** 2, season: scale.season ** 2, rest: scale.rest ** 2 },
  });
  const usual = traits.slice(0, plan.isProteinUsual ? 2 : 1).map((one, t) => ({
    ...{ id: randomUUID(), traitId: one.id, estimatedAt: new Date(0) },
    ...square(t === 0 ? grain : protein),
  }));
  return {
    evidence: {
      crop: { id: randomUUID(), cvLimitPercent: 15, typicalYield: grain.level },
      ...{ traits, trials, usual, fits, means },
      varieties: varietyIds.map((id, k) => ({ id, name: `V${k + 1}`, isCheck: k === 0 })),
    },
    varietyIds,
    drawSeason: (candidate) => {
      const season = (k: number): Pair =>
        sumUp([entryEffect(k), drawTerm('site'), drawTerm('season'), drawTerm('rest')]);
      const [own, other] = [season(candidate), season(0)];
      const level = protein.level + protein.environment * normal();
      return { gap: own[0] - other[0], current: level + other[1], candidate: level + own[1] };
    },
  };
}

function describeTrial(site: number, season: number): EvidenceTrial {
  return {
    ...{ trialId: randomUUID(), versionId: randomUUID(), version: 1, sha256: '', name: '' },
    ...{ siteId: `S${site}`, siteName: `S${site}`, regionId: 'plain', regionName: { en: '', fr: '' } },
    place: {
      ...{ latitude: 50, longitude: 0, seasonRainMm: 300, heatSumDegreeDays: 1500, soilTexture: 'loam' },
    },
    ...{ inRegion: true, season, kind: 'plots', isStrips: false, management: {} },
  };
}
