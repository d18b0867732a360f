import { gapRowOf } from '#shared/gap-rows.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { breakLines, drawLines, inks, styles } from './pdf-text.ts';

type Entry = { words: string; sampleWidth: number; draw: (x: number, middle: number) => void };

/** From a sample to its words, and from one entry to the next, points. */
const wordGap = 5;
const entryGap = 14;

/** What each kind of mark stands for; only those that occur. */
export function addStripKey(
  flow: PageFlow,
  candidates: readonly CandidateResult[],
  { say, write }: CopyVoice,
): void {
  const { doc } = flow;
  const rows = candidates.map(gapRowOf);
  const shown = rows.find((row) => row.region);
  const region = shown?.region;
  const ownSeason = rows.find((row) => row.ownSeason)?.ownSeason;
  const level = (interval: { level: number }) => ({ level: write.percent(interval.level * 100) });
  const line = (x: number, middle: number) => doc.moveTo(x, middle - 5).lineTo(x, middle + 5);
  const entries: Entry[] = [
    {
      words: say('drawings:gapStrip.legendEstimate'),
      sampleWidth: 4,
      draw: (x, middle) =>
        line(x + 2, middle)
          .lineWidth(2)
          .strokeColor(inks.ink)
          .stroke(),
    },
  ];
  if (region) {
    entries.push({
      words: say(
        shown.isBeyondRegion ? 'drawings:gapStrip.legendSites' : 'drawings:gapStrip.legendRegion',
        level(region),
      ),
      sampleWidth: 20,
      draw: (x, middle) => doc.rect(x, middle - 3.5, 20, 7).fill(inks.open),
    });
  }
  if (ownSeason) {
    entries.push({
      words: say('drawings:gapStrip.legendOwnSeason', level(ownSeason)),
      sampleWidth: 20,
      draw: (x, middle) => {
        doc
          .roundedRect(x, middle - 4.5, 20, 9, 4.5)
          .lineWidth(0.6)
          .fillOpacity(0.16)
          .strokeOpacity(0.75);
        doc.fillAndStroke(inks.open, inks.open).fillOpacity(1).strokeOpacity(1);
      },
    });
  }
  if (rows.some((row) => row.breakEven !== null)) {
    entries.push({
      words: say('drawings:gapStrip.legendBreakEven'),
      sampleWidth: 4,
      draw: (x, middle) => {
        doc.dash(3, { space: 2.4 });
        line(x + 2, middle)
          .lineWidth(1.2)
          .strokeColor(inks.breakEven)
          .stroke();
        doc.undash();
      },
    });
  }
  drawEntries(flow, entries);
}

function drawEntries(flow: PageFlow, entries: readonly Entry[]): void {
  const style = styles.label;
  flow.y += 4;
  let x = flow.left;
  flow.ensureRoom(style.leading);
  for (const { words, sampleWidth, draw } of entries) {
    const lines = breakLines(flow.doc, words, style, flow.width - sampleWidth - wordGap);
    const width = sampleWidth + wordGap + Math.max(...lines.map((line) => line.width));
    if (x > flow.left && x + width > flow.right) {
      x = flow.left;
      flow.y += style.leading + 1;
      flow.ensureRoom(style.leading);
    }
    const start = x;
    flow.artifact(() => draw(start, flow.y + style.leading / 2));
    flow.leaf('P', () =>
      drawLines(flow.doc, lines, { x: start + sampleWidth + wordGap, y: flow.y, width }, style),
    );
    x += width + entryGap;
  }
  flow.y += style.leading + 4;
}
