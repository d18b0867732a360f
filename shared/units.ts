/** International avoirdupois pound, exact. */
const kilogramsPerPound = 0.45359237;
/** International acre, exact. */
export const hectaresPerAcre = 0.40468564224;

/** Units in which a file may state yield. */
export const yieldUnits = ['t/ha', 'kg/ha', 'q/ha', 'bu/ac'] as const;
export type YieldUnit = (typeof yieldUnits)[number];

/**
 * What a bushel of account weighs, in tonnes.
 * @param bushelWeightLb the crop's, in pounds
 */
export function tonnesPerBushel(bushelWeightLb: number): number {
  return (bushelWeightLb * kilogramsPerPound) / 1000;
}

/**
 * The factor that brings a yield to t/ha.
 * @param bushelWeightLb the crop's bushel of account in pounds; only bushels per acre need it
 */
export function tonnesPerHectareFactor(unit: YieldUnit, bushelWeightLb: number): number {
  switch (unit) {
    case 't/ha':
      return 1;
    case 'kg/ha':
      return 0.001;
    case 'q/ha':
      return 0.1;
    case 'bu/ac':
      return tonnesPerBushel(bushelWeightLb) / hectaresPerAcre;
  }
}

/**
 * Brings a yield to t/ha. Whole divisors are divided by, so that 5113 kg/ha is 5.113 t/ha to the last digit.
 * @param value in `unit`
 */
export function toTonnesPerHectare(value: number, unit: YieldUnit, bushelWeightLb: number): number {
  if (unit === 'kg/ha') return value / 1000;
  if (unit === 'q/ha') return value / 10;
  return value * tonnesPerHectareFactor(unit, bushelWeightLb);
}
