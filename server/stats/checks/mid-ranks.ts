/**
 * Ranks from 1, tied values sharing the mean of their ranks.
 * @returns ranks in the order of the values, and Σ (t³ − t) over groups of t tied values
 */
export function midRanks(values: ArrayLike<number>): { readonly ranks: Float64Array; readonly ties: number } {
  const sorted = Array.from(values, (value, index) => ({ value, index })).sort((a, b) => a.value - b.value);
  const ranks = new Float64Array(sorted.length);
  let ties = 0;
  for (let start = 0; start < sorted.length;) {
    let end = start + 1;
    while (end < sorted.length && sorted[end]?.value === sorted[start]?.value) end += 1;
    const size = end - start;
    ties += size * size * size - size;
    for (const { index } of sorted.slice(start, end)) ranks[index] = (start + 1 + end) / 2;
    start = end;
  }
  return { ranks, ties };
}
