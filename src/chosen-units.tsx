import { useMemo, type ReactNode } from 'react';
import { useSearchParams } from 'react-router-dom';
import { unitCookieName } from '#shared/page-exchange.ts';
import { readUnitParameter, writeUnitParameter } from '#shared/reader-units.ts';
import type { YieldUnit } from '#shared/units.ts';
import { ReaderUnitsProvider } from './components/reader-units-context.tsx';
import { tellServer } from './tell-server.ts';
import { useUrlPatch } from './url-state.ts';

const storageKey = 'gavelrow.yield-unit';
const parameter = 'unit';

function readStoredUnit(): YieldUnit | null {
  try {
    return readUnitParameter(localStorage.getItem(storageKey));
  } catch {
    // Storage may be refused (private windows): the page then starts in t/ha.
    return null;
  }
}

function storeUnit(unit: YieldUnit): void {
  tellServer(unitCookieName, writeUnitParameter(unit));
  try {
    localStorage.setItem(storageKey, writeUnitParameter(unit));
  } catch {
    // Not being able to remember the unit must not stop its use.
  }
}

type CropUnitsProps = { bushelWeightLb: number; children: ReactNode };

/**
 * The figures of a crop in the units that the reader chose: by the address where it names one, so that a link is read as
 * it was sent, else as last chosen in this browser, else t/ha.
 */
export function CropUnits({ bushelWeightLb, children }: CropUnitsProps) {
  const [search] = useSearchParams();
  const yieldUnit = readUnitParameter(search.get(parameter)) ?? readStoredUnit() ?? 't/ha';
  const units = useMemo(() => ({ yieldUnit, bushelWeightLb }), [yieldUnit, bushelWeightLb]);
  return <ReaderUnitsProvider units={units}>{children}</ReaderUnitsProvider>;
}

/** Chooses a unit for the page, in its address, and for the next ones in this browser. */
export function useUnitChoice(): (unit: YieldUnit) => void {
  const patch = useUrlPatch();
  return (unit) => {
    storeUnit(unit);
    patch({ [parameter]: writeUnitParameter(unit) });
  };
}
