import PDFDocument from 'pdfkit';
import { gapRowOf, scaleOfRows } from '#shared/gap-rows.ts';
import { addCandidate } from './copy-pdf-candidate.ts';
import { addEvidence } from './copy-pdf-evidence.ts';
import { addSummary, sayTitle } from './copy-pdf-summary.ts';
import { openCopyVoice, type CopyVoice } from './copy-voice.ts';
import { margins, PageFlow } from './page-flow.ts';
import { breakLines, drawLines, styles } from './pdf-text.ts';
import type { PrintedCopy, PrintOrder } from './printed-copy.ts';

/**
 * A copy as a PDF: a page for the weigh-up and one for each candidate, then the trials; tagged, in one language, with its
 * typeface embedded. Made without a browser and without waiting for anything.
 */
export function renderCopyPdf(order: PrintOrder): Uint8Array {
  const { result } = order.snapshot;
  const copy: PrintedCopy = { ...order, scale: scaleOfRows(result.candidates.map(gapRowOf)) };
  const voice = openCopyVoice(order);
  const doc = openDocument(copy, voice);
  const flow = new PageFlow(doc, order.paper);
  const { outline } = doc;
  outline.addItem(sayTitle(copy, voice));
  flow.group('Sect', () => addSummary(flow, copy, voice));
  if (result.answer !== 'no-trials') {
    for (const candidate of result.candidates) {
      flow.newPage();
      outline.addItem(candidate.varietyName);
      flow.group('Sect', () => addCandidate(flow, candidate, copy, voice));
    }
  }
  flow.newPage();
  outline.addItem(voice.say('print:evidence'));
  flow.group('Sect', () => addEvidence(flow, copy, voice));
  addFeet(flow, copy, voice);
  doc.end();
  const bytes: unknown = doc.read();
  if (!Buffer.isBuffer(bytes)) throw new Error('the document is not whole');
  return bytes;
}

function openDocument(copy: PrintedCopy, voice: CopyVoice): PDFKit.PDFDocument {
  const { advisorName, madeAt } = copy.snapshot;
  const product = voice.say('common:productName');
  return new PDFDocument({
    pdfVersion: '1.7',
    tagged: true,
    lang: copy.language,
    displayTitle: true,
    // The feet say how many pages there are, which is known at the end.
    bufferPages: true,
    autoFirstPage: false,
    info: {
      Title: sayTitle(copy, voice),
      Author: advisorName,
      Subject: voice.say('print:subject'),
      Creator: product,
      Producer: product,
      CreationDate: new Date(copy.printedAt),
      ModDate: new Date(madeAt),
    },
  });
}

/** At the foot of each page: which copy this is, what its figures rest on, and which page of how many. */
function addFeet(flow: PageFlow, copy: PrintedCopy, voice: CopyVoice): void {
  const { doc } = flow;
  const { say, write } = voice;
  const { snapshot, printedAt } = copy;
  const { weighUp, result } = snapshot;
  const style = styles.label;
  const facts = say('print:foot', {
    date: write.date(snapshot.madeAt),
    versions: say('method:trialVersions', { count: result.trials.length }),
    engine: snapshot.engineVersion,
    printed: write.date(printedAt),
  });
  const about = `${say('common:productName')} · ${weighUp.growerName}, ${weighUp.farmName} · ${sayTitle(copy, voice)}`;
  const { start, count } = doc.bufferedPageRange();
  for (let page = 0; page < count; page += 1) {
    doc.switchToPage(start + page);
    const number = breakLines(doc, say('print:page', { page: page + 1, pages: count }), style, flow.width);
    const room = flow.width - (number[0]?.width ?? 0) - 12;
    const top = flow.bottom + margins.bottom - 34;
    flow.artifact(() => {
      drawLines(
        doc,
        breakLines(doc, about, style, room).slice(0, 1),
        { x: flow.left, y: top, width: room },
        style,
      );
      drawLines(doc, number, { x: flow.left, y: top, width: flow.width, align: 'end' }, style);
      const lines = breakLines(doc, facts, style, flow.width);
      drawLines(doc, lines, { x: flow.left, y: top + style.leading, width: flow.width }, style);
    }, 'Pagination');
  }
}
