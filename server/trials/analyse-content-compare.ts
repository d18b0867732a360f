import { groupUndiffering, type TrialAnalysis } from '#server/stats/engine.ts';
import type { AnalysisOutcome, ComparisonMethod, PairGap } from '#shared/trial.ts';
import { findEntryTest } from './trial-fit.ts';

/** The gaps of a trial under one comparison. */
export type ComparedPairs = {
  gaps: PairGap[];
  /** By entry; '' where the comparison gives none. */
  letters: ReadonlyMap<string, string>;
  pairsDifferent: number;
  pairsTotal: number;
  /** Why the comparison asked for could not be made. */
  outcome: AnalysisOutcome | null;
};

type Gap = TrialAnalysis['gaps'][number];
/** p of a pair under the comparison; null where the comparison does not speak of it. */
type PairTest = (gap: Gap) => number | null;

const alphabet = 'abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ';

/**
 * Judges every pair by one comparison. A pair differs when p < alpha, strictly.
 * @param check the entry that Dunnett's test compares with; null where the trial has none
 */
export function comparePairs(
  result: TrialAnalysis,
  comparison: ComparisonMethod,
  alpha: number,
  check: string | null,
): ComparedPairs {
  const { test, outcome } = chooseTest(result, comparison, check);
  const tested = result.gaps.map((gap) => ({ gap, p: test(gap) }));
  const compared = tested.filter(({ p }) => p !== null);
  const different = compared.filter(({ p }) => p !== null && p < alpha);
  const isWhole = compared.length === result.gaps.length && compared.length > 0;
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
          result,
          different.map(({ gap }) => gap),
        )
      : new Map<string, string>(),
    pairsDifferent: different.length,
    pairsTotal: compared.length,
    outcome,
  };
}

function chooseTest(
  result: TrialAnalysis,
  comparison: ComparisonMethod,
  check: string | null,
): { test: PairTest; outcome: AnalysisOutcome | null } {
  const byLsd: PairTest = (gap) => gap.p;
  switch (comparison) {
    case 'lsd':
      return { test: byLsd, outcome: null };
    case 'protected-lsd': {
      // No pair is told apart unless the F test of all entries is; the larger of the two p says both at once.
      const overall = findEntryTest(result.anova)?.p ?? null;
      const test: PairTest = (gap) => (overall === null || gap.p === null ? null : Math.max(gap.p, overall));
      return { test, outcome: null };
    }
    case 'tukey':
      return { test: (gap) => gap.pTukey, outcome: null };
    case 'holm':
      return { test: (gap) => gap.pHolm, outcome: null };
    case 'bonferroni':
      return { test: (gap) => gap.pBonferroni, outcome: null };
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
      return { test: byLsd, outcome: { code: 'comparison-not-available', values: {} } };
  }
}

/** The pair's least significant difference at a level that the engine tabulates. */
function lsdOf(gap: Gap, alpha: number): number | null {
  if (alpha === 0.05) return gap.lsd05;
  if (alpha === 0.1) return gap.lsd10;
  return alpha === 0.01 ? gap.lsd01 : null;
}

/** Entries that share a letter are not told apart (Piepho 2004); largest mean first. */
function giveLetters(result: TrialAnalysis, different: readonly Gap[]): Map<string, string> {
  const order = result.means
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
