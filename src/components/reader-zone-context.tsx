import { createContext, useContext, type ReactNode } from 'react';

const ReaderZoneContext = createContext<string | undefined>(undefined);

type ReaderZoneProviderProps = { timeZone: string; children: ReactNode };

/** Everything inside tells moments in the days of this time zone (IANA), wherever the page is made. */
export function ReaderZoneProvider({ timeZone, children }: ReaderZoneProviderProps) {
  return <ReaderZoneContext value={timeZone}>{children}</ReaderZoneContext>;
}

/** The time zone that moments are told in; without one, that of whoever looks. */
export function useReaderZone(): string | undefined {
  return useContext(ReaderZoneContext);
}
