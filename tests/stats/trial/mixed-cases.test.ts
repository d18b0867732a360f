import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialDesign } from '#server/stats/trial/trial-data.ts';
import { deviationOf, DeviationLog } from '#tests/support/deviation.ts';
import { readCase, type CaseColumns } from '#tests/support/reference-case.ts';
import { compareMixedCase, sortGroups } from '#tests/support/trial-deviation.ts';

/** REML and Kenward–Roger against lme4 at the exact optimum and pbkrtest; tolerances of the engine's design, section 5. */
const tolerances: Record<string, number> = {
  fit: 1e-6,
  components: 1e-6,
  anova: 1e-6,
  means: 1e-6,
  gaps: 1e-6,
  se: 1e-6,
  df: 1e-6,
  lsd: 1e-6,
  p: 1e-6,
  pAdjusted: 1e-6,
  pTukey: 1e-6,
  shapiroP: 1e-6,
  residuals: 1e-6,
};

const cases: [string, string, TrialDesign, CaseColumns][] = [
  ['06-alpha-24x3', 'mixed', { kind: 'incomplete-blocks' }, { rep: 'rep', block: 'block' }],
  ['06-alpha-boundary-18x3', 'mixed', { kind: 'incomplete-blocks' }, { rep: 'rep', block: 'block' }],
  ['07-rowcol-20x4-open', 'mixed', { kind: 'row-column' }, { rep: 'rep', row: 'row', col: 'col' }],
  [
    '08-splitplot-oats',
    'lmer_block_fixed',
    { kind: 'split-plot', termNames: { main: 'variety', sub: 'nitro' } },
    { block: 'block', main: 'variety', sub: 'nitro' },
  ],
];

describe.each(cases)('%s', (name, section, design, columns) => {
  const { plots, expected } = readCase(name, columns);
  const isSplit = design.kind === 'split-plot';
  // R read the rates as numbers
  const read = isSplit ? plots.map((plot) => ({ ...plot, sub: String(Number(plot.sub)) })) : plots;
  const actual = analyseTrial(read, design);
  const mixed = expected[section]!;

  it('equals lme4 with pbkrtest', () => {
    const log = new DeviationLog();
    compareMixedCase(log, actual, mixed, isSplit ? 'variety' : null);
    expect(overTolerance(log)).toEqual({});
  });

  if (!isSplit)
    it('has Dunnett’s p within what mvtnorm knows, which takes whole df only', () => {
      const dunnett = mixed['dunnett_kr']!;
      const rows = analyseTrial(read, design, { check: String(dunnett['control']) }).dunnett!.rows;
      expect(rows).toHaveLength(dunnett['rows']!.length);
      for (const row of dunnett['rows']!) {
        const own = rows.find((one) => one.entry === String(row['entry']))!;
        const rounding = Math.abs(Number(row['df_kr']) - Number(row['df_used'])) / Number(row['df_used']);
        const slack = 3 * Number(row['achieved_error']) + 0.2 * rounding * Number(row['p_dunnett']) + 1e-6;
        expect(Math.abs(own.p - Number(row['p_dunnett']))).toBeLessThan(slack);
        expect(deviationOf(own.estimate, row['estimate'])).toBeLessThan(1e-6);
        expect(deviationOf(own.df, row['df_kr'])).toBeLessThan(1e-6);
      }
    });

  it('groups as R does', () => {
    const groups = isSplit ? actual.factors['variety']!.groups : actual.groups;
    expect(sortGroups(groups)).toEqual(sortGroups(mixed['cld_lsd05_kr']!['cliques']!));
  });
});

function overTolerance(log: DeviationLog): Record<string, number> {
  if (process.env['SHOW_DEVIATION']) console.log(JSON.stringify(log.largest));
  return Object.fromEntries(
    Object.entries(log.largest).filter(([kind, value]) => !(value <= tolerances[kind]!)),
  );
}
