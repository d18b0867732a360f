import {
  conversionOf,
  type Conversion,
  type ErrorContext,
  type ErrorQuantities,
  type ErrorQuantity,
  type QuantityGap,
} from './error-quantities.ts';
import { errorDfOfDesign, harmonicReplication, type TrialSize } from './error-df.ts';
import { type Printed, printedInterval } from './printed-value.ts';

/** A trial of which only the table is left. */
export interface SummaryTrial extends TrialSize {
  readonly given: ErrorQuantities;
  /** Error degrees of freedom, where printed. */
  readonly errorDf?: number | undefined;
  /** Level of the printed LSD or HSD: never assumed. */
  readonly alpha?: number | undefined;
  readonly trialMean?: Printed | undefined;
}

/** The standard error of a difference by one printed quantity, and its ends by the rounding of the print. */
export interface SedEstimate {
  readonly from: ErrorQuantity;
  readonly sed: number;
  readonly low: number;
  readonly high: number;
}

/** Something to say about a recovered error. */
export type SummaryFinding =
  | { readonly code: 'df-from-design'; readonly df: number }
  | { readonly code: 'replication-averaged'; readonly replication: number }
  | { readonly code: 'quantity-unused'; readonly quantity: ErrorQuantity; readonly reason: QuantityGap }
  | {
      readonly code: 'quantities-contradict';
      /** The quantity the figures rest on. */
      readonly used: PrintedAgainst;
      readonly other: PrintedAgainst;
      /** Another usual level at which the two agree: the table's level may be misread. */
      readonly agreesAtAlpha: number | null;
    };

/** A printed quantity, and what it should be by the one that contradicts it. Of a pair the difference is meant. */
export interface PrintedAgainst {
  readonly quantity: ErrorQuantity;
  readonly printed: number;
  readonly implied: number;
}

/** Why a table gives no standard error. */
export type RecoveryGap = 'nothing-printed' | 'no-df' | QuantityGap;

/** The error of a summary trial, or why there is none. */
export type RecoveredError =
  | {
      readonly recovered: true;
      /** Standard error of a difference of two entries with the usual replication, unit of the trait. */
      readonly sed: number;
      /** Error variance of one plot, or null where the replication is not known. */
      readonly residualMs: number | null;
      readonly df: number;
      /** The quantity the figures rest on: the one whose print is finest. */
      readonly from: ErrorQuantity;
      readonly estimates: readonly SedEstimate[];
      readonly findings: readonly SummaryFinding[];
    }
  | { readonly recovered: false; readonly reason: RecoveryGap };

const QUANTITIES: readonly ErrorQuantity[] = [
  'residualMs',
  'sed',
  'seMean',
  'lsd',
  'cvPercent',
  'hsd',
  'pair',
];
const USUAL_ALPHAS = [0.05, 0.1, 0.01];
/** Beyond rounding, this part may come from averaged replication or a fitted mean; more is a contradiction. */
const TOLERANCE = 0.05;

/** Estimates whose rounding intervals, widened by the tolerance, do not meet. */
function doContradict(a: SedEstimate, b: SedEstimate): boolean {
  return a.low > b.high * (1 + TOLERANCE) || b.low > a.high * (1 + TOLERANCE);
}

function estimate(from: ErrorQuantity, conversion: Conversion): SedEstimate {
  const ends = conversion.inputs.map(printedInterval);
  return {
    from,
    sed: conversion.toSed(...conversion.inputs.map((input) => input.value)),
    low: conversion.toSed(...ends.map(([low]) => low)),
    high: conversion.toSed(...ends.map(([, high]) => high)),
  };
}

/** Another usual level of the LSD or HSD at which two quantities agree. */
function agreeingAlpha(
  a: ErrorQuantity,
  b: ErrorQuantity,
  trial: SummaryTrial,
  context: ErrorContext,
): number | null {
  const found = USUAL_ALPHAS.find((alpha) => {
    if (alpha === context.alpha) return false;
    const [first, second] = [a, b].map((quantity) => {
      const conversion = conversionOf(quantity, trial.given, { ...context, alpha });
      return typeof conversion === 'object' ? estimate(quantity, conversion) : undefined;
    });
    return first !== undefined && second !== undefined && !doContradict(first, second);
  });
  const dependsOnAlpha = [a, b].some((quantity) => quantity === 'lsd' || quantity === 'hsd');
  return dependsOnAlpha ? (found ?? null) : null;
}

interface Reading {
  readonly estimate: SedEstimate;
  readonly conversion: Conversion;
}

function printedAgainst(own: Reading, rival: Reading): PrintedAgainst {
  const printed = own.conversion.inputs[0]?.value ?? 0;
  return { quantity: own.estimate.from, printed, implied: own.conversion.fromSed(rival.estimate.sed) };
}

function contradictions(
  best: Reading,
  readings: readonly Reading[],
  trial: SummaryTrial,
  context: ErrorContext,
): SummaryFinding[] {
  return readings
    .filter((reading) => doContradict(reading.estimate, best.estimate))
    .map((reading) => ({
      code: 'quantities-contradict' as const,
      used: printedAgainst(best, reading),
      other: printedAgainst(reading, best),
      agreesAtAlpha: agreeingAlpha(reading.estimate.from, best.estimate.from, trial, context),
    }));
}

/**
 * The standard error behind a printed table, from whatever the table gives, each quantity checked against the others.
 * @param trial sizes and printed quantities; means and quantities in one unit
 * @returns the error by the most finely printed quantity, every estimate, and what contradicts or was assumed
 */
export function recoverError(trial: SummaryTrial): RecoveredError {
  const printed = QUANTITIES.filter((quantity) => trial.given[quantity] !== undefined);
  if (printed.length === 0) return { recovered: false, reason: 'nothing-printed' };
  const designDf = errorDfOfDesign(trial);
  const df = trial.errorDf ?? designDf;
  if (df === undefined || !(df > 0)) return { recovered: false, reason: 'no-df' };
  const { entries, alpha, trialMean } = trial;
  const replication = harmonicReplication(trial);
  const context: ErrorContext = { entries, replication, df, alpha, trialMean };
  const readings: Reading[] = [];
  const unused: Extract<SummaryFinding, { code: 'quantity-unused' }>[] = [];
  for (const quantity of printed) {
    const conversion = conversionOf(quantity, trial.given, context);
    if (typeof conversion === 'string')
      unused.push({ code: 'quantity-unused', quantity, reason: conversion });
    else if (conversion) readings.push({ estimate: estimate(quantity, conversion), conversion });
  }
  const coarseness = ({ estimate: { low, high, sed } }: Reading): number => (high - low) / sed;
  const best = readings.toSorted((a, b) => coarseness(a) - coarseness(b))[0];
  if (!best) return { recovered: false, reason: unused[0]?.reason ?? 'no-information' };
  const { sed, from } = best.estimate;
  return {
    recovered: true,
    sed,
    residualMs: replication === undefined ? null : (sed * sed * replication) / 2,
    df,
    from,
    estimates: readings.map((reading) => reading.estimate),
    findings: [
      ...(trial.errorDf === undefined ? [{ code: 'df-from-design' as const, df }] : []),
      ...(typeof trial.replicates === 'object' &&
      new Set(trial.replicates).size > 1 &&
      replication !== undefined
        ? [{ code: 'replication-averaged' as const, replication }]
        : []),
      ...unused,
      ...contradictions(best, readings, trial, context),
    ],
  };
}

/**
 * Standard error of the difference of two entries with their own numbers of plots.
 * @param residualMs error variance of one plot
 * @param replicatesA plots of one entry, positive
 * @param replicatesB plots of the other, positive
 */
export function sedOfPair(residualMs: number, replicatesA: number, replicatesB: number): number {
  return Math.sqrt(residualMs * (1 / replicatesA + 1 / replicatesB));
}
