import { describe, expect, it } from 'vitest';
import { seededNormals } from '#server/commands/bench/bench-task.ts';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialPlot } from '#server/stats/trial/trial-data.ts';
import type { SpatialModel } from '#server/stats/trial/trial-result.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readReferenceJson, readReferenceRows, toPlots } from '#tests/support/reference-case.ts';

const columns = { block: 'rep', row: 'row', col: 'col' };
const plots = toPlots(readReferenceRows('spatial/40x3/plots.csv'), columns);
const expected = readReferenceJson('spatial/40x3/expected.json');
const { spatial, lsd } = analyseTrial(plots, { kind: 'rcbd' }, { spatial: true });
const modelOf = (code: SpatialModel['code']) => spatial!.models.find((model) => model.code === code)!;

describe('errors autoregressive along rows and columns (dense REML in R)', () => {
  const own = modelOf('autoregressive');
  const r = expected['autoregressive']!;

  it('have R’s likelihood, correlations and variance', () => {
    expect(deviationOf(own.logLik, r['logLik'])).toBeLessThan(1e-9);
    expect(own.correlations!.row).toBeCloseTo(Number(r['row']), 5);
    expect(own.correlations!.col).toBeCloseTo(Number(r['col']), 5);
    expect(deviationOf(own.residualMs, r['residualMs'])).toBeLessThan(1e-5);
  });

  it('have R’s gap and its error', () => {
    const gap = own.gaps.find((one) => one.a === r['gap']!['a'] && one.b === r['gap']!['b'])!;
    expect(deviationOf(gap.estimate, r['gap']!['estimate'])).toBeLessThan(1e-5);
    expect(deviationOf(gap.se, r['gap']!['se'])).toBeLessThan(1e-5);
  });
});

describe('a smooth surface (dense REML in R)', () => {
  it('has R’s likelihood and variances', () => {
    const own = modelOf('surface');
    expect(deviationOf(own.logLik, expected['surface']!['logLik'])).toBeLessThan(1e-9);
    for (const { name, variance } of own.components)
      expect(deviationOf(variance, expected['surface']![name])).toBeLessThan(1e-4);
  });
});

describe('side by side', () => {
  it('the design’s model stands first, with the gaps of the analysis itself', () => {
    expect(spatial!.models.map((model) => model.code)).toEqual(['design', 'autoregressive', 'surface']);
    expect(spatial!.models[0]!.lsd).toEqual(lsd);
  });

  it('the smallest AIC is preferred: here the model that made the data', () => {
    expect(spatial!.preferred).toBe('autoregressive');
    const [design, autoregressive] = [modelOf('design'), modelOf('autoregressive')];
    expect(autoregressive.aic).toBeLessThan(design.aic);
    expect(design.aic).toBeCloseTo(-2 * design.logLik + 2 * design.parameters, 10);
    expect(autoregressive.lsd['0.05']!.mean).toBeLessThan(design.lsd['0.05']!.mean);
  });

  it('without correlation the autoregressive model is the design’s', () => {
    const normal = seededNormals(12);
    const independent = plots.map((plot) => ({ ...plot, value: plot.value && 7 + normal() / 2 }));
    const models = analyseTrial(independent, { kind: 'rcbd' }, { spatial: true }).spatial!;
    expect(models.preferred).toBe('design');
    expect(models.models[1]!.logLik).toBeGreaterThanOrEqual(models.models[0]!.logLik);
  });

  it('the order of the plots and where the field begins do not matter', () => {
    const moved: TrialPlot[] = plots
      .toReversed()
      .map((plot) => ({ ...plot, row: Number(plot.row) + 100, col: 50 - Number(plot.col) }));
    const other = analyseTrial(moved, { kind: 'rcbd' }, { spatial: true }).spatial!;
    other.models.forEach((model, i) =>
      expect(deviationOf(model.aic, spatial!.models[i]!.aic)).toBeLessThan(1e-8),
    );
  });

  it('are not fitted unless asked for, nor where the field is not known', () => {
    expect(analyseTrial(plots, { kind: 'rcbd' }).spatial).toBeNull();
    const unplaced = plots.map((plot) => ({ ...plot, row: null }));
    expect(analyseTrial(unplaced, { kind: 'rcbd' }, { spatial: true }).spatial).toBeNull();
  });
});
