/** A stream of chance that is the same on every machine for the same seed and label. */
export type RandomSource = {
  /** Uniform on [0, 1). */
  uniform: () => number;
  /** Standard normal. */
  normal: () => number;
  /** Whole number from 0 to below − 1. */
  integer: (below: number) => number;
  /** The items in random order; the list given is left alone. */
  shuffle: <T>(items: readonly T[]) => T[];
  /** An identifier of the shape of a random UUID, the same at every run. */
  uuid: () => string;
};

/**
 * Opens the stream of a label, so that a change to one trial leaves the others' figures alone.
 * Generator: xoshiro128** 1.1 of Blackman and Vigna (2018), state filled by splitmix32 from an FNV-1a hash; from memory.
 */
export function openRandomSource(seed: number, label: string): RandomSource {
  const next = startXoshiro(seed ^ hashLabel(label));
  const uniform = (): number => (next() >>> 5) / 2 ** 27;
  const integer = (below: number): number => Math.floor(uniform() * below);
  return {
    uniform,
    integer,
    normal: () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform()),
    shuffle: (items) => {
      const order = [...items];
      for (let i = order.length - 1; i > 0; i -= 1) {
        const other = integer(i + 1);
        const kept = order[i];
        const moved = order[other];
        // Both indices lie inside the list, so neither is undefined unless an item is.
        if (kept === undefined || moved === undefined) continue;
        order[i] = moved;
        order[other] = kept;
      }
      return order;
    },
    uuid: () => writeUuid([next(), next(), next(), next()]),
  };
}

function hashLabel(label: string): number {
  let hash = 0x811c9dc5;
  for (let i = 0; i < label.length; i += 1) hash = Math.imul(hash ^ label.charCodeAt(i), 0x01000193);
  return hash >>> 0;
}

function startXoshiro(seed: number): () => number {
  let mixed = seed >>> 0;
  const splitmix = (): number => {
    mixed = (mixed + 0x9e3779b9) | 0;
    let z = Math.imul(mixed ^ (mixed >>> 16), 0x21f0aaad);
    z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
    return (z ^ (z >>> 15)) >>> 0;
  };
  let [a, b, c, d] = [splitmix(), splitmix(), splitmix(), splitmix()];
  const rotate = (value: number, by: number): number => (value << by) | (value >>> (32 - by));
  return () => {
    const result = Math.imul(rotate(Math.imul(b, 5), 7), 9) >>> 0;
    const shifted = b << 9;
    c ^= a;
    d ^= b;
    b ^= c;
    a ^= d;
    c ^= shifted;
    d = rotate(d, 11);
    return result;
  };
}

/** Four 32-bit words as a UUID of version 4. */
function writeUuid(words: readonly number[]): string {
  const hex = words.map((word) => (word >>> 0).toString(16).padStart(8, '0')).join('');
  const variant = ((Number.parseInt(hex.charAt(16), 16) & 3) | 8).toString(16);
  return [
    hex.slice(0, 8),
    hex.slice(8, 12),
    `4${hex.slice(13, 16)}`,
    `${variant}${hex.slice(17, 20)}`,
    hex.slice(20, 32),
  ].join('-');
}
