import { tellMethod } from '#shared/method-sentences.ts';
import type { LeftOutTrial, UsedTrial } from '#shared/weigh-up.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { addBullets, addHeading, addParagraph } from './pdf-blocks.ts';
import { addTable, type PdfColumn } from './pdf-table.ts';
import { styles } from './pdf-text.ts';
import type { PrintedCopy } from './printed-copy.ts';

/** How the figures were made, the trials behind them, and those left out with the reason. */
export function addEvidence(flow: PageFlow, { snapshot: { result } }: PrintedCopy, voice: CopyVoice): void {
  const { say, write } = voice;
  if (result.answer !== 'no-trials') {
    addHeading(flow, 'H2', say('copy:howTitle'));
    for (const { kind, text, items } of tellMethod(result, say, write)) {
      addParagraph(flow, text, kind === 'mark' ? styles.small : styles.body);
      if (items.length > 0) addBullets(flow, items);
    }
  }
  const columns = usedColumns(voice);
  addHeading(flow, 'H2', say('print:evidence'));
  if (result.trials.length > 0) {
    addHeading(flow, 'H3', say('method:trialsUsed'));
    addTable(flow, columns, result.trials, say('method:trialsUsedCaption'));
  }
  addHeading(flow, 'H3', say('method:leftOut'));
  if (result.leftOut.length === 0) {
    addParagraph(flow, say('method:nothingLeftOut'));
    return;
  }
  const reason: PdfColumn<LeftOutTrial> = {
    header: say('method:column.reason'),
    share: 34,
    cell: (trial) => [
      say(`method:reason.${trial.reason}`),
      ...(trial.reasonText ? [say('method:reasonWords', { words: trial.reasonText })] : []),
    ],
  };
  addTable(flow, [...columns, reason], result.leftOut, say('method:leftOutCaption'));
}

function usedColumns({ say, write, unit }: CopyVoice): PdfColumn<UsedTrial>[] {
  return [
    {
      header: say('method:column.trial'),
      share: 40,
      cell: ({ siteName, name, inRegion, regionName }) => [
        siteName,
        name,
        ...(inRegion === false && regionName
          ? [say('method:elsewhere', { region: write.name(regionName) })]
          : []),
      ],
    },
    { header: say('method:column.season'), share: 10, align: 'end', cell: ({ season }) => [`${season}`] },
    {
      header: say('method:column.mean'),
      share: 16,
      align: 'end',
      cell: ({ meanYield }) => [meanYield === null ? '–' : write.quantity(meanYield, unit, { decimals: 2 })],
    },
    {
      header: say('method:column.cv'),
      share: 10,
      align: 'end',
      cell: ({ cvPercent }) => [cvPercent === null ? '–' : write.percent(cvPercent, { decimals: 1 })],
    },
    {
      header: say('method:column.version'),
      share: 14,
      align: 'end',
      cell: ({ version }) => [say('method:versionOf', { version })],
    },
  ];
}
