import { errorOfStandings, sayStanding } from '#shared/best-sentences.ts';
import { tellMethod } from '#shared/method-sentences.ts';
import type { BestStanding } from '#shared/question-kind.ts';
import type { LeftOutTrial, UsedTrial } from '#shared/weigh-up.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { addBullets, addHeading, addParagraph } from './pdf-blocks.ts';
import { addTable, type PdfColumn } from './pdf-table.ts';
import { styles } from './pdf-text.ts';
import type { PrintedCopy } from './printed-copy.ts';

/** Who can be the best of the list, where that was asked; how the figures were made, the trials behind them, and those left out. */
export function addEvidence(flow: PageFlow, { snapshot: { result } }: PrintedCopy, voice: CopyVoice): void {
  const { say, write } = voice;
  if (result.answer !== 'no-trials') {
    if (result.best) addStandings(flow, result.best.standings, voice);
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

/** Each variety of the list against the best of the others: what the sentences on the first page rest on. */
function addStandings(
  flow: PageFlow,
  standings: readonly BestStanding[],
  { say, write, unit }: CopyVoice,
): void {
  const [first] = standings;
  if (first === undefined) return;
  const decimals = write.decimals(errorOfStandings(standings), unit);
  const title = say('verdicts:best.show');
  const columns: PdfColumn<BestStanding>[] = [
    { header: say('verdicts:best.variety'), share: 26, cell: ({ varietyName }) => [varietyName] },
    {
      header: say('verdicts:best.gap'),
      share: 24,
      align: 'end',
      cell: ({ estimate }) => [write.gap(estimate, unit, decimals)],
    },
    {
      header: say('verdicts:best.interval', { level: write.percent(first.interval.level * 100) }),
      share: 26,
      align: 'end',
      cell: ({ interval }) => [say('drawings:gapStrip.fromTo', write.ends(interval, unit, decimals))],
    },
    {
      header: say('verdicts:best.verdict'),
      share: 24,
      cell: (standing) => [sayStanding(standing, say)],
    },
  ];
  addHeading(flow, 'H2', title);
  addTable(flow, columns, standings, title);
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
