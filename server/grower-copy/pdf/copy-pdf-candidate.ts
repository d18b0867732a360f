import { reachesBeyondRegion } from '#shared/evidence-reach.ts';
import { spanScale } from '#shared/gap-scale.ts';
import { gapRowOf } from '#shared/gap-rows.ts';
import { verdictTilts } from '#shared/beam-tilt.ts';
import { tellStory } from '#shared/story-sentences.ts';
import { findOtherTraits, nameTrait, sayDirection, tellTrait, verdictOn } from '#shared/trait-sentences.ts';
import type { CandidateResult, TrialGap } from '#shared/weigh-up.ts';
import {
  drawFigure,
  drawScale,
  drawWords,
  labelledTrackHeight,
  sayMoneyVerdict,
  sayTilted,
} from './copy-pdf-strip.ts';
import type { CopyVoice } from './copy-voice.ts';
import type { PageFlow } from './page-flow.ts';
import { addBullets, addHeading, addParagraph } from './pdf-blocks.ts';
import { addCautions } from './pdf-cautions.ts';
import { axisHeight, drawTrack, trackHeight } from './pdf-strip.ts';
import { addTable, type PdfColumn } from './pdf-table.ts';
import { inks, styles } from './pdf-text.ts';
import type { PrintedCopy } from './printed-copy.ts';

/** A candidate on a page of its own: verdicts, drawing, story, cautions, each trial, other traits. */
export function addCandidate(
  flow: PageFlow,
  candidate: CandidateResult,
  copy: PrintedCopy,
  voice: CopyVoice,
): void {
  const { weighUp } = copy.snapshot;
  const { say } = voice;
  const name = candidate.varietyName;
  addHeading(flow, 'H2', say('print:against', { name, current: weighUp.currentVarietyName }));
  addVerdicts(flow, candidate, voice);
  addOwnStrip(flow, candidate, copy, voice);
  const ground = {
    currentName: weighUp.currentVarietyName,
    money: weighUp.assumptions,
    areaHectares: weighUp.areaHectares,
  };
  for (const { title, paragraphs, items } of tellStory(candidate, ground, voice)) {
    addHeading(flow, 'H3', title);
    addParagraph(flow, paragraphs.join(' '), styles.body, { after: 1 });
    if (items.length > 0) addBullets(flow, items);
  }
  const cautions = voice.tellCautions(candidate.cautions);
  addCautions(flow, voice, say('verdicts:story.cautions', { name }), cautions, 'H3');
  addTrialLines(flow, candidate, copy, voice);
  addTraits(flow, candidate, copy, voice);
}

function addVerdicts(flow: PageFlow, candidate: CandidateResult, voice: CopyVoice): void {
  const { verdict } = candidate;
  const width = flow.width / 2;
  const { doc } = flow;
  const box = { x: flow.left, y: flow.y, width };
  const word = sayTilted(doc, voice.say(`common:verdict.${verdict}`), verdictTilts[verdict], width);
  drawWords(flow, [word], box, 'start');
  const money = sayMoneyVerdict(doc, candidate, voice, width);
  if (money) drawWords(flow, [money], { ...box, x: flow.left + width }, 'start');
  flow.y += styles.small.leading + 4;
}

function addOwnStrip(flow: PageFlow, candidate: CandidateResult, copy: PrintedCopy, voice: CopyVoice): void {
  const { weighUp } = copy.snapshot;
  const props = { weighUp, scale: copy.scale, voice };
  const box = { x: flow.left, y: flow.y, width: flow.width };
  flow.artifact(() => drawScale(flow, box, props));
  drawFigure(flow, gapRowOf(candidate), { ...box, y: flow.y + axisHeight + 2 }, props);
  flow.y += axisHeight + labelledTrackHeight + 4;
}

/** Poor sites first: so a candidate that is ahead only where yields are high is seen to turn. */
function addTrialLines(
  flow: PageFlow,
  candidate: CandidateResult,
  copy: PrintedCopy,
  { say, write, unit, decimals }: CopyVoice,
): void {
  const { weighUp, result } = copy.snapshot;
  const [name, current] = [candidate.varietyName, weighUp.currentVarietyName];
  const title = say('print:trialLines', { name, current });
  addHeading(flow, 'H3', title);
  const trials = [...candidate.trials].sort((a, b) => a.trialMean - b.trialMean);
  const [first] = trials;
  if (first === undefined) {
    addParagraph(flow, say('verdicts:story.noShared'));
    return;
  }
  const level = write.percent(first.interval.level * 100);
  const versions = new Map(result.trials.map((trial) => [trial.trialId, trial.version]));
  const columns: PdfColumn<TrialGap>[] = [
    {
      header: say('drawings:siteLines.trial'),
      share: 20,
      cell: ({ siteName, inRegion }) =>
        inRegion === false ? [siteName, say('drawings:siteLines.elsewhere')] : [siteName],
    },
    { header: say('drawings:siteLines.season'), share: 9, align: 'end', cell: ({ season }) => [`${season}`] },
    {
      header: say('method:column.version'),
      share: 11,
      align: 'end',
      cell: ({ trialId }) => [`${versions.get(trialId) ?? '–'}`],
    },
    {
      header: say('drawings:siteLines.meanYield'),
      share: 23,
      align: 'end',
      cell: ({ trialMean }) => [write.quantity(trialMean, unit, { decimals })],
    },
    {
      header: say('drawings:siteLines.gap'),
      share: 15,
      align: 'end',
      cell: ({ estimate }) => [write.gap(estimate, unit, decimals)],
    },
    {
      header: say('drawings:siteLines.interval', { level }),
      share: 22,
      align: 'end',
      cell: ({ interval }) => [say('drawings:gapStrip.fromTo', write.ends(interval, unit, decimals))],
    },
  ];
  const scale = spanScale(
    trials.flatMap(({ estimate, interval }) => [estimate, interval.low, interval.high]),
  );
  addTable(flow, columns, trials, title, {
    share: 24,
    draw: ({ estimate, interval }, { x, y, width, height }) => {
      const box = { x, y: y + (height - trackHeight) / 2, width };
      flow.doc.save().rect(x, y, width, height).clip();
      drawTrack(flow.doc, box, scale, { colour: inks.open, estimate, region: interval });
      flow.doc.restore();
    },
  });
  addParagraph(flow, say('print:trialLinesNote', { level }), styles.label);
}

function addTraits(
  flow: PageFlow,
  candidate: CandidateResult,
  { snapshot }: PrintedCopy,
  { say, write, language }: CopyVoice,
): void {
  const current = snapshot.weighUp.currentVarietyName;
  const traits = findOtherTraits(snapshot.traits, [candidate]);
  const title = say('verdicts:traits.title', { current });
  addHeading(flow, 'H3', title);
  if (traits.length === 0) {
    addParagraph(flow, say('verdicts:traits.empty'));
    return;
  }
  const rows = traits.map((trait) => {
    const verdict = verdictOn(candidate, trait);
    return { trait, verdict, words: tellTrait(verdict, trait, current, say, write) };
  });
  const level = rows.find(({ verdict }) => verdict?.gap)?.verdict?.gap?.region.level;
  const average = reachesBeyondRegion(candidate) ? 'drawings:gapStrip.sites' : 'drawings:gapStrip.region';
  type Row = (typeof rows)[number];
  const judge = ({ words }: Row): string => {
    if (words.kind !== 'gap') return '–';
    return say(words.verdict === null ? 'verdicts:traits.differs' : `common:verdict.${words.verdict}`);
  };
  const columns: PdfColumn<Row>[] = [
    {
      header: say('verdicts:traits.trait'),
      share: 32,
      cell: ({ trait }) =>
        [nameTrait(trait, language), sayDirection(trait, say)].filter((words) => words !== null),
    },
    {
      header: say('drawings:gapStrip.gap'),
      share: 32,
      cell: ({ words }) =>
        words.kind === 'gap'
          ? [words.gap]
          : words.kind === 'rating' && words.counts !== null
            ? [words.text, words.counts]
            : [words.text],
    },
    { header: say('drawings:gapStrip.verdict'), share: 22, cell: (row) => [judge(row)] },
    {
      header: level === undefined ? '–' : say(average, { level: write.percent(level * 100) }),
      share: 32,
      cell: ({ words }) => [words.kind === 'gap' && words.range !== null ? words.range : '–'],
    },
    {
      header: say('print:traitTrials'),
      share: 9,
      align: 'end',
      cell: ({ verdict }) => [write.number(verdict?.siteYears ?? 0)],
    },
  ];
  addTable(flow, columns, rows, title);
  if (traits.some((trait) => trait.kind === 'ordinal')) {
    addParagraph(flow, say('verdicts:traits.ratingNote'), styles.label);
  }
}
