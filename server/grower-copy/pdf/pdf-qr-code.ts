import { create } from 'qrcode';

/** Empty modules around the code, without which cameras do not find it (ISO/IEC 18004). */
const quietZone = 4;

/** Draws the code of a link as a square of `side` points with its quiet zone, black on white. */
export function drawQrCode(
  doc: PDFKit.PDFDocument,
  link: string,
  { x, y, side }: { x: number; y: number; side: number },
): void {
  const { modules } = create(link, { errorCorrectionLevel: 'M' });
  const module = side / (modules.size + 2 * quietZone);
  for (let row = 0; row < modules.size; row += 1) {
    let start = 0;
    // Dark modules side by side are one bar, so that no seam shows between them on paper.
    for (let column = 0; column <= modules.size; column += 1) {
      if (column < modules.size && modules.get(row, column)) continue;
      const length = column - start;
      if (length > 0) {
        doc.rect(x + (quietZone + start) * module, y + (quietZone + row) * module, length * module, module);
      }
      start = column + 1;
    }
  }
  doc.fill('#000000');
}
