/** A number as a table prints it. */
export interface Printed {
  readonly value: number;
  /** Digits after the point; those of the shortest form of the number when left out. */
  readonly decimals?: number | undefined;
}

function decimalsOf(value: number): number {
  const text = String(value);
  const exponent = text.includes('e') ? Number(text.slice(text.indexOf('e') + 1)) : 0;
  const fraction = /\.(\d+)/.exec(text)?.[1]?.length ?? 0;
  return Math.max(0, fraction - exponent);
}

/**
 * The values that print alike.
 * @returns lower and upper end, the lower not below 0
 */
export function printedInterval(printed: Printed): readonly [number, number] {
  const half = 0.5 * 10 ** -(printed.decimals ?? decimalsOf(printed.value));
  return [Math.max(0, printed.value - half), printed.value + half];
}
