import { describe, expect, it } from 'vitest';
import { chanceAbove, chanceOver } from '#server/stats/network/gap-chance.ts';
import { combineTrials } from '#server/stats/network/combine-trials.ts';
import { judgeGap } from '#server/stats/network/judge-gap.ts';
import { gradeEvidence } from '#server/stats/network/evidence-tier.ts';
import { weighCandidates } from '#server/stats/network/weigh-candidates.ts';
import type { EvidenceNetwork, LevelInterval, WeighQuestion } from '#server/stats/network/weigh-question.ts';
import type { CandidateWeighing, TraitWeighing } from '#server/stats/network/weigh-result.ts';
import { countSiteYearsToSettle } from '#server/stats/network/site-years-to-settle.ts';
import { dunnettQuantile } from '#server/stats/distributions/dunnett.ts';
import { tQuantile } from '#server/stats/distributions/student-t.ts';
import {
  askAbout,
  changeTrait,
  changeTrials,
  growEvidence,
  usualYield,
} from '#tests/support/sown-network.ts';

const entries = { Now: 0, Best: 1.2, Like: 0.02, Worse: -1.2, Close: 0.3, Other: 0 };
const network = growEvidence({ entries, sites: 5 });

const weigh = (evidence: EvidenceNetwork, question: WeighQuestion): TraitWeighing =>
  weighCandidates(evidence, question).traits[0]!;
const weighOne = (
  evidence: EvidenceNetwork,
  candidate: string,
  change: Partial<WeighQuestion> = {},
): CandidateWeighing => weigh(evidence, askAbout([candidate], change)).candidates[0]!;

const between = (low: number, high: number): LevelInterval => ({ low, high, level: 0.95 });

describe('the verdict on an interval', () => {
  it.each([
    ['ahead', between(0.01, 0.5), 'higher'],
    ['behind', between(0.01, 0.5), 'lower'],
    ['behind', between(-0.5, -0.01), 'higher'],
    ['ahead', between(-0.5, -0.01), 'lower'],
    ['level', between(-0.05, 0.09), 'higher'],
    ['open', between(-0.05, 0.1), 'higher'],
    ['open', between(0, 0.5), 'higher'],
    ['level', between(-0.05, 0.09), 'neutral'],
    ['open', between(-0.5, 0.1), 'neutral'],
    [null, between(0.2, 0.5), 'neutral'],
  ] as const)('is %s for %o where %s is better', (verdict, interval, better) => {
    expect(judgeGap(interval, better, 0.1, true)).toBe(verdict);
  });

  it('is thin, whatever the interval, where the method cannot answer', () => {
    expect(judgeGap(between(1, 2), 'higher', 0.1, false)).toBe('thin');
  });
});

describe('tiers', () => {
  const count = { siteYears: 12, environments: 12, sites: 4, seasons: 3, entries: 8, hasUsual: true };
  it.each([
    ['data-alone', {}],
    ['data-alone', { environments: 10, sites: 2, seasons: 2, entries: 5 }],
    ['supported', { environments: 9 }],
    ['supported', { entries: 4 }],
    ['one-season', { seasons: 1 }],
    ['few', { seasons: 1, hasUsual: false }],
    ['few', { environments: 3, hasUsual: false }],
    ['one-trial', { siteYears: 1 }],
    ['none', { siteYears: 0 }],
  ] as const)('%s', (tier, change) => {
    expect(gradeEvidence({ ...count, ...change })).toBe(tier);
  });
});

describe('weighing a pair', () => {
  it.each([
    ['Best', 'ahead'],
    ['Worse', 'behind'],
    ['Close', 'open'],
  ] as const)('%s is %s', (candidate, verdict) => {
    expect(weighOne(network, candidate).verdict).toBe(verdict);
  });

  it('is neck and neck where the margin holds the whole interval', () => {
    const { gap } = weighOne(network, 'Like');
    const margin = Math.max(-gap!.region.low, gap!.region.high) + 0.01;
    expect(weighOne(changeTrait(network, { practicalMargin: margin }), 'Like').verdict).toBe('level');
    expect(weighOne(network, 'Like', { margins: { yield: { Like: margin } } }).verdict).toBe('level');
    expect(weighOne(network, 'Like', { margins: { yield: { Other: margin } } }).verdict).toBe('open');
  });

  it('takes the direction of the trait', () => {
    const lower = changeTrait(network, { better: 'lower' });
    expect(weighOne(lower, 'Best').verdict).toBe('behind');
    expect(weighOne(lower, 'Worse').verdict).toBe('ahead');
    expect(weighOne(lower, 'Worse').ledIn).toBe(weighOne(network, 'Best').ledIn);
  });

  it('is the network’s own gap with an LSD, all entries of the trials in it', () => {
    const { gap } = weighOne(network, 'Close');
    const place = new Map(network.trials.map((trial) => [trial.trial, trial]));
    const cells = network.traits[0]!.cells.map(({ entry, trial, mean, variance }) => {
      const { site, season } = place.get(trial)!;
      return { entry, trial, site, year: season, mean, variance: variance! };
    });
    const combined = combineTrials(cells, { usual: usualYield, spread: Math.LN2, current: 'Now' });
    if (combined.outcome === 'not-fitted') throw new Error(combined.reason);
    const same = combined.gaps.find(({ a }) => a === 'Close')!;
    expect(gap!.estimate).toBeCloseTo(same.estimate, 10);
    expect(gap!.se).toBeCloseTo(same.se, 10);
    expect(gap!.ownSeason.se).toBeCloseTo(same.ownSeason.se, 10);
    expect(gap!.lsd).toBeCloseTo(tQuantile(0.975, gap!.df) * gap!.se, 10);
    expect(gap!.region).toEqual(gap!.regionAlone);
    expect(gap!.pAdjusted).toBe(gap!.p);
  });

  it('draws a line for each trial in which both stood', () => {
    const half = growEvidence({ entries, sites: 4, stands: (entry, site) => entry !== 'Close' || site > 1 });
    const row = weighOne(half, 'Close');
    expect([row.siteYears, row.sharedSiteYears]).toEqual([6, 6]);
    const [line] = row.trials;
    const { cells } = half.traits[0]!;
    const meanOf = (entry: string): number =>
      cells.find((cell) => cell.entry === entry && cell.trial === line!.trial)!.mean;
    expect(line!.estimate).toBeCloseTo(meanOf('Close') - meanOf('Now'), 12);
    expect(line!.se).toBeCloseTo(Math.sqrt(0.1), 12);
    expect(line!.interval.high - line!.interval.low).toBeCloseTo(
      2 * tQuantile(0.975, 30) * Math.sqrt(0.1),
      9,
    );
    expect(row.ledIn).toBe(row.trials.filter(({ estimate }) => estimate > 0).length);
  });
});

describe('weighing several', () => {
  const names = ['Best', 'Like', 'Worse', 'Close', 'Other'];
  const named = weigh(network, askAbout(names));

  it('widens every interval for their number, by Dunnett', () => {
    expect(named.comparison).toBe('dunnett');
    for (const { gap } of named.candidates) {
      expect(gap!.region.high - gap!.region.low).toBeGreaterThan(
        gap!.regionAlone.high - gap!.regionAlone.low,
      );
      expect(gap!.pAdjusted).toBeGreaterThan(gap!.p);
      // never wider than Bonferroni
      const bonferroni = tQuantile(1 - 0.025 / names.length, gap!.df) * gap!.se;
      expect(gap!.region.high - gap!.estimate).toBeLessThan(bonferroni);
      expect(gap!.pAdjusted).toBeLessThanOrEqual(Math.min(1, gap!.p * names.length) * (1 + 1e-6));
    }
  });

  it('is Dunnett’s width at correlation one half, where all stood everywhere', () => {
    const half = names.map((_, i) => names.map((__, j) => (i === j ? 1 : 0.5)));
    for (const { gap } of named.candidates) {
      const width = dunnettQuantile({ alpha: 0.05, df: gap!.df, correlation: half }) * gap!.se;
      expect(gap!.region.high - gap!.estimate).toBeCloseTo(width, 7);
      expect(gap!.estimate - gap!.region.low).toBeCloseTo(width, 7);
    }
  });

  it('has interval and adjusted p agree on 0', () => {
    for (const { gap } of named.candidates)
      expect(gap!.region.low > 0 || gap!.region.high < 0).toBe(gap!.pAdjusted < 0.05);
  });

  it('compares with the best of the list where that is the question', () => {
    const { best } = weigh(network, askAbout(names, { kind: 'best' }));
    expect(best!.map(({ entry }) => entry)).toEqual(['Now', ...names]);
    expect(best!.filter(({ isBest }) => isBest).map(({ entry }) => entry)).toEqual(['Best']);
    expect(best!.find(({ entry }) => entry === 'Worse')!.mayBeBest).toBe(false);
    expect(named.best).toBeNull();
  });
});

describe('what there is no verdict on', () => {
  it('a region without trials', () => {
    const elsewhere = changeTrials(network, () => ({ inRegion: false }));
    expect(weighCandidates(elsewhere, askAbout(['Best']))).toMatchObject({ answer: 'no-trials', traits: [] });
    expect(weighCandidates(network, askAbout(['Best'], { seasons: { from: 1990, to: 1999 } })).answer).toBe(
      'no-trials',
    );
  });

  it('a variety that stood nowhere, or beyond any chain of trials', () => {
    expect(weighOne(network, 'Unheard of')).toMatchObject({
      verdict: 'thin',
      gap: null,
      noGapBecause: 'no-trials',
    });
    const cut = growEvidence({
      entries,
      stands: (entry, site) => (['Best', 'Like', 'Close'].includes(entry) ? site < 2 : site >= 2),
    });
    expect(weighOne(cut, 'Best')).toMatchObject({ verdict: 'thin', gap: null, noGapBecause: 'disconnected' });
    expect(weigh(cut, askAbout(['Best'])).leftOut.every(({ reason }) => reason === 'not-connected')).toBe(
      true,
    );
  });

  it('one trial, however large the gap in it', () => {
    const single = growEvidence({
      entries,
      stands: (entry, site, season) => entry !== 'Best' || (site === 0 && season === 2024),
    });
    const row = weighOne(single, 'Best');
    expect(row.verdict).toBe('thin');
    expect(row.tier).toBe('one-trial');
    expect(row.gap).not.toBeNull();
  });

  it('few trials of a trait without usual variances, though plain REML answers from ten on', () => {
    const few = changeTrait(growEvidence({ entries, sites: 2, seasons: [2023, 2024] }), { usual: null });
    expect(weighOne(few, 'Best').verdict).toBe('thin');
    expect(weighOne(changeTrait(network, { usual: null }), 'Best').verdict).toBe('ahead');
  });
});

describe('trials left out', () => {
  it('change the figures and are named with their reason', () => {
    const trials = network.trials.map(({ trial }) => trial);
    const weak = changeTrials(network, ({ trial }) => (trial === trials[0] ? { cvPercent: 30 } : {}));
    const silent = changeTrait(weak, {
      cells: weak.traits[0]!.cells.map((cell) =>
        cell.trial === trials[1] ? { ...cell, variance: null } : cell,
      ),
    });
    const answer = weigh(silent, askAbout(['Close'], { setAside: [trials[2]!] }));
    expect(answer.leftOut).toEqual([
      { trial: trials[0], reason: 'weak-cv' },
      { trial: trials[1], reason: 'no-variance' },
      { trial: trials[2], reason: 'set-aside' },
    ]);
    expect(answer.trials).toEqual(trials.slice(3));
    expect(answer.candidates[0]!.siteYears).toBe(12);
    expect(answer.candidates[0]!.gap!.estimate).not.toBe(weighOne(network, 'Close').gap!.estimate);
  });

  it('are only those outside the seasons asked for', () => {
    const answer = weigh(network, askAbout(['Close'], { seasons: { from: 2023, to: 2024 } }));
    expect(answer.seasons).toEqual([2023, 2024]);
    expect(answer.trials).toHaveLength(10);
  });
});

describe('site-years to settle', () => {
  // known variances, no site or season part: (8 + m)/8 ≥ ((1.95996 + 0.84162)·0.2/0.3)² = 3.488, so m = 20
  const question = {
    estimate: 0.3,
    se: 0.2,
    df: 1e9,
    level: 0.95,
    components: { site: 1e-9, year: 1e-9, rest: 0.08 },
    cellVariance: 0.08,
    entries: 6,
    sites: 4,
    seasons: 2,
    environments: 8,
    penalty: { nu: 1e12, usual: { site: 1e-9, year: 1e-9, rest: 0.08 } },
  };

  it('are the first number with power .8', () => {
    expect(countSiteYearsToSettle(question)).toBe(20);
    expect(countSiteYearsToSettle({ ...question, estimate: -0.3 })).toBe(20);
  });

  it('are more than forty for a small gap, or for one that the same sites cannot settle', () => {
    expect(countSiteYearsToSettle({ ...question, estimate: 0.1 })).toBe(41);
    expect(countSiteYearsToSettle({ ...question, estimate: 0 })).toBe(41);
    expect(countSiteYearsToSettle({ ...question, components: { site: 0.3, year: 1e-9, rest: 0.08 } })).toBe(
      41,
    );
  });

  it('are none where it is settled, fewer the larger the gap', () => {
    expect(weighOne(network, 'Best').siteYearsToSettle).toBeNull();
    const further = [0.15, 0.3, 0.45].map((gap) => {
      const grown = growEvidence({
        entries: { ...entries, Close: gap },
        sites: 3,
        seasons: [2023, 2024],
        interactionSd: 0.3,
        seed: 5,
      });
      return weighOne(grown, 'Close');
    });
    const open = further.filter(({ verdict }) => verdict === 'open');
    expect(open.length).toBeGreaterThan(1);
    const sorted = open.toSorted((a, b) => Math.abs(a.gap!.estimate) - Math.abs(b.gap!.estimate));
    sorted
      .slice(1)
      .forEach((row, i) => expect(row.siteYearsToSettle).toBeLessThanOrEqual(sorted[i]!.siteYearsToSettle!));
  });
});

describe('chances', () => {
  const { gap } = weighOne(network, 'Close');

  it('are one half at the estimate and fall as the threshold rises', () => {
    expect(chanceAbove(gap!, gap!.estimate, 'region')).toBeCloseTo(0.5, 12);
    const chances = [-0.5, 0, 0.5, 1].map((threshold) => chanceAbove(gap!, threshold, 'own-season'));
    chances.slice(1).forEach((chance, i) => expect(chance).toBeLessThan(chances[i]!));
  });

  it('are nearer one half on the grower’s own land than for the region', () => {
    expect(chanceAbove(gap!, 0, 'region')).toBeGreaterThan(chanceAbove(gap!, 0, 'own-season'));
    expect(chanceAbove(gap!, 0, 'own-season')).toBeGreaterThan(0.5);
  });

  it('start from the shrunken gap where the candidate was picked', () => {
    const { shrunken, df } = gap!;
    expect(chanceAbove(gap!, 0.1, 'region', true)).toBeCloseTo(
      chanceOver({ estimate: shrunken.estimate, se: shrunken.se, df }, 0.1),
      12,
    );
  });

  it('match the interval: 2.5 in 100 lie over its upper end', () => {
    expect(chanceAbove(gap!, gap!.regionAlone.high, 'region')).toBeCloseTo(0.025, 9);
    expect(chanceAbove(gap!, gap!.ownSeason.high, 'own-season')).toBeCloseTo(0.025, 9);
  });
});

describe('questions that cannot be asked', () => {
  it.each([
    ['Now', 'New'],
    ['Best', 'Best'],
  ])('%s against itself or twice', (...candidates) => {
    expect(() => weighCandidates(network, askAbout(candidates))).toThrow(
      expect.objectContaining({ code: 'bad-option' }),
    );
  });
});

describe('the answer', () => {
  it('survives JSON whole', () => {
    const answer = weighCandidates(network, askAbout(['Best', 'Close'], { kind: 'best' }));
    expect(JSON.parse(JSON.stringify(answer))).toEqual(answer);
  });
});
