import { reachesBeyondRegion } from './evidence-reach.ts';
import type { MoneyAssumptions, MoneyResult } from './money.ts';
import { decimalsFor, sayChance } from './format-number.ts';
import { sayFrequency } from './natural-frequency.ts';
import { saySeasons } from './say-seasons.ts';
import type { Say } from './say-sentences.ts';
import { findTurningPoints, type TurningPoint } from './turning-points.ts';
import type { CandidateResult } from './weigh-up.ts';
import type { FigureWriter } from './write-figures.ts';

type StoryKey =
  | `verdicts:story.${'gap' | 'noGap' | 'thinGap' | 'region' | 'regionSites' | 'ownSeason'}`
  | `verdicts:story.${'usualYield' | 'slopeReal' | 'slopeOpen'}`
  | `verdicts:story.${'luckFewer' | 'luckOneIn' | 'luckOfHundred' | 'settle' | 'settleFar'}`
  | `verdicts:story.${'extraMore' | 'extraLess' | 'extraSame' | 'shrunken' | 'return' | 'chance'}`
  | `verdicts:story.${'noMoney' | 'noChance' | 'turnPays' | 'turnCosts' | 'turnNone'}`
  | `verdicts:story.${'turnNoPrice' | 'turnPremium' | 'quality' | 'qualityUnknown'}`
  | `verdicts:story.${'netPriceUsual' | 'netPriceTrials' | 'spread' | 'stake' | 'noStake'}`
  | `verdicts:chanceInRegion.${'fewer' | 'whole' | 'more'}`
  | `verdicts:story.${'price' | 'gap' | 'seed'}${'Under' | 'Over'}`
  | `verdicts:story.${'trials' | 'luck' | 'worth' | 'turn'}`
  | `verdicts:seasons.${'fewer' | 'whole' | 'more'}`
  | 'verdicts:trialCount';

/** Whose voice tells a candidate, about what. */
export type StoryTeller = {
  say: Say<StoryKey>;
  write: FigureWriter;
  /** Stored unit of yield gaps, and the decimals that their errors support where they are read. */
  unit: string;
  decimals: number;
};

/** What a candidate's story hangs on besides the candidate. */
export type StoryGround = { currentName: string; money: MoneyAssumptions; areaHectares: number };

/** A part of a story: paragraphs, and the items of a list that the last of them announces. */
export type StoryPart = { title: string; paragraphs: string[]; items: string[] };

/** A candidate told in sentences with their numbers: evidence, luck, worth, and what would turn the answer. */
export function tellStory(candidate: CandidateResult, ground: StoryGround, teller: StoryTeller): StoryPart[] {
  const { say } = teller;
  const { gap, money, moneyGap, verdict } = candidate;
  const isThin = verdict === 'thin';
  const parts: StoryPart[] = [
    {
      title: say('verdicts:story.trials'),
      paragraphs: tellTrials(candidate, ground.currentName, teller),
      items: [],
    },
  ];
  if (gap && !isThin) {
    parts.push({
      title: say('verdicts:story.luck'),
      paragraphs: [sayLuck(gap.p, teller), ...tellSettling(candidate.siteYearsToSettle, teller)],
      items: [],
    });
  }
  parts.push({
    title: say('verdicts:story.worth'),
    paragraphs: tellWorth(candidate, ground, teller),
    items: [],
  });
  if (money && moneyGap && !isThin) {
    const turn = tellTurning(candidate.varietyName, money, moneyGap.estimate, ground.money, teller);
    parts.push({ title: say('verdicts:story.turn'), ...turn });
  }
  return parts;
}

function tellTrials(candidate: CandidateResult, current: string, teller: StoryTeller): string[] {
  const { say, write, unit, decimals } = teller;
  const { gap, varietyName: name } = candidate;
  const trials = say('verdicts:trialCount', { count: candidate.siteYears });
  if (gap === null) return [say('verdicts:story.noGap', { name, current })];
  const estimate = write.gap(gap.estimate, unit, decimals);
  if (candidate.verdict === 'thin') {
    return [say('verdicts:story.thinGap', { gap: estimate, current, trials })];
  }
  const shared = write.number(candidate.sharedSiteYears);
  return [
    say('verdicts:story.gap', { name, current, gap: estimate, trials, shared }),
    ...tellIntervals(candidate, teller),
    ...tellUsualYield(candidate, teller),
  ];
}

/** Both intervals in words, each with its level and what it is an interval of. */
export function tellIntervals(
  candidate: Pick<CandidateResult, 'gap' | 'trials' | 'isBeyondRegion'>,
  { say, write, unit, decimals }: StoryTeller,
): string[] {
  const { gap } = candidate;
  if (gap === null) return [];
  const region = say(
    reachesBeyondRegion(candidate) ? 'verdicts:story.regionSites' : 'verdicts:story.region',
    write.ends(gap.region, unit, decimals),
  );
  if (gap.ownSeason === null) return [region];
  return [region, say('verdicts:story.ownSeason', write.ends(gap.ownSeason, unit, decimals))];
}

/** A slope with a smaller p than this is said to be there. */
const slopeLevel = 0.05;

/** The gap where the grower's fields usually yield; nothing where the trials do not carry it, which a caution says. */
export function tellUsualYield(
  { gapAtUsualYield: read, gapLine: line }: Pick<CandidateResult, 'gapAtUsualYield' | 'gapLine'>,
  { say, write, unit, decimals }: StoryTeller,
): string[] {
  if (!read?.isCarried || !line) return [];
  const p = write.pValue(line.slopeP);
  // A slope has no unit of its own: so much more gap for each unit of yield, whichever that is.
  const slope = write.number(line.slope, { decimals: decimalsFor(line.slopeSe, ''), isSigned: true });
  return [
    say('verdicts:story.usualYield', {
      yield: write.quantity(read.usualYield, unit, { decimals: 1 }),
      trials: say('verdicts:trialCount', { count: line.trials }),
      gap: write.gap(read.estimate, unit, decimals),
      ...write.ends(read.interval, unit, decimals),
    }),
    line.slopeP < slopeLevel
      ? say('verdicts:story.slopeReal', { slope, unit: write.unit(unit), p })
      : say('verdicts:story.slopeOpen', { p }),
  ];
}

function sayLuck(p: number, { say, write }: StoryTeller): string {
  const { key, count } = sayFrequency(p);
  const number = write.number(count);
  if (key === 'fewer') return say('verdicts:story.luckFewer', { number });
  return say(key === 'oneIn' ? 'verdicts:story.luckOneIn' : 'verdicts:story.luckOfHundred', { number });
}

/** Beyond this many further site-years the server says only that there would be more. */
const mostSiteYears = 40;

function tellSettling(siteYears: number | null, { say }: StoryTeller): string[] {
  if (siteYears === null) return [];
  return siteYears > mostSiteYears
    ? [say('verdicts:story.settleFar')]
    : [say('verdicts:story.settle', { count: siteYears })];
}

function tellWorth(
  candidate: CandidateResult,
  { currentName: current, money, areaHectares }: StoryGround,
  teller: StoryTeller,
): string[] {
  const { say, write, unit, decimals } = teller;
  const { money: result, varietyName: name, moneyGap } = candidate;
  if (result === null) return [say('verdicts:story.noMoney')];
  const isThin = candidate.verdict === 'thin';
  const signed = (amount: number) => write.moneyPer(amount, money.currency, 'ha', { isSigned: true });
  const extra = result.extraCostPerHectare;
  const amount = write.moneyPer(Math.abs(extra), money.currency, 'ha');
  const isSame = amount === write.moneyPer(0, money.currency, 'ha');
  const extraWords = isSame ? 'extraSame' : extra > 0 ? 'extraMore' : 'extraLess';
  const sentences = [
    say(`verdicts:story.${extraWords}`, { name, current, amount }),
    ...tellNetPrices(result, { name, current, currency: money.currency }, teller),
    ...tellShrunken(candidate, teller),
  ];
  if (!isThin && moneyGap !== null) {
    sentences.push(
      say('verdicts:story.return', {
        gap: write.gap(moneyGap.estimate, unit, decimals),
        price: write.pricePer(money.priceMiddle, money.currency, 't'),
        amount: signed(result.returnPerHectare),
        low: signed(result.returnAtLowPrice),
        high: signed(result.returnAtHighPrice),
        total: write.money(result.returnPerHectare * areaHectares, money.currency, { isSigned: true }),
        area: write.area(areaHectares),
      }),
      ...tellSpread(result, { currency: money.currency, areaHectares }, teller),
    );
  }
  sentences.push(
    result.chancePays === null || isThin
      ? say('verdicts:story.noChance')
      : say('verdicts:story.chance', { seasons: saySeasons(result.chancePays, say) }),
  );
  if (!isThin && result.chanceInRegion != null) {
    const { key, count } = sayChance(result.chanceInRegion);
    sentences.push(say(`verdicts:chanceInRegion.${key}`, { number: write.number(count) }));
  }
  return sentences;
}

/** What quality is expected to bring, and on which yield unequal prices count; nothing where prices are alike. */
function tellNetPrices(
  { quality, netPrice, baseYield }: MoneyResult,
  { name, current, currency }: { name: string; current: string; currency: string },
  { say, write, unit }: StoryTeller,
): string[] {
  const perTonne = (amount: number, isSigned = false) =>
    write.moneyPer(amount, currency, 't', { decimals: 2, isSigned });
  const sentences: string[] = [];
  if (quality === 'unknown') sentences.push(say('verdicts:story.qualityUnknown', { name, current }));
  else if (quality) {
    const premiums = { own: perTonne(quality.candidate, true), other: perTonne(quality.current, true) };
    sentences.push(say('verdicts:story.quality', { name, current, ...premiums }));
  }
  if (netPrice && baseYield) {
    const source = baseYield.from === 'grower' ? 'netPriceUsual' : 'netPriceTrials';
    const prices = { own: perTonne(netPrice.candidate), other: perTonne(netPrice.current) };
    const yieldWords = write.quantity(baseYield.value, unit, { decimals: 1 });
    sentences.push(say(`verdicts:story.${source}`, { name, current, ...prices, yield: yieldWords }));
  }
  return sentences;
}

/** The mean of it all, the bad and the good season of ten, and what the bad one costs on the area. */
function tellSpread(
  { expectedReturn, badReturn, goodReturn }: MoneyResult,
  { currency, areaHectares }: { currency: string; areaHectares: number },
  { say, write }: StoryTeller,
): string[] {
  // Copies frozen before this was reckoned have none.
  if (expectedReturn == null || badReturn == null || goodReturn == null) return [];
  const perArea = (amount: number) => write.moneyPer(amount, currency, 'ha', { isSigned: true });
  const area = write.area(areaHectares);
  return [
    say('verdicts:story.spread', {
      expected: perArea(expectedReturn),
      bad: perArea(badReturn),
      good: perArea(goodReturn),
    }),
    badReturn < 0
      ? say('verdicts:story.stake', { area, amount: write.money(-badReturn * areaHectares, currency) })
      : say('verdicts:story.noStake', { area }),
  ];
}

/** Says on which gap the return is reckoned, where that is not the one drawn. */
function tellShrunken(
  { gap, moneyGap, verdict }: CandidateResult,
  { say, write, unit, decimals }: StoryTeller,
): string[] {
  if (gap === null || moneyGap === null || verdict === 'thin') return [];
  const reckoned = write.gap(moneyGap.estimate, unit, decimals);
  if (reckoned === write.gap(gap.estimate, unit, decimals)) return [];
  return [say('verdicts:story.shrunken', { gap: reckoned })];
}

/** What, changed alone, would turn the answer. */
function tellTurning(
  name: string,
  result: MoneyResult,
  estimate: number,
  assumed: MoneyAssumptions,
  { say, write, unit, decimals }: StoryTeller,
): { paragraphs: string[]; items: string[] } {
  const { pays, points } = findTurningPoints(result, estimate, assumed);
  if (points.length === 0) return { paragraphs: [say('verdicts:story.turnNone')], items: [] };
  const sayPoint = ({ kind, side, value }: TurningPoint): string => {
    const key = `verdicts:story.${kind}${side === 'under' ? 'Under' : 'Over'}` as const;
    if (kind === 'price') return say(key, { price: write.moneyPer(value, assumed.currency, 't') });
    if (kind === 'gap') return say(key, { gap: write.gap(value, unit, decimals) });
    return say(key, { amount: write.moneyPer(value, assumed.currency, 'ha'), name });
  };
  const paragraphs: string[] = [];
  if (!points.some(({ kind }) => kind === 'price')) paragraphs.push(say('verdicts:story.turnNoPrice'));
  else if (result.quality && result.quality !== 'unknown') {
    paragraphs.push(say('verdicts:story.turnPremium'));
  }
  paragraphs.push(say(pays ? 'verdicts:story.turnPays' : 'verdicts:story.turnCosts'));
  return { paragraphs, items: points.map(sayPoint) };
}
