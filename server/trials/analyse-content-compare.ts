import { groupUndiffering, type FamilyTable, type TrialAnalysis } from '#server/stats/engine.ts';
import type { AnalysisOutcome, ComparisonMethod, PairGap } from '#shared/trial.ts';
import { findEntryTest } from './trial-fit.ts';

/** The gaps of a family of means under one comparison. */
export type ComparedPairs = {
  gaps: PairGap[];
  /** By entry; '' where the comparison gives none. */
  letters: ReadonlyMap<string, string>;
  pairsDifferent: number;
  pairsTotal: number;
};

type Gap = TrialAnalysis['gaps'][number];
/** p of a pair under the comparison; null where the comparison does not speak of it. */
type PairTest = (gap: Gap) => number | null;

const alphabet = 'abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ';

/**
 * Judges every pair by one comparison. A pair differs when p < alpha, strictly.
 * @param check the entry that Dunnett's test compares with; null where the trial has none
 * @returns with `outcome` why the comparison asked for could not be made
 */
export function comparePairs(
  result: TrialAnalysis,
  comparison: ComparisonMethod,
  alpha: number,
  check: string | null,
): ComparedPairs & { outcome: AnalysisOutcome | null } {
  const { test, outcome } = chooseTest(result, comparison, check);
  return { ...judgePairs(result, test, alpha), outcome };
}

/**
 * Judges the pairs of a factor's levels. Comparisons that speak of entries alone, with a check or with the best, do not
 * apply to them: the LSD stands in.
 * @param overall p of the factor's own F test
 */
export function compareLevels(
  table: FamilyTable,
  comparison: ComparisonMethod,
  alpha: number,
  overall: number | null,
): ComparedPairs {
  const isOfEntries = comparison === 'dunnett' || comparison === 'best';
  return judgePairs(table, testByPairs(isOfEntries ? 'lsd' : comparison, overall), alpha);
}

function judgePairs(table: FamilyTable, test: PairTest, alpha: number): ComparedPairs {
  const tested = table.gaps.map((gap) => ({ gap, p: test(gap) }));
  const compared = tested.filter(({ p }) => p !== null);
  const different = compared.filter(({ p }) => p !== null && p < alpha);
  const isWhole = compared.length === table.gaps.length && compared.length > 0;
  return {
    gaps: tested.map(({ gap, p }) => ({
      a: gap.a,
      b: gap.b,
      estimate: gap.estimate,
      se: gap.se,
      df: gap.df,
      lsd: lsdOf(gap, alpha),
      p,
    })),
    letters: isWhole
      ? giveLetters(
          table,
          different.map(({ gap }) => gap),
        )
      : new Map<string, string>(),
    pairsDifferent: different.length,
    pairsTotal: compared.length,
  };
}

function chooseTest(
  result: TrialAnalysis,
  comparison: ComparisonMethod,
  check: string | null,
): { test: PairTest; outcome: AnalysisOutcome | null } {
  switch (comparison) {
    case 'dunnett': {
      if (check === null) return { test: () => null, outcome: { code: 'unknown-check', values: {} } };
      const byEntry = new Map(result.dunnett?.rows.map((row) => [row.entry, row.p]));
      const test: PairTest = ({ a, b }) => {
        if (a !== check && b !== check) return null;
        return byEntry.get(a === check ? b : a) ?? null;
      };
      return { test, outcome: null };
    }
    case 'best':
      // The comparison with the best judges entries, not pairs; without it the LSD stands in, and that is said.
      return result.best === null
        ? { test: testByPairs('lsd', null), outcome: { code: 'comparison-not-available', values: {} } }
        : { test: () => null, outcome: null };
    default:
      return { test: testByPairs(comparison, findEntryTest(result.anova)?.p ?? null), outcome: null };
  }
}

/** @param overall p of the F test that guards the protected LSD */
function testByPairs(
  comparison: Exclude<ComparisonMethod, 'dunnett' | 'best'>,
  overall: number | null,
): PairTest {
  switch (comparison) {
    case 'lsd':
      return (gap) => gap.p;
    case 'protected-lsd':
      // No pair is told apart unless the F test of all is; the larger of the two p says both at once.
      return (gap) => (overall === null || gap.p === null ? null : Math.max(gap.p, overall));
    case 'tukey':
      return (gap) => gap.pTukey;
    case 'holm':
      return (gap) => gap.pHolm;
    case 'bonferroni':
      return (gap) => gap.pBonferroni;
  }
}

/** The pair's least significant difference at a level that the engine tabulates. */
function lsdOf(gap: Gap, alpha: number): number | null {
  if (alpha === 0.05) return gap.lsd05;
  if (alpha === 0.1) return gap.lsd10;
  return alpha === 0.01 ? gap.lsd01 : null;
}

/** Entries that share a letter are not told apart (Piepho 2004); largest mean first. */
function giveLetters(table: FamilyTable, different: readonly Gap[]): Map<string, string> {
  const order = table.means
    .filter((row) => row.mean !== null)
    .toSorted((x, y) => (y.mean ?? 0) - (x.mean ?? 0))
    .map((row) => row.entry);
  const apart = new Set(different.flatMap((gap) => [`${gap.a}\n${gap.b}`, `${gap.b}\n${gap.a}`]));
  const groups = groupUndiffering(order.length, (a, b) => apart.has(`${order[a]}\n${order[b]}`));
  if (groups === null || groups.length > alphabet.length) return new Map();
  return new Map(
    order.map((entry, place) => [
      entry,
      groups.flatMap((group, i) => (group.includes(place) ? alphabet.charAt(i) : [])).join(''),
    ]),
  );
}
