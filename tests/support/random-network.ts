import type { TrialCell } from '#server/stats/network/network-cell.ts';

/** A repeatable source of random numbers. */
export interface RandomSource {
  uniform(): number;
  between(low: number, high: number): number;
  normal(mean: number, sd: number): number;
}

/** Mulberry32, from memory; normal deviates by Box and Muller. */
export function randomOf(seed: number): RandomSource {
  let state = seed >>> 0;
  const uniform = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let t = state;
    t = Math.imul(t ^ (t >>> 15), t | 1);
    t ^= t + Math.imul(t ^ (t >>> 7), t | 61);
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296;
  };
  return {
    uniform,
    between: (low, high) => low + (high - low) * uniform(),
    normal: (mean, sd) =>
      mean + sd * Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
  };
}

export interface NetworkPlan {
  readonly entries: number;
  readonly sites: number;
  readonly years: number;
  /** share of cells present */
  readonly presence: number;
  readonly seed: number;
}

/** Cells with entry, interaction and error effects of a cereal's size, t/ha. */
export function growCells({ entries, sites, years, presence, seed }: NetworkPlan): TrialCell[] {
  const random = randomOf(seed);
  const effect = new Map<string, number>();
  const draw = (key: string, sd: number): number => {
    const known = effect.get(key) ?? random.normal(0, sd);
    effect.set(key, known);
    return known;
  };
  const cells: TrialCell[] = [];
  for (let s = 0; s < sites; s++)
    for (let y = 0; y < years; y++)
      for (let i = 0; i < entries; i++) {
        if (random.uniform() >= presence) continue;
        const variance = random.between(0.01, 0.12);
        cells.push({
          entry: `E${i}`,
          site: `S${s}`,
          year: 2015 + y,
          mean:
            6 +
            draw(`e${s},${y}`, 1) +
            draw(`g${i}`, 0.4) +
            draw(`s${i},${s}`, 0.2) +
            draw(`y${i},${y}`, 0.2) +
            random.normal(0, 0.25) +
            random.normal(0, Math.sqrt(variance)),
          variance,
        });
      }
  return cells;
}
