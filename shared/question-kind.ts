import { z } from 'zod';
import { interval } from './verdict.ts';

/**
 * How a question compares: several: these candidates against the current variety, all at once; pair: one candidate,
 * chosen before its results were looked at; best: the best of the list of all varieties that stood in the trials.
 */
export const questionKinds = ['several', 'pair', 'best'] as const;
export const questionKind = z.enum(questionKinds);
export type QuestionKind = z.infer<typeof questionKind>;

/** Two candidates are not one planned pair. */
export const isPairOfOne = (asked: {
  question?: QuestionKind | undefined;
  candidateIds: readonly string[];
}): boolean => asked.question !== 'pair' || asked.candidateIds.length === 1;

/** One variety of a list against the best of the others, for the region's average over seasons; t/ha. */
export const bestStanding = z.object({
  varietyId: z.uuid(),
  varietyName: z.string(),
  /** Its mean less the best of the others'. */
  estimate: z.number(),
  /** Holds for the whole list at once; an end of 0 decides. */
  interval,
  /** False: shown not to be the best. */
  mayBeBest: z.boolean(),
  /** True: it alone is shown to be the best. */
  isBest: z.boolean(),
});
export type BestStanding = z.infer<typeof bestStanding>;

/** Which of a list can be the best, the current variety among them. */
export const bestOfList = z.object({
  /** Best first. */
  standings: z.array(bestStanding),
  /** Names of those with too few trials to be ruled in or out. */
  thin: z.array(z.string()),
});
export type BestOfList = z.infer<typeof bestOfList>;
