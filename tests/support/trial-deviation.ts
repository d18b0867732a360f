import type { FamilyTable, TrialAnalysis, VarianceRow } from '#server/stats/trial/trial-result.ts';
import type { DeviationLog } from './deviation.ts';
import type { Expected } from './reference-case.ts';

/** Fields of expected.json carry the suffix _kr in a model with random effects. */
type Suffix = '' | '_kr';

/** Fit, analysis of variance, means, gaps, LSDs and checks of a fixed model against R's. */
export function compareFixedCase(log: DeviationLog, actual: TrialAnalysis, expected: Expected): void {
  const fit = expected['fit']!;
  log.note('fit', actual.fit.grandMean, fit['grand_mean']);
  log.note('fit', actual.fit.residualDf, fit['residual_df']);
  log.note('fit', actual.fit.residualMs, fit['residual_ms']);
  log.note('fit', actual.fit.cvPercent, fit['cv_pct']);
  log.note('fit', actual.fit.r2, fit['r2']);
  if (fit['logLik_ML'] !== undefined) log.note('fit', actual.fit.logLik, fit['logLik_ML']);
  compareRows(log, actual.anova, expected['anova_type3']);
  compareSequential(log, actual.anova, expected['anova_sequential']);
  if (expected['emmeans']) compareFamily(log, actual, expected['emmeans'], expected['pairwise']!, '');
  if (expected['lsd']) compareLsd(log, actual, expected['lsd']);
  if (expected['diagnostics']) compareDiagnostics(log, actual, expected['diagnostics']);
}

export function compareRows(
  log: DeviationLog,
  actual: readonly VarianceRow[],
  expected: Expected | undefined,
): void {
  for (const row of expected ?? []) {
    const own = findTerm(actual, row);
    log.note('anova', own?.df, row['df']);
    log.note('anova', own?.ss, row['ss']);
    log.note('anova', own?.f, row['F']);
    log.note('p', own?.p, row['p']);
  }
}

function compareSequential(
  log: DeviationLog,
  actual: readonly VarianceRow[],
  expected: Expected | undefined,
): void {
  for (const row of expected ?? []) {
    const own = findTerm(actual, row)?.sequential;
    if (row['term'] === ('Residuals' as unknown)) continue;
    log.note('anova', own?.df, row['df']);
    log.note('anova', own?.ss, row['ss']);
    log.note('anova', own?.f, row['F']);
    log.note('p', own?.p, row['p']);
  }
}

function findTerm(actual: readonly VarianceRow[], row: Expected): VarianceRow | undefined {
  const term = String(row['term']) === 'Residuals' ? 'residual' : String(row['term']);
  return actual.find((own) => own.term === term);
}

/** Means and gaps of a family. Estimates are measured against the spread of the means, p of any size relatively. */
export function compareFamily(
  log: DeviationLog,
  actual: FamilyTable,
  means: Expected,
  gaps: Expected,
  suffix: Suffix,
  labelKey = 'entry',
): void {
  const se = Math.max(...[...gaps].map((gap) => Number(gap[`se${suffix}`])));
  for (const mean of means) {
    const own = actual.means.find((row) => row.entry === String(mean[labelKey]));
    log.note('means', own?.mean, mean['emmean'], se);
    log.note('se', own?.se, mean[`se${suffix}`]);
    log.note('df', own?.df, mean[`df${suffix}`]);
    if (mean['n'] !== undefined) log.note('means', own?.n, mean['n']);
  }
  const byPair = new Map(actual.gaps.map((gap) => [JSON.stringify([gap.a, gap.b]), gap]));
  for (const gap of gaps) {
    const own = byPair.get(JSON.stringify([String(gap['a']), String(gap['b'])]));
    log.note('gaps', own?.estimate, gap['estimate'], se);
    log.note('se', own?.se, gap[`se${suffix}`]);
    log.note('df', own?.df, gap[`df${suffix}`]);
    log.note('gaps', own?.t, gap[`t${suffix}`], 1);
    log.note('p', own?.p, gap[`p${suffix}`]);
    log.note('lsd', own?.lsd05, gap[`lsd05${suffix}`]);
    log.note('lsd', own?.lsd10, gap[`lsd10${suffix}`]);
    log.note('pTukey', own?.pTukey, gap[`p_tukey_acc${suffix}`], 1e-12);
    log.note('pAdjusted', own?.pHolm, gap[`p_holm${suffix}`]);
    log.note('pAdjusted', own?.pBonferroni, gap[`p_bonferroni${suffix}`]);
  }
}

export function compareLsd(log: DeviationLog, actual: FamilyTable, expected: Expected): void {
  log.note('lsd', actual.lsd['0.05']?.mean, expected['lsd05_mean_over_pairs']);
  log.note('lsd', actual.lsd['0.1']?.mean, expected['lsd10_mean_over_pairs']);
  log.note('lsd', actual.lsd['0.05']?.min, expected['lsd05_min']);
  log.note('lsd', actual.lsd['0.05']?.max, expected['lsd05_max']);
}

function compareDiagnostics(log: DeviationLog, actual: TrialAnalysis, expected: Expected): void {
  const own = actual.diagnostics;
  log.note('checks', own.shapiroWilk?.w, expected['shapiro_wilk']!['W']);
  log.note('shapiroP', own.shapiroWilk?.p, expected['shapiro_wilk']!['p']);
  const largest = expected['largest_externally_studentised']!;
  log.note('checks', own.largestStudentised?.pBonferroni, largest['p_bonferroni']);
  const byPlot = new Map(actual.residuals.map((row) => [row.plot, row]));
  // with two entries the residuals of a pair are equal but for the sign, and rounding says which is the largest
  log.note('checks', sizeOf(own.largestStudentised?.value), sizeOf(Number(largest['value'])));
  log.note(
    'checks',
    sizeOf(byPlot.get(String(largest['plot']))?.studentised),
    sizeOf(own.largestStudentised?.value),
  );
  const size = Math.sqrt(actual.fit.residualMs ?? 0);
  for (const row of expected['residuals']!) {
    const residual = byPlot.get(String(row['plot']));
    log.note('residuals', residual?.residual, row['residual'], size);
    log.note('residuals', residual?.leverage, row['leverage']);
    log.note('residuals', residual?.studentised, row['rstudent'], 1);
  }
}

/** Cliques as sets, whatever their order. */
export function sortGroups(groups: readonly (readonly string[])[] | Expected): string[] {
  return [...groups].map((group) => [...(group as readonly string[])].map(String).sort().join('|')).sort();
}

/**
 * REML fit, Kenward–Roger tests, means and gaps against lme4 with pbkrtest and emmeans.
 * @param mainFamily name of the family that the unsuffixed tables hold (a split plot's main factor), null for the own
 */
export function compareMixedCase(
  log: DeviationLog,
  actual: TrialAnalysis,
  expected: Expected,
  mainFamily: string | null,
): void {
  const fit = expected['fit']!;
  log.note('fit', actual.fit.grandMean, fit['grand_mean']);
  log.note('fit', actual.fit.cvPercent, fit['cv_pct']);
  log.note('fit', actual.fit.logLik, fit['logLik_REML_plus_half_logdet_XtX']);
  const total = [...expected['varcomp']!].reduce((sum, row) => sum + Number(row['variance']), 0);
  for (const row of expected['varcomp']!) {
    const own = actual.fit.components.find(
      (c) => c.name.split(':').sort().join() === String(row['component']).split(':').sort().join(),
    );
    log.note('components', own?.variance, row['variance'], 1e-4 * total);
  }
  for (const row of expected['anova_kr']!) {
    const own = actual.anova.find((a) => a.term === String(row['term']));
    log.note('anova', own?.df, row['num_df']);
    log.note('anova', own?.denDf, row['den_df']);
    log.note('anova', own?.f, row['F']);
    log.note('p', own?.p, row['p']);
  }
  const main = mainFamily ? actual.factors[mainFamily]! : actual;
  compareFamily(log, main, expected['emmeans']!, expected['pairwise']!, '_kr');
  compareLsd(log, main, expected['lsd_kr']!);
  if (mainFamily) {
    compareFamily(log, actual, expected['emmeans_nitro']!, expected['pairwise_nitro']!, '_kr');
    compareLsd(log, actual, expected['lsd_kr_nitro']!);
    compareFamily(
      log,
      actual.factors['variety:nitro']!,
      expected['emmeans_variety_x_nitro']!,
      expected['pairwise_variety_x_nitro']!,
      '_kr',
    );
  }
  log.note(
    'shapiroP',
    actual.diagnostics.shapiroWilk?.p,
    expected['conditional_residuals']!['shapiro_wilk']!['p'],
  );
  const byPlot = new Map(actual.residuals.map((row) => [row.plot, row]));
  const size = Math.sqrt(actual.fit.residualMs ?? 0);
  for (const row of expected['conditional_residuals']!['residuals']!)
    log.note('residuals', byPlot.get(String(row['plot']))?.residual, row['residual'], size);
}

function sizeOf(value: number | null | undefined): number | null {
  return value === null || value === undefined ? null : Math.abs(value);
}
