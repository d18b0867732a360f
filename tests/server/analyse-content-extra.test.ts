import { describe, expect, test } from 'vitest';
import type { TrialContent } from '#shared/trial-content.ts';
import { trialAnalysis, type AnalysisQuery } from '#shared/trial.ts';
import { generateDemo } from '#server/demo/generate-demo.ts';
import { cautionTrend } from '#server/trials/analyse-content-spatial.ts';
import { viewAnalysis } from '#server/trials/analyse-content-view.ts';
import type { ContentTrait } from '#server/trials/trial-content-store.ts';

const demo = generateDemo();
const yieldTrait: ContentTrait = {
  id: '1',
  slug: 'yield',
  kind: 'numeric',
  direction: 'higher',
  scaleMin: 0,
  scaleMax: null,
};

function view(content: TrialContent, query: Partial<AnalysisQuery> = {}, trait = yieldTrait) {
  const analysis = viewAnalysis(
    content,
    trait,
    { comparison: 'lsd', view: 'reading', ...query },
    {
      trialId: '11111111-1111-4111-8111-111111111111',
      source: 'published',
      version: 1,
      plotIds: new Map(),
      cvLimitPercent: 15,
      isSingleAuthor: false,
    },
  );
  expect(trialAnalysis.parse(analysis)).toEqual(analysis);
  return analysis;
}

function find(is: (trial: (typeof demo.trials)[number]) => boolean): TrialContent {
  const found = demo.trials.find((trial) => trial.content.kind === 'plots' && is(trial));
  if (found === undefined) throw new Error('The demo has no such trial');
  return found.content;
}

/** Grown with a drift across its columns (server/demo/demo-plan.ts). */
const drifting = find(({ planned }) => planned.incident === 'spatial-trend');
const sound = find(({ content, planned }) => content.design === 'rcbd' && planned.incident === null);
const split = find(({ content }) => content.design === 'split-plot');

describe('a trend across the field', () => {
  test('sets its models beside the design, which stays the analysis', () => {
    const analysis = view(drifting, { view: 'analysis' });
    const [design, ...others] = analysis.spatial;
    expect(design).toMatchObject({
      code: 'design',
      lsd: analysis.lsd?.mean,
      residualMs: analysis.residualMs,
    });
    expect(design?.means.map(({ entry, mean }) => [entry, mean])).toEqual(
      analysis.means.map(({ entry, mean }) => [entry, mean]),
    );
    expect(others.map(({ code }) => code)).toEqual(['autoregressive', 'surface']);
    for (const model of analysis.spatial) {
      expect(model.means.map(({ rank }) => rank)).toEqual(model.means.map((_, i) => i + 1));
    }
    expect(Math.min(...others.map(({ aic }) => aic))).toBeLessThan(design?.aic ?? 0);
  });

  test('is cautioned with the LSD and the mover of the best of them, in the plain reading as well', () => {
    const { spatial, cautions } = view(drifting);
    const caution = cautions.find(({ code }) => code === 'spatial-trend');
    const best = spatial.toSorted((a, b) => a.aic - b.aic)[0];
    expect(caution?.values).toMatchObject({ context: 'yield-moved', lsd: best?.lsd, usual: spatial[0]?.lsd });
    const { variety, from, to } = caution?.values ?? {};
    expect(spatial[0]?.means.find(({ entry }) => entry === variety)?.rank).toBe(from);
    expect(best?.means.find(({ entry }) => entry === variety)?.rank).toBe(to);
    expect(from).not.toBe(to);
    expect(view(drifting, { view: 'analysis' }).cautions).toEqual(cautions);
  });

  test('of another trait is told as a share of the LSD, since its unit is not t/ha', () => {
    const plots = drifting.plots.map((plot) => ({
      ...plot,
      values: { ...(plot.values['yield'] !== undefined && { protein: plot.values['yield'] }) },
    }));
    const { cautions } = view({ ...drifting, plots }, {}, { ...yieldTrait, slug: 'protein' });
    const { values } = cautions.find(({ code }) => code === 'spatial-trend') ?? {};
    expect(values?.['context']).toBe('share-moved');
    expect(values?.['share']).toBeCloseTo(73, 0);
  });

  test('is told without an LSD where AR1 fits best, whose LSD is too small, or where no model fits better', () => {
    const [design, autoregressive, surface] = view(drifting).spatial;
    if (!design || !autoregressive || !surface) throw new Error('A model is missing');
    const contextOf = (...models: (typeof design)[]) => cautionTrend(models, true).values;
    expect(contextOf(design, autoregressive)).toEqual({ context: 'beside' });
    expect(contextOf(design, { ...surface, aic: design.aic })).toEqual({ context: 'no-better' });
    expect(contextOf(design, { ...surface, means: design.means })).toEqual({
      context: 'yield',
      lsd: surface.lsd,
      usual: design.lsd,
    });
    expect(contextOf(design)).toEqual({});
  });

  test('is not looked for by models in the plain reading of a sound trial', () => {
    expect(view(sound).spatial).toEqual([]);
    expect(view(sound, { view: 'analysis' }).spatial.length).toBeGreaterThan(1);
  });

  test('has no models where rows and columns are not known', () => {
    const plots = drifting.plots.map((plot) => ({ ...plot, row: null, col: null }));
    expect(view({ ...drifting, plots }, { view: 'analysis' }).spatial).toEqual([]);
  });
});

describe('the comparison with the best', () => {
  test('says who may be the best and who is surely not', () => {
    const { best, means, pairsTotal, outcomes } = view(drifting, { comparison: 'best' });
    expect(outcomes).toEqual([]);
    expect(pairsTotal).toBe(0);
    expect(best.map(({ entry }) => entry)).toEqual(means.map(({ entry }) => entry));
    expect(best[0]?.mayBeBest).toBe(true);
    expect(best.at(-1)?.mayBeBest).toBe(false);
    for (const row of best) {
      // Hsu's limits: an entry that may be the best has an upper limit above 0, and the others 0 itself.
      expect(row.mayBeBest).toBe(row.upper > 0);
      expect(row.lower).toBeLessThanOrEqual(row.estimate);
    }
  });

  test('turns round where low is good, and is not made where neither end is', () => {
    const low = view(drifting, { comparison: 'best' }, { ...yieldTrait, direction: 'lower' });
    expect(low.best[0]?.entry).toBe(low.means.at(-1)?.entry);
    expect(low.best[0]?.mayBeBest).toBe(true);
    const neutral = view(drifting, { comparison: 'best' }, { ...yieldTrait, direction: 'neutral' });
    expect(neutral.best).toEqual([]);
    expect(neutral.outcomes).toEqual([{ code: 'comparison-not-available', values: {} }]);
    expect(neutral.pairsTotal).toBeGreaterThan(0);
  });
});

describe('factors', () => {
  test('of a split plot: the main factor and the combinations beside the entries', () => {
    const { factors, means } = view(split);
    expect(factors.map(({ name }) => name)).toEqual(['main', 'main:sub']);
    const [main, cells] = factors;
    expect(main?.means.map(({ entry }) => entry).sort()).toEqual(['treated', 'untreated']);
    expect(main?.gaps).toHaveLength(1);
    // The main factor has fewer degrees of freedom than the entries, whose plots lie within its own.
    expect(main?.gaps[0]?.df).toBeLessThan(view(split).gaps[0]?.df ?? 0);
    expect(cells?.means).toHaveLength(2 * means.length);
    // Too many to list in pairs: means, letters and an LSD alone.
    expect(cells?.gaps).toEqual([]);
    expect(cells?.lsd?.mean).toBeGreaterThan(0);
    expect(cells?.means.every(({ letters }) => letters !== '')).toBe(true);
  });

  test('of a factorial: each factor beside the combinations', () => {
    const plots = split.plots.map((plot) => ({
      ...plot,
      mainLevel: null,
      factorLevels: { fungicide: plot.mainLevel ?? '', variety: plot.entry },
    }));
    const { factors, means, kind } = view({ ...split, design: 'factorial', plots });
    expect(kind).toBe('numeric');
    expect(factors.map(({ name }) => name)).toEqual(['fungicide', 'variety']);
    expect(means).toHaveLength(12);
    const [fungicide] = factors;
    const difference = (fungicide?.means[0]?.mean ?? 0) - (fungicide?.means[1]?.mean ?? 0);
    expect(Math.abs(fungicide?.gaps[0]?.estimate ?? 0)).toBeCloseTo(difference, 12);
  });

  test('are none where entries alone are compared', () => {
    expect(view(sound).factors).toEqual([]);
  });
});

test('further checks come with every reading', () => {
  const { diagnostics } = view(drifting);
  expect(diagnostics?.moran?.p).toBeLessThan(0.001);
  expect(diagnostics?.colTrend?.p).toBeLessThan(0.001);
  expect(diagnostics?.nonAdditivity).not.toBeNull();
  expect(diagnostics?.repeatability).toBeGreaterThan(0);
});

test('a refusal names the plots at fault', () => {
  const plots = sound.plots.map((plot, i) => (i === 2 ? { ...plot, block: null, rep: null } : plot));
  const { kind, outcomes } = view({ ...sound, plots });
  expect(kind).toBe('none');
  expect(outcomes).toEqual([
    { code: 'missing-level', values: { context: 'plots', plots: sound.plots[2]?.plotNumber } },
  ]);
});
