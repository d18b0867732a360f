import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { placeOnScale, spanScale, tickDecimals } from '#shared/gap-scale.ts';

describe('the shared scale', () => {
  it('holds zero, every value and round ticks', () => {
    const scale = spanScale([0.38, -0.09, 0.85, 0.11]);
    expect(scale.low).toBeLessThan(-0.09);
    expect(scale.high).toBeGreaterThan(0.85);
    expect(scale.ticks).toEqual([0, 0.2, 0.4, 0.6, 0.8]);
    expect(tickDecimals(scale)).toBe(1);
  });

  it('keeps zero where all gaps lie on one side', () => {
    const scale = spanScale([0.4, 0.9]);
    expect(placeOnScale(scale, 0)).toBeGreaterThan(0);
    expect(placeOnScale(scale, 0)).toBeLessThan(10);
  });

  it('stands without any value', () => {
    expect(spanScale([]).ticks).toContain(0);
    expect(spanScale([Number.NaN, Number.POSITIVE_INFINITY, 0]).ticks).toContain(0);
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
        expect(scale.ticks.length).toBeLessThanOrEqual(10);
        expect(scale.ticks).toContain(0);
      }),
    );
  });
});
