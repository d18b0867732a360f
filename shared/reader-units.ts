import { hectaresPerAcre, tonnesPerBushel, yieldUnits, type YieldUnit } from './units.ts';

/** The units in which somebody reads yields, and with them areas and prices: per acre and per bushel with bu/ac. */
export type ReaderUnits = {
  yieldUnit: YieldUnit;
  /** The crop's bushel of account in pounds; asked for by bu/ac alone. */
  bushelWeightLb: number;
};

/** What stands in every contract: t/ha, t and ha. */
export const storedUnits: ReaderUnits = { yieldUnit: 't/ha', bushelWeightLb: 60 };

/** Reader's units in one stored unit, and their name. */
type Conversion = { factor: number; unit: string };

/**
 * How a figure in a stored unit reads: yields (`t/ha`), tonnes (`t`) and hectares (`ha`) follow the reader; anything
 * else (`%`, `cm`, `kg/hL`, or a yield that is in the reader's unit already) stays what it is.
 */
function findConversion(unit: string, { yieldUnit, bushelWeightLb }: ReaderUnits): Conversion {
  const isPerAcre = yieldUnit === 'bu/ac';
  const bushelsPerTonne = 1 / tonnesPerBushel(bushelWeightLb);
  switch (unit) {
    case 't/ha':
      return {
        factor: isPerAcre ? bushelsPerTonne * hectaresPerAcre : metricFactors[yieldUnit],
        unit: yieldUnit,
      };
    case 't':
      return isPerAcre ? { factor: bushelsPerTonne, unit: 'bu' } : { factor: 1, unit };
    case 'ha':
      return isPerAcre ? { factor: 1 / hectaresPerAcre, unit: 'ac' } : { factor: 1, unit };
    default:
      return { factor: 1, unit };
  }
}

/** Of each in one t/ha. */
const metricFactors: Record<Exclude<YieldUnit, 'bu/ac'>, number> = { 't/ha': 1, 'kg/ha': 1000, 'q/ha': 10 };

/** The name of the unit in which a figure stored in `unit` is read. */
export function readerUnit(unit: string, units: ReaderUnits): string {
  return findConversion(unit, units).unit;
}

/**
 * Brings a stored figure, or its standard error, to the reader's unit.
 * @param value in `unit`
 */
export function toReader(value: number, unit: string, units: ReaderUnits): number {
  return value * findConversion(unit, units).factor;
}

/** Brings a figure that was typed in the reader's unit back to the stored one. */
export function fromReader(value: number, unit: string, units: ReaderUnits): number {
  return value / findConversion(unit, units).factor;
}

/**
 * Brings an amount of money for one stored unit to the reader's: per tonne to per bushel, per hectare to per acre.
 * @param amount money for one `per`
 */
export function toReaderPer(amount: number, per: string, units: ReaderUnits): number {
  return amount / findConversion(per, units).factor;
}

/** Brings an amount of money typed for one of the reader's units back to one stored unit. */
export function fromReaderPer(amount: number, per: string, units: ReaderUnits): number {
  return amount * findConversion(per, units).factor;
}

/** A yield unit as an address holds it: `bu-ac`. */
export function writeUnitParameter(unit: YieldUnit): string {
  return unit.replace('/', '-');
}

/** The yield unit that an address or a browser's memory names; null where it names none. */
export function readUnitParameter(text: string | null): YieldUnit | null {
  return yieldUnits.find((unit) => writeUnitParameter(unit) === text) ?? null;
}
