import fc from 'fast-check';
import { expect, it } from 'vitest';
import { AnalysisError } from '#server/stats/analysis-error.ts';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { designKinds, type TrialPlot } from '#server/stats/trial/trial-data.ts';

/** Few levels, so that layouts are unbalanced, confounded, disconnected and unreplicated as often as not. */
const level = (prefix: string, most: number) => fc.nat({ max: most }).map((n) => `${prefix}${n}`);
const value = fc.oneof(
  { weight: 4, arbitrary: fc.integer({ min: 0, max: 300 }).map((n) => n / 100) },
  { weight: 2, arbitrary: fc.nat({ max: 1 }) },
  { weight: 1, arbitrary: fc.constant(5) },
  { weight: 1, arbitrary: fc.constant(null) },
);
const plots: fc.Arbitrary<TrialPlot[]> = fc
  .array(
    fc.record({
      entry: level('E', 5),
      rep: level('r', 2),
      block: level('b', 3),
      main: level('M', 2),
      sub: level('S', 2),
      factors: fc.record({ a: level('a', 1), b: level('b', 2) }),
      value,
    }),
    { minLength: 1, maxLength: 26 },
  )
  .map((rows) => rows.map((row, i) => ({ ...row, plot: String(i), row: Math.floor(i / 5), col: i % 5 })));
const offset = fc.constantFrom(0, 1e9, 1e-8);

it('every layout and design gives a finite result that has converged, or a refusal', () => {
  const refuted: string[] = [];
  fc.assert(
    fc.property(plots, fc.constantFrom(...designKinds), offset, (rows, kind, add) => {
      const shifted = rows.map((plot) => ({ ...plot, value: plot.value === null ? null : plot.value + add }));
      try {
        const hasEntries = kind !== 'split-plot' && kind !== 'factorial';
        const check = hasEntries ? (shifted.find((plot) => plot.value !== null)?.entry ?? null) : null;
        const options = { check, spatial: true, checks: true, comparisons: true };
        const result = analyseTrial(shifted, { kind, factors: ['a', 'b'] }, options);
        // JSON turns what is not finite into null, which the comparison shows
        expect(JSON.parse(JSON.stringify(result))).toEqual(result);
        expect(result.fit.converged).toBe(true);
      } catch (error) {
        if (!(error instanceof AnalysisError)) throw error;
        refuted.push(error.code);
      }
    }),
    { numRuns: 250, seed: 3 },
  );
  // most layouts can be analysed: the property is not about refusals
  expect(refuted.length).toBeLessThan(125);
});
