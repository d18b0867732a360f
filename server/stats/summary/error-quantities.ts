import { studentisedRangeQuantileUpper } from '#server/stats/distributions/studentised-range.ts';
import { tQuantileUpper } from '#server/stats/distributions/student-t.ts';
import type { Printed } from './printed-value.ts';

/** What a table may print about its error. */
export interface ErrorQuantities {
  readonly lsd?: Printed | undefined;
  readonly hsd?: Printed | undefined;
  /** Coefficient of variation, in %. */
  readonly cvPercent?: Printed | undefined;
  /** Standard error of an entry mean. */
  readonly seMean?: Printed | undefined;
  /** Standard error of a difference. */
  readonly sed?: Printed | undefined;
  readonly residualMs?: Printed | undefined;
  /** One gap with its unadjusted two-sided p. */
  readonly pair?: { readonly difference: Printed; readonly p: Printed } | undefined;
}

/** Name of a printed quantity. */
export type ErrorQuantity = keyof ErrorQuantities;

/** What the conversion of a quantity needs besides the quantity. */
export interface ErrorContext {
  readonly entries: number;
  /** Plots an entry; harmonic mean where they differ. */
  readonly replication?: number | undefined;
  readonly df: number;
  /** Level of LSD and HSD. */
  readonly alpha?: number | undefined;
  readonly trialMean?: Printed | undefined;
}

/** Why one printed quantity does not give a standard error. */
export type QuantityGap = 'no-alpha' | 'no-mean' | 'no-replication' | 'no-information';

/** A conversion that grows with every printed number it uses. */
export interface Conversion {
  readonly inputs: readonly Printed[];
  /** Standard error of a difference of two entries with the usual replication, from the inputs. */
  readonly toSed: (...inputs: number[]) => number;
  /** The quantity's own value, from that standard error. */
  readonly fromSed: (sed: number) => number;
}

/**
 * How a printed quantity and the standard error of a difference follow from each other.
 * @returns the conversion, or what is missing for it
 * Source: domain knowledge of trial tables; theory from memory: LSD = t SED, HSD = q SED/√2, SED = s √(2/r).
 */
export function conversionOf(
  quantity: ErrorQuantity,
  given: ErrorQuantities,
  context: ErrorContext,
): Conversion | QuantityGap | undefined {
  if (quantity === 'pair') return pairConversion(given.pair, context);
  const printed = given[quantity];
  if (!printed) return undefined;
  if (!(printed.value > 0)) return 'no-information';
  const factor = factorOf(quantity, context);
  if (typeof factor === 'string') return factor;
  if (quantity === 'residualMs') {
    return {
      inputs: [printed],
      toSed: (ms = 0) => Math.sqrt(ms) * factor,
      fromSed: (sed) => (sed / factor) ** 2,
    };
  }
  if (quantity === 'cvPercent') {
    const { trialMean } = context;
    if (!trialMean || !(trialMean.value > 0)) return 'no-mean';
    return {
      inputs: [printed, trialMean],
      toSed: (cv = 0, mean = 0) => (cv / 100) * mean * factor,
      fromSed: (sed) => (100 * sed) / factor / trialMean.value,
    };
  }
  return { inputs: [printed], toSed: (value = 0) => value * factor, fromSed: (sed) => sed / factor };
}

/** Standard error of a difference over the quantity, or over its root for a mean square. */
function factorOf(quantity: Exclude<ErrorQuantity, 'pair'>, context: ErrorContext): number | QuantityGap {
  const { alpha, df, entries, replication } = context;
  switch (quantity) {
    case 'sed':
      return 1;
    case 'seMean':
      return Math.SQRT2;
    case 'lsd':
      return alpha === undefined ? 'no-alpha' : 1 / tQuantileUpper(alpha / 2, df);
    case 'hsd':
      return alpha === undefined
        ? 'no-alpha'
        : Math.SQRT2 / studentisedRangeQuantileUpper(alpha, entries, df);
    case 'cvPercent':
    case 'residualMs':
      return replication === undefined ? 'no-replication' : Math.sqrt(2 / replication);
  }
}

function pairConversion(
  pair: ErrorQuantities['pair'],
  context: ErrorContext,
): Conversion | QuantityGap | undefined {
  if (!pair) return undefined;
  const difference = { ...pair.difference, value: Math.abs(pair.difference.value) };
  if (!(difference.value > 0 && pair.p.value > 0 && pair.p.value < 1)) return 'no-information';
  const critical = (p: number): number =>
    tQuantileUpper(Math.min(Math.max(p, 1e-12), 0.9999) / 2, context.df);
  return {
    inputs: [difference, pair.p],
    toSed: (size = 0, p = 0) => size / critical(p),
    fromSed: (sed) => critical(pair.p.value) * sed,
  };
}
