import { describe, expect, it } from 'vitest';
import { fitGapLine, readGapAt, type GapLine, type GapPoint } from '#server/stats/network/gap-line.ts';
import { readReferenceJson, readReferenceRows } from '#tests/support/reference-case.ts';

const points: GapPoint[] = readReferenceRows('open/G-gap-line/effects.csv').map((row) => ({
  trialMean: Number(row['trial_mean']),
  estimate: Number(row['y']),
  se: Math.sqrt(Number(row['v'])),
}));

function fit(chosen: readonly GapPoint[]): GapLine {
  const line = fitGapLine(chosen);
  if (line.outcome === 'not-fitted') throw new Error(line.reason);
  return line;
}

// Expected figures: metafor 3.8.1, tests/reference/scripts/G-gap-line.R.
describe('the gap as a line over the trials’ mean yields', () => {
  const expected = readReferenceJson('open/G-gap-line/expected.json');
  it.each([
    { name: 'all twenty trials', chosen: points, part: expected },
    { name: 'the last eight', chosen: points.slice(12), part: expected['last_eight']! },
  ])('agrees with rma on $name', ({ chosen, part }) => {
    const line = fit(chosen);
    const z = part['z']!;
    const kh = part['knapp_hartung']!;
    // our factor is never below 1
    const slopeSe = Math.max(Number(kh['slope_se']), Number(z['slope_se']));
    expect(line.slope / Number(z['slope'])).toBeCloseTo(1, 8);
    expect(line.slopeSe / slopeSe).toBeCloseTo(1, 8);
    expect(line.tau2).toBeCloseTo(Number(z['tau2']), 8);
    [6, 7, 8.5].forEach((fieldYield, i) => {
      const at = readGapAt(line, fieldYield);
      expect(at.estimate).toBeCloseTo(Number(z['gap']![i]), 8);
      expect(at.se).toBeCloseTo(Math.max(Number(kh['gap_se']![i]), Number(z['gap_se']![i])), 8);
    });
  });

  it('says where the trials do not reach', () => {
    const line = fit(points);
    expect(readGapAt(line, line.centre).isCovered).toBe(true);
    expect(readGapAt(line, line.to + 0.1).isCovered).toBe(false);
    expect(readGapAt(line, line.from - 0.1).isCovered).toBe(false);
  });

  it('draws no line through three trials, nor through trials of one yield', () => {
    expect(fitGapLine(points.slice(0, 3))).toEqual({ outcome: 'not-fitted', reason: 'too-few-trials' });
    expect(fitGapLine(points.map((point) => ({ ...point, trialMean: 7 })))).toEqual({
      outcome: 'not-fitted',
      reason: 'no-spread',
    });
  });
});
