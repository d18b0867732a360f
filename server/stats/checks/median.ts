/**
 * Middle value, or the mean of the two middle ones.
 * @param values at least one
 * @throws RangeError when there is none
 */
export function median(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  const upper = sorted[sorted.length >> 1];
  const lower = sorted[(sorted.length - 1) >> 1];
  if (upper === undefined || lower === undefined) throw new RangeError('the median of nothing');
  return lower === upper ? upper : (lower + upper) / 2;
}
