/** The list with one of its items moved on by so many places, kept within its ends. */
export function moveBy<Item>(items: readonly Item[], from: number, places: number): Item[] {
  const rest = items.filter((_, place) => place !== from);
  const to = Math.min(Math.max(from + places, 0), rest.length);
  return [...rest.slice(0, to), ...items.slice(from, from + 1), ...rest.slice(to)];
}
