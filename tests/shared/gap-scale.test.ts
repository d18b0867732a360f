import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { findTicks, placeOnScale, spanScale, tickDecimals } from '#shared/gap-scale.ts';

describe('the shared scale', () => {
  it('holds zero, every value and round ticks', () => {
    const scale = spanScale([0.38, -0.09, 0.85, 0.11]);
    expect(scale.low).toBeLessThan(-0.09);
    expect(scale.high).toBeGreaterThan(0.85);
    const ticks = findTicks(scale);
    expect(ticks.map(({ label }) => label)).toEqual([0, 0.2, 0.4, 0.6, 0.8]);
    expect(tickDecimals(ticks)).toBe(1);
  });

  it('keeps zero where all gaps lie on one side', () => {
    const scale = spanScale([0.4, 0.9]);
    expect(placeOnScale(scale, 0)).toBeGreaterThan(0);
    expect(placeOnScale(scale, 0)).toBeLessThan(10);
  });

  it('stands without any value', () => {
    const zero = { label: 0, value: 0 };
    expect(findTicks(spanScale([]))).toContainEqual(zero);
    expect(findTicks(spanScale([Number.NaN, Number.POSITIVE_INFINITY, 0]))).toContainEqual(zero);
  });

  it('has its ticks at round figures of the unit that is read, where they lie in its own', () => {
    const scale = spanScale([0.38, -0.09, 0.85, 0.11]);
    // −0.15 to 0.91 t/ha are −2.2 to 13.5 bu/ac of wheat
    const bushels = findTicks(scale, 1 / 0.06725);
    expect(bushels.map(({ label }) => label)).toEqual([-2, 0, 2, 4, 6, 8, 10, 12]);
    expect(bushels.at(-1)?.value).toBeCloseTo(12 * 0.06725, 12);
    expect(tickDecimals(bushels)).toBe(0);
    expect(findTicks(scale, 1000).map(({ label }) => label)).toEqual([0, 200, 400, 600, 800]);
  });

  it('places values in order, all within the drawing, with few ticks', () => {
    const values = fc.array(fc.double({ min: -50, max: 50, noNaN: true }), { minLength: 1, maxLength: 40 });
    fc.assert(
      fc.property(values, (gaps) => {
        const scale = spanScale(gaps);
        const places = [...gaps].sort((a, b) => a - b).map((gap) => placeOnScale(scale, gap));
        expect(places).toEqual([...places].sort((a, b) => a - b));
        expect(Math.min(...places)).toBeGreaterThan(0);
        expect(Math.max(...places)).toBeLessThan(100);
        const ticks = findTicks(scale);
        expect(ticks.length).toBeLessThanOrEqual(10);
        expect(ticks).toContainEqual({ label: 0, value: 0 });
      }),
    );
  });
});
