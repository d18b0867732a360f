import { describe, expect, it } from 'vitest';
import { sayFrequency } from '#shared/natural-frequency.ts';

describe('a p-value as a natural frequency', () => {
  // The two examples of the engine's description: .004 is about 1 in 250, below 1 in 10,000 is fewer than that.
  it.each([
    [0.004, { key: 'oneIn', count: 250 }],
    [0.00239, { key: 'oneIn', count: 420 }],
    [0.05, { key: 'oneIn', count: 20 }],
    [0.31, { key: 'ofHundred', count: 31 }],
    [0.00009, { key: 'fewer', count: 10_000 }],
    [1e-300, { key: 'fewer', count: 10_000 }],
  ])('says %s', (p, said) => {
    expect(sayFrequency(p)).toEqual(said);
  });

  it('never says 0, and never 100 of 100', () => {
    for (let p = 1e-12; p <= 1; p *= 1.37) {
      const { key, count } = sayFrequency(p);
      expect(count).toBeGreaterThan(0);
      if (key === 'ofHundred') expect(count).toBeLessThan(100);
    }
    expect(sayFrequency(1)).toEqual({ key: 'ofHundred', count: 99 });
  });

  it('never gets more frequent as p falls', () => {
    let last = 1;
    for (let p = 0.999; p > 1e-6; p *= 0.93) {
      const { key, count } = sayFrequency(p);
      const frequency = key === 'ofHundred' ? count / 100 : 1 / count;
      expect(frequency).toBeLessThanOrEqual(last + 1e-12);
      last = frequency;
    }
  });
});
