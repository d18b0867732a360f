import { brownForsythe } from '#server/stats/checks/brown-forsythe.ts';
import { shapiroWilk } from '#server/stats/checks/shapiro-wilk.ts';
import type { TrialModel } from './trial-model.ts';
import type { PlotResidual, TestResult, TrialDiagnostics } from './trial-result.ts';
import type { UsedPlots } from './read-plots.ts';

/** Residuals of a fit, in the order of the used plots. */
export interface FitResiduals {
  readonly residuals: Float64Array;
  readonly fitted: Float64Array;
  readonly leverage: Float64Array;
  /** null where none can be computed */
  readonly studentised: {
    readonly values: readonly (number | null)[];
    readonly largest: { readonly index: number; readonly value: number; readonly pBonferroni: number } | null;
  } | null;
  /** whether the residual variance is 0, or there are no residual df: nothing to check then */
  readonly isEmpty: boolean;
}

/** Shapiro–Wilk, Brown–Forsythe and the largest studentised residual, null where the data give none. */
export function diagnose(
  used: UsedPlots,
  model: TrialModel,
  fit: FitResiduals,
): { diagnostics: TrialDiagnostics; residuals: PlotResidual[] } {
  const residuals = used.plots.map((plot, i) => ({
    plot: plot.plot,
    fitted: fit.fitted[i]!,
    residual: fit.residuals[i]!,
    leverage: fit.leverage[i]!,
    studentised: fit.studentised?.values[i] ?? null,
  }));
  if (fit.isEmpty) return { diagnostics: noDiagnostics, residuals };
  const own = model.families[0]!.factors;
  const shapiro = shapiroWilk(fit.residuals);
  const largest = fit.studentised?.largest;
  return {
    residuals,
    diagnostics: {
      shapiroWilk: shapiro.computed ? { w: shapiro.w, p: shapiro.p } : null,
      brownForsythe: compareSpread(fit.residuals, groupsOf(own)),
      brownForsytheBlocks: model.blocking ? compareSpread(fit.residuals, model.blocking.codes) : null,
      brownForsytheValues: compareSpread(used.values, groupsOf(own)),
      largestStudentised: largest
        ? {
            plot: used.plots[largest.index]!.plot,
            value: largest.value,
            pBonferroni: largest.pBonferroni,
          }
        : null,
    },
  };
}

const noDiagnostics: TrialDiagnostics = {
  shapiroWilk: null,
  brownForsythe: null,
  brownForsytheBlocks: null,
  brownForsytheValues: null,
  largestStudentised: null,
};

function compareSpread(values: Float64Array, groups: ArrayLike<number>): TestResult | null {
  const test = brownForsythe(values, groups);
  return test.computed ? { f: test.f, df1: test.df1, df2: test.df2, p: test.p } : null;
}

/** One group number a plot for a combination of factors. */
function groupsOf(factors: readonly { levels: readonly string[]; codes: Int32Array }[]): Int32Array {
  const out = new Int32Array(factors[0]!.codes.length);
  for (const factor of factors)
    for (let i = 0; i < out.length; i++) out[i] = out[i]! * factor.levels.length + factor.codes[i]!;
  return out;
}
