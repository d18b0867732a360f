import type { GapDistribution } from './money.ts';
import { openStudentTail, tabulateStudentTail } from './student-tail.ts';

/** One way it may come: under it the return is `slope` × gap + `offset`, per ha. */
export type ReturnPart = { slope: number; offset: number; weight: number };

/** The return spread over gap, prices and premiums. */
export type ReturnSpread = {
  /** Chance, 0 to 1, of a return over an amount per ha. */
  chanceOver: (amount: number) => number;
  /** The amount per ha that the return stays under with a probability between 0 and 1. */
  quantile: (probability: number) => number;
};

/**
 * A mixture of scaled t distributions, one a part: nothing is drawn by chance, the same parts give the same answer.
 * @param parts their weights sum to 1
 * @param gap t/ha
 */
export function spreadReturn(parts: readonly ReturnPart[], gap: GapDistribution): ReturnSpread {
  const tail = openStudentTail(gap.df);
  let tableOfTail: typeof tail | null = null;
  return {
    chanceOver: (amount) => chanceOver(amount, parts, gap, tail),
    quantile: (probability) => {
      tableOfTail ??= tabulateStudentTail(gap.df);
      return findQuantile(probability, parts, gap, tableOfTail);
    },
  };
}

function chanceOver(
  amount: number,
  parts: readonly ReturnPart[],
  gap: GapDistribution,
  tail: (t: number) => number,
): number {
  let sum = 0;
  for (const { slope, offset, weight } of parts) {
    if (slope === 0 || gap.se === 0) {
      sum += weight * Number(slope * gap.estimate + offset > amount);
      continue;
    }
    const above = tail(((amount - offset) / slope - gap.estimate) / gap.se);
    // A tonne that costs more than it brings turns the gap round.
    sum += weight * (slope > 0 ? above : 1 - above);
  }
  return sum;
}

function findQuantile(
  probability: number,
  parts: readonly ReturnPart[],
  gap: GapDistribution,
  tail: (t: number) => number,
): number {
  const excess = (amount: number): number => chanceOver(amount, parts, gap, tail) - (1 - probability);
  const centres = parts.map(({ slope, offset }) => slope * gap.estimate + offset);
  let reach = 2 * gap.se * Math.max(...parts.map(({ slope }) => Math.abs(slope))) + 1e-6;
  let low = Math.min(...centres) - reach;
  let high = Math.max(...centres) + reach;
  // Few degrees of freedom have far tails: the reach doubles until it holds the quantile.
  while (excess(low) < 0) low -= reach *= 2;
  while (excess(high) > 0) high += reach *= 2;
  return narrowDown(excess, low, high);
}

/** Root of a falling function between two bounds: the secant, and every third step the middle, which cannot stall. */
function narrowDown(excess: (amount: number) => number, from: number, to: number): number {
  let [low, high] = [from, to];
  let [atLow, atHigh] = [excess(low), excess(high)];
  for (let step = 1; step <= 90 && high - low > 1e-7 * (1 + Math.abs(low)); step += 1) {
    const secant = low + ((high - low) * atLow) / (atLow - atHigh);
    const next = step % 3 === 0 || !(secant > low && secant < high) ? (low + high) / 2 : secant;
    const at = excess(next);
    if (Math.abs(at) < 1e-7) return next;
    if (at > 0) [low, atLow] = [next, at];
    else [high, atHigh] = [next, at];
  }
  return (low + high) / 2;
}
