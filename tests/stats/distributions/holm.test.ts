import fc from 'fast-check';
import { expect, test } from 'vitest';
import { bonferroniAdjust, holmAdjust } from '#server/stats/distributions/holm.ts';

const ps = [0.01, 0.02, 0.03, 0.04, 0.5, 0.001];

// R 4.2.2, stats::p.adjust.
test('Holm and Bonferroni as R adjusts', () => {
  expect([...holmAdjust(ps)].map((p) => p.toFixed(12))).toEqual(
    [0.05, 0.08, 0.09, 0.09, 0.5, 0.006].map((p) => p.toFixed(12)),
  );
  expect([...bonferroniAdjust(ps)].map((p) => p.toFixed(12))).toEqual(
    [0.06, 0.12, 0.18, 0.24, 1, 0.006].map((p) => p.toFixed(12)),
  );
  expect(bonferroniAdjust([0.01], 10)[0]).toBeCloseTo(0.1, 15);
});

test('Holm keeps the order of p, lies between p and Bonferroni, and does not care for the order of the input', () => {
  fc.assert(
    fc.property(
      fc.array(fc.double({ min: 0, max: 1, noNaN: true }), { minLength: 1, maxLength: 30 }),
      (values) => {
        const holm = holmAdjust(values);
        const bonferroni = bonferroniAdjust(values);
        const reversed = holmAdjust(values.toReversed()).toReversed();
        values.forEach((p, i) => {
          const own = holm[i] ?? -1;
          expect(own).toBeGreaterThanOrEqual(p);
          expect(own).toBeLessThanOrEqual(bonferroni[i] ?? -1);
          expect(reversed[i]).toBe(own);
          values.forEach((other, j) => {
            if (other > p) expect(holm[j]).toBeGreaterThanOrEqual(own);
          });
        });
      },
    ),
  );
});
