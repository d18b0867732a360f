import { moneyTilts, verdictTilts, type BeamTilt } from '#shared/beam-tilt.ts';
import { gapRowOf, sayGapRow, type GapRow } from '#shared/gap-rows.ts';
import { sayPulledBackGap } from '#shared/pulled-back-gap.ts';
import type { Scale } from '#shared/gap-scale.ts';
import { sayPaysIn } from '#shared/say-seasons.ts';
import type { CandidateResult, WeighUp } from '#shared/weigh-up.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { beamWidth, drawBeam, tiltInks } from './pdf-beam.ts';
import { axisHeight, drawAxis, drawMarkLabel, drawTrack, trackHeight, type DrawingBox } from './pdf-strip.ts';
import { breakLines, drawLines, inks, styles, type Line, type TextStyle } from './pdf-text.ts';

/** The three columns of a row: names, drawing, figures; points. */
const nameWidth = 116;
const figureWidth = 116;
const gutter = 14;
const rowPadding = 3;

/** Height of a drawing with the labels above and below its marks, points. */
export const labelledTrackHeight = styles.label.leading * 2 + trackHeight;

function columnsOf(flow: PageFlow): Record<'name' | 'drawing' | 'figures', { x: number; width: number }> {
  const start = flow.left + nameWidth + gutter;
  const end = flow.right - figureWidth - gutter;
  return {
    name: { x: flow.left, width: nameWidth },
    drawing: { x: start, width: end - start },
    figures: { x: end + gutter, width: figureWidth },
  };
}

type StripProps = { weighUp: WeighUp; scale: Scale; voice: CopyVoice };

/** One row per candidate on one scale with its axis: name and verdict, drawing, what it returns. */
export function addStrip(
  flow: PageFlow,
  candidates: readonly CandidateResult[],
  { weighUp, scale, voice }: StripProps,
): void {
  const { drawing } = columnsOf(flow);
  flow.ensureRoom(axisHeight + 60);
  const axis = () => drawScale(flow, { ...drawing, y: flow.y }, { weighUp, scale, voice });
  flow.artifact(axis);
  flow.y += axisHeight;
  for (const candidate of candidates) {
    const row = setRow(flow, candidate, weighUp, voice);
    if (flow.ensureRoom(row.height)) {
      flow.artifact(axis, 'Pagination');
      flow.y += axisHeight;
    }
    flow.group('Sect', () => drawRow(flow, row, { weighUp, scale, voice }));
    flow.y += row.height;
  }
  flow.artifact(() => ruleAt(flow, inks.ink));
}

/** The axis that all rows share; a screen reader is told the figures themselves. */
export function drawScale(flow: PageFlow, box: DrawingBox, { weighUp, scale, voice }: StripProps): void {
  drawAxis(flow.doc, box, scale, weighUp.currentVarietyName, {
    factor: voice.unitFactor,
    write: (value, decimals) => voice.write.number(value, { decimals, isSigned: true }),
  });
}

function ruleAt(flow: PageFlow, colour: string): void {
  flow.doc.moveTo(flow.left, flow.y).lineTo(flow.right, flow.y).lineWidth(0.75).strokeColor(colour).stroke();
}

type Words = { lines: Line[]; style: TextStyle; tilt?: BeamTilt };
type SetRow = { candidate: CandidateResult; name: Line[]; beside: Words[]; figures: Words[]; height: number };

const nameStyle: TextStyle = { ...styles.strong, size: 10.5, leading: 14 };

function setRow(flow: PageFlow, candidate: CandidateResult, weighUp: WeighUp, voice: CopyVoice): SetRow {
  const { doc } = flow;
  const { verdict, money, siteYears, cautions } = candidate;
  const { say, write } = voice;
  const name = breakLines(doc, candidate.varietyName, nameStyle, nameWidth);
  const beside = [sayTilted(doc, say(`common:verdict.${verdict}`), verdictTilts[verdict], nameWidth)];
  if (cautions.length > 0) {
    beside.push(setWords(doc, say('verdicts:cautionCount', { count: cautions.length }), inks.breakEven));
  }
  const hasMoney = money !== null && verdict !== 'thin';
  const pulledBack = sayPulledBackGap(candidate, voice.unit, voice.decimals, say, write);
  const figures = [
    hasMoney
      ? {
          lines: breakLines(
            doc,
            write.moneyPer(money.returnPerHectare, weighUp.assumptions.currency, 'ha', { isSigned: true }),
            nameStyle,
            figureWidth,
          ),
          style: nameStyle,
        }
      : { lines: breakLines(doc, say('verdicts:cantSay'), nameStyle, figureWidth), style: nameStyle },
    ...(hasMoney && money.chancePays !== null
      ? [setWords(doc, sayPaysIn(money.chancePays, say), inks.ink)]
      : []),
    ...(pulledBack === null ? [] : [setWords(doc, pulledBack, inks.ink)]),
    setWords(doc, say('verdicts:siteYears', { count: siteYears }), inks.faded),
  ];
  const heights = [
    name.length * nameStyle.leading + heightOf(beside),
    labelledTrackHeight,
    heightOf(figures),
  ];
  return { candidate, name, beside, figures, height: Math.max(...heights) + 2 * rowPadding };
}

function setWords(doc: PDFKit.PDFDocument, text: string, colour: string): Words {
  const style = { ...styles.small, colour };
  return { lines: breakLines(doc, text, style, nameWidth), style };
}

/** The word of a verdict with its beam before it. */
export function sayTilted(doc: PDFKit.PDFDocument, word: string, tilt: BeamTilt, width: number): Words {
  const style: TextStyle = { ...styles.small, weight: 'bold', colour: tiltInks[tilt] };
  return { lines: breakLines(doc, word, style, width - beamWidth - 4), style, tilt };
}

const heightOf = (words: readonly Words[]): number =>
  words.reduce((sum, { lines, style }) => sum + lines.length * style.leading, 0);

function drawRow(flow: PageFlow, row: SetRow, props: StripProps): void {
  const { doc } = flow;
  const columns = columnsOf(flow);
  flow.artifact(() => ruleAt(flow, inks.rule));
  const top = flow.y + rowPadding;
  flow.leaf('H3', () => drawLines(doc, row.name, { ...columns.name, y: top }, nameStyle));
  drawWords(flow, row.beside, { ...columns.name, y: top + row.name.length * nameStyle.leading }, 'start');
  drawFigure(flow, gapRowOf(row.candidate), { ...columns.drawing, y: top }, props);
  drawWords(flow, row.figures, { ...columns.figures, y: top }, 'end');
}

/** Words under each other, each its own paragraph, a beam before those that have one. */
export function drawWords(
  flow: PageFlow,
  words: readonly Words[],
  box: DrawingBox,
  align: 'start' | 'end',
): void {
  let { y } = box;
  for (const { lines, style, tilt } of words) {
    const indent = tilt === undefined ? 0 : beamWidth + 4;
    if (tilt !== undefined) flow.artifact(() => drawBeam(flow.doc, tilt, box.x, y));
    flow.leaf('P', () =>
      drawLines(flow.doc, lines, { x: box.x + indent, y, width: box.width - indent, align }, style),
    );
    y += lines.length * style.leading;
  }
}

/** The marks of one candidate with their labels, as a figure that is told in words. */
export function drawFigure(
  flow: PageFlow,
  row: GapRow,
  box: DrawingBox,
  { weighUp, scale, voice }: StripProps,
): void {
  const { say, write, unit, decimals } = voice;
  const { doc } = flow;
  const gap = (value: number) => write.gap(value, unit, decimals);
  const marksTop = box.y + styles.label.leading;
  const labelTop = marksTop + trackHeight;
  const draw = () => {
    if (row.estimate !== null) {
      const style: TextStyle = { ...styles.label, weight: 'bold', colour: inks.ink };
      drawMarkLabel(doc, box, scale, row.estimate, gap(row.estimate), style);
    }
    drawTrack(doc, { ...box, y: marksTop }, scale, {
      ...row,
      colour: tiltInks[verdictTilts[row.verdict]],
      isThin: row.verdict === 'thin',
    });
    if (row.breakEven !== null) {
      const words = say('drawings:gapStrip.paysFrom', { gap: gap(row.breakEven) });
      const style = { ...styles.label, colour: inks.breakEven };
      drawMarkLabel(doc, { ...box, y: labelTop }, scale, row.breakEven, words, style);
    } else if (row.verdict === 'thin') {
      const words = say('drawings:gapStrip.thin');
      drawMarkLabel(doc, { ...box, y: labelTop }, scale, row.estimate ?? 0, words, styles.label);
    }
  };
  const bottom = box.y + labelledTrackHeight;
  flow.leaf('Figure', draw, {
    alt: sayGapRow(row, weighUp.currentVarietyName, voice, say, write),
    bbox: [box.x, box.y, box.x + box.width, bottom],
    placement: 'Block',
  });
}

/** The verdict on a candidate's money as a word with its beam; null where there is none. */
export function sayMoneyVerdict(
  doc: PDFKit.PDFDocument,
  { money, verdict }: CandidateResult,
  { say }: CopyVoice,
  width: number,
): Words | null {
  if (money === null || verdict === 'thin') return null;
  return sayTilted(doc, say(`common:moneyVerdict.${money.verdict}`), moneyTilts[money.verdict], width);
}
