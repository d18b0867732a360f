import { tQuantileUpper } from '#server/stats/distributions/student-t.ts';
import { noncentralTUpper } from '#server/stats/distributions/noncentral-t.ts';
import type { InteractionVariances } from './network-cell.ts';
import { invertSmall } from './small-symmetric.ts';
import { penaltyInformation, type VariancePenalty } from './variance-penalty.ts';

/** How the evidence on a gap lies now. */
export interface SettleQuestion {
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
  readonly level: number;
  readonly components: InteractionVariances;
  /** typical v of a cell */
  readonly cellVariance: number;
  readonly entries: number;
  readonly sites: number;
  readonly seasons: number;
  readonly environments: number;
  /** null for plain REML */
  readonly penalty: VariancePenalty | null;
}

/** Reported where more than 40 are needed. */
export const MORE_THAN_FORTY = 41;
const POWER = 0.8;

/**
 * Variance and df of a gap in a complete table of sites × seasons, by the strata of its analysis of variance:
 * λ = (Tθ_s + r, Sθ_y + r, r), df = (J−1)·(S−1, T−1, (S−1)(T−1)), gap variance 2(θ_s/S + θ_y/T + r/ST).
 */
function foresee(question: SettleQuestion, seasons: number): { variance: number; df: number } {
  const { components, cellVariance, entries, sites, penalty } = question;
  const rest = components.rest + cellVariance;
  const others = entries - 1;
  const strata = [
    { jacobian: [seasons, 0, 1], lambda: seasons * components.site + rest, df: others * (sites - 1) },
    {
      jacobian: [0, sites, 1],
      lambda: sites * components.year + rest,
      df: others * Math.max(0, seasons - 1),
    },
    { jacobian: [0, 0, 1], lambda: rest, df: others * (sites - 1) * Math.max(0, seasons - 1) },
  ];
  const theta = Float64Array.of(components.site, components.year, components.rest);
  const pull = penalty && penaltyInformation(penalty, theta);
  const information = new Float64Array(9);
  for (let k = 0; k < 3; k++) {
    for (let l = 0; l < 3; l++)
      for (const { jacobian, lambda, df } of strata)
        information[k * 3 + l]! += (jacobian[k]! * jacobian[l]! * df) / (2 * lambda * lambda);
    if (!(theta[k]! > 0)) information[k * 4] = 1e300;
    else if (pull !== null)
      for (let l = 0; l < 3; l++) information[k * 3 + l]! += pull[k * 3 + l]! / (theta[k]! * theta[l]!);
  }
  const variance = 2 * (components.site / sites + components.year / seasons + rest / (sites * seasons));
  const slope = [2 / sites, 2 / seasons, 2 / (sites * seasons)];
  const w = invertSmall(information, 3);
  if (w === null) return { variance, df: question.df };
  let spread = 0;
  for (let k = 0; k < 3; k++) for (let l = 0; l < 3; l++) spread += slope[k]! * w[k * 3 + l]! * slope[l]!;
  return { variance, df: (2 * variance * variance) / spread };
}

/**
 * Smallest number of further site-years, at the present sites and as many a season as now, at which the present gap
 * would lie outside ± its interval with power .8, were it the true one.
 * The complete table foretells how variance and df change; both start from what they are now.
 * @returns 1 … 40, or 41 for more than 40
 */
export function countSiteYearsToSettle(question: SettleQuestion): number {
  const { estimate, se, df, level, environments, seasons } = question;
  if (estimate === 0) return MORE_THAN_FORTY;
  const perSeason = environments / seasons;
  const now = foresee(question, seasons);
  for (let more = 1; more < MORE_THAN_FORTY; more++) {
    const then = foresee(question, seasons + more / perSeason);
    const variance = (se * se * then.variance) / now.variance;
    const thenDf = Math.max(1, (df * then.df) / now.df);
    const limit = tQuantileUpper((1 - level) / 2, thenDf);
    if (noncentralTUpper(limit, thenDf, Math.abs(estimate) / Math.sqrt(variance)) >= POWER) return more;
  }
  return MORE_THAN_FORTY;
}
