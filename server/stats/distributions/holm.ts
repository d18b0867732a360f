/**
 * Bonferroni's adjustment: each p times the number of tests, at most 1.
 * @param ps unadjusted p values
 * @param tests number of tests in the family, at least as many as ps
 */
export function bonferroniAdjust(ps: ArrayLike<number>, tests: number = ps.length): Float64Array {
  const adjusted = new Float64Array(ps.length);
  for (let i = 0; i < adjusted.length; i += 1) adjusted[i] = Math.min(1, (ps[i] as number) * tests);
  return adjusted;
}

/**
 * Holm's step-down adjustment, in the order of the input.
 * @param ps unadjusted p values
 * Source: Holm (1979), Scand. J. Statist. 6:65–70.
 */
export function holmAdjust(ps: ArrayLike<number>): Float64Array {
  const values = Float64Array.from(ps);
  const order = new Uint32Array(values.length);
  for (let i = 0; i < order.length; i += 1) order[i] = i;
  order.sort((i, j) => (values[i] as number) - (values[j] as number));
  const adjusted = new Float64Array(values.length);
  let running = 0;
  for (let rank = 0; rank < order.length; rank += 1) {
    const index = order[rank] as number;
    running = Math.max(running, Math.min(1, (values[index] as number) * (values.length - rank)));
    adjusted[index] = running;
  }
  return adjusted;
}
