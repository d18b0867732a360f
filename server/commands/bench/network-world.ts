import type {
  EvidenceNetwork,
  InteractionVariances,
  NetworkCell,
  NetworkTrial,
} from '#server/stats/engine.ts';
import { seededNormals, seededNumbers } from './bench-task.ts';

/** One kind of evidence to be tried, in t/ha. */
export interface WorldPlan {
  readonly sites: number;
  readonly seasons: number;
  readonly entries: number;
  /** share of trials in which an entry other than the current variety stands */
  readonly presence: number;
  /** true interaction variances as a multiple of the usual ones that the engine is told */
  readonly factor: number;
  /** sd between varieties; 0: all are equal */
  readonly entrySd: number;
  readonly plots: 'normal' | 'skewed';
  /** trials struck by hail: plots scatter, varieties suffer unequally */
  readonly hailed: number;
}

/** A drawn region: its trials, and what is true of it. */
export interface World {
  readonly network: EvidenceNetwork;
  /** region's average over seasons, by entry */
  readonly truth: ReadonlyMap<string, number>;
  /** variance of a gap between two varieties in one further site-year */
  readonly ownSeasonVariance: number;
}

/** A cereal's variances: site .12, season .12, rest .18, plot .35 t/ha. */
const USUAL: InteractionVariances = { site: 0.0144, year: 0.0144, rest: 0.0324 };
const PLOT_SD = 0.35;
export const REPLICATES = 4;
const HAIL_PLOT_SD = 1;
const HAIL_ENTRY_SD = 0.6;

export const currentName = 'V01';

interface Chance {
  readonly normal: () => number;
  readonly uniform: () => number;
}

/** Effects remembered by label, drawn when first asked for. */
function rememberEffects(normal: () => number): (label: string, sd: number) => number {
  const known = new Map<string, number>();
  return (label, sd) => {
    const effect = known.get(label) ?? normal() * sd;
    known.set(label, effect);
    return effect;
  };
}

export interface TrialDraw {
  readonly means: ReadonlyMap<string, number>;
  /** residual mean square of complete blocks and its df */
  readonly ms: number;
  readonly df: number;
}

/** Plots in complete blocks about given entry values: entry means and the residual mean square. */
export function drawPlots(values: ReadonlyMap<string, number>, draw: () => number): TrialDraw {
  const names = [...values.keys()];
  const plots = names.map((name) => Array.from({ length: REPLICATES }, () => values.get(name)! + draw()));
  const rowMeans = plots.map((row) => row.reduce((sum, x) => sum + x, 0) / REPLICATES);
  const blockMeans = Array.from(
    { length: REPLICATES },
    (_, b) => plots.reduce((sum, row) => sum + row[b]!, 0) / names.length,
  );
  const grand = rowMeans.reduce((sum, x) => sum + x, 0) / names.length;
  let ss = 0;
  plots.forEach((row, i) =>
    row.forEach((x, b) => {
      ss += (x - rowMeans[i]! - blockMeans[b]! + grand) ** 2;
    }),
  );
  const df = (names.length - 1) * (REPLICATES - 1);
  return { means: new Map(names.map((name, i) => [name, rowMeans[i]!])), ms: ss / df, df };
}

/** Error mean squares pulled towards their pooled value, as stage 1 does: each weighs with its own df, the pool with 20. */
function shrinkErrors(draws: readonly TrialDraw[]): number[] {
  const df = draws.reduce((sum, draw) => sum + draw.df, 0);
  const pooled = draws.reduce((sum, draw) => sum + draw.df * draw.ms, 0) / df;
  return draws.map((draw) => (draw.df * draw.ms + 20 * pooled) / (draw.df + 20));
}

/** Draws a region. The same plan and seed give the same region. */
export function drawWorld(plan: WorldPlan, seed: number): World {
  const chance: Chance = { normal: seededNormals(seed), uniform: seededNumbers(seed + 1e6) };
  const effect = rememberEffects(chance.normal);
  const names = Array.from({ length: plan.entries }, (_, i) => `V${String(i + 1).padStart(2, '0')}`);
  const sd = (variance: number): number => Math.sqrt(variance * plan.factor);
  const trials: NetworkTrial[] = [];
  const draws: TrialDraw[] = [];
  for (let y = 0; y < plan.seasons; y++)
    for (let s = 0; s < plan.sites; s++) {
      const isHailed = trials.length < plan.hailed;
      const standing = names.filter((name) => name === currentName || chance.uniform() < plan.presence);
      const level = 7 + chance.normal() - (isHailed ? 3 : 0);
      const values = new Map(
        standing.map((name) => [
          name,
          level +
            effect(name, plan.entrySd) +
            effect(`${name} s${s}`, sd(USUAL.site)) +
            effect(`${name} y${y}`, sd(USUAL.year)) +
            chance.normal() * sd(USUAL.rest) +
            (isHailed ? chance.normal() * HAIL_ENTRY_SD : 0),
        ]),
      );
      if (values.size < 2) continue;
      const plotSd = isHailed ? HAIL_PLOT_SD : PLOT_SD;
      const skewed = (): number => -Math.log(1 - chance.uniform()) - 1;
      const draw = drawPlots(values, () => plotSd * (plan.plots === 'skewed' ? skewed() : chance.normal()));
      draws.push(draw);
      trials.push({
        trial: `S${s}-${y}`,
        site: `S${s}`,
        siteName: `S${s}`,
        season: 2020 + y,
        inRegion: true,
        kind: 'plots',
        plotSize: 'small-plots',
        cvPercent: (100 * Math.sqrt(draw.ms)) / level,
        entryP: null,
        management: {},
      });
    }
  const errors = shrinkErrors(draws);
  const cells = draws.flatMap((draw, t): NetworkCell[] =>
    [...draw.means].map(([entry, mean]) => ({
      entry,
      trial: trials[t]!.trial,
      mean,
      variance: errors[t]! / REPLICATES,
      df: draw.df,
    })),
  );
  return {
    network: {
      trials,
      names: {},
      traits: [
        {
          trait: 'yield',
          better: 'higher',
          practicalMargin: 0.05,
          usual: { ...USUAL, source: 'crop-default' },
          cells,
          cvLimitPercent: 15,
        },
      ],
    },
    truth: new Map(names.map((name) => [name, effect(name, plan.entrySd)])),
    ownSeasonVariance: 2 * plan.factor * (USUAL.site + USUAL.year + USUAL.rest),
  };
}
