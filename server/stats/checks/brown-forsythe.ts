import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';
import type { FTest } from './f-test.ts';
import { positionsByGroup } from './group-positions.ts';
import { median } from './median.ts';

/**
 * Brown–Forsythe test of equal spread: one-way analysis of |value − median of its group|.
 * @param values residuals or responses, length n
 * @param groups the group of each value (entry, or block), length n
 * @returns F test; not computed with one group, one value a group, or no spread at all
 * Source: Brown & Forsythe (1974), J. Amer. Statist. Assoc. 69:364–367.
 */
export function brownForsythe(
  values: ArrayLike<number>,
  groups: ArrayLike<number | string>,
): CheckOutcome<FTest> {
  const n = values.length;
  const members = [...positionsByGroup(groups).values()];
  if (members.length < 2) return notComputed('one-group');
  const df1 = members.length - 1;
  const df2 = n - members.length;
  if (df2 < 1) return notComputed('too-few-values');
  const spreads = members.map((positions) => {
    const own = positions.map((i) => values[i] ?? 0);
    const centre = median(own);
    return own.map((value) => Math.abs(value - centre));
  });
  const means = spreads.map((group) => group.reduce((sum, z) => sum + z, 0) / group.length);
  const grand = spreads.flat().reduce((sum, z) => sum + z, 0) / n;
  let between = 0;
  let within = 0;
  spreads.forEach((group, g) => {
    const mean = means[g] ?? 0;
    between += group.length * (mean - grand) ** 2;
    for (const z of group) within += (z - mean) ** 2;
  });
  if (within === 0) return notComputed('no-spread');
  const f = between / df1 / (within / df2);
  return { computed: true, f, df1, df2, p: fUpper(f, df1, df2) };
}
