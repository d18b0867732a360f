import type { QualityRule } from './money.ts';

/** The premium per tonne over a trait's level: `premiums[i]` holds from `limits[i − 1]` up to `limits[i]`. */
export type PremiumSteps = {
  /** Ascending, in the trait's unit. */
  limits: readonly number[];
  /** One more than the limits; a discount is negative. */
  premiums: readonly number[];
};

/** What the rules of one trait add to the price at each level; rules that hold at once add up. */
export function layOutSteps(rules: readonly QualityRule[]): PremiumSteps {
  const limits = [...new Set(rules.map(({ limit }) => limit))].sort((a, b) => a - b);
  const premiums = [-Infinity, ...limits].map((from) =>
    rules
      .filter(({ side, limit }) => (side === 'at-least' ? from >= limit : from < limit))
      .reduce((sum, { perTonne }) => sum + perTonne, 0),
  );
  return { limits, premiums };
}

/** The rules by trait, in the order in which they were given. */
export function groupRules(rules: readonly QualityRule[]): Map<string, QualityRule[]> {
  const byTrait = new Map<string, QualityRule[]>();
  for (const rule of rules) byTrait.set(rule.traitSlug, [...(byTrait.get(rule.traitSlug) ?? []), rule]);
  return byTrait;
}
