import { reachesBeyondRegion } from './evidence-reach.ts';
import { spanScale, type Scale } from './gap-scale.ts';
import type { Say } from './say-sentences.ts';
import type { Interval, VerdictCode } from './verdict.ts';
import type { CandidateResult } from './weigh-up.ts';
import type { FigureWriter } from './write-figures.ts';

/** What is drawn of one candidate; all gaps in the unit of the trait. */
export type GapRow = {
  name: string;
  verdict: VerdictCode;
  /** Candidate minus current, in t/ha as everything drawn; null where the data give none. */
  estimate: number | null;
  /** For the region's average, or for that over the sites of the trials. */
  region: Interval | null;
  /** Whether trials of other regions are among them. */
  isBeyondRegion?: boolean;
  /** For the grower's own next season. */
  ownSeason: Interval | null;
  /** Gap from which the candidate pays; null without costs. */
  breakEven: number | null;
};

/** A candidate as the drawing needs it. Too few trials for a verdict are too few for an interval: none is shown. */
export function gapRowOf(candidate: CandidateResult): GapRow {
  const { varietyName, verdict, gap, money } = candidate;
  const isThin = verdict === 'thin';
  return {
    name: varietyName,
    verdict,
    estimate: gap?.estimate ?? null,
    region: isThin ? null : (gap?.region ?? null),
    isBeyondRegion: reachesBeyondRegion(candidate),
    ownSeason: isThin ? null : (gap?.ownSeason ?? null),
    breakEven: money?.breakEvenGap ?? null,
  };
}

/**
 * One scale that holds every row's estimate and intervals. A break-even gap far beyond them is left off the scale, so that
 * one absurd cost does not press all rows together: its label then stands at the edge, with an arrow.
 */
export function scaleOfRows(rows: readonly GapRow[]): Scale {
  const gaps = rows
    .flatMap((row) => [
      row.estimate,
      row.region?.low,
      row.region?.high,
      row.ownSeason?.low,
      row.ownSeason?.high,
    ])
    .filter((value) => typeof value === 'number');
  const { low, high } = spanScale(gaps);
  const reach = (high - low) / 2;
  const breakEvens = rows
    .map((row) => row.breakEven)
    .filter((value) => value !== null)
    .filter((value) => gaps.length === 0 || (value >= low - reach && value <= high + reach));
  return spanScale([...gaps, ...breakEvens]);
}

type GapKey =
  | 'drawings:gapStrip.sentence'
  | `drawings:gapStrip.sentence${'Region' | 'Sites' | 'OwnSeason' | 'Thin' | 'BreakEven' | 'NoEstimate'}`;

/** Says a row in words: what stands for the drawing where it is not seen. */
export function sayGapRow(
  { name, estimate, region, isBeyondRegion, ownSeason, verdict, breakEven }: GapRow,
  current: string,
  { unit, decimals }: { unit: string; decimals: number },
  say: Say<GapKey>,
  write: FigureWriter,
): string {
  if (estimate === null) return say('drawings:gapStrip.sentenceNoEstimate', { name, current });
  const gap = (value: number) => write.gap(value, unit, decimals);
  const ends = ({ low, high, level }: Interval) => ({
    low: gap(low),
    high: gap(high),
    level: write.percent(level * 100),
  });
  const parts = [say('drawings:gapStrip.sentence', { name, current, gap: gap(estimate) })];
  if (region) {
    const key = isBeyondRegion ? 'sentenceSites' : 'sentenceRegion';
    parts.push(say(`drawings:gapStrip.${key}`, ends(region)));
  }
  if (ownSeason) parts.push(say('drawings:gapStrip.sentenceOwnSeason', ends(ownSeason)));
  if (verdict === 'thin') parts.push(say('drawings:gapStrip.sentenceThin'));
  if (breakEven !== null) parts.push(say('drawings:gapStrip.sentenceBreakEven', { gap: gap(breakEven) }));
  return parts.join(' ');
}
