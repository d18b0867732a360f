import type { NetworkFrame } from './network-frame.ts';

/** Entries of each connected part, parts in the order of their first entry. */
export function listConnected(frame: NetworkFrame): string[][] {
  const parts = Array.from({ length: frame.partCount }, (): string[] => []);
  frame.entries.forEach((entry, i) => parts[frame.entryPart[i]!]!.push(entry));
  return parts;
}
