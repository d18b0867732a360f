import { tabulate } from './chebyshev-panels.ts';

/**
 * An upper tail P(W > w) of a statistic of normal variables, held as scaled(w) = exp(decay w²) P(W > w):
 * smooth and of moderate size everywhere, so that a small tail keeps its relative accuracy.
 */
export interface ScaledTail {
  readonly decay: number;
  scaled(w: number): number;
}

/** Widths of a panel times √decay: exp(decay w²) turns little enough on it for 1e-11, and for 1e-8. */
const FINE_WIDTH = 0.9;
const COARSE_WIDTH = 1.4;
/** Exponent beyond which the unscaled tail nears the smallest double. */
const LAST_EXPONENT = 660;

/**
 * Tabulates a costly upper tail.
 * @param tail P(W > w) for w of at least 0, falling like exp(−decay w²)
 * @param decay see ScaledTail
 * @param isFine whether to keep eleven digits, or eight at two thirds of the cost
 */
export function tabulateTail(tail: (w: number) => number, decay: number, isFine = true): ScaledTail {
  const last = Math.sqrt(LAST_EXPONENT / decay);
  const exact = (w: number): number => tail(Math.min(w, last)) * Math.exp(decay * Math.min(w, last) ** 2);
  const cheap = tabulate(exact, (isFine ? FINE_WIDTH : COARSE_WIDTH) / Math.sqrt(decay));
  return { decay, scaled: (w) => cheap(Math.min(w, last)) };
}
