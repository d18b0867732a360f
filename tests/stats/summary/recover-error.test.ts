import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { ErrorQuantities } from '#server/stats/summary/error-quantities.ts';
import { recoverError, sedOfPair, type SummaryTrial } from '#server/stats/summary/recover-error.ts';
import { studentisedRangeQuantileUpper } from '#server/stats/distributions/studentised-range.ts';
import { tQuantileUpper, tTwoSided } from '#server/stats/distributions/student-t.ts';

function recover(trial: SummaryTrial) {
  const result = recoverError(trial);
  if (!result.recovered) throw new Error(result.reason);
  return result;
}

const codes = (trial: SummaryTrial) => recover(trial).findings.map((finding) => finding.code);

// Gomez & Gomez (1984), p. 26: six seed rates in four blocks, rice kg/ha; MSE 110,558 with 15 df; mean 4,959.58 (R 4.2.2).
const seedRates = {
  design: 'rcbd',
  entries: 6,
  replicates: 4,
  alpha: 0.05,
  trialMean: { value: 4959.58 },
} as const;

describe('round trip of the seed-rate trial', () => {
  test('CV 6.7 % gives the mean square 110,418', () => {
    // The true one is 110,558: the CV is printed to one digit after the point.
    const result = recover({ ...seedRates, given: { cvPercent: { value: 6.7 } } });
    expect(Math.round(result.residualMs ?? 0)).toBe(110418);
    expect(result.df).toBe(15);
  });

  test('LSD 501.1 and SED 235.1 are one', () => {
    expect(recover({ ...seedRates, given: { lsd: { value: 501.1 } } }).sed).toBeCloseTo(235.1, 1);
    const bySed = recover({ ...seedRates, given: { sed: { value: 235.1 }, lsd: { value: 501.1 } } });
    expect(bySed.findings.map((finding) => finding.code)).toEqual(['df-from-design']);
    expect(bySed.residualMs).toBeCloseTo(110558, -2);
  });
});

describe('a table whose LSD and CV contradict each other', () => {
  // domain.md, from a published table with 4 replicates at 5 %; its df are not printed, 35 fit all three columns.
  test.each([
    [15, 58, 7, 12.5],
    [11, 100, 12, 15.8],
    [20, 45, 8, 12.9],
  ])('CV %d, mean %d: printed LSD %d should be %d', (cv, mean, lsd, expected) => {
    const { findings } = recover({
      design: 'unknown',
      entries: 12,
      replicates: 4,
      errorDf: 35,
      alpha: 0.05,
      trialMean: { value: mean },
      given: { cvPercent: { value: cv }, lsd: { value: lsd } },
    });
    const [finding] = findings;
    if (findings.length !== 1 || finding?.code !== 'quantities-contradict')
      throw new Error(JSON.stringify(findings));
    const lsdSide = [finding.used, finding.other].find((side) => side.quantity === 'lsd');
    expect(lsdSide?.printed).toBe(lsd);
    expect(lsdSide?.implied.toFixed(1)).toBe(expected.toFixed(1));
  });

  test('an LSD read at the wrong level is pointed out with the level that fits', () => {
    const lsd = tQuantileUpper(0.05, 15) * 235.1;
    const { findings } = recover({
      ...seedRates,
      given: { sed: { value: 235.1 }, lsd: { value: Math.round(lsd) } },
    });
    expect(findings).toContainEqual(
      expect.objectContaining({ code: 'quantities-contradict', agreesAtAlpha: 0.1 }),
    );
  });

  test('rounding of the print is no contradiction', () => {
    expect(codes({ ...seedRates, given: { sed: { value: 235.1 }, cvPercent: { value: 7 } } })).toEqual([
      'df-from-design',
    ]);
  });
});

test('every quantity leads back to the error it was made from', () => {
  const positive = fc.double({ min: 0.01, max: 50, noNaN: true });
  fc.assert(
    fc.property(
      positive,
      fc.integer({ min: 2, max: 40 }),
      fc.integer({ min: 2, max: 8 }),
      fc.constantFrom(0.05, 0.1, 0.01),
      (sd, entries, replicates, alpha) => {
        const df = (entries - 1) * (replicates - 1);
        fc.pre(df >= 2);
        const sed = sd * Math.sqrt(2 / replicates);
        const mean = 20 * sd;
        const quantities: ErrorQuantities = {
          lsd: { value: tQuantileUpper(alpha / 2, df) * sed },
          hsd: { value: (studentisedRangeQuantileUpper(alpha, entries, df) * sed) / Math.SQRT2 },
          cvPercent: { value: (100 * sd) / mean },
          seMean: { value: sd / Math.sqrt(replicates) },
          sed: { value: sed },
          residualMs: { value: sd * sd },
          pair: { difference: { value: -1.7 * sed }, p: { value: tTwoSided(1.7, df) } },
        };
        const result = recover({
          design: 'rcbd',
          entries,
          replicates,
          alpha,
          trialMean: { value: mean },
          given: quantities,
        });
        expect(result.estimates).toHaveLength(7);
        for (const estimate of result.estimates) expect(estimate.sed / sed).toBeCloseTo(1, 8);
        expect(result.findings).toEqual([{ code: 'df-from-design', df }]);
        expect((result.residualMs ?? 0) / (sd * sd)).toBeCloseTo(1, 8);
      },
    ),
    { numRuns: 30 },
  );
});

test('the most finely printed quantity is the one used', () => {
  expect(recover({ ...seedRates, given: { cvPercent: { value: 7 }, lsd: { value: 501.1 } } }).from).toBe(
    'lsd',
  );
  expect(
    recover({ ...seedRates, given: { lsd: { value: 500, decimals: 0 }, sed: { value: 235, decimals: 2 } } })
      .from,
  ).toBe('sed');
});

describe('unequal replication', () => {
  const trial = { ...seedRates, replicates: [4, 4, 4, 4, 2, 2], given: { residualMs: { value: 110558 } } };

  test('the harmonic mean stands for all, and it is said', () => {
    const result = recover(trial);
    expect(result.findings).toContainEqual({ code: 'replication-averaged', replication: 3 });
    expect(result.sed).toBeCloseTo(Math.sqrt((2 * 110558) / 3), 8);
    expect(result.residualMs).toBeCloseTo(110558, 6);
    expect(result.df).toBe(20 - 6 - 3);
  });

  test('a pair has its own error', () => {
    expect(sedOfPair(110558, 4, 2)).toBeCloseTo(Math.sqrt(110558 * 0.75), 8);
  });
});

describe('what cannot be recovered says why', () => {
  const base = { design: 'rcbd', entries: 6, replicates: 4 } as const;
  test.each<[string, SummaryTrial, string]>([
    ['nothing printed', { ...base, given: {} }, 'nothing-printed'],
    ['an LSD without its level', { ...base, given: { lsd: { value: 5 } } }, 'no-alpha'],
    ['a CV without the mean', { ...base, given: { cvPercent: { value: 5 } } }, 'no-mean'],
    ['an unknown design without df', { ...base, design: 'unknown', given: { sed: { value: 1 } } }, 'no-df'],
    ['one plot an entry', { ...base, replicates: 1, given: { sed: { value: 1 } } }, 'no-df'],
    [
      'a mean square without replication',
      { ...base, replicates: undefined, errorDf: 15, given: { residualMs: { value: 4 } } },
      'no-replication',
    ],
    [
      'a gap of nothing',
      { ...base, given: { pair: { difference: { value: 0 }, p: { value: 1 } } } },
      'no-information',
    ],
  ])('%s', (_, trial, reason) => {
    expect(recoverError(trial)).toEqual({ recovered: false, reason });
  });

  test('an unusable quantity beside a usable one is named', () => {
    const trial: SummaryTrial = { ...base, given: { lsd: { value: 5 }, sed: { value: 2.3 } } };
    expect(recover(trial).findings).toContainEqual({
      code: 'quantity-unused',
      quantity: 'lsd',
      reason: 'no-alpha',
    });
  });

  test('without replication an LSD still gives the error of a difference', () => {
    const trial: SummaryTrial = {
      ...base,
      replicates: undefined,
      errorDf: 15,
      alpha: 0.05,
      given: { lsd: { value: 501.1 } },
    };
    expect(recover(trial)).toMatchObject({ residualMs: null, df: 15 });
  });
});
