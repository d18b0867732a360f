/** How a p-value is said in whole numbers: about 1 in so many, so many of 100, or fewer than 1 in 10,000. */
export type NaturalFrequency = { key: 'fewer' | 'oneIn' | 'ofHundred'; count: number };

/** Rarer than this, the tail rests on the model's shape more than on the data. */
const rarest = 10_000;

/** Rounded to two digits: more would claim what no trial knows. */
function roundToTwoDigits(value: number): number {
  const power = 10 ** Math.max(0, Math.floor(Math.log10(value)) - 1);
  return Math.round(value / power) * power;
}

/**
 * Says a probability under "no gap" as a natural frequency.
 * @param p in (0, 1]; 0.004 gives 1 in 250, 0.31 gives 31 of 100
 */
export function sayFrequency(p: number): NaturalFrequency {
  if (p < 1 / rarest) return { key: 'fewer', count: rarest };
  if (p < 0.095) return { key: 'oneIn', count: roundToTwoDigits(1 / p) };
  return { key: 'ofHundred', count: Math.min(Math.round(p * 100), 99) };
}
