import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialAnalysis } from '#server/stats/trial/trial-result.ts';
import type { TrialPlot } from '#server/stats/trial/trial-data.ts';
import { studentisedRangeQuantile } from '#server/stats/distributions/studentised-range.ts';
import { dunnettQuantile } from '#server/stats/distributions/dunnett.ts';
import { readReferenceRows, toPlots } from '#tests/support/reference-case.ts';

/** Textbook examples; every figure as printed there (sources beside each), to the digits printed. */
const row = (analysis: TrialAnalysis, term: string) => analysis.anova.find((one) => one.term === term)!;

/** Values in the order entry by entry, blocks in the order given. */
function fromTable(table: Readonly<Record<string, readonly number[]>>): TrialPlot[] {
  return Object.entries(table).flatMap(([entry, values]) =>
    values.map((value, i) => ({ plot: `${entry}/${i + 1}`, entry, block: String(i + 1), value })),
  );
}

describe('A. Nitrogen of red clover, Erdman 1946, in Steel & Torrie 1980 ch. 7–8', () => {
  const plots = fromTable({
    '3DOK1': [19.4, 32.6, 27.0, 32.1, 33.0],
    '3DOK5': [17.7, 24.8, 27.9, 25.2, 24.3],
    '3DOK4': [17.0, 19.4, 9.1, 11.9, 15.8],
    '3DOK7': [20.7, 21.0, 20.5, 18.8, 18.6],
    '3DOK13': [14.3, 14.4, 11.8, 11.6, 14.2],
    Composite: [17.3, 19.4, 19.1, 16.9, 20.8],
  });
  const analysis = analyseTrial(plots, { kind: 'crd' }, { check: 'Composite' });
  const sed = analysis.gaps[0]!.se!;

  it('prints SS 847.05 (5) and 282.93 (24), MSE 11.789, F 14.37, CV 17.27 %', () => {
    expect(row(analysis, 'entry')).toMatchObject({ df: 5 });
    expect(row(analysis, 'entry').ss).toBeCloseTo(847.05, 2);
    expect(row(analysis, 'residual').ss).toBeCloseTo(282.93, 2);
    expect(analysis.fit.residualMs).toBeCloseTo(11.789, 3);
    expect(row(analysis, 'entry').f).toBeCloseTo(14.37, 2);
    expect(analysis.fit.cvPercent).toBeCloseTo(17.27, 2);
  });

  it('prints LSD 4.482, Tukey’s HSD 6.714 and Dunnett’s d′ 5.852', () => {
    expect(analysis.lsd['0.05']!.mean).toBeCloseTo(4.482, 3);
    expect((studentisedRangeQuantile(0.95, 6, 24) * sed) / Math.SQRT2).toBeCloseTo(6.714, 2);
    const correlation = Array.from({ length: 5 }, (_, i) =>
      Array.from({ length: 5 }, (_, j) => (i === j ? 1 : 0.5)),
    );
    expect(dunnettQuantile({ alpha: 0.05, df: 24, correlation }) * sed).toBeCloseTo(5.852, 1);
  });

  it('finds different exactly what lies beyond HSD and d′', () => {
    for (const gap of analysis.gaps) expect(gap.pTukey! < 0.05).toBe(Math.abs(gap.estimate!) > 6.714);
    for (const one of analysis.dunnett!.rows) expect(one.p < 0.05).toBe(Math.abs(one.estimate) > 5.852);
  });
});

describe('B and C. Rice at six seed rates, Gomez & Gomez 1984 p. 26', () => {
  const plots = toPlots(readReferenceRows('published/gomez.seedrate.csv'), { entry: 'rate', block: 'rep' });
  const analysis = analyseTrial(plots, { kind: 'rcbd' });

  it('prints SS 1,944,361 (3), 1,198,331 (5), 1,658,376 (15), F 2.17, CV 6.7 %', () => {
    expect(row(analysis, 'block')).toMatchObject({ df: 3 });
    expect(Math.round(row(analysis, 'block').ss!)).toBe(1944361);
    expect(Math.round(row(analysis, 'entry').ss!)).toBe(1198331);
    expect(Math.round(row(analysis, 'residual').ss!)).toBe(1658376);
    expect(Math.round(analysis.fit.residualMs!)).toBe(110558);
    expect(row(analysis, 'entry').f).toBeCloseTo(2.17, 2);
    expect(row(analysis, 'entry').p).toBeCloseTo(0.113, 3);
    expect(analysis.fit.cvPercent).toBeCloseTo(6.7, 1);
  });

  it('keeps the order of the rates', () => {
    expect(analysis.means.map((mean) => mean.entry)).toEqual(['25', '50', '75', '100', '125', '150']);
  });

  it('C: with rate 100 in block II missing, Yates’ estimate 5,264.87 is the fitted value and error has 14 df', () => {
    const isMissing = (plot: TrialPlot) => plot.entry === '100' && plot.block === 'R2';
    const present = plots.map((plot) => (isMissing(plot) ? { ...plot, value: null } : plot));
    const fit = analyseTrial(present, { kind: 'rcbd' });
    const filled = plots.map((plot) => (isMissing(plot) ? { ...plot, value: 5264.87 } : plot));
    expect(fit.fit.residualDf).toBe(14);
    // Yates' value leaves the residual sum of squares and the means as they are without the plot
    const whole = analyseTrial(filled, { kind: 'rcbd' });
    expect(whole.residuals.find((one) => one.plot === filled.find(isMissing)!.plot)!.residual).toBeCloseTo(
      0,
      2,
    );
    expect(row(whole, 'residual').ss! / row(fit, 'residual').ss!).toBeCloseTo(1, 8);
    fit.means.forEach((mean, i) => expect(mean.mean! / whole.means[i]!.mean!).toBeCloseTo(1, 6));
  });
});

describe('D. Rice at five rates of nitrogen, a training text', () => {
  const analysis = analyseTrial(
    fromTable({
      '0': [2.1, 2.8, 2.7, 2.9],
      '50': [3.2, 3.4, 4.1, 4.2],
      '60': [4.9, 4.6, 4.6, 5.0],
      '90': [5.3, 5.2, 5.1, 6.1],
      '120': [3.4, 4.6, 4.6, 3.8],
    }),
    { kind: 'rcbd' },
  );

  it('prints error MS 0.163, SED 0.285, LSD 0.621 at 5 % and 0.871 at 1 %', () => {
    expect(analysis.fit.residualMs).toBeCloseTo(0.163, 3);
    expect(analysis.gaps[0]!.se).toBeCloseTo(0.285, 3);
    expect(analysis.lsd['0.05']!.mean).toBeCloseTo(0.621, 2);
    expect(analysis.lsd['0.01']!.mean).toBeCloseTo(0.871, 2);
  });
});

describe('E. Oats, Yates 1935: split plot', () => {
  const plots = toPlots(readReferenceRows('published/yates.oats.csv'), {
    block: 'B',
    main: 'V',
    sub: 'N',
    entry: 'N',
    value: 'Y',
  });
  const analysis = analyseTrial(plots, { kind: 'split-plot' });
  const varieties = analysis.factors['main']!;

  it('prints F 1.485 for varieties on 10 df, 37.69 for nitrogen and 0.303 for both on 45', () => {
    expect(row(analysis, 'main').f).toBeCloseTo(1.485, 3);
    expect(row(analysis, 'main').denDf).toBeCloseTo(10, 9);
    expect(row(analysis, 'sub').f).toBeCloseTo(37.69, 2);
    expect(row(analysis, 'main:sub').f).toBeCloseTo(0.303, 3);
    expect(row(analysis, 'main:sub').denDf).toBeCloseTo(45, 9);
  });

  it('prints SED 7.079 between varieties and 4.436 between rates', () => {
    for (const gap of varieties.gaps) expect(gap.se).toBeCloseTo(7.079, 3);
    for (const gap of analysis.gaps) expect(gap.se).toBeCloseTo(4.436, 3);
  });

  it('has the error mean squares Ea 6013/10 and Eb 7969/45 as its components', () => {
    const [main, residual] = analysis.fit.components;
    expect(residual!.variance).toBeCloseTo(7968.75 / 45, 6);
    expect(4 * main!.variance + residual!.variance).toBeCloseTo(6013.3 / 10, 1);
  });
});

describe('F. Goulden 1952 p. 216: Latin square', () => {
  const plots = toPlots(readReferenceRows('published/goulden.latin.csv'), {
    entry: 'trt',
    row: 'row',
    col: 'col',
  });
  const analysis = analyseTrial(plots, { kind: 'latin-square' });

  it('prints row 46.67, column 14.02, treatment 196.61 (4 df each), error 28.04 (12), F 21.03', () => {
    expect(row(analysis, 'row')).toMatchObject({ df: 4 });
    expect(row(analysis, 'row').ss).toBeCloseTo(46.67, 2);
    expect(row(analysis, 'col').ss).toBeCloseTo(14.02, 2);
    expect(row(analysis, 'entry').ss).toBeCloseTo(196.61, 2);
    expect(row(analysis, 'residual').ss).toBeCloseTo(28.04, 2);
    expect(analysis.fit.residualDf).toBe(12);
    expect(row(analysis, 'entry').f).toBeCloseTo(21.03, 1);
  });
});

describe('G. Petersen 1994 table 5.7: three checks in six blocks', () => {
  const plots = toPlots(readReferenceRows('published/petersen.wheat.csv'), { entry: 'gen', block: 'block' });
  const counts = new Map<string, number>();
  for (const plot of plots) counts.set(plot.entry, (counts.get(plot.entry) ?? 0) + 1);

  it('prints error MS 91,102.7 on 10 df for the checks', () => {
    const checks = plots.filter((plot) => counts.get(plot.entry) === 6);
    const analysis = analyseTrial(checks, { kind: 'rcbd' });
    expect(analysis.fit.residualDf).toBe(10);
    expect(analysis.fit.residualMs).toBeCloseTo(91102.7, 1);
  });

  it('gives the same error with the 30 unreplicated lines in the model: they fit themselves', () => {
    const analysis = analyseTrial(plots, { kind: 'rcbd' });
    expect(analysis.fit.residualDf).toBe(10);
    expect(analysis.fit.residualMs).toBeCloseTo(91102.7, 1);
    expect(analysis.means.every((mean) => mean.estimable)).toBe(true);
  });
});
