import { create } from 'qrcode';
import { listBars, quietZone } from '#shared/qr-code-path.ts';

/** Draws the code of a link as a square of `side` points with its quiet zone, black on white. */
export function drawQrCode(
  doc: PDFKit.PDFDocument,
  link: string,
  { x, y, side }: { x: number; y: number; side: number },
): void {
  const { modules } = create(link, { errorCorrectionLevel: 'M' });
  const module = side / (modules.size + 2 * quietZone);
  for (const { row, start, length } of listBars(modules)) {
    doc.rect(x + (quietZone + start) * module, y + (quietZone + row) * module, length * module, module);
  }
  doc.fill('#000000');
}
