import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialDesign, TrialPlot } from '#server/stats/trial/trial-data.ts';
import type { TrialAnalysis } from '#server/stats/trial/trial-result.ts';

interface Sample {
  readonly design: TrialDesign;
  readonly plots: readonly TrialPlot[];
}

/** Values with two decimals around 7, as yields are written. */
const value = fc.integer({ min: 400, max: 1000 }).map((v) => v / 100);

/** Complete blocks with up to three plots missing, and incomplete blocks of half a replicate. */
const sample: fc.Arbitrary<Sample> = fc
  .record({
    isRandom: fc.boolean(),
    entries: fc.integer({ min: 4, max: 7 }),
    reps: fc.integer({ min: 3, max: 4 }),
    values: fc.array(value, { minLength: 28, maxLength: 28 }),
    missing: fc.array(fc.nat({ max: 27 }), { maxLength: 3 }),
  })
  .map(({ isRandom, entries, reps, values, missing }) => {
    const plots: TrialPlot[] = [];
    for (let rep = 0; rep < reps; rep++)
      for (let e = 0; e < entries; e++) {
        const i = plots.length;
        // entries move between the halves of a replicate from one to the next
        const half = Math.floor(((e * (rep + 1)) % entries) / Math.ceil(entries / 2));
        const block = isRandom ? `${rep + 1}.${half + 1}` : String(rep + 1);
        plots.push({
          plot: String(i + 1),
          entry: `E${e + 1}`,
          rep: isRandom ? String(rep + 1) : null,
          block,
          value: missing.includes(i) ? null : values[i]! + e / 10,
        });
      }
    return { design: { kind: isRandom ? 'incomplete-blocks' : 'rcbd' }, plots };
  });

function changeValues(plots: readonly TrialPlot[], change: (value: number) => number): TrialPlot[] {
  return plots.map((plot) => ({ ...plot, value: plot.value === null ? null : change(plot.value) }));
}

/** Compares gaps after a change of the data: estimates and SE by a factor, t, p, df unchanged. */
function expectSameGaps(actual: TrialAnalysis, base: TrialAnalysis, factor: number, digits: number): void {
  // a gap is measured against its error, or against the values' own size where there is none
  const scale = Math.max(...base.gaps.map((gap) => gap.se ?? 0)) || base.fit.grandMean;
  const byPair = new Map(actual.gaps.flatMap((gap) => [[`${gap.a}|${gap.b}`, gap] as const]));
  for (const gap of base.gaps) {
    const own = byPair.get(`${gap.a}|${gap.b}`);
    expect(own?.estimable).toBe(gap.estimable);
    if (gap.estimate === null || own?.estimate === undefined || own.estimate === null) continue;
    expect((own.estimate / factor - gap.estimate) / scale).toBeCloseTo(0, digits);
    if (gap.se === null || own.se === null) continue;
    if (gap.se === 0) expect(own.se).toBe(0);
    else expect(own.se / factor / gap.se).toBeCloseTo(1, digits);
    expect(own.df! / gap.df!).toBeCloseTo(1, digits - 2);
    if (gap.p !== null) expect(own.p).toBeCloseTo(gap.p, digits - 2);
  }
}

const runs = { numRuns: 60, seed: 20 };

describe('an analysis does not depend on', () => {
  it('the order of the rows', () => {
    fc.assert(
      fc.property(sample, fc.infiniteStream(fc.nat()), ({ design, plots }, stream) => {
        const keys = new Map(plots.map((plot) => [plot, stream.next().value ?? 0]));
        const shuffled = [...plots].sort((a, b) => keys.get(a)! - keys.get(b)!);
        const base = analyseTrial(plots, design);
        const actual = analyseTrial(shuffled, design);
        expectSameGaps(actual, base, 1, 8);
        expect(actual.groups).toEqual(base.groups);
      }),
      runs,
    );
  });

  it('what the entries, blocks and plots are called', () => {
    fc.assert(
      fc.property(sample, ({ design, plots }) => {
        const rename = (label: string) => `小麦 ${label}`;
        const renamed = plots.map((plot) => ({
          ...plot,
          plot: `№ ${plot.plot}`,
          entry: rename(plot.entry),
          block: `Б${plot.block}`,
        }));
        const base = analyseTrial(plots, design);
        const actual = analyseTrial(renamed, design);
        const back = actual.gaps.map((gap) => ({ ...gap, a: gap.a.slice(3), b: gap.b.slice(3) }));
        expectSameGaps({ ...actual, gaps: back }, base, 1, 9);
      }),
      runs,
    );
  });

  it('a constant added to all values, but for the means', () => {
    fc.assert(
      fc.property(sample, fc.integer({ min: 1, max: 500 }), ({ design, plots }, shift) => {
        const base = analyseTrial(plots, design);
        const actual = analyseTrial(
          changeValues(plots, (v) => v + shift),
          design,
        );
        expectSameGaps(actual, base, 1, 6);
        actual.means.forEach((mean, i) => {
          const own = base.means[i]!.mean;
          if (own !== null) expect(mean.mean! - shift).toBeCloseTo(own, 7);
        });
      }),
      runs,
    );
  });

  it('the unit', () => {
    fc.assert(
      fc.property(sample, fc.double({ min: 1e-3, max: 1e3, noNaN: true }), ({ design, plots }, unit) => {
        const base = analyseTrial(plots, design);
        const actual = analyseTrial(
          changeValues(plots, (v) => v * unit),
          design,
        );
        expectSameGaps(actual, base, unit, 7);
        if (base.fit.cvPercent) expect(actual.fit.cvPercent! / base.fit.cvPercent).toBeCloseTo(1, 7);
      }),
      runs,
    );
  });

  it('an offset of 1e9, beyond what doubles lose by holding it', () => {
    fc.assert(
      fc.property(sample, ({ design, plots }) => {
        const far = changeValues(plots, (v) => v + 1e9);
        const near = changeValues(far, (v) => v - 1e9);
        expectSameGaps(analyseTrial(far, design), analyseTrial(near, design), 1, 8);
      }),
      runs,
    );
  });
});

describe('an excluded plot', () => {
  it('counts as one that was not measured', () => {
    fc.assert(
      fc.property(sample, fc.nat({ max: 11 }), ({ design, plots }, which) => {
        const excluded = plots.map((plot, i) => (i === which ? { ...plot, excluded: 'hail' } : plot));
        const missing = plots.map((plot, i) => (i === which ? { ...plot, value: null } : plot));
        expect(analyseTrial(excluded, design)).toEqual(analyseTrial(missing, design));
      }),
      runs,
    );
  });
});
