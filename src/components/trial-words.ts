import { useTranslation } from 'react-i18next';
import type { TrialDesign, TrialState } from '#shared/trial.ts';

/** Words of a trial's design and state, as lists and pages name them. */
export function useTrialWords() {
  const { t } = useTranslation('trials');
  return {
    design: (design: TrialDesign) => t(`design.${design}`),
    state: (state: TrialState) => t(`state.${state}`),
  };
}
