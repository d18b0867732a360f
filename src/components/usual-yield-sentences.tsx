import { useTranslation } from 'react-i18next';
import { tellUsualYield } from '#shared/story-sentences.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { useFormat } from './use-format.ts';

type UsualYieldSentencesProps = { candidate: CandidateResult; unit: string; decimals: number };

/** The gap where the grower's fields usually yield; nothing where the trials do not carry it, which a caution says. */
export function UsualYieldSentences({ candidate, unit, decimals }: UsualYieldSentencesProps) {
  const { t: say } = useTranslation(['verdicts']);
  const write = useFormat();
  return tellUsualYield(candidate, { say, write, unit, decimals }).map((sentence) => (
    <p key={sentence}>{sentence}</p>
  ));
}
