import type { PageFlow } from './page-flow.ts';
import { breakLines, drawLines, inks, styles, type Line, type TextStyle } from './pdf-text.ts';

/** A column as a share of the table's width; figures stand at the end, so that their decimals line up. */
export type PdfColumn<Row> = {
  header: string;
  share: number;
  align?: 'start' | 'end';
  /** Paragraphs of the cell, the first in normal ink and the others smaller. */
  cell: (row: Row) => readonly string[];
};

/** A picture at the end of each row, of figures that its cells say already: it is no part of the table's structure. */
export type RowDrawing<Row> = {
  share: number;
  /** Draws into a box of the row's height. */
  draw: (row: Row, box: { x: number; y: number; width: number; height: number }) => void;
};

type Cell = { lines: { line: Line; style: TextStyle }[]; height: number };

const cellStyles = {
  head: { ...styles.small, weight: 'bold' },
  first: { ...styles.small, leading: 10.2, colour: inks.ink },
  further: styles.label,
} as const satisfies Record<string, TextStyle>;

/** Free between two columns, and above and below a row, points. */
const gutter = 8;
const padding = 1.2;

/**
 * A table with a heading for each column and, in its first column, for each row. Rows are not cut by a page's end, and
 * the column's headings come again on the next page.
 */
export function addTable<Row>(
  flow: PageFlow,
  columns: readonly PdfColumn<Row>[],
  rows: readonly Row[],
  title: string,
  drawing?: RowDrawing<Row>,
): void {
  const boxes = placeColumns(flow, drawing ? [...columns, drawing] : columns);
  const head = columns.map((column, i) =>
    setCell(flow, [column.header], boxes[i]?.width ?? 0, () => cellStyles.head),
  );
  const body = rows.map((row) =>
    columns.map((column, i) =>
      setCell(flow, column.cell(row), boxes[i]?.width ?? 0, (part) =>
        part === 0 ? cellStyles.first : cellStyles.further,
      ),
    ),
  );
  const headHeight = heightOf(head);
  const [firstRow = []] = body;
  flow.ensureRoom(headHeight + heightOf(firstRow));
  flow.group(
    'Table',
    () => {
      flow.group('THead', () =>
        flow.group('TR', () => {
          drawRow(flow, boxes, head, (_i, draw) => flow.leaf('TH', draw, { scope: 'Column' }));
        }),
      );
      endRow(flow, headHeight, inks.ink);
      flow.group('TBody', () => {
        body.forEach((cells, i) => {
          addRow(flow, boxes, head, cells);
          const row = rows[i];
          if (drawing && row !== undefined) drawBeside(flow, boxes.at(-1), heightOf(cells), row, drawing);
        });
      });
    },
    { title },
  );
  flow.y += 3;
}

type Box = { x: number; width: number; align: 'start' | 'end' };

/** The row has been ended: its picture goes into the height that it took. */
function drawBeside<Row>(
  flow: PageFlow,
  box: Box | undefined,
  height: number,
  row: Row,
  drawing: RowDrawing<Row>,
): void {
  if (box === undefined) return;
  flow.artifact(() => drawing.draw(row, { x: box.x, y: flow.y - height, width: box.width, height }));
}

function placeColumns(flow: PageFlow, columns: readonly { share: number; align?: 'start' | 'end' }[]): Box[] {
  const whole = columns.reduce((sum, column) => sum + column.share, 0);
  const room = flow.width - gutter * (columns.length - 1);
  let x = flow.left;
  return columns.map(({ share, align = 'start' }) => {
    const width = (room * share) / whole;
    const box = { x, width, align };
    x += width + gutter;
    return box;
  });
}

function setCell(
  flow: PageFlow,
  parts: readonly string[],
  width: number,
  styleOf: (part: number) => TextStyle,
): Cell {
  const lines = parts.flatMap((part, index) => {
    const style = styleOf(index);
    // A space between two parts, for whoever hears the cell read out.
    const text = index < parts.length - 1 ? `${part} ` : part;
    return breakLines(flow.doc, text, style, width).map((line) => ({ line, style }));
  });
  return { lines, height: lines.reduce((sum, { style }) => sum + style.leading, 0) };
}

const heightOf = (row: readonly Cell[]): number =>
  Math.max(...row.map((cell) => cell.height), 0) + 2 * padding;

function addRow(flow: PageFlow, boxes: readonly Box[], head: readonly Cell[], row: readonly Cell[]): void {
  const height = heightOf(row);
  if (flow.ensureRoom(height)) {
    flow.artifact(() => drawRow(flow, boxes, head, (_i, draw) => draw()), 'Pagination');
    endRow(flow, heightOf(head), inks.ink);
  }
  flow.group('TR', () =>
    drawRow(flow, boxes, row, (i, draw) =>
      i === 0 ? flow.leaf('TH', draw, { scope: 'Row' }) : flow.leaf('TD', draw),
    ),
  );
  endRow(flow, height, inks.rule);
}

function drawRow(
  flow: PageFlow,
  boxes: readonly Box[],
  row: readonly Cell[],
  wrap: (index: number, draw: () => void) => void,
): void {
  row.forEach((cell, index) => {
    const box = boxes[index];
    if (box === undefined) return;
    wrap(index, () => {
      let y = flow.y + padding;
      for (const { line, style } of cell.lines) {
        drawLines(flow.doc, [line], { ...box, y }, style);
        y += style.leading;
      }
    });
  });
}

function endRow(flow: PageFlow, height: number, colour: string): void {
  flow.y += height;
  flow.artifact(() => {
    flow.doc.moveTo(flow.left, flow.y).lineTo(flow.right, flow.y).lineWidth(0.6).strokeColor(colour).stroke();
  });
}
