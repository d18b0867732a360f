import type { GrowerCopySnapshot } from './grower-copy.ts';

/** Whose days a copy is told in: its advisor's, wherever the server stands; UTC, which is then said, where nobody told. */
export const zoneOfCopy = ({ timeZone }: Pick<GrowerCopySnapshot, 'timeZone'>): string => timeZone ?? 'UTC';
