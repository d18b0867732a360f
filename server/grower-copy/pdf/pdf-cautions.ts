import type { CautionSeverity } from '#shared/caution.ts';
import { sortByGravity, type CautionSentence } from '#shared/caution-sentences.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { addHeading } from './pdf-blocks.ts';
import { breakLines, inks, styles } from './pdf-text.ts';

const tones: Record<CautionSeverity, string> = {
  stop: inks.stop,
  warning: inks.breakEven,
  note: inks.faded,
};

/** From the bar beside a caution to its words, and from one caution to the next, points. */
const indent = 8;
const gap = 1.6;

/** Where the evidence stops: whole, gravest first, each with its word and a bar beside it. */
export function addCautions(
  flow: PageFlow,
  { say }: CopyVoice,
  title: string,
  cautions: readonly CautionSentence[],
  level: 'H2' | 'H3' = 'H2',
): void {
  if (cautions.length === 0) return;
  addHeading(flow, level, title);
  flow.group('L', () => {
    for (const { severity, text } of sortByGravity(cautions)) {
      const tone = tones[severity];
      const pieces = [
        { text: `${say(`common:severity.${severity}`)} `, weight: 'bold', colour: tone } as const,
        { text },
      ];
      const style = { ...styles.small, colour: inks.ink };
      const width = flow.width - indent;
      const lines = breakLines(flow.doc, pieces, style, width);
      flow.ensureRoom(lines.length * style.leading);
      const top = flow.y;
      flow.group('LI', () =>
        flow.leaf('LBody', () => flow.writeLines(lines, style, { x: flow.left + indent, width })),
      );
      flow.artifact(() => {
        flow.doc.rect(flow.left, top + 1, 2, flow.y - top - 2).fill(tone);
      });
      flow.y += gap;
    }
  });
}
