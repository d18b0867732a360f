import { useState, useSyncExternalStore } from 'react';

/** The grower's own price lives in the page and in its fragment (`#price=275`), which no browser sends to a server. */
const name = 'price';

let kept: number | null = null;

function readFragment(): number | null {
  const text = new URLSearchParams(location.hash.slice(1)).get(name);
  const price = text === null ? NaN : Number(text);
  return Number.isFinite(price) && price > 0 ? price : null;
}

const writeFragment = (): string =>
  kept === null ? '' : `#${new URLSearchParams({ [name]: String(kept) }).toString()}`;

const changed = 'gavelrow:own-price';

function keepPrice(price: number | null): void {
  kept = price;
  history.replaceState(null, '', `${location.pathname}${location.search}${writeFragment()}`);
  dispatchEvent(new Event(changed));
}

function listen(onChange: () => void): () => void {
  // A fragment that leads to a place in the page says nothing of prices, so only the one at the start is read.
  kept = readFragment();
  addEventListener(changed, onChange);
  return () => removeEventListener(changed, onChange);
}

/** Lets a link that loads the page anew, in another language say, take the own price along. */
export function carryOwnPrice(link: HTMLAnchorElement): void {
  link.hash = writeFragment();
}

export type OwnPrice = {
  /** What stands in the field: null for nothing, NaN for what is no figure. */
  price: number | null;
  choose: (price: number | null) => void;
  /** Back to the price of the copy. */
  reset: () => void;
};

/**
 * The price per tonne that the reader tries; the copy's own until then.
 * @param frozen of the copy, per tonne
 */
export function useOwnPrice(frozen: number): OwnPrice {
  const own = useSyncExternalStore(
    listen,
    () => kept,
    () => null,
  );
  // What is typed and is no price stays in its field for correction, and is kept nowhere.
  const [refused, setRefused] = useState<{ value: number | null } | null>(null);
  const choose = (value: number | null) => {
    const isPrice = value !== null && Number.isFinite(value) && value > 0;
    setRefused(isPrice ? null : { value });
    if (isPrice) keepPrice(value === frozen ? null : value);
  };
  const reset = () => {
    setRefused(null);
    keepPrice(null);
  };
  return { price: refused === null ? (own ?? frozen) : refused.value, choose, reset };
}
