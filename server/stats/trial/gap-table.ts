import { bonferroniAdjust, holmAdjust } from '#server/stats/distributions/holm.ts';
import { tQuantileUpper, tTwoSided } from '#server/stats/distributions/student-t.ts';
import { studentisedRangeUpper, tukeyAdjust } from '#server/stats/distributions/studentised-range.ts';
import { groupUndiffering } from './different-groups.ts';
import { isEstimable, type MeanFamily } from './mean-family.ts';
import type { AdjustedMean, FamilyTable, Gap, LsdSummary, TrialNotice } from './trial-result.ts';

/** The means of a family as a fit estimates them: all that gaps, LSDs and comparisons need. */
export interface MeanEstimates {
  readonly family: MeanFamily;
  /** minus center, which is added only to what a person reads */
  readonly values: Float64Array;
  readonly center: number;
  /** e × e, null without residual df */
  readonly covariance: Float64Array | null;
  /** of a mean (b null) or of a gap */
  readonly dfOf: (a: number, b: number | null) => number;
  /** whether all gaps share their df */
  readonly hasSharedDf: boolean;
  /** whether the residual variance is 0: standard errors of 0, and nothing to test with */
  readonly isExact: boolean;
}

/** Kenward–Roger df below this mean that the error is hardly known: there is no test and no LSD then. */
export const leastTestDf = 0.2;

const lsdLevels = [0.05, 0.1, 0.01] as const;

/**
 * Means, all gaps with their LSDs and adjusted p, and the groups of entries that do not differ.
 * @param missing labels of entries without a used plot: listed, not estimable
 * @param order places of all labels (family's, then missing's) in table order
 */
export function tabulateFamily(
  estimates: MeanEstimates,
  alpha: number,
  missing: readonly string[] = [],
  order: readonly string[] = estimates.family.labels,
): FamilyTable & { readonly notices: readonly TrialNotice[] } {
  const { family } = estimates;
  const pairs = estimatePairs(estimates);
  const adjusted = adjustPairs(pairs, family);
  const { groups, notices } = groupMeans(estimates, pairs, alpha);
  if (pairs.df.some((df, g) => pairs.estimable[g] === 1 && df > 0 && !(df >= leastTestDf)))
    notices.push({ code: 'no-residual-df' });
  const place = new Map(order.map((label, i) => [label, i]));
  const quantiles = new Map<number, readonly [number, number, number]>();
  const gaps: Gap[] = new Array<Gap>(pairs.a.length);
  for (let g = 0; g < gaps.length; g++) gaps[g] = describeGap(estimates, pairs, adjusted, g, quantiles);
  return {
    means: order.map((label) => describeMean(estimates, label, missing)),
    gaps: missing.length === 0 ? gaps : insertMissing(gaps, missing, place),
    lsd: summariseLsd(gaps, pairs, alpha),
    groups,
    notices,
  };
}

interface Pairs {
  readonly a: Int32Array;
  readonly b: Int32Array;
  readonly estimable: Uint8Array;
  readonly estimate: Float64Array;
  /** 0 where there is none */
  readonly se: Float64Array;
  readonly df: Float64Array;
  /** NaN where there is no test */
  readonly t: Float64Array;
  readonly p: Float64Array;
  readonly hasSharedDf: boolean;
}

function estimatePairs(estimates: MeanEstimates): Pairs {
  const { family, values, covariance } = estimates;
  const size = family.labels.length;
  const count = (size * (size - 1)) / 2;
  const pairs = {
    a: new Int32Array(count),
    b: new Int32Array(count),
    estimable: new Uint8Array(count),
    estimate: new Float64Array(count),
    se: new Float64Array(count),
    df: new Float64Array(count),
    t: new Float64Array(count).fill(Number.NaN),
    p: new Float64Array(count).fill(Number.NaN),
    hasSharedDf: estimates.hasSharedDf,
  };
  let g = 0;
  for (let a = 0; a < size; a++)
    for (let b = a + 1; b < size; b++, g++) {
      pairs.a[g] = a;
      pairs.b[g] = b;
      pairs.estimate[g] = values[a]! - values[b]!;
      if (!isEstimable(family, a, b)) continue;
      pairs.estimable[g] = 1;
      if (!covariance) continue;
      const variance = covariance[a * size + a]! + covariance[b * size + b]! - 2 * covariance[a * size + b]!;
      pairs.se[g] = Math.sqrt(Math.max(0, variance));
      pairs.df[g] = estimates.dfOf(a, b);
      if (estimates.isExact || !(pairs.se[g]! > 0) || !(pairs.df[g]! >= leastTestDf)) continue;
      pairs.t[g] = pairs.estimate[g]! / pairs.se[g]!;
      pairs.p[g] = tTwoSided(pairs.t[g]!, pairs.df[g]!);
    }
  return pairs;
}

interface AdjustedP {
  readonly tukey: Float64Array;
  readonly holm: Float64Array;
  readonly bonferroni: Float64Array;
}

/** Adjusts over all tested gaps of the family; NaN where a gap is not tested. */
function adjustPairs(pairs: Pairs, family: MeanFamily): AdjustedP {
  const count = pairs.p.length;
  const tested = new Int32Array(count);
  let tests = 0;
  for (let g = 0; g < count; g++) if (!Number.isNaN(pairs.p[g]!)) tested[tests++] = g;
  const isWhole = tests === count;
  const pick = (values: Float64Array) => (isWhole ? values : gather(values, tested.subarray(0, tests)));
  const spread = (values: Float64Array) => (isWhole ? values : scatter(values, tested, count));
  const ps = pick(pairs.p);
  const ts = pick(pairs.t);
  return {
    tukey: spread(adjustTukey(ts, pick(pairs.df), family.labels.length, pairs.hasSharedDf)),
    holm: spread(holmAdjust(ps)),
    bonferroni: spread(bonferroniAdjust(ps)),
  };
}

function adjustTukey(ts: Float64Array, dfs: Float64Array, members: number, isShared: boolean): Float64Array {
  if (ts.length === 0) return ts;
  if (isShared) return tukeyAdjust(ts, members, dfs[0]!);
  return ts.map((t, i) => studentisedRangeUpper(Math.SQRT2 * Math.abs(t), members, dfs[i]!));
}

function gather(values: Float64Array, places: Int32Array): Float64Array {
  const out = new Float64Array(places.length);
  for (let i = 0; i < out.length; i++) out[i] = values[places[i]!]!;
  return out;
}

function scatter(values: Float64Array, places: Int32Array, count: number): Float64Array {
  const out = new Float64Array(count).fill(Number.NaN);
  for (let i = 0; i < values.length; i++) out[places[i]!] = values[i]!;
  return out;
}

function describeGap(
  estimates: MeanEstimates,
  pairs: Pairs,
  adjusted: AdjustedP,
  g: number,
  quantiles: Map<number, readonly [number, number, number]>,
): Gap {
  const labels = estimates.family.labels;
  const a = labels[pairs.a[g]!]!;
  const b = labels[pairs.b[g]!]!;
  if (!pairs.estimable[g]) return emptyGap(a, b);
  const hasVariance = estimates.covariance !== null;
  const df = pairs.df[g]!;
  const se = pairs.se[g]!;
  let quantile = quantiles.get(df);
  if (!quantile && hasVariance && df >= leastTestDf) {
    quantile = [tQuantileUpper(0.025, df), tQuantileUpper(0.05, df), tQuantileUpper(0.005, df)];
    quantiles.set(df, quantile);
  }
  return {
    a,
    b,
    estimate: pairs.estimate[g]!,
    se: hasVariance ? se : null,
    df: hasVariance ? df : null,
    t: orNull(pairs.t[g]!),
    p: orNull(pairs.p[g]!),
    lsd05: quantile ? quantile[0] * se : null,
    lsd10: quantile ? quantile[1] * se : null,
    lsd01: quantile ? quantile[2] * se : null,
    pTukey: orNull(adjusted.tukey[g]!),
    pHolm: orNull(adjusted.holm[g]!),
    pBonferroni: orNull(adjusted.bonferroni[g]!),
    estimable: true,
  };
}

function describeMean(estimates: MeanEstimates, label: string, missing: readonly string[]): AdjustedMean {
  const { family, covariance, center } = estimates;
  if (missing.includes(label))
    return { entry: label, n: 0, mean: null, se: null, df: null, estimable: false, rawMean: null };
  const i = family.labels.indexOf(label);
  const estimable = isEstimable(family, i, null);
  const size = family.labels.length;
  const n = family.counts[i]!;
  return {
    entry: label,
    n,
    mean: estimable ? center + estimates.values[i]! : null,
    se: estimable && covariance ? Math.sqrt(Math.max(0, covariance[i * size + i]!)) : null,
    df: estimable && covariance ? estimates.dfOf(i, null) : null,
    estimable,
    rawMean: n > 0 ? center + family.plainMeans[i]! : null,
  };
}

/** Places the gaps of entries without data where the table order wants them. */
function insertMissing(
  gaps: readonly Gap[],
  missing: readonly string[],
  place: ReadonlyMap<string, number>,
): Gap[] {
  const known = new Map(gaps.map((gap) => [JSON.stringify([gap.a, gap.b]), gap]));
  const order = [...place.keys()];
  const out: Gap[] = [];
  for (let i = 0; i < order.length; i++)
    for (let j = i + 1; j < order.length; j++) {
      const [a, b] = [order[i]!, order[j]!];
      const isKnown = !missing.includes(a) && !missing.includes(b);
      out.push((isKnown && known.get(JSON.stringify([a, b]))) || emptyGap(a, b));
    }
  return out;
}

function emptyGap(a: string, b: string): Gap {
  const nothing = { se: null, df: null, t: null, p: null, lsd05: null, lsd10: null, lsd01: null };
  return { a, b, estimate: null, ...nothing, pTukey: null, pHolm: null, pBonferroni: null, estimable: false };
}

/** Mean, smallest and largest LSD over the gaps that have one, for 5, 10 and 1 % and the trial's own level. */
function summariseLsd(gaps: readonly Gap[], pairs: Pairs, alpha: number): Record<string, LsdSummary> {
  const out: Record<string, LsdSummary> = {};
  const lists: [number, (gap: Gap, g: number) => number | null][] = [
    [lsdLevels[0], (gap) => gap.lsd05],
    [lsdLevels[1], (gap) => gap.lsd10],
    [lsdLevels[2], (gap) => gap.lsd01],
  ];
  if (!lists.some(([level]) => level === alpha))
    lists.push([
      alpha,
      (gap, g) =>
        gap.se === null || pairs.df[g]! < leastTestDf
          ? null
          : tQuantileUpper(alpha / 2, pairs.df[g]!) * gap.se,
    ]);
  for (const [level, pick] of lists) {
    let [sum, count, min, max] = [0, 0, Infinity, -Infinity];
    gaps.forEach((gap, g) => {
      const value = pick(gap, g);
      if (value === null) return;
      sum += value;
      count++;
      min = Math.min(min, value);
      max = Math.max(max, value);
    });
    if (count > 0) out[String(level)] = { mean: sum / count, min, max };
  }
  return out;
}

/** Groups at the trial's level, members by falling mean. A gap that cannot be estimated is not shown as a difference. */
function groupMeans(
  estimates: MeanEstimates,
  pairs: Pairs,
  alpha: number,
): { groups: string[][]; notices: TrialNotice[] } {
  const { family, values, covariance, isExact } = estimates;
  if (!covariance || isExact) return { groups: [], notices: [] };
  const size = family.labels.length;
  const level = (i: number) => (isEstimable(family, i, null) ? values[i]! : family.plainMeans[i]!);
  const order = Array.from({ length: size }, (_, i) => i).sort((i, j) => level(j) - level(i) || i - j);
  const pairOf = (i: number, j: number) => i * size - (i * (i + 1)) / 2 + (j - i - 1);
  const found = groupUndiffering(size, (x, y) => {
    const [i, j] = [Math.min(order[x]!, order[y]!), Math.max(order[x]!, order[y]!)];
    return pairs.p[pairOf(i, j)]! < alpha;
  });
  if (!found) return { groups: [], notices: [{ code: 'groups-too-many' }] };
  return { groups: found.map((group) => group.map((i) => family.labels[order[i]!]!)), notices: [] };
}

function orNull(value: number): number | null {
  return Number.isNaN(value) ? null : value;
}
