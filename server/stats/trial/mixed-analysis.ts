import { tTwoSided } from '#server/stats/distributions/student-t.ts';
import { solveTransposed } from '#server/stats/linear/skipping-factor.ts';
import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { expandTerm } from './contrasts.ts';
import { predictFixed } from './cross-products.ts';
import { summariseFixedFit } from './fixed-analysis.ts';
import { leverages } from './mean-family.ts';
import type { MixedFit } from './mixed-fit.ts';
import type { FitResiduals } from './trial-diagnostics.ts';
import type { FitSummary, TrialNotice } from './trial-result.ts';

export function summariseMixedFit(fit: MixedFit, total: number): FitSummary {
  const { fixed, random, theta, components } = fit;
  const base = summariseFixedFit(fixed, total);
  const residual = theta[theta.length - 1]!;
  return {
    ...base,
    method: 'reml',
    residualMs: residual,
    cvPercent: base.grandMean !== 0 ? (100 * Math.sqrt(residual)) / Math.abs(base.grandMean) : null,
    r2: null,
    components: [
      ...random.terms.map((term, k) => ({ name: term.name, variance: theta[k]! })),
      { name: 'residual', variance: residual },
    ],
    logLik: components.point.logLik,
    converged: components.converged,
    iterations: components.iterations,
  };
}

export function noticeComponents(fit: MixedFit): TrialNotice[] {
  const { random, theta, components } = fit;
  const atZero = random.terms.filter((_, k) => theta[k] === 0).map((term) => term.name);
  const notices: TrialNotice[] = [];
  if (random.notIdentifiable.length > 0)
    notices.push({ code: 'component-not-identifiable', components: random.notIdentifiable });
  if (atZero.length > 0) notices.push({ code: 'component-at-zero', components: atZero });
  if (!components.converged) notices.push({ code: 'not-converged' });
  return notices;
}

/** Conditional residuals y − Xβ − Zu with h, where their variance is σ²(1 − h) and 1 − h = σ² P_ii. */
export function describeMixedResiduals(fit: MixedFit): FitResiduals {
  const { fixed, random, theta, basis, components } = fit;
  const { model } = fixed;
  const beta = new Float64Array(model.width);
  basis.kept.forEach((column, j) => (beta[column] = basis.beta[j]!));
  const fitted = predictFixed(model, beta);
  random.terms.forEach((term, k) => {
    for (let i = 0; i < model.count; i++)
      fitted[i]! += theta[k]! * components.point.u[random.starts[k]! + term.cells[i]!]!;
  });
  const residuals = fixed.y.map((value, i) => value - fitted[i]!);
  const leverage = conditionalLeverages(fit);
  return {
    residuals,
    fitted: fitted.map((value) => fixed.center + value),
    leverage,
    studentised: studentiseConditional(residuals, leverage, theta[theta.length - 1]!, fixed.residualDf),
    isEmpty: false,
  };
}

/** 1 − σ²P_ii = h_i + ‖R⁻ᵀ Γ½ (Z'M)_i‖² with R'R = I + Γ½ Z'MZ Γ½. */
function conditionalLeverages(fit: MixedFit): Float64Array {
  const { fixed, random, root } = fit;
  const { model, factor } = fixed;
  const q = root.length;
  const { rank } = factor;
  const h = new Float64Array(q * q);
  for (let i = 0; i < q; i++)
    for (let j = 0; j < q; j++)
      h[i * q + j] = root[i]! * random.zmz[i * q + j]! * root[j]! + (i === j ? 1 : 0);
  const triangle = choleskyUpper(h, q)!;
  // rows of Z'X(X'X)⁻¹ as effects of every cell of every fixed term
  const effects: Float64Array[][] = model.fixed.map(() => []);
  const row = new Float64Array(model.width);
  for (let k = 0; k < q; k++) {
    row.fill(0);
    for (let j = 0; j < rank; j++) {
      let sum = 0;
      for (let i = 0; i < rank; i++)
        sum += random.ztx[k * model.width + factor.kept[i]!]! * fixed.inverse[i * rank + j]!;
      row[factor.kept[j]!] = sum;
    }
    model.fixed.forEach((term, t) =>
      effects[t]!.push(expandTerm(row.subarray(term.offset, term.offset + term.width), term, 1, 1)),
    );
  }
  const out = leverages(fixed);
  const column = new Float64Array(q);
  for (let i = 0; i < model.count; i++) {
    for (let k = 0; k < q; k++) {
      let value = 0;
      for (let t = 0; t < model.fixed.length; t++) value -= effects[t]![k]![model.fixed[t]!.cells[i]!]!;
      column[k] = value;
    }
    random.terms.forEach((term, t) => (column[random.starts[t]! + term.cells[i]!]! += 1));
    for (let k = 0; k < q; k++) column[k]! *= root[k]!;
    solveTransposed(triangle, q, column);
    for (let k = 0; k < q; k++) out[i]! += column[k]! * column[k]!;
  }
  return out;
}

/** Externally studentised conditional residuals, the deletion taken as in least squares; an approximation under REML. */
function studentiseConditional(
  residuals: Float64Array,
  leverage: Float64Array,
  variance: number,
  residualDf: number,
): { values: (number | null)[]; largest: { index: number; value: number; pBonferroni: number } | null } {
  const values = Array.from(residuals, (residual, i) => {
    const rest = 1 - leverage[i]!;
    if (rest < 1e-9 || residualDf < 2) return null;
    const internal = residual / Math.sqrt(variance * rest);
    const left = residualDf - internal * internal;
    return left > 0 ? internal * Math.sqrt((residualDf - 1) / left) : null;
  });
  let index = -1;
  values.forEach((value, i) => {
    if (value !== null && (index < 0 || Math.abs(value) > Math.abs(values[index]!))) index = i;
  });
  const value = values[index];
  if (value === undefined || value === null) return { values, largest: null };
  const tests = values.filter((one) => one !== null).length;
  return {
    values,
    largest: { index, value, pBonferroni: Math.min(1, tests * tTwoSided(value, residualDf - 1)) },
  };
}
