import { describe, expect, it } from 'vitest';
import { synthesisePair, type PairFit } from '#server/stats/network/pair-synthesis.ts';
import { tQuantile } from '#server/stats/distributions/student-t.ts';
import { readNetworkCase } from '#tests/support/network-case.ts';
import type { Expected } from '#tests/support/reference-case.ts';

const relative = (actual: number, expected: Expected | undefined): number =>
  Math.abs(actual - Number(expected)) / Math.max(Math.abs(Number(expected)), 0.01);

// Expected figures: metafor 3.8.1, tests/reference/scripts/E-meta.R.
describe.each(['E-meta-k3', 'E-meta-k8', 'E-meta-k8-tau0', 'E-meta-k20'])('%s', (name) => {
  const expected = readNetworkCase(name);
  const effects = Array.from(expected['effects']!, (row) => ({
    estimate: Number(row['y']),
    variance: Number(row['v']),
  }));
  const result = synthesisePair(effects);

  const methods: [string, PairFit, string, string][] = [
    ['REML', result.reml, 'REML_z', 'REML_knapp_hartung'],
    ['DerSimonian and Laird', result.dl, 'DL_z', 'DL_knapp_hartung'],
  ];
  it.each(methods)('agrees by %s', (_, fit, normal, knappHartung) => {
    const z = expected[normal]!;
    expect(relative(fit.estimate, z['estimate'])).toBeLessThan(1e-9);
    expect(relative(fit.se, z['se'])).toBeLessThan(1e-9);
    expect(relative(fit.tau2, z['tau2'])).toBeLessThan(1e-9);
    expect(relative(fit.ci[0], z['ci_lower'])).toBeLessThan(1e-9);
    expect(relative(fit.ci[1], z['ci_upper'])).toBeLessThan(1e-9);
    expect(relative(fit.i2, z['I2_percent'])).toBeLessThan(1e-9);
    expect(relative(fit.q, expected['heterogeneity']!['Q'])).toBeLessThan(1e-9);
    expect(relative(fit.qP, expected['heterogeneity']!['p'])).toBeLessThan(1e-9);
    // metafor lets the factor fall below 1; ours does not
    const k = effects.length;
    const half = tQuantile(0.975, k - 1) * Math.max(Number(expected[knappHartung]!['se']), fit.se);
    expect(relative(fit.ciHk![0], (fit.estimate - half) as unknown as Expected)).toBeLessThan(1e-9);
    expect(relative(fit.ciHk![1], (fit.estimate + half) as unknown as Expected)).toBeLessThan(1e-9);
  });

  it('predicts a further trial as Higgins, Thompson and Spiegelhalter do', () => {
    const prediction = expected['prediction_interval_t_k_minus_2_REML_z']!;
    expect(relative(result.reml.prediction![0], prediction['lower'])).toBeLessThan(1e-9);
    expect(relative(result.reml.prediction![1], prediction['upper'])).toBeLessThan(1e-9);
  });
});

describe('few trials', () => {
  it('gives one trial its own interval and claims nothing about others', () => {
    const { reml } = synthesisePair([{ estimate: 0.4, variance: 0.04 }]);
    expect(reml.estimate).toBe(0.4);
    expect(reml.se).toBeCloseTo(0.2, 12);
    expect(reml.ciHk).toBeNull();
    expect(reml.prediction).toBeNull();
  });

  it('refuses a variance of 0 and names its row', () => {
    expect(() =>
      synthesisePair([
        { estimate: 0.4, variance: 0.04 },
        { estimate: 0.1, variance: 0 },
      ]),
    ).toThrow(expect.objectContaining({ code: 'bad-variance', rows: [2] }));
  });
});
