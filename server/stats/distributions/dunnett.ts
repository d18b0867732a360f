import { expandedTail, oneFactorTail } from './equicoordinate.ts';
import { latticeDifference } from './equicoordinate-lattice.ts';
import { findUpperQuantile } from './find-root.ts';
import { type Correlation, fitOneFactor, type OneFactor } from './one-factor.ts';
import { averageOverScale } from './scale-average.ts';
import { type ScaledTail, tabulateTail } from './scaled-tail.ts';

/** How the probability was found: exactly, by expansion around one shared factor, or by a lattice rule as well. */
export type DunnettMethod = 'product-form' | 'expansion' | 'lattice';

/** Adjusted p values, the method, and the largest error to expect in any of them. */
export interface DunnettResult {
  readonly p: Float64Array;
  readonly method: DunnettMethod;
  readonly maxError: number;
}

const DECAY = 0.5;
/** Correlations this near to λ_i λ_j are taken as equal: the effect on p is smaller still. */
const EXACT_REST = 1e-9;
const QUADRATURE_ERROR = 1e-9;
const COARSE_ERROR = 1e-7;
const LATTICE_TARGET = 1e-6;
/** Deviates beyond which no error is left to see. */
const FARTHEST = 36;

/** Error above which the slow lattice is asked; less is wanted of a p that no verdict hangs on. */
function errorAllowed(p: number): number {
  return p > 0.3 ? 0.02 : 2e-4 + 5e-3 * p;
}

/** P(max |Z_i| > w) tabulated, and what a p at t may be wrong by. */
interface FamilyTail {
  readonly factor: OneFactor;
  readonly isExact: boolean;
  readonly tail: ScaledTail;
  readonly errorAt: (t: number) => number;
}

const families = new WeakMap<Correlation, FamilyTail>();

/** The family's tail: kept with its correlations, since p values and intervals of one family ask for the same. */
function familyTail(correlation: Correlation): FamilyTail {
  const known = families.get(correlation);
  if (known) return known;
  const built = buildFamilyTail(correlation);
  families.set(correlation, built);
  return built;
}

function buildFamilyTail(correlation: Correlation): FamilyTail {
  const factor = fitOneFactor(correlation);
  if (factor.largestRest <= EXACT_REST) {
    const tail = tabulateTail(oneFactorTail(factor.loadings, true), DECAY);
    return { factor, isExact: true, tail, errorAt: () => QUADRATURE_ERROR };
  }
  const evaluate = expandedTail(factor, true);
  return {
    factor,
    isExact: false,
    tail: tabulateTail((w) => evaluate(w).upper, DECAY, false),
    // The estimated scale moves w around t.
    errorAt: (t) =>
      COARSE_ERROR + Math.max(...[0.7, 1, 1.3].map((scale) => evaluate(Math.min(FARTHEST, t * scale)).error)),
  };
}

/** P(max |T_i| > t) with what it may be wrong by; the lattice is asked only where the expansion is not enough. */
function adjustOne(
  family: FamilyTail,
  correlation: Correlation,
  t: number,
  df: number,
): { readonly p: number; readonly error: number; readonly usesLattice: boolean } {
  const p = averageOverScale(family.tail, t, df);
  const error = family.errorAt(t);
  if (error <= errorAllowed(p)) return { p, error, usesLattice: false };
  const approximate = averageOverScale(
    tabulateTail(oneFactorTail(family.factor.loadings, true), DECAY),
    t,
    df,
  );
  const difference = latticeDifference(correlation, family.factor, t, df, LATTICE_TARGET);
  // The lattice replaces the expansion only where it knows better.
  if (difference.error >= error) return { p, error, usesLattice: false };
  const corrected = Math.min(1, Math.max(0, approximate + difference.mean));
  return { p: corrected, error: difference.error, usesLattice: true };
}

/**
 * Adjusted two-sided p values of a single-step comparison of several entries with one check.
 * @param family.ts estimates divided by their standard errors, length m; signs are ignored
 * @param family.df degrees of freedom, fractional or Infinity: one for all, or one for each comparison
 * @param family.correlation of the estimates, m × m; not to be changed afterwards
 * @returns p in the order of ts, the method, and the largest error to expect of a p
 * @throws RangeError when a correlation, t or df is out of range
 * Source: Dunnett (1955), J. Amer. Statist. Assoc. 50:1096–1121.
 */
export function dunnettAdjust(family: {
  readonly ts: ArrayLike<number>;
  readonly df: number | ArrayLike<number>;
  readonly correlation: Correlation;
}): DunnettResult {
  const { ts, df, correlation } = family;
  if (ts.length !== correlation.length)
    throw new RangeError(`${ts.length} estimates, ${correlation.length} correlations`);
  const tail = familyTail(correlation);
  const rows = Array.from(ts, (t, i) =>
    adjustOne(tail, correlation, Math.abs(t), typeof df === 'number' ? df : (df[i] ?? 0)),
  );
  const inexact = rows.some((row) => row.usesLattice) ? 'lattice' : 'expansion';
  return {
    p: Float64Array.from(rows, (row) => row.p),
    method: tail.isExact ? 'product-form' : inexact,
    maxError: rows.reduce((worst, row) => Math.max(worst, row.error), 0),
  };
}

/**
 * The d with P(max |T| > d) = alpha: the critical value of two-sided comparisons with one check.
 * @param family.alpha in (0, 1)
 * @param family.df degrees of freedom, fractional or Infinity
 * @param family.correlation of the estimates, m × m
 * @throws RangeError when an argument is out of range
 */
export function dunnettQuantile(family: {
  readonly alpha: number;
  readonly df: number;
  readonly correlation: Correlation;
}): number {
  const { alpha, df, correlation } = family;
  if (!(alpha > 0 && alpha < 1)) throw new RangeError(`a tail must lie between 0 and 1, got ${alpha}`);
  const tail = familyTail(correlation);
  const solve = (shift: number): number =>
    findUpperQuantile((d) => averageOverScale(tail.tail, d, df) + shift, alpha, 2);
  const first = solve(0);
  const there = adjustOne(tail, correlation, first, df);
  return there.usesLattice ? solve(there.p - alpha) : first;
}
