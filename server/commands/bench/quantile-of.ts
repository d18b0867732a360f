/** The value under which that share of some values lies, by nearest rank: one of them, NaN where there is none. */
export function quantileOf(values: readonly number[], share: number): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.min(Math.floor(values.length * share), values.length - 1)] ?? NaN;
}

export const median = (values: readonly number[]): number => quantileOf(values, 0.5);
