import { memo } from 'react';
import { useTranslation } from 'react-i18next';
import { tellIntervals, tellStory, type StoryGround } from '#shared/story-sentences.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

export type StoryProps = StoryGround & { candidate: CandidateResult; unit: string; decimals: number };

/** A candidate told in sentences with their numbers: evidence, luck, worth, and what would turn the answer. */
export function CandidateStory({ candidate, unit, decimals, ...ground }: StoryProps) {
  const { t: say } = useTranslation(['verdicts']);
  const write = useFormat();
  return (
    <div className="flex max-w-prose flex-col gap-4 print:gap-2">
      {tellStory(candidate, ground, { say, write, unit, decimals }).map(({ title, paragraphs, items }) => (
        <section key={title} className="flex flex-col gap-1 print:block">
          <h3>{title}</h3>
          {paragraphs.map((paragraph) => (
            // On paper, where room is dear, they run on as one.
            <p key={paragraph} className="print:inline">
              {paragraph}{' '}
            </p>
          ))}
          {items.length > 0 && (
            <ul className="list-disc pl-5">
              {items.map((item) => (
                <li key={item}>{item}</li>
              ))}
            </ul>
          )}
        </section>
      ))}
    </div>
  );
}

type IntervalSentencesProps = Pick<CandidateResult, 'gap' | 'trials'> & {
  unit: string;
  decimals: number;
};

/** Both intervals in words, each with its level and what it is an interval of; no price bears on them. */
export const IntervalSentences = memo(function IntervalSentences(props: IntervalSentencesProps) {
  const { gap, trials, unit, decimals } = props;
  const { t: say } = useTranslation(['verdicts']);
  const write = useFormat();
  return tellIntervals({ gap, trials }, { say, write, unit, decimals }).map((sentence) => (
    <p key={sentence}>{sentence}</p>
  ));
});
