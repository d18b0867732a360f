/** A linear scale that a drawing lays across its width: `low` at 0 %, `high` at 100 %, both in the data's unit. */
export type Scale = { low: number; high: number };

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
 */
export function spanScale(values: readonly number[]): Scale {
  const finite = values.filter((value) => Number.isFinite(value));
  const lowest = Math.min(0, ...finite);
  const highest = Math.max(0, ...finite);
  const span = highest - lowest > smallestSpan ? highest - lowest : 1;
  return { low: lowest - span * padding, high: highest + span * padding };
}

/** A round figure in the unit that is read, and where it lies in the unit of the scale. */
export type Tick = { label: number; value: number };

/**
 * The ticks of a scale, round in the unit that is read: steps of 1, 2 or 5 times a power of ten.
 * @param factor of the unit that is read in one of the scale's
 * @param mostSteps the most steps between labelled ticks
 */
export function findTicks({ low, high }: Scale, factor = 1, mostSteps = 9): Tick[] {
  const step = chooseStep((high - low) * factor, mostSteps);
  const ticks: Tick[] = [];
  for (let count = Math.ceil((low * factor) / step); count * step <= high * factor; count += 1) {
    // Adding zero turns −0 into 0.
    const label = Number((count * step).toPrecision(12)) + 0;
    ticks.push({ label, value: label / factor });
  }
  return ticks;
}

/** Where a value lies on the scale, in percent of the width, kept between 0 and 100. */
export function placeOnScale(scale: Scale, value: number): number {
  const share = ((value - scale.low) / (scale.high - scale.low)) * 100;
  return Math.min(Math.max(share, 0), 100);
}

/** Decimals that tell the labels of ticks apart. */
export function tickDecimals(ticks: readonly Tick[]): number {
  const [first, second] = ticks;
  if (first === undefined || second === undefined) return 1;
  return Math.max(0, -Math.floor(Math.log10(second.label - first.label) + 1e-9));
}

/** Whether a value lies within the drawing at all. */
export function isOnScale(scale: Scale, value: number): boolean {
  return value >= scale.low && value <= scale.high;
}
