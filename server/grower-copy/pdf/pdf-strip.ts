import { findTicks, isOnScale, placeOnScale, tickDecimals, type Scale } from '#shared/gap-scale.ts';
import type { Interval } from '#shared/verdict.ts';
import { breakLines, drawLines, inks, styles, type TextStyle } from './pdf-text.ts';

/** Where a drawing lies on its page, points. */
export type DrawingBox = { x: number; y: number; width: number };

/** What is drawn of one gap, in the unit of the scale. */
export type StripMarks = {
  colour: string;
  estimate: number | null;
  /** For the region's average. */
  region: Interval | null;
  /** For the grower's own next season. */
  ownSeason?: Interval | null;
  breakEven?: number | null;
  /** A figure that no interval backs: its tick is dotted. */
  isThin?: boolean;
};

/** Height of the marks of one gap, points. */
export const trackHeight = 18;
/** Height of the axis with its figures and what zero stands for, points. */
export const axisHeight = 24;

const placeX = (box: DrawingBox, scale: Scale, value: number): number =>
  box.x + (placeOnScale(scale, value) / 100) * box.width;

/** The marks of one gap: range of the own season, interval of the region, zero, break-even, estimate. */
export function drawTrack(doc: PDFKit.PDFDocument, box: DrawingBox, scale: Scale, marks: StripMarks): void {
  const middle = box.y + trackHeight / 2;
  const { colour, estimate, region, ownSeason = null, breakEven = null, isThin = false } = marks;
  const span = ({ low, high }: Interval): [number, number] => {
    const start = placeX(box, scale, low);
    return [start, placeX(box, scale, high) - start];
  };
  if (ownSeason) {
    const [start, width] = span(ownSeason);
    doc.roundedRect(start, middle - 5.5, width, 11, Math.min(5.5, width / 2)).lineWidth(0.6);
    doc.fillOpacity(0.16).strokeOpacity(0.75).fillAndStroke(colour, colour);
    doc.fillOpacity(1).strokeOpacity(1);
  }
  if (region) {
    const [start, width] = span(region);
    doc.rect(start, middle - 3.5, width, 7).fill(colour);
  }
  drawEdged(doc, placeX(box, scale, 0), box.y, { colour: inks.ink, width: 0.9 });
  if (breakEven !== null && isOnScale(scale, breakEven)) {
    drawEdged(doc, placeX(box, scale, breakEven), box.y, {
      colour: inks.breakEven,
      width: 1.2,
      isDashed: true,
    });
  }
  if (estimate !== null) drawTick(doc, placeX(box, scale, estimate), middle, isThin);
}

type LineLook = { colour: string; width: number; isDashed?: boolean };

/** A line over the whole height, edged with paper, so that it can be followed across a dark interval, in grey too. */
function drawEdged(
  doc: PDFKit.PDFDocument,
  x: number,
  y: number,
  { colour, width, isDashed = false }: LineLook,
): void {
  const stroke = (ink: string, weight: number) =>
    doc
      .moveTo(x, y)
      .lineTo(x, y + trackHeight)
      .lineWidth(weight)
      .strokeColor(ink)
      .stroke();
  stroke(inks.paper, width + 1.4);
  if (isDashed) doc.dash(3, { space: 2.4 });
  stroke(colour, width);
  if (isDashed) doc.undash();
}

/** Edged like the lines; heavier and shorter than they are, so that it is not taken for one. */
function drawTick(doc: PDFKit.PDFDocument, x: number, middle: number, isThin: boolean): void {
  const stroke = (ink: string, weight: number) =>
    doc
      .moveTo(x, middle - 8.5)
      .lineTo(x, middle + 8.5)
      .lineWidth(weight)
      .strokeColor(ink)
      .stroke();
  if (isThin) {
    doc.dash(2, { space: 2 });
    stroke(inks.open, 2);
    doc.undash();
    return;
  }
  stroke(inks.paper, 4);
  stroke(inks.ink, 2);
}

/** Free between two figures of an axis, points. */
const tickGap = 7;

/**
 * The one scale of all rows: what zero stands for, and its figures; every second of them where they would touch.
 * @param factor of the unit that is read in one of the scale's
 * @param write a figure of the axis with so many decimals
 */
export function drawAxis(
  doc: PDFKit.PDFDocument,
  box: DrawingBox,
  scale: Scale,
  zeroLabel: string,
  { factor, write }: { factor: number; write: (value: number, decimals: number) => string },
): void {
  drawMarkLabel(doc, box, scale, 0, zeroLabel, { ...styles.label, weight: 'bold', colour: inks.ink });
  const ticks = findTicks(scale, factor);
  const decimals = tickDecimals(ticks);
  const labelled = ticks.map(({ label, value }) => ({
    value,
    words: write(label, label === 0 ? 0 : decimals),
  }));
  const widest = Math.max(0, ...labelled.map(({ words }) => widthOfWords(doc, words, styles.label)));
  const [first, second] = ticks;
  const step = first && second ? placeX(box, scale, second.value) - placeX(box, scale, first.value) : 0;
  const size = first && second ? second.label - first.label : 1;
  labelled.forEach(({ value, words }, i) => {
    const x = placeX(box, scale, value);
    const isEverySecond = Math.round((ticks[i]?.label ?? 0) / size) % 2 === 0;
    if (step >= widest + tickGap || isEverySecond) {
      drawMarkLabel(doc, { ...box, y: box.y + 11 }, scale, value, words, styles.label);
    }
    doc.moveTo(x, box.y + axisHeight - 4).lineTo(x, box.y + axisHeight);
    doc.lineWidth(0.6).strokeColor(inks.edge).stroke();
  });
}

const widthOfWords = (doc: PDFKit.PDFDocument, words: string, style: TextStyle): number =>
  Math.max(...breakLines(doc, words, style, Infinity).map((line) => line.width));

/** Half the side of the arrow beside a label whose mark lies beyond the drawing, points. */
const arrow = 2.4;

/** Words at a mark, centred on it and kept inside the drawing; an arrow where the mark lies beyond its edge. */
export function drawMarkLabel(
  doc: PDFKit.PDFDocument,
  box: DrawingBox,
  scale: Scale,
  value: number,
  words: string,
  style: TextStyle,
): void {
  const lines = breakLines(doc, words, style, box.width - 4 * arrow);
  const width = Math.max(...lines.map((line) => line.width));
  const isBeyond = !isOnScale(scale, value);
  const room = isBeyond ? 4 * arrow : 0;
  const low = box.x + (value < 0 ? room : 0);
  const high = box.x + box.width - width - (value < 0 ? 0 : room);
  const x = Math.min(Math.max(placeX(box, scale, value) - width / 2, low), high);
  drawLines(doc, lines, { x, y: box.y, width, align: 'middle' }, style);
  if (!isBeyond) return;
  const tip = value < 0 ? x - 3.5 * arrow : x + width + 3.5 * arrow;
  const back = value < 0 ? tip + 2 * arrow : tip - 2 * arrow;
  const middle = box.y + style.leading / 2;
  doc.polygon([tip, middle], [back, middle - arrow], [back, middle + arrow]).fill(style.colour);
}
