import { useSyncExternalStore } from 'react';

/**
 * The grower's own numbers live in the page and in its fragment (`#price=275&seed1=80`), which no browser sends to a
 * server: the price per tonne, and what the seed of a variety costs per hectare, the current one's being `seed0`, the
 * others' in the order of the copy.
 */
export type OwnName = 'price' | `seed${number}`;
/** By name, what stands in the field: null for nothing, NaN for what is no figure. */
export type OwnNumbers = ReadonlyMap<OwnName, number | null>;

const none: OwnNumbers = new Map();
let kept = none;

const isOwnName = (name: string): name is OwnName => /^(price|seed\d)$/.test(name);

/** What is typed and is none stays in its field for correction, and is kept nowhere. Seed may cost nothing, a tonne may not. */
export const isPossible = (name: OwnName, value: number | null): value is number =>
  value !== null && (name === 'price' ? value > 0 : value >= 0) && value < Infinity;

function readFragment(): OwnNumbers {
  const found = new Map<OwnName, number>();
  for (const [name, text] of new URLSearchParams(location.hash.slice(1)))
    if (isOwnName(name) && text !== '' && isPossible(name, Number(text))) found.set(name, Number(text));
  return found;
}

function writeFragment(): string {
  const possible = [...kept].filter(([name, value]) => isPossible(name, value));
  const written = possible.map(([name, value]) => [name, String(value)]);
  return written.length === 0 ? '' : `#${new URLSearchParams(written).toString()}`;
}

const changed = 'gavelrow:own-numbers';

function keep(numbers: OwnNumbers): void {
  kept = numbers;
  history.replaceState(null, '', `${location.pathname}${location.search}${writeFragment()}`);
  dispatchEvent(new Event(changed));
}

/** @param frozen the copy's own: where it is typed, it counts as the copy's again */
export function keepOwnNumber(name: OwnName, value: number | null, frozen: number | null): void {
  const numbers = new Map(kept);
  if (value === frozen) numbers.delete(name);
  else numbers.set(name, value);
  keep(numbers);
}

/** Back to the numbers of the copy. */
export const forgetOwnNumbers = (): void => keep(none);

function listen(onChange: () => void): () => void {
  // A fragment that leads to a place in the page says nothing of numbers, so only the one at the start is read.
  kept = readFragment();
  addEventListener(changed, onChange);
  return () => removeEventListener(changed, onChange);
}

/** Lets a link that loads the page anew, in another language say, take the own numbers along. */
export function carryOwnNumbers(link: HTMLAnchorElement): void {
  link.hash = writeFragment();
}

/** What the reader tries in place of the copy's figures; nothing until then. */
export function useOwnNumbers(): OwnNumbers {
  return useSyncExternalStore(
    listen,
    () => kept,
    () => none,
  );
}
