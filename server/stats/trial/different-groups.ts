/** Cliques found before giving up: a display with more groups helps nobody, and their number can grow exponentially. */
const mostGroups = 500;
const mostSteps = 100_000;

/**
 * Largest sets of entries of which no two differ (Piepho 2004, J. Comput. Graph. Stat. 13:456–466):
 * the maximal cliques of "not different", by Bron–Kerbosch with pivoting.
 * @param size entries in the order in which groups and their members are to be listed
 * @param isDifferent for two places in that order
 * @returns places, ascending within a group; null where there are too many groups to list
 */
export function groupUndiffering(
  size: number,
  isDifferent: (a: number, b: number) => boolean,
): number[][] | null {
  const joined = new Uint8Array(size * size);
  for (let a = 0; a < size; a++)
    for (let b = a + 1; b < size; b++)
      if (!isDifferent(a, b)) joined[a * size + b] = joined[b * size + a] = 1;
  const groups = findRuns(size, joined) ?? findCliques(size, joined);
  if (!groups) return null;
  return groups.sort((a, b) => a[0]! - b[0]! || b.length - a.length || compareMembers(a, b));
}

/**
 * With equal standard errors every group is a run of neighbours in the order of the means, found without search.
 * Null where it is not so.
 */
function findRuns(size: number, joined: Uint8Array): number[][] | null {
  const ends = new Int32Array(size);
  for (let a = 0; a < size; a++) {
    let end = a;
    while (end + 1 < size && joined[a * size + end + 1]) end++;
    for (let b = end + 1; b < size; b++) if (joined[a * size + b]) return null;
    if (a > 0 && end < ends[a - 1]!) return null;
    ends[a] = end;
  }
  const groups: number[][] = [];
  for (let a = 0; a < size; a++)
    if (a === 0 || ends[a]! > ends[a - 1]!)
      groups.push(Array.from({ length: ends[a]! - a + 1 }, (_, i) => a + i));
  return groups;
}

function findCliques(size: number, joined: Uint8Array): number[][] | null {
  const groups: number[][] = [];
  let steps = 0;
  const extend = (
    clique: readonly number[],
    candidates: readonly number[],
    excluded: readonly number[],
  ): boolean => {
    if (++steps > mostSteps || groups.length > mostGroups) return false;
    if (candidates.length === 0) {
      if (excluded.length === 0) groups.push([...clique].sort((a, b) => a - b));
      return true;
    }
    const pivot = choosePivot(size, joined, candidates, excluded) * size;
    let open = candidates;
    let closed = excluded;
    for (const vertex of candidates) {
      if (joined[pivot + vertex]) continue;
      const isNear = (other: number) => joined[vertex * size + other] === 1;
      if (!extend([...clique, vertex], open.filter(isNear), closed.filter(isNear))) return false;
      open = open.filter((other) => other !== vertex);
      closed = [...closed, vertex];
    }
    return true;
  };
  const all = Array.from({ length: size }, (_, i) => i);
  return extend([], all, []) ? groups : null;
}

/** The vertex joined to most candidates; the first that is joined to all others is as good as any. */
function choosePivot(
  size: number,
  joined: Uint8Array,
  candidates: readonly number[],
  excluded: readonly number[],
): number {
  let best = candidates[0]!;
  let most = -1;
  for (const list of [candidates, excluded])
    for (const vertex of list) {
      let count = 0;
      for (const other of candidates) count += joined[vertex * size + other]!;
      if (count > most) [best, most] = [vertex, count];
      if (most >= candidates.length - 1) return best;
    }
  return best;
}

function compareMembers(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return a[i]! - b[i]!;
  return 0;
}
