import type { GrowerCopySnapshot } from './grower-copy.ts';
import { storedUnits, type ReaderUnits } from './reader-units.ts';
import type { YieldUnit } from './units.ts';

/** The units of a copy. Bushels need the crop's, which the first copies did not freeze: those are read in t/ha then. */
export function readerUnitsOfCopy(snapshot: GrowerCopySnapshot, yieldUnit: YieldUnit): ReaderUnits {
  if (snapshot.format !== 1) return { yieldUnit, bushelWeightLb: snapshot.bushelWeightLb };
  return yieldUnit === 'bu/ac' ? storedUnits : { ...storedUnits, yieldUnit };
}
