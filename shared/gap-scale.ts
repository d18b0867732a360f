/** A linear scale that a drawing lays across its width: `low` at 0 %, `high` at 100 %, both in the data's unit. */
export type Scale = { low: number; high: number; ticks: readonly number[] };

/** Room left at both ends, so that a mark or its label does not touch the edge. */
const padding = 0.06;

/** Below this all values are as good as zero, and any span would do. */
const smallestSpan = 1e-9;

/** The step of 1, 2 or 5 times a power of ten that cuts a span into at most `most` parts. */
function chooseStep(span: number, most: number): number {
  const raw = span / most;
  const power = 10 ** Math.floor(Math.log10(raw));
  const factor = [1, 2, 5, 10].find((candidate) => candidate * power >= raw * (1 - 1e-9)) ?? 10;
  return factor * power;
}

/**
 * One scale for all the values of a list, zero always on it.
 * @param values estimates, interval ends and break-even gaps, one unit; what is not finite is left out
 * @param mostSteps the most steps between labelled ticks
 */
export function spanScale(values: readonly number[], mostSteps = 9): Scale {
  const finite = values.filter((value) => Number.isFinite(value));
  const lowest = Math.min(0, ...finite);
  const highest = Math.max(0, ...finite);
  const span = highest - lowest > smallestSpan ? highest - lowest : 1;
  const low = lowest - span * padding;
  const high = highest + span * padding;
  const step = chooseStep(high - low, mostSteps);
  const ticks: number[] = [];
  for (let count = Math.ceil(low / step); count * step <= high; count += 1) {
    // Adding zero turns −0 into 0.
    ticks.push(Number((count * step).toPrecision(12)) + 0);
  }
  return { low, high, ticks };
}

/** Where a value lies on the scale, in percent of the width, kept between 0 and 100. */
export function placeOnScale(scale: Scale, value: number): number {
  const share = ((value - scale.low) / (scale.high - scale.low)) * 100;
  return Math.min(Math.max(share, 0), 100);
}

/** Decimals that tell the ticks of a scale apart. */
export function tickDecimals(scale: Scale): number {
  const [first, second] = scale.ticks;
  if (first === undefined || second === undefined) return 1;
  return Math.max(0, -Math.floor(Math.log10(second - first) + 1e-9));
}

/** Whether a value lies within the drawing at all. */
export function isOnScale(scale: Scale, value: number): boolean {
  return value >= scale.low && value <= scale.high;
}
