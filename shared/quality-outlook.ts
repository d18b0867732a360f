import type { GapDistribution, MoneyAssumptions } from './money.ts';
import type { MoneyBasis } from './money-basis.ts';
import { groupRules, layOutSteps } from './premium-steps.ts';
import type { TraitOutlook } from './premium-states.ts';
import type { CandidateResult } from './weigh-up.ts';

/**
 * What is known of the traits that a buyer pays by.
 * @returns nothing where there are no rules; `unknown` where a trait of theirs was not measured on both varieties, or
 * on the current one in fewer than three trials: then it cannot be told how often a limit is met
 */
export function readQualityOutlook(
  traits: CandidateResult['traits'],
  { levels }: MoneyBasis,
  money: Pick<MoneyAssumptions, 'qualityRules' | 'currentLevels'>,
): TraitOutlook[] | 'unknown' {
  const outlook: TraitOutlook[] = [];
  for (const [slug, rules] of groupRules(money.qualityRules ?? [])) {
    const known = levels.find(({ traitSlug }) => traitSlug === slug);
    const gaps = readGaps(traits.find(({ traitSlug }) => traitSlug === slug));
    const level = money.currentLevels?.[slug] ?? known?.mean;
    const spread = known?.spread ?? null;
    if (level === undefined || spread === null || gaps === null) return 'unknown';
    // What the grower says is about the own land; a mean of trials is itself known by so many of them only.
    const isOwn = money.currentLevels?.[slug] !== undefined;
    const trials = known?.trials ?? 0;
    const predicted = isOwn ? spread : spread * Math.sqrt(1 + 1 / trials);
    outlook.push({ steps: layOutSteps(rules), level, spread: predicted, ...gaps });
  }
  return outlook;
}

/**
 * The gap pulled back as the yield's is, with what is left to know of it: mean and standard error of one and the same
 * distribution. Copies frozen before that was told have the plain gap's standard errors, which are larger.
 */
function readGaps(
  trait: CandidateResult['traits'][number] | undefined,
): { ownSeason: GapDistribution; region: GapDistribution } | null {
  const gap = trait?.gap ?? null;
  if (gap === null || gap.ownSeason === null) return null;
  const estimate = gap.shrunken ?? gap.estimate;
  const se = gap.shrunkenSe ?? { region: gap.se, ownSeason: gap.ownSeason.se };
  return {
    ownSeason: { estimate, se: se.ownSeason, df: gap.ownSeason.df },
    region: { estimate, se: se.region, df: gap.df },
  };
}
