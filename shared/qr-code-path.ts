/** A code as its maker gives it. */
type CodeModules = { size: number; get: (row: number, column: number) => number };

/** Empty modules around the code, without which cameras do not find it (ISO/IEC 18004). */
export const quietZone = 4;

/** Dark modules side by side: one bar, so that no seam shows between them on paper. In modules, without the quiet zone. */
export type CodeBar = { row: number; start: number; length: number };

/** The dark bars of a QR code, row by row. */
export function listBars(modules: CodeModules): CodeBar[] {
  const bars: CodeBar[] = [];
  for (let row = 0; row < modules.size; row += 1) {
    let start = 0;
    for (let column = 0; column <= modules.size; column += 1) {
      if (column < modules.size && modules.get(row, column)) continue;
      if (column > start) bars.push({ row, start, length: column - start });
      start = column + 1;
    }
  }
  return bars;
}

/** The dark part of a code as the data of one SVG path, and its side in modules with the quiet zone. */
export function drawCodePath(modules: CodeModules): { path: string; side: number } {
  const bars = listBars(modules).map(
    ({ row, start, length }) => `M${start + quietZone} ${row + quietZone}h${length}v1h-${length}z`,
  );
  return { path: bars.join(''), side: modules.size + 2 * quietZone };
}
