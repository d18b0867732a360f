import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialDesign } from '#server/stats/trial/trial-data.ts';
import { DeviationLog } from '#tests/support/deviation.ts';
import { readCase, type CaseColumns, type Expected } from '#tests/support/reference-case.ts';
import { compareFixedCase, sortGroups } from '#tests/support/trial-deviation.ts';

/** Cases, each with its source and R script named in its expected.json; tolerances of the engine's design, section 5. */
const tolerances: Record<string, number> = {
  fit: 1e-9,
  anova: 1e-9,
  means: 1e-9,
  gaps: 1e-9,
  se: 1e-9,
  df: 1e-9,
  lsd: 1e-9,
  p: 1e-8,
  pAdjusted: 1e-8,
  pTukey: 1e-6,
  checks: 1e-8,
  shapiroP: 1e-6,
  residuals: 1e-8,
  dunnett: 1e-6,
};

const cases: [string, TrialDesign, CaseColumns][] = [
  ['01-crd-plantgrowth', { kind: 'crd' }, {}],
  ['02-crd-unbalanced-chickwts', { kind: 'crd' }, {}],
  ['03-rcbd-immer', { kind: 'rcbd' }, { block: 'block' }],
  ['04-rcbd-missing-3of60', { kind: 'rcbd' }, { block: 'block' }],
  ['05-latin-orchardsprays', { kind: 'latin-square' }, { row: 'row', col: 'col' }],
  ['10-paired-strips-6', { kind: 'strips' }, { block: 'block' }],
  ['12c-entry-all-missing', { kind: 'rcbd' }, { block: 'block' }],
];

describe.each(cases)('%s', (name, design, columns) => {
  const { plots, expected } = readCase(name, columns);
  const dunnett = expected['dunnett'];
  const actual = analyseTrial(plots, design, { check: dunnett ? String(dunnett['control']) : null });

  it('equals R', () => {
    const log = new DeviationLog();
    compareFixedCase(log, actual, expected);
    for (const row of dunnett?.['rows'] ?? []) {
      const own = actual.dunnett?.rows.find((r) => r.entry === String(row['entry']));
      log.note('dunnett', own?.p, row['p_dunnett'], 1e-3);
      log.note('gaps', own?.estimate, row['estimate'], 1e-3);
    }
    expect(overTolerance(log)).toEqual({});
  });

  it('groups as R does', () => {
    expect(sortGroups(actual.groups)).toEqual(sortGroups(expected['cld_lsd05']!['cliques']!));
  });
});

function overTolerance(log: DeviationLog): Record<string, number> {
  if (process.env['SHOW_DEVIATION']) console.log(JSON.stringify(log.largest));
  return Object.fromEntries(
    Object.entries(log.largest).filter(([kind, value]) => !(value <= tolerances[kind]!)),
  );
}

export type { Expected };
