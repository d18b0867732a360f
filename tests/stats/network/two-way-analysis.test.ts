import { describe, expect, it } from 'vitest';
import {
  analyseTwoWay,
  type EnvironmentMean,
  type TwoWayAnalysis,
} from '#server/stats/network/two-way-analysis.ts';
import { DeviationLog } from '#tests/support/deviation.ts';
import { averageBy, readBarley, readNetworkCase } from '#tests/support/network-case.ts';
import { readReferenceRows } from '#tests/support/reference-case.ts';

function analyse(table: readonly EnvironmentMean[]): TwoWayAnalysis {
  const result = analyseTwoWay(table);
  if (result.outcome === 'not-analysed') throw new Error(result.reason);
  return result;
}

const termOf = (result: TwoWayAnalysis, term: string) => result.anova.find((row) => row.term === term)!;

describe('A: barley over twelve site-years', () => {
  const expected = readNetworkCase('A-barley')['env_fixed']!;
  const result = analyse(
    readBarley().map(({ entry, site, year, mean }) => ({ entry, environment: `${site} ${year}`, mean })),
  );

  it('has the analysis of variance of lm', () => {
    const log = new DeviationLog();
    const names = { environment: 'env', entry: 'entry', 'entry:environment': 'Residuals' };
    for (const row of result.anova) {
      const r = Array.from(expected['anova_type3']!).find(({ term }) => String(term) === names[row.term])!;
      for (const figure of ['df', 'ss', 'ms'] as const) log.note(figure, row[figure], r[figure]);
      log.note('f', row.f, r['F']);
      log.note('p', row.p, r['p']);
    }
    expect(Math.max(...Object.values(log.largest))).toBeLessThan(1e-10);
    expect(result.cvPercent).toBeCloseTo(Number(expected['fit']!['cv_pct']), 9);
    expect(result.grandMean).toBeCloseTo(Number(expected['fit']!['grand_mean']), 10);
  });

  it('has the means and gaps of emmeans', () => {
    const log = new DeviationLog();
    result.means.forEach((row, i) => {
      log.note('mean', row.mean, expected['emmeans']![i]!['emmean']);
      log.note('se', row.se, expected['emmeans']![i]!['se']);
    });
    result.gaps.forEach((gap, i) => {
      const r = expected['pairwise']![i]!;
      expect([gap.a, gap.b]).toEqual([r['a'], r['b']]);
      for (const figure of ['estimate', 'se', 'df', 't', 'p', 'lsd05', 'lsd10'] as const)
        log.note(figure, gap[figure], r[figure]);
    });
    expect(Math.max(...Object.values(log.largest))).toBeLessThan(1e-9);
    expect(result.lsd['0.05'].mean).toBeCloseTo(Number(expected['lsd']!['lsd05_mean_over_pairs']), 9);
  });
});

describe('H: durum, eight varieties in seven years', () => {
  // Onofri & Ciriciofolo (2007), R News 7(1):14–19, recomputed in R: mean squares are those of means over three blocks.
  const result = analyse(
    averageBy(readReferenceRows('published/onofri.winterwheat.csv'), 'gen', 'year', 'yield'),
  );

  it('tests varieties against variety × year', () => {
    expect(3 * termOf(result, 'entry').ss).toBeCloseTo(11.544, 3);
    expect(3 * termOf(result, 'entry:environment').ss).toBeCloseTo(27.713, 3);
    expect(3 * termOf(result, 'environment').ss).toBeCloseTo(159.279, 3);
    expect(termOf(result, 'entry').f).toBeCloseTo(2.5, 2);
    expect(termOf(result, 'entry').p).toBeCloseTo(0.031, 3);
    expect(result.lsd['0.05'].mean).toBeCloseTo(0.506, 3);
  });
});

describe('I: wheat, nine varieties at seven sites, the verdict that reverses', () => {
  // Linder (1963), recomputed in R: F 2.12, p .037 on plot error, 0.75 and .65 on variety × site.
  const result = analyse(averageBy(readReferenceRows('published/linder.wheat.csv'), 'gen', 'env', 'yield'));

  it('finds no difference where the plots’ own error would claim one', () => {
    expect(4 * termOf(result, 'entry').ss).toBeCloseTo(23_429, 0);
    expect(4 * termOf(result, 'entry:environment').ss).toBeCloseTo(188_224, 0);
    expect(termOf(result, 'entry').f).toBeCloseTo(0.75, 2);
    expect(termOf(result, 'entry').p).toBeCloseTo(0.65, 2);
    const plotError = 232_185 / 168;
    expect((4 * termOf(result, 'entry').ms) / plotError).toBeCloseTo(2.12, 2);
  });
});

describe('tables that cannot be analysed', () => {
  const cell = (entry: string, environment: string, mean: number) => ({ entry, environment, mean });

  it('says that a single environment leaves no error', () => {
    expect(analyseTwoWay([cell('A', '1', 4), cell('B', '1', 5)])).toEqual({
      outcome: 'not-analysed',
      reason: 'no-residual',
    });
  });

  it('says that a perfectly additive table leaves none either', () => {
    const table = ['A', 'B', 'C'].flatMap((entry, i) =>
      [1, 2, 3].map((e) => cell(entry, String(e), 5 + i + 0.5 * e)),
    );
    expect(analyseTwoWay(table)).toEqual({ outcome: 'not-analysed', reason: 'no-variation' });
  });

  it('gives no gap between entries that no environment links', () => {
    const table = [
      ...['A', 'B', 'C'].flatMap((entry, i) => [1, 2, 3].map((e) => cell(entry, String(e), i * e + 0.3 * i))),
      ...['D', 'E'].flatMap((entry, i) => [4, 5].map((e) => cell(entry, String(e), i * e + 0.3 * i))),
    ];
    const result = analyse(table);
    expect(result.connected).toEqual([
      ['A', 'B', 'C'],
      ['D', 'E'],
    ]);
    expect(result.gaps.map(({ a, b }) => a + b)).toEqual(['AB', 'AC', 'BC', 'DE']);
    expect(result.errorDf).toBe(4 + 1);
  });

  it('refuses an entry that stands twice in one environment, by its row', () => {
    expect(() => analyseTwoWay([cell('A', '1', 4), cell('B', '1', 5), cell('A', '1', 6)])).toThrow(
      expect.objectContaining({ code: 'duplicate-cell', rows: [3] }),
    );
  });
});
