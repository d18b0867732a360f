import { describe, expect, test } from 'vitest';
import type { TrialContent } from '#shared/trial-content.ts';
import { trialAnalysis, type ComparisonMethod } from '#shared/trial.ts';
import { analyseContent } from '#server/trials/analyse-content.ts';
import { viewAnalysis } from '#server/trials/analyse-content-view.ts';
import type { ContentTrait } from '#server/trials/trial-content-store.ts';
import { summariseFit } from '#server/trials/trial-fit.ts';

const yieldTrait: ContentTrait = {
  id: '1',
  slug: 'yield',
  kind: 'numeric',
  direction: 'higher',
  scaleMin: 0,
  scaleMax: null,
};
const lodging: ContentTrait = {
  id: '2',
  slug: 'lodging',
  kind: 'ordinal',
  direction: 'lower',
  scaleMin: 1,
  scaleMax: 9,
};

type Plot = TrialContent['plots'][number];

function content(fields: Partial<TrialContent>): TrialContent {
  return {
    format: 1,
    cropSlug: 'crop',
    siteSlug: 'site',
    season: 2026,
    name: 'Trial',
    design: 'rcbd',
    kind: 'plots',
    alpha: 0.05,
    management: {},
    sownOn: null,
    harvestedOn: null,
    entries: [...new Set((fields.plots ?? []).map((plot) => plot.entry))].map((label) => ({
      label,
      varietyName: null,
      isCheck: false,
    })),
    plots: [],
    summary: [],
    ...fields,
  };
}

/** Plots of a block trial: a row of values for each entry, null where one is missing. */
function blocks(values: Record<string, (number | null)[]>): Plot[] {
  return Object.entries(values).flatMap(([entry, row]) =>
    row.map((value, i) => ({
      plotNumber: `${entry}${i + 1}`,
      entry,
      rep: null,
      block: String(i + 1),
      row: null,
      col: null,
      mainLevel: null,
      factorLevels: null,
      excludedReason: null,
      values: Object.fromEntries(value === null ? [] : [['yield', value]]),
    })),
  );
}

function view(trial: TrialContent, trait = yieldTrait, comparison: ComparisonMethod = 'lsd', alpha?: number) {
  const analysis = viewAnalysis(
    trial,
    trait,
    { comparison, alpha, view: 'reading' },
    {
      trialId: '11111111-1111-4111-8111-111111111111',
      source: 'draft',
      version: null,
      plotIds: new Map(),
      cvLimitPercent: 15,
      isSingleAuthor: false,
    },
  );
  expect(trialAnalysis.parse(analysis)).toEqual(analysis);
  return analysis;
}

const codes = (analysis: ReturnType<typeof view>) => analysis.cautions.map((caution) => caution.code);

/** Rice, t/ha at five rates of nitrogen: tests/reference/published/training.rice.csv; LSD 0.621 at 5 %. */
const rice = content({
  plots: blocks({
    N0: [2.1, 2.8, 2.7, 2.9],
    N50: [3.2, 3.4, 4.1, 4.2],
    N60: [4.9, 4.6, 4.6, 5.0],
    N90: [5.3, 5.2, 5.1, 6.1],
    N120: [3.4, 4.6, 4.6, 3.8],
  }),
});

describe('a trial of plots', () => {
  test('letters follow the LSD: means closer than it share one', () => {
    const analysis = view(rice);
    const means = new Map(analysis.means.map((mean) => [mean.entry, mean.mean ?? 0]));
    const letters = new Map(analysis.means.map((mean) => [mean.entry, mean.letters]));
    expect([...means.keys()]).toEqual(['N90', 'N60', 'N120', 'N50', 'N0']);
    for (const { a, b, p } of analysis.gaps) {
      const gap = Math.abs((means.get(a) ?? 0) - (means.get(b) ?? 0));
      const share = [...(letters.get(a) ?? '')].some((letter) => letters.get(b)?.includes(letter));
      expect(share).toBe(gap < (analysis.lsd?.mean ?? 0));
      expect((p ?? 1) < 0.05).toBe(!share);
    }
    expect(letters.get('N90')).toBe('a');
    expect(analysis.pairsTotal).toBe(10);
    expect(analysis.pairsDifferent).toBe(9);
  });

  test('each comparison has its own p, and its own level', () => {
    const p = (comparison: ComparisonMethod) => {
      const gap = view(rice, yieldTrait, comparison).gaps.find((one) => one.a === 'N120' && one.b === 'N50');
      return gap?.p ?? 0;
    };
    expect(p('tukey')).toBeGreaterThan(p('lsd'));
    expect(p('bonferroni')).toBeGreaterThan(p('holm'));
    expect(p('holm')).toBeGreaterThanOrEqual(p('lsd'));
    expect(p('protected-lsd')).toBe(p('lsd'));
    expect(view(rice, yieldTrait, 'lsd', 0.01).lsd?.mean).toBeGreaterThan(view(rice).lsd?.mean ?? 9);
    const strict = view(rice, yieldTrait, 'lsd', 0.01);
    expect(strict.alpha).toBe(0.01);
    const beyond = strict.gaps.filter((gap) => Math.abs(gap.estimate ?? 0) > (strict.lsd?.mean ?? 0));
    expect(strict.pairsDifferent).toBe(beyond.length);
    expect(strict.pairsDifferent).toBeLessThan(view(rice).pairsDifferent);
  });

  test('Dunnett compares with the check alone, and says so when there is none', () => {
    const withCheck = {
      ...rice,
      entries: rice.entries.map((entry) => ({ ...entry, isCheck: entry.label === 'N0' })),
    };
    const compared = view(withCheck, yieldTrait, 'dunnett');
    expect(compared.pairsTotal).toBe(4);
    expect(compared.gaps.filter((gap) => gap.p !== null).every((gap) => [gap.a, gap.b].includes('N0'))).toBe(
      true,
    );
    expect(compared.means.every((mean) => mean.letters === '')).toBe(true);
    const without = view(rice, yieldTrait, 'dunnett');
    expect(without.outcomes).toEqual([{ code: 'unknown-check', values: {} }]);
    expect(without.pairsTotal).toBe(0);
  });

  test('missing and excluded plots are counted apart and cautioned', () => {
    const [first, second, ...others] = rice.plots;
    if (first === undefined || second === undefined) throw new Error('no plots');
    const plots = [{ ...first, values: {} }, { ...second, excludedReason: 'Birds' }, ...others];
    const analysis = view(content({ plots }));
    expect(analysis).toMatchObject({ plotsTotal: 20, plotsUsed: 18, plotsMissing: 1, plotsExcluded: 1 });
    expect(codes(analysis)).toEqual(expect.arrayContaining(['plots-missing', 'plots-excluded']));
    expect(analysis.plots.slice(0, 2).map((plot) => plot.residual)).toEqual([null, null]);
    expect(analysis.plots[2]?.residual).not.toBeNull();
  });

  test('a wide CV, a flat F and a plot far out are cautioned, a sound trial is not', () => {
    expect(codes(view(rice))).toEqual([]);
    const noise = view(content({ plots: blocks({ A: [3, 6, 2, 7], B: [6, 3, 7, 2], C: [4, 5, 6, 3] }) }));
    expect(codes(noise)).toEqual(['trial-weak-cv', 'trial-f-not-significant']);
    const lost = structuredClone(rice);
    const plot = lost.plots[7];
    if (plot !== undefined) plot.values['yield'] = 42;
    const caution = view(lost).cautions.find((one) => one.code === 'outlying-plot');
    expect(caution?.values['plot']).toBe(plot?.plotNumber);
  });

  test('residuals that are not normal, or spread by entry, are cautioned with their p', () => {
    // Nine quiet blocks and one that scatters: long tails. A quiet entry beside a wild one: unequal spread.
    const quiet = [5.1, 4.9, 5.05, 4.95, 5.02, 4.98, 5.08, 4.92, 5, 5.03];
    const tailed = view(
      content({
        plots: blocks({
          A: [...quiet.slice(0, 9), 8.4],
          B: [...quiet.slice(1), 2.1],
          C: [...quiet.slice(2), 5.1, 5.2],
          D: [...quiet.slice(3), 5.1, 4.9, 4.8],
        }),
      }),
    );
    const spread = view(
      content({
        plots: blocks({
          A: [5.1, 4.9, 5, 5.1, 4.9, 5, 5.1, 4.9, 5, 5.05],
          B: [6.9, 3.2, 5.8, 4.1, 6.6, 3.5, 5.9, 4.2, 6.8, 3.4],
          C: [5, 5.1, 4.95, 5.05, 4.9, 5.1, 5, 4.95, 5.05, 4.9],
        }),
      }),
    );
    const find = (analysis: typeof tailed, code: string) =>
      analysis.cautions.find((one) => one.code === code);
    expect(Number(find(tailed, 'residuals-not-normal')?.values['p'])).toBeLessThan(0.01);
    expect(find(spread, 'residuals-not-normal')).toBeUndefined();
    expect(Number(find(spread, 'unequal-spread')?.values['p'])).toBeLessThan(0.01);
    expect(find(tailed, 'unequal-spread')).toBeUndefined();
  });

  test('what cannot be analysed says why', () => {
    expect(view(content({ plots: blocks({ A: [1, null], B: [null, null] }) }))).toMatchObject({
      kind: 'none',
      outcomes: [{ code: 'one-plot' }],
      means: [],
    });
    const single = view(content({ design: 'crd', plots: blocks({ A: [5], B: [4] }) }));
    expect(single.outcomes).toContainEqual({ code: 'no-residual-df', values: {} });
    expect(single.gaps[0]).toMatchObject({ estimate: 1, se: null, p: null });
    expect(single.lsd).toBeNull();
    const unmeasured = view(content({ plots: blocks({ A: [1, 2], B: [2, 3], C: [null, null] }) }));
    expect(unmeasured.outcomes).toContainEqual({ code: 'entry-without-data', values: { entries: 'C' } });
  });

  test('half the mean variance of the differences is what a version keeps of a mean', () => {
    // Balanced: every difference has variance 2 s²/r, so half its mean is s²/r.
    const analysis = analyseContent(rice, yieldTrait);
    const fit = summariseFit(analysis);
    for (const mean of fit?.means ?? []) expect(mean.variance).toBeCloseTo((fit?.residualMs ?? 0) / 4, 12);
    expect(fit?.means).toHaveLength(5);
    expect(fit?.entryP).toBeLessThan(1e-4);
  });
});

describe('ratings', () => {
  const rated = content({
    plots: blocks({ A: [1, 2, 2, 9], B: [5, 5, 6, 6] }).map((plot) => ({
      ...plot,
      values: { lodging: plot.values['yield'] ?? 1 },
    })),
  });

  test('are told as medians and counts, never as means with an LSD', () => {
    const analysis = view(rated, lodging);
    expect(analysis).toMatchObject({ kind: 'ordinal', means: [], gaps: [], lsd: null, cvPercent: null });
    expect(analysis.ordinal).toEqual([
      {
        entry: 'A',
        n: 4,
        median: 2,
        low: 1,
        high: 9,
        counts: [
          { score: 1, plots: 1 },
          { score: 2, plots: 2 },
          { score: 9, plots: 1 },
        ],
      },
      expect.objectContaining({ entry: 'B', median: 5.5 }),
    ]);
    expect(summariseFit(analyseContent(rated, lodging))?.means).toEqual([
      { entryLabel: 'A', mean: 2, variance: null, df: null, plotsUsed: 4 },
      { entryLabel: 'B', mean: 5.5, variance: null, df: null, plotsUsed: 4 },
    ]);
  });
});

describe('a published table', () => {
  /** Gomez and Gomez 1984, p. 26, as a table: CV 6.7 %, LSD at 5 % 501.1, error mean square 110,558. */
  const means = [5124, 5070.25, 5304.25, 4847.75, 4708, 4703.25].map((mean, i) => ({
    entry: `rate ${i}`,
    mean,
    replicates: 4,
  }));
  const nothing = {
    lsd: null,
    lsdAlpha: null,
    cvPercent: null,
    standardError: null,
    residualMs: null,
    errorDf: null,
  };
  const table = (given: Partial<TrialContent['summary'][number]>) =>
    content({
      kind: 'summary',
      entries: means.map(({ entry }) => ({ label: entry, varietyName: null, isCheck: false })),
      summary: [{ trait: 'yield', means, ...nothing, ...given }],
    });

  test.each([
    ['its LSD', { lsd: 501.1, lsdAlpha: 0.05 }, 'lsd', 110_558, 60],
    ['its CV', { cvPercent: 6.7 }, 'cv', 110_418, 120],
    ['its error mean square', { residualMs: 110_558 }, 'residual-ms', 110_558, 0.01],
    ['its standard error of a mean', { standardError: 166.25 }, 'se', 110_558, 10],
  ] as const)('gives its error back by %s', (_what, given, from, expected, tolerance) => {
    const analysis = view(table(given));
    expect(analysis).toMatchObject({ kind: 'summary', recoveredFrom: from, residualDf: 15, plots: [] });
    expect(Math.abs((analysis.residualMs ?? 0) - expected)).toBeLessThan(tolerance);
    expect(Math.abs((analysis.lsd?.mean ?? 0) - 501.1)).toBeLessThan(0.5);
    expect(codes(analysis)).toEqual(['summary-trial']);
    const fit = summariseFit(analyseContent(table(given), yieldTrait));
    expect(fit?.means[0]?.variance).toBeCloseTo((analysis.residualMs ?? 0) / 4, 6);
  });

  test('that contradicts itself is cautioned', () => {
    // Published with CV 15 %, mean 58, 4 replicates: the LSD should be near 12.5; 7 was printed (domain table).
    const analysis = view(table({ lsd: 290, lsdAlpha: 0.05, cvPercent: 6.7 }));
    const caution = analysis.cautions.find((one) => one.code === 'summary-contradiction');
    expect(caution?.values['given']).toBe(290);
    expect(caution?.values['expected']).toBeCloseTo(501, -1);
  });

  test('without any measure of error has means and no verdict on them', () => {
    const analysis = view(table({}));
    expect(analysis).toMatchObject({
      kind: 'summary',
      residualMs: null,
      lsd: null,
      recoveredFrom: null,
      outcomes: [{ code: 'summary-without-error', values: {} }],
    });
    expect(summariseFit(analyseContent(table({}), yieldTrait))?.means[0]?.variance).toBeNull();
  });
});
