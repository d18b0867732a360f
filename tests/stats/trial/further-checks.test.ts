import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialPlot } from '#server/stats/trial/trial-data.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readCase } from '#tests/support/reference-case.ts';

/** Complete blocks of four entries, one block a row of the field; values by place. */
function layField(value: (entry: number, row: number, col: number) => number): TrialPlot[] {
  return Array.from({ length: 24 }, (_, i) => {
    const [row, col] = [Math.floor(i / 4) + 1, (i % 4) + 1];
    const entry = (i + row * 3) % 4;
    return {
      plot: String(i),
      entry: 'ABCD'[entry]!,
      block: String(row),
      row,
      col,
      value: value(entry, row, col),
    };
  });
}

const noise = (row: number, col: number) => (((row * 31 + col * 17) % 13) - 6) / 20;

describe('repeatability', () => {
  it('is 1 − 1/F in complete blocks', () => {
    const { plots } = readCase('03-rcbd-immer', { block: 'block' });
    const { checks, anova } = analyseTrial(plots, { kind: 'rcbd' }, { checks: true });
    const { f } = anova.find((row) => row.term === 'entry')!;
    expect(deviationOf(checks!.repeatability, 1 - 1 / f!)).toBeLessThan(1e-8);
  });

  it('is 0 where entries vary less than plots', () => {
    const plots = layField((_, row, col) => 7 + noise(row, col) + row / 3);
    const { checks, anova } = analyseTrial(plots, { kind: 'rcbd' }, { checks: true });
    expect(anova.find((row) => row.term === 'entry')!.f).toBeLessThan(1);
    expect(checks!.repeatability).toBe(0);
  });
});

describe('checks over the field', () => {
  const checkOf = (plots: TrialPlot[]) => analyseTrial(plots, { kind: 'rcbd' }, { checks: true }).checks!;

  it('find a trend along the columns and its slope', () => {
    const { colTrend, rowTrend } = checkOf(
      layField((entry, row, col) => 7 + entry / 2 + 0.4 * col + noise(row, col)),
    );
    expect(colTrend!.slope).toBeCloseTo(0.4, 1);
    expect(colTrend!.p).toBeLessThan(1e-4);
    // blocks are the rows: a trend along them is already taken out
    expect(rowTrend).toBeNull();
  });

  it('find entries and blocks that multiply', () => {
    const added = checkOf(layField((entry, row, col) => 7 + entry + row + noise(row, col)));
    const multiplied = checkOf(layField((entry, row, col) => (1 + entry) * (1 + row) + noise(row, col)));
    expect(added.nonAdditivity!.p).toBeGreaterThan(0.05);
    expect(multiplied.nonAdditivity!.p).toBeLessThan(1e-6);
  });

  it('find that neighbours are alike', () => {
    const patch = (row: number, col: number) => (row <= 3 === col <= 2 ? 1 : -1);
    expect(checkOf(layField((entry, row, col) => 7 + entry + patch(row, col))).moran!.p).toBeLessThan(0.01);
  });

  it('are left out where two plots stand in one place', () => {
    const plots = layField((entry, row, col) => 7 + entry + noise(row, col)).map((plot) => ({
      ...plot,
      row: 1,
    }));
    expect(checkOf(plots)).toMatchObject({ moran: null, rowTrend: null, colTrend: null });
  });

  it('are not made unless asked for', () => {
    const { checks, best } = analyseTrial(
      layField((entry, row, col) => 7 + entry + noise(row, col)),
      { kind: 'rcbd' },
    );
    expect(checks).toBeNull();
    expect(best).toBeNull();
  });
});

describe('comparison with the best', () => {
  const plots = layField((entry, row, col) => 7 + entry / 4 + noise(row, col));
  const compare = (better: 'higher' | 'lower') =>
    analyseTrial(plots, { kind: 'rcbd' }, { comparisons: true, better }).best!;

  it('gives intervals about the gap to the best of the others that never cross 0', () => {
    const means = new Map(
      analyseTrial(plots, { kind: 'rcbd' }).means.map((mean) => [mean.entry, mean.mean!]),
    );
    for (const row of compare('higher')) {
      const others = [...means].filter(([entry]) => entry !== row.entry).map(([, mean]) => mean);
      expect(row.estimate).toBeCloseTo(means.get(row.entry)! - Math.max(...others), 10);
      expect(row.lower).toBeLessThanOrEqual(0);
      expect(row.upper).toBeGreaterThanOrEqual(0);
    }
  });

  it('follows the better end of the trait', () => {
    expect(
      compare('higher')
        .filter((row) => row.mayBeBest)
        .map((row) => row.entry),
    ).toContain('D');
    expect(
      compare('lower')
        .filter((row) => row.mayBeBest)
        .map((row) => row.entry),
    ).toContain('A');
    expect(compare('lower').find((row) => row.entry === 'D')!.mayBeBest).toBe(false);
  });
});
