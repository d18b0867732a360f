import { studentiseResiduals } from '#server/stats/checks/studentised.ts';
import type { FitResiduals } from './trial-diagnostics.ts';
import { leverages, covarianceOfMeans, predictMeans, type MeanFamily } from './mean-family.ts';
import { sumOfSquares, type FixedFit } from './fixed-fit.ts';
import type { MeanEstimates } from './gap-table.ts';
import type { FitSummary } from './trial-result.ts';

/** Residual mean square; null without residual df, 0 for data that the model fits exactly. */
export function residualVariance(fit: FixedFit): number | null {
  return fit.residualDf > 0 ? fit.residualSs / fit.residualDf : null;
}

/** Means of a family under least squares. */
export function estimateFixedMeans(fit: FixedFit, family: MeanFamily): MeanEstimates {
  const variance = residualVariance(fit);
  let covariance: Float64Array | null = null;
  if (variance !== null) {
    covariance = covarianceOfMeans(family, fit, fit.inverse);
    for (let i = 0; i < covariance.length; i++) covariance[i]! *= variance;
  }
  return {
    family,
    values: predictMeans(family, fit.beta),
    center: fit.center,
    covariance,
    dfOf: () => fit.residualDf,
    hasSharedDf: true,
    isExact: fit.isExact,
  };
}

export function summariseFixedFit(fit: FixedFit, total: number): FitSummary {
  const { model, residualSs, residualDf, y, center } = fit;
  const mean = y.reduce((sum, value) => sum + value, 0) / y.length;
  const grandMean = center + mean;
  const variance = residualVariance(fit);
  const totalSs = sumOfSquares(y.map((value) => value - mean));
  const n = model.count;
  return {
    method: 'ols',
    plots: total,
    used: n,
    grandMean,
    residualDf,
    residualMs: variance,
    cvPercent:
      variance !== null && grandMean !== 0 ? (100 * Math.sqrt(variance)) / Math.abs(grandMean) : null,
    r2: residualDf > 0 && totalSs > 0 ? 1 - residualSs / totalSs : null,
    components: variance === null ? [] : [{ name: 'residual', variance }],
    logLik:
      residualDf > 0 && residualSs > 0
        ? (-n / 2) * (Math.log(2 * Math.PI) + Math.log(residualSs / n) + 1)
        : null,
    converged: true,
    iterations: 0,
  };
}

/** Residuals with externally studentised values. */
export function describeFixedResiduals(fit: FixedFit): FitResiduals {
  const leverage = leverages(fit);
  const isEmpty = fit.isExact || fit.residualDf === 0;
  const studentised = isEmpty ? null : studentiseResiduals(fit.residuals, leverage, fit.residualDf);
  return {
    residuals: fit.residuals,
    fitted: fit.y.map((value, i) => fit.center + (value - fit.residuals[i]!)),
    leverage,
    studentised: studentised?.computed && Number.isFinite(studentised.largest.value) ? studentised : null,
    isEmpty,
  };
}
