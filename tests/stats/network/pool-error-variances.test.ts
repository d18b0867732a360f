import { expect, test } from 'vitest';
import { digamma, poolErrorVariances, trigamma } from '#server/stats/network/pool-error-variances.ts';

// R 4.2.2, digamma() and trigamma().
test.each([
  [0.5, -1.9635100260214231, 4.934802200544679],
  [1, -0.57721566490153231, 1.6449340668482264],
  [2.5, 0.70315664064524341, 0.49035775610023491],
  [20, 2.9705239922421489, 0.05127082293520313],
])('ψ and ψ′ at %f', (x, psi, slope) => {
  expect(Math.abs(digamma(x) / psi - 1)).toBeLessThan(1e-14);
  expect(Math.abs(trigamma(x) / slope - 1)).toBeLessThan(1e-14);
});

/*
 * R 4.2.2, base functions alone, Smyth (2004) section 6.2:
 *   e <- log(s2) - digamma(d/2) + log(d/2); ev <- var(e) - mean(trigamma(d/2))
 *   half <- exp(uniroot(function(u) log(trigamma(exp(u))) - log(ev), c(-20, 20), tol = 1e-15)$root)
 *   d0 <- 2*half; s0 <- exp(mean(e) + digamma(half) - log(half)); (d0*s0 + d*s2)/(d0 + d)
 */
test.each([
  {
    s2: [0.06, 0.12, 0.09, 0.35, 0.05, 0.2],
    d: [39, 26, 5, 39, 42, 18],
    priorDf: 5.941024355039993,
    priorMs: 0.102314865258475,
    ms: [
      0.0655938565862405, 0.1167105683570544, 0.0966870260092176, 0.3172570120730739, 0.0564830464682918,
      0.1757591924214141,
    ],
  },
  {
    s2: [0.5, 4, 0.02, 1],
    d: [10, 10, 3, 30],
    priorDf: 1.114268276692049,
    priorMs: 0.169695245454918,
    ms: [0.4668850795691176, 3.6159902773804022, 0.0605419996860672, 0.9702650166878832],
  },
])('trials that differ are pulled as R has it', ({ s2, d, priorDf, priorMs, ms }) => {
  const pooled = poolErrorVariances(s2.map((value, j) => ({ ms: value, df: d[j] ?? 0 })));
  expect(pooled.priorDf).toBeCloseTo(priorDf, 8);
  expect(pooled.priorMs).toBeCloseTo(priorMs, 10);
  pooled.trials.forEach((trial, j) => {
    expect(trial.ms).toBeCloseTo(ms[j] ?? NaN, 10);
    expect(trial.df).toBeCloseTo(priorDf + (d[j] ?? 0), 8);
  });
});

test('trials that differ no more than chance has it share one variance', () => {
  const pooled = poolErrorVariances([
    { ms: 0.1, df: 20 },
    { ms: 0.11, df: 30 },
    { ms: 0.09, df: 10 },
  ]);
  expect(pooled.priorDf).toBe(Infinity);
  for (const trial of pooled.trials) {
    expect(trial.ms).toBeCloseTo((2 + 3.3 + 0.9) / 60, 12);
    expect(trial.df).toBe(60);
  }
});

test('two trials tell nothing of a common value', () => {
  const errors = [
    { ms: 0.1, df: 20 },
    { ms: 0.4, df: 3 },
  ];
  expect(poolErrorVariances(errors).trials).toEqual(errors);
});

test('a trial of few df is pulled further than one of many, and the unit does not matter', () => {
  const errors = [
    { ms: 0.06, df: 39 },
    { ms: 0.5, df: 3 },
    { ms: 0.5, df: 60 },
    { ms: 0.1, df: 24 },
  ];
  const pooled = poolErrorVariances(errors);
  const [, few, many] = pooled.trials;
  expect(few?.ms).toBeLessThan(many?.ms ?? 0);
  const inKilograms = poolErrorVariances(errors.map(({ ms, df }) => ({ ms: ms * 1e6, df })));
  expect(inKilograms.priorDf).toBeCloseTo(pooled.priorDf, 8);
  inKilograms.trials.forEach((trial, j) => expect(trial.ms / 1e6).toBeCloseTo(pooled.trials[j]?.ms ?? 0, 10));
});
