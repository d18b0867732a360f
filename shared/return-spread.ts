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
  return {
    chanceOver: (amount) => {
      const tail = parts.length > partsForTable ? tabulateStudentTail(gap.df) : openStudentTail(gap.df);
      return chanceOver(amount, parts, gap, tail);
    },
    quantile: (probability) => findQuantile(probability, parts, gap, tabulateStudentTail(gap.df)),
  };
}

/** To make the table takes as long as so many tails. */
const partsForTable = 256;

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
  let [atLow, atHigh] = [excess(low), excess(high)];
  // Few degrees of freedom have far tails: the reach doubles until it holds the quantile.
  while (atLow < 0) {
    [high, atHigh] = [low, atLow];
    low -= reach *= 2;
    atLow = excess(low);
  }
  while (atHigh > 0) {
    [low, atLow] = [high, atHigh];
    high += reach *= 2;
    atHigh = excess(high);
  }
  return narrowDown(excess, { low, atLow, high, atHigh });
}

/** Two amounts with the root between them, and the falling function there. */
type Bracket = { low: number; atLow: number; high: number; atHigh: number };

/**
 * Root of a falling function: the secant, where an end that stays counts half as much each time (Illinois), and every
 * fourth step the middle, which cannot stall at a jump.
 * Source: Dowell & Jarratt (1971), BIT 11:168–174.
 */
function narrowDown(excess: (amount: number) => number, { low, atLow, high, atHigh }: Bracket): number {
  let stayed: 'low' | 'high' | null = null;
  for (let step = 1; step <= 120 && high - low > 1e-7 * (1 + Math.abs(low)); step += 1) {
    const secant = low + ((high - low) * atLow) / (atLow - atHigh);
    const next = step % 4 === 0 || !(secant > low && secant < high) ? (low + high) / 2 : secant;
    const at = excess(next);
    if (Math.abs(at) < 1e-7) return next;
    if (at > 0) {
      [low, atLow] = [next, at];
      if (stayed === 'high') atHigh /= 2;
      stayed = 'high';
    } else {
      [high, atHigh] = [next, at];
      if (stayed === 'low') atLow /= 2;
      stayed = 'low';
    }
  }
  return (low + high) / 2;
}
