import { describe, expect, test } from 'vitest';
import { demoAccounts } from '#server/demo/demo-accounts.ts';
import { demoCrops } from '#server/demo/demo-crops.ts';
import { varietyWithoutSeedCost } from '#server/demo/demo-prices.ts';
import { generateDemo, type DemoTrial } from '#server/demo/generate-demo.ts';
import { openRandomSource } from '#server/demo/random-source.ts';
import { velmarSites } from '#server/demo/velmar-geography.ts';
import { analyseTrial } from '#server/stats/engine.ts';
import { trialContent } from '#shared/trial-content.ts';

const demo = generateDemo();

function count(is: (trial: DemoTrial) => boolean): number {
  return demo.trials.filter(is).length;
}

function theOne(is: (trial: DemoTrial) => boolean): DemoTrial {
  const [found, ...others] = demo.trials.filter(is);
  if (found === undefined || others.length > 0) throw new Error('Not exactly one such trial');
  return found;
}

function analyse({ content }: DemoTrial) {
  const plots = content.plots.map((plot) => ({
    ...plot,
    plot: plot.plotNumber,
    value: plot.values['yield'] ?? null,
    excluded: plot.excludedReason,
  }));
  return analyseTrial(plots, { kind: content.design });
}

describe('the generator', () => {
  test('gives the same fields at every run', () => {
    expect(generateDemo()).toEqual(demo);
  });

  test('draws what it says: uniform, normal, fair shuffles', () => {
    const random = openRandomSource(7, 'check');
    const draws = Array.from({ length: 40_000 }, () => random.normal());
    const mean = draws.reduce((sum, value) => sum + value, 0) / draws.length;
    const variance = draws.reduce((sum, value) => sum + value ** 2, 0) / draws.length - mean ** 2;
    expect(Math.abs(mean)).toBeLessThan(0.02);
    expect(Math.abs(variance - 1)).toBeLessThan(0.03);
    const firsts = Array.from({ length: 6000 }, () => random.shuffle([0, 1, 2])[0]);
    for (const item of [0, 1, 2]) {
      expect(Math.abs(firsts.filter((first) => first === item).length - 2000)).toBeLessThan(150);
    }
  });
});

describe('the scenario', () => {
  test('holds the trials that it promises', () => {
    expect(demo.trials).toHaveLength(76);
    expect(count(({ content }) => content.kind === 'summary')).toBe(11);
    const byDesign = new Map(demo.trials.map(({ content }) => [content.design, 0]));
    for (const { content } of demo.trials)
      byDesign.set(content.design, (byDesign.get(content.design) ?? 0) + 1);
    expect(Object.fromEntries(byDesign)).toEqual({
      rcbd: 51,
      'incomplete-blocks': 11,
      'row-column': 3,
      crd: 3,
      strips: 6,
      'split-plot': 2,
    });
    expect(new Set(demo.trials.map(({ planned }) => planned.season))).toEqual(
      new Set([2022, 2023, 2024, 2025, 2026]),
    );
    expect(count(({ planned }) => planned.state === 'draft')).toBe(1);
    expect(count(({ planned }) => planned.state === 'in-review')).toBe(2);
    expect(count(({ planned }) => planned.state === 'withdrawn')).toBe(1);
    expect(count(({ planned }) => planned.incident === 'corrected')).toBe(1);
    expect(
      count(({ content }) => content.plots.some((plot) => plot.values['yield'] === undefined)),
    ).toBeGreaterThan(8);
  });

  test('has no site, and so no trial, on the Sarrow Coast, but prices', () => {
    expect(velmarSites).toHaveLength(9);
    expect(velmarSites.map((site) => site.region)).not.toContain('sarrow-coast');
    expect(demo.priceSheets.filter((sheet) => sheet.region === 'sarrow-coast')).toHaveLength(3);
  });

  test('is valid content, with a place for every plot that no other has', () => {
    for (const { content } of demo.trials) {
      expect(trialContent.parse(content)).toEqual(content);
      const places = content.plots.map((plot) => `${plot.row} ${plot.col}`);
      expect(new Set(places).size).toBe(places.length);
      expect(new Set(content.plots.map((plot) => plot.plotNumber)).size).toBe(content.plots.length);
    }
  });

  test('lays its designs out as they are named', () => {
    for (const { content } of demo.trials) {
      const group = (of: (plot: (typeof content.plots)[number]) => string): string[][] => {
        const groups = new Map<string, string[]>();
        for (const plot of content.plots) groups.set(of(plot), [...(groups.get(of(plot)) ?? []), plot.entry]);
        return [...groups.values()];
      };
      const isComplete = (entries: string[]): boolean =>
        entries.length === content.entries.length && new Set(entries).size === entries.length;
      if (content.plots.length === 0) continue;
      if (content.design === 'rcbd' || content.design === 'strips')
        expect(group((plot) => plot.block ?? '').every(isComplete)).toBe(true);
      if (content.design === 'incomplete-blocks' || content.design === 'row-column')
        expect(group((plot) => plot.rep ?? '').every(isComplete)).toBe(true);
      if (content.design === 'incomplete-blocks')
        expect(new Set(group((plot) => `${plot.rep} ${plot.block}`).map((block) => block.length)).size).toBe(
          1,
        );
      if (content.design === 'split-plot')
        expect(group((plot) => `${plot.block} ${plot.mainLevel}`).every(isComplete)).toBe(true);
    }
  });

  test('has a trial that hail went over, one with a trend and one with a lost comma', () => {
    const hail = theOne(({ planned }) => planned.incident === 'hail');
    expect(analyse(hail).fit.cvPercent).toBeGreaterThan(26);
    expect(analyse(hail).fit.cvPercent).toBeLessThan(30);
    const { diagnostics } = analyse(theOne(({ planned }) => planned.incident === 'lost-comma'));
    expect(diagnostics.largestStudentised?.pBonferroni).toBeLessThan(1e-6);
    const drifting = theOne(({ planned }) => planned.incident === 'spatial-trend');
    expect(correlateWithColumn(drifting)).toBeGreaterThan(0.6);
    const sound = demo.trials.find(({ content }) => content.design === 'rcbd' && content.plots.length > 30);
    expect(Math.abs(correlateWithColumn(sound ?? drifting))).toBeLessThan(0.4);
  });

  test('varieties have invented names, each once, and prices but for one', () => {
    for (const crop of demoCrops) {
      expect(crop.varieties.length).toBeGreaterThanOrEqual(12);
      expect(new Set(crop.varieties.map((variety) => variety.name)).size).toBe(crop.varieties.length);
    }
    const priced = new Set(demo.priceSheets.flatMap((sheet) => sheet.seedCosts.map((cost) => cost.variety)));
    const unpriced = demoCrops.flatMap((crop) => crop.varieties).filter((one) => !priced.has(one.name));
    expect(unpriced.map((variety) => variety.name)).toEqual([varietyWithoutSeedCost]);
  });

  test('people have addresses that reach nobody and passwords long enough', () => {
    for (const account of Object.values(demoAccounts)) {
      expect(account.email).toMatch(/@example\.org$/);
      expect(account.password.length).toBeGreaterThanOrEqual(12);
    }
  });
});

describe('the truth behind it', () => {
  test.each(demo.truth.map((truth) => [truth.crop, truth] as const))(
    'is found again in the trials of %s',
    (crop, truth) => {
      const effects = truth.varieties.get('yield');
      const deviations = new Map<string, number[]>();
      for (const trial of demo.trials) {
        if (trial.planned.crop !== crop || trial.planned.kind === 'summary') continue;
        if (['strips', 'split-plot'].includes(trial.content.design) || trial.planned.incident !== null)
          continue;
        const plain = trial.content.plots.filter((plot) => plot.values['yield'] !== undefined);
        const expected =
          plain.reduce(
            (sum, plot) => sum + (plot.values['yield'] ?? 0) - (effects?.get(plot.entry) ?? 0),
            0,
          ) / plain.length;
        for (const plot of plain)
          deviations.set(plot.entry, [
            ...(deviations.get(plot.entry) ?? []),
            (plot.values['yield'] ?? 0) - expected,
          ]);
      }
      const pairs = [...deviations]
        .filter(([, values]) => values.length >= 12)
        .map(
          ([entry, values]) =>
            [
              effects?.get(entry) ?? 0,
              values.reduce((sum, value) => sum + value, 0) / values.length,
            ] as const,
        );
      expect(pairs.length).toBeGreaterThan(8);
      expect(correlate(pairs)).toBeGreaterThan(0.8);
    },
  );
});

function correlateWithColumn(trial: DemoTrial): number {
  const residuals = new Map(analyse(trial).residuals.map((row) => [row.plot, row.residual]));
  return correlate(
    trial.content.plots.flatMap((plot) => {
      const residual = residuals.get(plot.plotNumber);
      return residual === undefined ? [] : [[plot.col ?? 0, residual] as const];
    }),
  );
}

function correlate(pairs: readonly (readonly [number, number])[]): number {
  const mean = (at: 0 | 1): number => pairs.reduce((sum, pair) => sum + pair[at], 0) / pairs.length;
  const [x, y] = [mean(0), mean(1)];
  const sum = (term: (pair: readonly [number, number]) => number): number =>
    pairs.reduce((total, pair) => total + term(pair), 0);
  return (
    sum(([a, b]) => (a - x) * (b - y)) / Math.sqrt(sum(([a]) => (a - x) ** 2) * sum(([, b]) => (b - y) ** 2))
  );
}
