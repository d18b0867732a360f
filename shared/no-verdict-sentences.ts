import type { BilingualName } from './catalogue.ts';
import type { Say } from './say-sentences.ts';
import type { LeftOutTrial } from './weigh-up.ts';
import type { FigureWriter } from './write-figures.ts';

/** What was asked of which there is no answer. */
export type UnansweredQuestion = { crop: BilingualName; region: BilingualName; from: number; to: number };

/** Why there is no verdict, and what helps; null where nothing does that the reader could do. */
export type NoVerdictWords = { title: string; why: string; next: string | null };

type NoVerdictKey = `verdicts:${'noTrials' | 'allTickedOff'}.${'title' | 'why' | 'next'}`;

type Write = Pick<FigureWriter, 'name'>;

const nameQuestion = ({ crop, region, from, to }: UnansweredQuestion, write: Write) => ({
  crop: write.name(crop),
  region: write.name(region),
  from,
  to,
});

/** A region without trials gets no verdict. */
export function tellNoTrials(
  question: UnansweredQuestion,
  say: Say<NoVerdictKey>,
  write: Write,
): NoVerdictWords {
  return {
    title: say('verdicts:noTrials.title'),
    why: say('verdicts:noTrials.why', nameQuestion(question, write)),
    next: say('verdicts:noTrials.next'),
  };
}

/**
 * Why a weigh-up has no answer: the region has no trials, or the advisor ticked off all it has.
 * @param canTakeBack whether the list of trials left out, with the way back into the figures, stands below
 */
export function tellUnanswered(
  question: UnansweredQuestion,
  leftOut: readonly LeftOutTrial[],
  canTakeBack: boolean,
  say: Say<NoVerdictKey>,
  write: Write,
): NoVerdictWords {
  const count = leftOut.filter(
    ({ reason, inRegion }) => reason === 'ticked-off' && inRegion !== false,
  ).length;
  if (count === 0) return tellNoTrials(question, say, write);
  return {
    title: say('verdicts:allTickedOff.title'),
    why: say('verdicts:allTickedOff.why', { ...nameQuestion(question, write), count }),
    next: canTakeBack ? say('verdicts:allTickedOff.next') : null,
  };
}
