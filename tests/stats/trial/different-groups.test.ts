import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { groupUndiffering } from '#server/stats/trial/different-groups.ts';

/** All maximal sets without a different pair, by trying every subset. */
function bruteForce(size: number, isDifferent: (a: number, b: number) => boolean): string[] {
  const isGroup = (mask: number) => {
    for (let a = 0; a < size; a++)
      for (let b = a + 1; b < size; b++)
        if (mask & (1 << a) && mask & (1 << b) && isDifferent(a, b)) return false;
    return true;
  };
  const groups = Array.from({ length: (1 << size) - 1 }, (_, i) => i + 1).filter(isGroup);
  return groups
    .filter((mask) => !groups.some((other) => other !== mask && (other & mask) === mask))
    .map((mask) =>
      Array.from({ length: size }, (_, i) => i)
        .filter((i) => mask & (1 << i))
        .join(),
    )
    .sort();
}

describe('groups of entries that do not differ', () => {
  it('are all maximal cliques, whatever differs from what', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 1, max: 7 }),
        fc.array(fc.boolean(), { minLength: 49, maxLength: 49 }),
        (size, bits) => {
          const isDifferent = (a: number, b: number) => bits[a * 7 + b]!;
          const groups = groupUndiffering(size, isDifferent)!;
          expect(groups.map((group) => group.join()).sort()).toEqual(bruteForce(size, isDifferent));
        },
      ),
      { numRuns: 400 },
    );
  });

  it('are all maximal cliques where only distance counts', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 20 }), { minLength: 1, maxLength: 8 }), (values) => {
        const sorted = [...values].sort((a, b) => b - a);
        const isDifferent = (a: number, b: number) => Math.abs(sorted[a]! - sorted[b]!) > 5;
        const groups = groupUndiffering(sorted.length, isDifferent)!;
        expect(groups.map((group) => group.join()).sort()).toEqual(bruteForce(sorted.length, isDifferent));
      }),
      { numRuns: 400 },
    );
  });

  it('are given up where there would be thousands', () => {
    // pairs that differ and nothing else: 2²⁰ groups
    expect(groupUndiffering(40, (a, b) => b === a + 1 && a % 2 === 0)).toBeNull();
  });
});
