import { z } from 'zod';
import { bilingualName } from './catalogue.ts';
import { caution } from './caution.ts';
import { defineContract } from './contract.ts';
import { decisionLine } from './decision.ts';
import { farmAnswer, farmInput, farmQuery, farmRange, hasPlaceForChoice, isWholePlace } from './farm.ts';
import { currentLevel, gapDistribution, moneyAssumptions, moneyInput, moneyResult } from './money.ts';
import { bestOfList, isPairOfOne, questionKind } from './question-kind.ts';
import { interval, verdictCode } from './verdict.ts';

/** The gap of a candidate to the current variety in one trait; units are the trait's. */
export const gapEstimate = z.object({
  /** Candidate minus current, by the model. */
  estimate: z.number(),
  se: z.number(),
  df: z.number(),
  /** p of "no gap", under the comparison the question calls for. */
  p: z.number(),
  /** For the region's average over seasons, widened for the number of candidates where several are compared. */
  region: interval,
  /** For the grower's own next season. */
  ownSeason: interval.extend({ se: z.number(), df: z.number() }).nullable(),
  /** Pulled back towards no gap for having been picked from a list. */
  shrunken: z.number().nullable(),
  /**
   * What is left to know of the shrunken gap, as standard errors for the region's average and for the grower's own next
   * season: they go with it, those above with the estimate. Left out in copies frozen before.
   */
  shrunkenSe: z.object({ region: z.number(), ownSeason: z.number() }).nullish(),
});
export type GapEstimate = z.infer<typeof gapEstimate>;

/** One trial in which both varieties stood. */
export const trialGap = z.object({
  trialId: z.uuid(),
  siteName: z.string(),
  season: z.number().int(),
  /** Mean yield of the trial, t/ha: the lines are sorted by it. */
  trialMean: z.number(),
  estimate: z.number(),
  interval,
  /** False for a trial that stood in another region than the question's. */
  inRegion: z.boolean().optional(),
});
export type TrialGap = z.infer<typeof trialGap>;

export const traitVerdict = z.object({
  traitSlug: z.string(),
  kind: z.enum(['numeric', 'ordinal']),
  verdict: verdictCode.nullable(),
  gap: gapEstimate.nullable(),
  siteYears: z.number().int(),
  /** Ordinal ratings: medians and trials, no verdict. */
  medianCandidate: z.number().nullable(),
  medianCurrent: z.number().nullable(),
  /** Trials in which both were rated, and in how many of them the candidate's rating was the lower or the higher. */
  rated: z.object({ trials: z.number().int(), lower: z.number().int(), higher: z.number().int() }).optional(),
});
export type TraitVerdict = z.infer<typeof traitVerdict>;

/** The gap as a line over the trials' mean yields, t/ha: at the centre, gap and slope are uncorrelated. */
export const gapLine = z.object({
  trials: z.number().int(),
  centre: z.number(),
  gapAtCentre: z.number(),
  gapSe: z.number(),
  /** t/ha of gap per t/ha of mean yield */
  slope: z.number(),
  slopeSe: z.number(),
  df: z.number(),
  /** p of "the gap is the same on low- and high-yielding fields". */
  slopeP: z.number(),
  /** variance of the true gaps about the line */
  tau2: z.number(),
  /** The span of the trials' mean yields. */
  from: z.number(),
  to: z.number(),
});
export type GapLine = z.infer<typeof gapLine>;

/** The gap read off that line over the trials' mean yields, at the yield that the grower usually gets; t/ha. */
export const gapAtYield = z.object({
  usualYield: z.number(),
  estimate: z.number(),
  se: z.number(),
  df: z.number(),
  interval,
  /** False where the usual yield lies outside the span of the trials' mean yields: then the line is not to be read there. */
  isCarried: z.boolean(),
});
export type GapAtYield = z.infer<typeof gapAtYield>;

export const candidateResult = z.object({
  varietyId: z.uuid(),
  varietyName: z.string(),
  verdict: verdictCode,
  gap: gapEstimate.nullable(),
  /** Trials in which the candidate stood, and those it shared with the current variety. */
  siteYears: z.number().int(),
  sharedSiteYears: z.number().int(),
  /**
   * The gap that money is reckoned on, as it may come out on the grower's own land in another season: shrunken, since
   * candidates are picked from a list; null where the evidence is too thin to judge. The page recomputes with it: weighMoney(candidate, basis, money).
   */
  moneyGap: gapDistribution.nullable(),
  /** True where trials of other regions stand behind the figures as well; absent in older copies. */
  isBeyondRegion: z.boolean().optional(),
  /** The same for the region's average over seasons; left out in copies frozen before. */
  moneyGapInRegion: gapDistribution.nullish(),
  money: moneyResult.nullable(),
  /** Further site-years at which the present gap would be settled; 41 stands for "more than 40"; null where it is settled. */
  siteYearsToSettle: z.number().int().nullable(),
  /** Verdict with the usual variances halved and doubled; null without usual variances, and in older copies. */
  sensitivity: z.object({ half: verdictCode.nullable(), double: verdictCode.nullable() }).nullish(),
  /** null where too few trials held both, or all of them yielded alike. */
  gapLine: gapLine.nullish(),
  /** null where no usual yield was given or no line could be fitted; absent in answers made before it was asked. */
  gapAtUsualYield: gapAtYield.nullish(),
  trials: z.array(trialGap),
  traits: z.array(traitVerdict),
  cautions: z.array(caution),
});
export type CandidateResult = z.infer<typeof candidateResult>;

export const usedTrial = z.object({
  trialId: z.uuid(),
  name: z.string(),
  siteName: z.string(),
  season: z.number().int(),
  version: z.number().int(),
  sha256: z.string(),
  meanYield: z.number().nullable(),
  cvPercent: z.number().nullable(),
  /** False for a trial that stood in another region than the question's, with that region's name. */
  inRegion: z.boolean().optional(),
  regionName: bilingualName.optional(),
});
export type UsedTrial = z.infer<typeof usedTrial>;

export const leftOutTrial = usedTrial.extend({
  reason: z.enum(['weak-cv', 'no-variance', 'not-connected', 'set-aside', 'ticked-off']),
  /** The advisor's words where the trial was ticked off. */
  reasonText: z.string().optional(),
});
export type LeftOutTrial = z.infer<typeof leftOutTrial>;

/** A trial that the advisor takes out of a weigh-up, and why. */
export const tickedOffTrial = z.object({ trialId: z.uuid(), reason: z.string().trim().min(1).max(500) });
export type TickedOffTrial = z.infer<typeof tickedOffTrial>;

export const weighUpResult = z.object({
  /** no-trials: the region has none of the crop in these seasons, so there is no verdict at all. */
  answer: z.enum(['weighed', 'no-trials']),
  computedAt: z.iso.datetime(),
  engineVersion: z.string(),
  /** What was asked, which decides the comparison; absent in answers made before there was a choice. */
  question: questionKind.optional(),
  /** Comparison used, said in one sentence on the page. */
  comparison: z.enum(['dunnett', 'lsd']),
  /** For the question about the best of the list: which of it can be; null where the evidence judges no two of it. */
  best: bestOfList.nullish(),
  sites: z.number().int(),
  seasons: z.array(z.number().int()),
  trials: z.array(usedTrial),
  leftOut: z.array(leftOutTrial),
  /** Standard deviations of variety × site, × season and rest, t/ha, with where they came from. */
  components: z.object({ site: z.number(), season: z.number(), rest: z.number() }).nullable(),
  /**
   * How much varieties moved in these trials against what is usual, as a ratio of standard deviations; null without
   * usual variances, absent in answers from before it was told.
   */
  usualFactor: z.number().nullish(),
  usualVariancesFrom: z.enum(['crop-default', 'own-trials']).nullable(),
  /** When the organisation's own were estimated; a copy frozen before this was told has none. */
  usualVariancesAt: z.iso.datetime().nullish(),
  /** How the farm lies to the sites of the trials used; null where nobody has said where the farm is. */
  farmRange: farmRange.nullish(),
  /** What the current variety gives in these trials, yield and numeric traits; left out in copies frozen before. */
  currentLevels: z.array(currentLevel).nullish(),
  candidates: z.array(candidateResult),
  cautions: z.array(caution),
});
export type WeighUpResult = z.infer<typeof weighUpResult>;

const seasonSpan = {
  seasonFrom: z.coerce.number().int().min(1900).max(2200),
  seasonTo: z.coerce.number().int().min(1900).max(2200),
};

export const weighUpInput = z
  .object({
    cropId: z.uuid(),
    regionId: z.uuid(),
    ...seasonSpan,
    growerName: z.string().trim().min(1).max(120),
    farmName: z.string().trim().min(1).max(120),
    areaHectares: z.number().positive().max(100_000),
    currentVarietyId: z.uuid(),
    candidateIds: z.array(z.uuid()).min(1).max(8),
    /** Left out, several candidates are compared. */
    question: questionKind.optional(),
    assumptions: moneyInput,
    ...farmInput,
  })
  .refine(isPairOfOne, { path: ['question'], message: 'pair-of-one' })
  .refine(isWholePlace, { path: ['farmLongitude'], message: 'half-a-place' })
  .refine(hasPlaceForChoice, { path: ['trialChoice'], message: 'nearest-needs-farm' })
  .refine((input) => input.seasonFrom <= input.seasonTo, { path: ['seasonTo'], message: 'season-order' })
  .refine((input) => new Set(input.candidateIds).size === input.candidateIds.length, {
    path: ['candidateIds'],
    message: 'candidate-twice',
  })
  .refine((input) => !input.candidateIds.includes(input.currentVarietyId), {
    path: ['candidateIds'],
    message: 'candidate-is-current',
  });
export type WeighUpInput = z.infer<typeof weighUpInput>;

export const weighUp = z.object({
  id: z.uuid(),
  revision: z.number().int(),
  ownerName: z.string(),
  cropId: z.uuid(),
  cropName: bilingualName,
  regionId: z.uuid(),
  regionName: bilingualName,
  seasonFrom: z.number().int(),
  seasonTo: z.number().int(),
  growerName: z.string(),
  farmName: z.string(),
  areaHectares: z.number(),
  currentVarietyId: z.uuid(),
  currentVarietyName: z.string(),
  candidateIds: z.array(z.uuid()),
  question: questionKind.default('several'),
  assumptions: moneyAssumptions,
  ...farmAnswer,
  tickedOff: z.array(tickedOffTrial).default([]),
  createdAt: z.iso.datetime(),
  updatedAt: z.iso.datetime(),
});
export type WeighUp = z.infer<typeof weighUp>;

export const weighUpLine = z.object({
  id: z.uuid(),
  cropName: bilingualName,
  regionName: bilingualName,
  growerName: z.string(),
  farmName: z.string(),
  currentVarietyName: z.string(),
  candidates: z.number().int(),
  seasonFrom: z.number().int(),
  seasonTo: z.number().int(),
  decision: decisionLine.nullable(),
  archivedAt: z.iso.datetime().nullable(),
  updatedAt: z.iso.datetime(),
});
export type WeighUpLine = z.infer<typeof weighUpLine>;

export const candidateQuery = z
  .object({
    cropId: z.uuid(),
    regionId: z.uuid(),
    currentVarietyId: z.uuid(),
    ...seasonSpan,
    ...farmQuery,
  })
  .refine(isWholePlace, { path: ['farmLongitude'], message: 'half-a-place' })
  .refine(hasPlaceForChoice, { path: ['trialChoice'], message: 'nearest-needs-farm' });

/** All varieties of the crop with trials in the region (or those chosen instead), each weighed against the current one, largest gap first. */
export const listCandidates = defineContract({
  method: 'GET',
  path: '/api/candidates',
  access: ['advisor', 'agronomist'],
  query: candidateQuery,
  reply: z.object({ result: weighUpResult, assumptions: moneyAssumptions.nullable() }),
});

export const listWeighUps = defineContract({
  method: 'GET',
  path: '/api/weigh-ups',
  access: ['advisor', 'agronomist'],
  reply: z.object({ weighUps: z.array(weighUpLine) }),
});

/** Stores a question; the draft that it was written in is gone with that. */
export const createWeighUp = defineContract({
  method: 'POST',
  path: '/api/weigh-ups',
  access: ['advisor', 'agronomist'],
  query: z.object({ draftId: z.uuid().optional() }),
  body: weighUpInput,
  reply: z.object({ weighUp }),
});

const weighUpParams = z.object({ weighUpId: z.uuid() });

export const readWeighUp = defineContract({
  method: 'GET',
  path: '/api/weigh-ups/:weighUpId',
  access: ['advisor', 'agronomist'],
  params: weighUpParams,
  reply: z.object({ weighUp, result: weighUpResult }),
});

/** Saves the whole question; `revision-conflict` when somebody saved in between. */
export const changeWeighUp = defineContract({
  method: 'PUT',
  path: '/api/weigh-ups/:weighUpId',
  access: ['advisor', 'agronomist'],
  params: weighUpParams,
  body: z.object({ revision: z.number().int(), weighUp: weighUpInput }),
  reply: z.object({ weighUp, result: weighUpResult }),
});
