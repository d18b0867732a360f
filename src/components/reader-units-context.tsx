import { createContext, useContext, type ReactNode } from 'react';
import { storedUnits, type ReaderUnits } from '#shared/reader-units.ts';

const ReaderUnitsContext = createContext<ReaderUnits>(storedUnits);

type ReaderUnitsProviderProps = { units: ReaderUnits; children: ReactNode };

/** Everything inside writes yields, areas and prices in these units; `useFormat` brings the stored figures to them. */
export function ReaderUnitsProvider({ units, children }: ReaderUnitsProviderProps) {
  return <ReaderUnitsContext value={units}>{children}</ReaderUnitsContext>;
}

/** The units that the surrounding page is read in; t/ha, t and ha where it has not been asked. */
export function useReaderUnits(): ReaderUnits {
  return useContext(ReaderUnitsContext);
}
