import { describe, expect, it } from 'vitest';
import {
  combineTrials,
  type CombinedTrials,
  type CombineOptions,
} from '#server/stats/network/combine-trials.ts';
import type { TrialCell } from '#server/stats/network/network-cell.ts';
import { synthesisePair } from '#server/stats/network/pair-synthesis.ts';
import { analyseTwoWay } from '#server/stats/network/two-way-analysis.ts';
import { readNetworkCase, toCells } from '#tests/support/network-case.ts';
import { randomOf } from '#tests/support/random-network.ts';

function combine(cells: readonly TrialCell[], options: CombineOptions): CombinedTrials {
  const result = combineTrials(cells, options);
  if (result.outcome === 'not-fitted') throw new Error(result.reason);
  return result;
}

describe('a complete network of one season with one error variance', () => {
  const cells = toCells(readNetworkCase('C-network-balanced-open')['stage1']!).map((cell) => ({
    ...cell,
    variance: 0.09,
  }));
  const network = combine(cells, { penalty: 0 });
  const table = analyseTwoWay(cells.map(({ entry, site, mean }) => ({ entry, environment: site, mean })));

  it('is the two-way analysis: variances, gaps, standard errors, df and p', () => {
    if (table.outcome === 'not-analysed') throw new Error(table.reason);
    expect(network.fit.components.rest + 0.09).toBeCloseTo(table.errorMs, 9);
    network.gaps.forEach((gap, i) => {
      const other = table.gaps[i]!;
      expect(gap.estimate).toBeCloseTo(other.estimate, 11);
      expect(gap.se).toBeCloseTo(other.se, 9);
      expect(gap.df).toBeCloseTo(other.df, 6);
      expect(gap.p / other.p).toBeCloseTo(1, 6);
    });
  });
});

describe('two entries in exchangeable trials', () => {
  const random = randomOf(17);
  const effects = Array.from({ length: 9 }, () => ({
    estimate: random.normal(0.3, 0.4),
    variance: random.between(0.02, 0.12),
  }));
  // half of the gap's variance to each, so that the network sees the variance of the gap
  const cells = effects.flatMap(({ estimate, variance }, j): TrialCell[] => [
    { entry: 'A', site: `S${j}`, year: 2020, mean: 6 + j / 3 + estimate, variance: variance / 2 },
    { entry: 'B', site: `S${j}`, year: 2020, mean: 6 + j / 3, variance: variance / 2 },
  ]);

  it('are a random-effects meta-analysis of their gaps, with half of τ² to each entry', () => {
    const [gap] = combine(cells, { penalty: 0 }).gaps;
    const { reml } = synthesisePair(effects);
    expect(gap!.estimate).toBeCloseTo(reml.estimate, 8);
    expect(gap!.modelSe).toBeCloseTo(reml.se, 8);
    expect(2 * combine(cells, { penalty: 0 }).fit.components.rest).toBeCloseTo(reml.tau2, 7);
  });
});

describe('one trial', () => {
  const cells: TrialCell[] = ['A', 'B', 'C'].map((entry, i) => ({
    entry,
    site: 'S',
    year: 2021,
    mean: 5 + i / 4,
    variance: 0.03,
  }));
  const usual = { site: 0.0144, year: 0.0144, rest: 0.0337 };

  it('leaves the usual variances as they are: the penalty’s own mode', () => {
    const { fit, gaps } = combine(cells, { usual });
    expect(fit.components.year).toBeCloseTo(usual.year, 9);
    expect(gaps[0]!.modelSe ** 2).toBeGreaterThan(2 * (0.0144 + 0.0144 + 0.0337 + 0.03) * 0.9);
    expect(gaps[0]!.estimate).toBeCloseTo(-0.25, 12);
  });

  it('refuses plain REML, which has nothing to go by', () => {
    expect(combineTrials(cells, { penalty: 0 })).toEqual({ outcome: 'not-fitted', reason: 'no-residual' });
  });
});

describe('the grower’s own next season', () => {
  const cells = toCells(readNetworkCase('D-network-unbalanced-open')['stage1']!);

  it('adds the interactions of one further site-year to the variance of the gap', () => {
    const { fit, gaps } = combine(cells, { usual: { site: 0.02, year: 0.02, rest: 0.1 } });
    const { site, year, rest } = fit.components;
    for (const { se, ownSeason } of gaps)
      expect(ownSeason.se ** 2).toBeCloseTo(se ** 2 + 2 * (site + year + rest), 12);
  });
});

describe('shrunken gaps', () => {
  const cells = toCells(readNetworkCase('C-network-balanced-open')['stage1']!).map((cell) => ({
    ...cell,
    variance: 0.1,
  }));

  it('are every gap times θ_g / (θ_g + variance of a mean) where all entries stood everywhere', () => {
    const { gaps } = combine(cells, { penalty: 0 });
    const ratios = gaps.map(({ shrunken, estimate }) => shrunken / estimate);
    ratios.forEach((ratio) => expect(ratio).toBeCloseTo(ratios[0]!, 9));
    // complete one-way table of means: θ_g + s² = mean square between entries / environments
    const means = combine(cells, { penalty: 0 }).means.map(({ estimate }) => estimate);
    const centre = means.reduce((sum, x) => sum + x, 0) / means.length;
    const between = means.reduce((sum, x) => sum + (x - centre) ** 2, 0) / (means.length - 1);
    const noise = gaps[0]!.modelSe ** 2 / 2;
    expect(ratios[0]).toBeCloseTo((between - noise) / between, 6);
  });

  it('have the entry variance that the penalty asks for', () => {
    const usual = { site: 0.05, year: 0.04, rest: 0.1 };
    const usualEntry = 0.3;
    const { gaps, means } = combine(cells, { usual, usualEntry });
    const effects = means.map(({ estimate }) => estimate);
    const centre = effects.reduce((sum, x) => sum + x, 0) / effects.length;
    const squares = effects.reduce((sum, x) => sum + (x - centre) ** 2, 0);
    const noise = gaps[0]!.modelSe ** 2 / 2;
    const ratio = gaps[0]!.shrunken / gaps[0]!.estimate;
    const theta = (ratio * noise) / (1 - ratio);
    // slope in θ of −½[(k−1) log(θ + s²) + SS/(θ + s²)] − (3/2)(log θ + u/θ)
    const slope =
      (-0.5 * (effects.length - 1)) / (theta + noise) +
      (0.5 * squares) / (theta + noise) ** 2 -
      1.5 / theta +
      (1.5 * usualEntry) / theta ** 2;
    expect(theta * slope).toBeCloseTo(0, 6);
  });

  it('never point the other way and never outgrow the gap in a complete table', () => {
    for (const { shrunken, estimate } of combine(cells, { usual: { site: 0.05, year: 0.04, rest: 0.1 } })
      .gaps) {
      expect(Math.sign(shrunken)).toBe(Math.sign(estimate));
      expect(Math.abs(shrunken)).toBeLessThan(Math.abs(estimate));
    }
  });
});
