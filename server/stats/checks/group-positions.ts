/** Positions of the values of each group, in order of first appearance. */
export function positionsByGroup(groups: ArrayLike<number | string>): Map<number | string, number[]> {
  const positions = new Map<number | string, number[]>();
  Array.from(groups).forEach((group, i) => {
    const members = positions.get(group);
    if (members) members.push(i);
    else positions.set(group, [i]);
  });
  return positions;
}
