/**
 * Connected parts of the graph in which an entry and an environment are neighbours where the entry stood in it.
 * @param entryOf entry of each cell
 * @param environmentOf environment of each cell
 * @returns part of each entry, then of each environment, numbered from 0
 */
export function findParts(
  entryOf: Int32Array,
  environmentOf: Int32Array,
  entries: number,
  environments: number,
): Int32Array {
  const parent = Int32Array.from({ length: entries + environments }, (_, node) => node);
  const findRoot = (node: number): number => {
    let root = node;
    while (parent[root] !== root) root = parent[root]!;
    for (let walk = node; parent[walk] !== root;) {
      const next = parent[walk]!;
      parent[walk] = root;
      walk = next;
    }
    return root;
  };
  for (let c = 0; c < entryOf.length; c++) {
    const a = findRoot(entryOf[c]!);
    const b = findRoot(entries + environmentOf[c]!);
    if (a !== b) parent[Math.max(a, b)] = Math.min(a, b);
  }
  const numberOfRoot = new Map<number, number>();
  return Int32Array.from(parent, (_, node) => {
    const root = findRoot(node);
    const known = numberOfRoot.get(root);
    if (known !== undefined) return known;
    numberOfRoot.set(root, numberOfRoot.size);
    return numberOfRoot.size - 1;
  });
}
