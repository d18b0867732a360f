import { AnalysisError } from '#server/stats/analysis-error.ts';
import { selectTrials } from './choose-evidence.ts';
import { cautionNoTrialInRegion } from './evidence-cautions.ts';
import type { EvidenceNetwork, WeighQuestion } from './weigh-question.ts';
import type { WeighedCandidates } from './weigh-result.ts';
import { weighTrait } from './weigh-trait.ts';

/**
 * Weighs candidates against the current variety, trait by trait: gap with both targets' uncertainty, verdict, cautions.
 * Pure: the same network and question give the same answer, JSON-serialisable, in the units of the traits.
 * @throws AnalysisError bad-option (current among the candidates, a candidate twice), and what frameNetwork throws
 */
export function weighCandidates(network: EvidenceNetwork, question: WeighQuestion): WeighedCandidates {
  if (question.candidates.includes(question.current))
    throw new AnalysisError('bad-option', 'the current variety is among the candidates');
  if (new Set(question.candidates).size !== question.candidates.length)
    throw new AnalysisError('bad-option', 'a candidate is named twice');
  const trials = selectTrials(network.trials, question);
  const mayAnswer = question.acceptsOtherRegions === true || trials.some(({ inRegion }) => inRegion);
  if (trials.length === 0 || !mayAnswer)
    return { answer: 'no-trials', traits: [], cautions: [cautionNoTrialInRegion] };
  return {
    answer: 'weighed',
    traits: network.traits.map((trait) => weighTrait(network, trials, trait, question)),
    cautions: [],
  };
}
