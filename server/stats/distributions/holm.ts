/**
 * Bonferroni's adjustment: each p times the number of tests, at most 1.
 * @param ps unadjusted p values
 * @param tests number of tests in the family, at least as many as ps
 */
export function bonferroniAdjust(ps: ArrayLike<number>, tests: number = ps.length): Float64Array {
  return Float64Array.from(ps, (p) => Math.min(1, p * tests));
}

/**
 * Holm's step-down adjustment, in the order of the input.
 * @param ps unadjusted p values
 * Source: Holm (1979), Scand. J. Statist. 6:65–70.
 */
export function holmAdjust(ps: ArrayLike<number>): Float64Array {
  const values = Float64Array.from(ps);
  const order = Array.from(values.keys()).sort((i, j) => (values[i] ?? 0) - (values[j] ?? 0));
  const adjusted = new Float64Array(values.length);
  let running = 0;
  order.forEach((index, rank) => {
    running = Math.max(running, Math.min(1, (values[index] ?? 0) * (values.length - rank)));
    adjusted[index] = running;
  });
  return adjusted;
}
