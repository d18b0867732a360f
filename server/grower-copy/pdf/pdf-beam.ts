import type { BeamTilt } from '#shared/beam-tilt.ts';
import { inks } from './pdf-text.ts';

/** Ink of a state; the beam and the word beside it say the same without colour. */
export const tiltInks: Record<BeamTilt, string> = {
  candidate: inks.ahead,
  current: inks.behind,
  level: inks.level,
  swinging: inks.open,
  bare: inks.open,
};

/** Width of a drawn beam, points. */
export const beamWidth = 16;

/** The grid on which a beam is drawn: 32 wide, 22 high. */
const grid = 32;

/** The balance beam of a verdict, `beamWidth` wide; its word stands beside it. */
export function drawBeam(doc: PDFKit.PDFDocument, tilt: BeamTilt, x: number, y: number): void {
  const colour = tiltInks[tilt];
  doc.save();
  doc.translate(x, y).scale(beamWidth / grid);
  doc.lineWidth(2.4).lineCap('round').strokeColor(colour).fillColor(colour);
  doc.path('M16 8V19M10.5 19H21.5').stroke();
  if (tilt === 'current') doc.translate(grid, 0).scale(-1, 1);
  if (tilt === 'candidate' || tilt === 'current') drawTilted(doc);
  if (tilt === 'level') {
    doc.path('M6 8H26').stroke();
    doc.circle(4.5, 8, 3.2).fill();
    doc.circle(27.5, 8, 3.2).fill();
  }
  if (tilt === 'swinging') {
    doc.lineWidth(2).dash(2.4, { space: 3.4 }).path('M4 4.5L28 11.5M4 11.5L28 4.5').stroke();
  }
  if (tilt === 'bare') doc.circle(16, 6, 2.4).fill();
  doc.restore();
}

/** The heavy pan is filled and low, the light one hollow and high. */
function drawTilted(doc: PDFKit.PDFDocument): void {
  doc.path('M6.4 4.2L26 11.2').stroke();
  doc.circle(27, 12, 3.6).fill();
  doc.lineWidth(1.7).circle(4.6, 3.8, 2.4).stroke();
}
