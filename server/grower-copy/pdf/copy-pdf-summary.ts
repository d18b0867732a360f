import { dialling } from '#shared/dialling.ts';
import { tellBest } from '#shared/best-sentences.ts';
import { buildHeadline, sayHeadline } from '#shared/headline.ts';
import { tellUnanswered } from '#shared/no-verdict-sentences.ts';
import { tellPrices } from '#shared/price-sentences.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
import { addStrip } from './copy-pdf-strip.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { addCautions } from './pdf-cautions.ts';
import { addHeading, addLink, addParagraph, addRule } from './pdf-blocks.ts';
import { drawQrCode } from './pdf-qr-code.ts';
import { inks, styles } from './pdf-text.ts';
import type { PrintedCopy } from './printed-copy.ts';
import { addStripKey } from './strip-key.ts';

/** Side of the QR code with its quiet zone, points: 27 mm, read at arm's length. */
const codeSide = 78;

/** The first page: what was asked, the answer, each candidate at a glance, where the evidence stops, and who to ask. */
export function addSummary(flow: PageFlow, copy: PrintedCopy, voice: CopyVoice): void {
  addTitle(flow, copy, voice);
  const { say } = voice;
  const changes = copy.laterChanges.map(({ siteName, season, change }) => ({
    severity: 'warning' as const,
    text: say(`verdicts:changes.${change}`, { site: siteName, season }),
  }));
  addCautions(flow, voice, say('verdicts:changes.title'), changes);
  const { result } = copy.snapshot;
  if (result.answer === 'no-trials') addNoVerdict(flow, copy, voice);
  else addAnswer(flow, copy, voice);
  addWhoToAsk(flow, copy, voice);
}

/** The title that names the copy, on its first page and in a viewer's window. */
export function sayTitle({ snapshot: { weighUp } }: PrintedCopy, { say, write }: CopyVoice): string {
  return say('copy:title', {
    crop: write.name(weighUp.cropName),
    region: write.name(weighUp.regionName),
    current: weighUp.currentVarietyName,
  });
}

function addTitle(flow: PageFlow, copy: PrintedCopy, voice: CopyVoice): void {
  const { say, write } = voice;
  const { weighUp, advisorName, madeAt } = copy.snapshot;
  const top = flow.y;
  const width = flow.width - codeSide - 16;
  const brand = `${say('common:productName')} · ${say('copy:readOnly')}`;
  addParagraph(flow, brand, { ...styles.small, weight: 'bold' }, { after: 5, width });
  addHeading(flow, 'H1', sayTitle(copy, voice), width);
  const about = say('copy:for', {
    grower: weighUp.growerName,
    farm: weighUp.farmName,
    area: write.area(weighUp.areaHectares),
    advisor: advisorName,
    date: write.date(madeAt),
  });
  addParagraph(flow, about, styles.small, { width });
  const x = flow.right - codeSide;
  flow.leaf('Figure', () => drawQrCode(flow.doc, copy.link, { x, y: top, side: codeSide }), {
    alt: say('print:qrCode'),
    bbox: [x, top, flow.right, top + codeSide],
    placement: 'Block',
  });
  flow.y = Math.max(flow.y, top + codeSide);
}

function addNoVerdict(flow: PageFlow, { snapshot }: PrintedCopy, { say, write }: CopyVoice): void {
  const { weighUp, result } = snapshot;
  const { cropName: crop, regionName: region, seasonFrom: from, seasonTo: to } = weighUp;
  const { title, why, next } = tellUnanswered({ crop, region, from, to }, result.leftOut, false, say, write);
  addHeading(flow, 'H2', title);
  addParagraph(flow, why);
  if (next !== null) addParagraph(flow, next);
}

function addAnswer(flow: PageFlow, copy: PrintedCopy, voice: CopyVoice): void {
  const { say } = voice;
  const { weighUp, result } = copy.snapshot;
  const { stops, others } = sortCautions(result);
  addCautions(flow, voice, say('verdicts:stopTitle'), voice.tellCautions(stops));
  const current = weighUp.currentVarietyName;
  addParagraph(
    flow,
    buildHeadline(result.candidates).map((part) => ({
      text: `${sayHeadline(part, current, voice.language, say)} `,
      ...(part.isLead && { weight: 'bold' as const }),
    })),
    styles.lead,
    { after: 2 },
  );
  if (result.best) {
    const currentVariety = { id: weighUp.currentVarietyId, name: current };
    for (const text of tellBest(result.best, currentVariety, voice.language, say)) addParagraph(flow, text);
  }
  addHeading(flow, 'H2', say('copy:axis', { current, unit: voice.write.unit(voice.unit) }));
  addStrip(flow, result.candidates, { weighUp, scale: copy.scale, voice });
  addStripKey(flow, result.candidates, voice);
  addParagraph(flow, tellPrices(weighUp.assumptions, say, voice.write), styles.small);
  addCautions(flow, voice, say('verdicts:cautionsTitle'), voice.tellCautions(others));
}

/** What stops the whole evidence is read before the verdict, not after it. */
function sortCautions({ cautions, candidates }: WeighUpResult) {
  return {
    stops: cautions.filter(({ severity }) => severity === 'stop'),
    others: [
      ...cautions.filter(({ severity }) => severity !== 'stop'),
      ...candidates.flatMap((candidate) => candidate.cautions),
    ],
  };
}

function addWhoToAsk(
  flow: PageFlow,
  { snapshot, expiresAt, link }: PrintedCopy,
  { say, write }: CopyVoice,
): void {
  const { advisorName: advisor, advisorEmail, advisorPhone, madeAt } = snapshot;
  const style = { ...styles.small, colour: inks.ink };
  // Kept together: whoever finds the question finds the answer's address beside it.
  flow.ensureRoom(5 * style.leading);
  flow.y += 3;
  addRule(flow);
  flow.y += 3;
  const question = { text: `${say('copy:question')} `, weight: 'bold' } as const;
  const email = { words: advisorEmail, target: `mailto:${advisorEmail}` };
  addLink(flow, [question, { text: `${say('copy:ask', { advisor })} ` }], email, style);
  if (advisorPhone !== null) {
    const phone = { words: advisorPhone, target: dialling(advisorPhone) };
    addLink(flow, [{ text: `${say('copy:orCall')} ` }], phone, style);
  }
  addLink(flow, [{ text: `${say('print:onScreen')} ` }], { words: link, target: link }, style);
  const dates = { date: write.date(madeAt), until: write.date(expiresAt) };
  addParagraph(flow, say('copy:frozen', dates), styles.small);
}
