/** Cliques found before giving up: a display with more groups helps nobody, and their number can grow exponentially. */
const mostGroups = 500;
const mostSteps = 200_000;

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
  const joined = Array.from({ length: size }, () => new Uint8Array(size));
  for (let a = 0; a < size; a++)
    for (let b = a + 1; b < size; b++) if (!isDifferent(a, b)) joined[a]![b] = joined[b]![a] = 1;
  const groups: number[][] = [];
  let steps = 0;
  const extend = (clique: number[], candidates: number[], excluded: number[]): boolean => {
    if (++steps > mostSteps || groups.length > mostGroups) return false;
    if (candidates.length === 0) {
      if (excluded.length === 0) groups.push(clique);
      return true;
    }
    const pivot = joined[choosePivot(joined, candidates, excluded)]!;
    let open = candidates;
    let closed = excluded;
    for (const vertex of candidates) {
      if (pivot[vertex]) continue;
      const near = joined[vertex]!;
      const inside = open.filter((other) => near[other]);
      if (
        !extend(
          [...clique, vertex],
          inside,
          closed.filter((other) => near[other]),
        )
      )
        return false;
      open = open.filter((other) => other !== vertex);
      closed = [...closed, vertex];
    }
    return true;
  };
  if (
    !extend(
      [],
      Array.from({ length: size }, (_, i) => i),
      [],
    )
  )
    return null;
  for (const group of groups) group.sort((a, b) => a - b);
  return groups.sort((a, b) => a[0]! - b[0]! || b.length - a.length || compareMembers(a, b));
}

function choosePivot(
  joined: readonly Uint8Array[],
  candidates: readonly number[],
  excluded: readonly number[],
): number {
  let best = candidates[0]!;
  let most = -1;
  for (const list of [candidates, excluded])
    for (const vertex of list) {
      const near = joined[vertex]!;
      let count = 0;
      for (const other of candidates) count += near[other]!;
      if (count > most) [best, most] = [vertex, count];
    }
  return best;
}

function compareMembers(a: readonly number[], b: readonly number[]): number {
  for (let i = 0; i < a.length; i++) if (a[i] !== b[i]) return a[i]! - b[i]!;
  return 0;
}
