import { useTranslation } from 'react-i18next';
import { sayChance } from '#shared/format-number.ts';

/** Says a chance as seasons of a hundred: `91 of 100 seasons`, `fewer than 1 of 100 seasons`. */
export function useSeasons(): (chance: number) => string {
  const { t } = useTranslation('verdicts');
  return (chance) => {
    const { key, count } = sayChance(chance);
    return key === 'whole' ? t('seasons.whole', { count }) : t(`seasons.${key}`);
  };
}

/** Says beside a strip how often a candidate pays, in as few words as fit there. */
export function usePaysIn(): (chance: number) => string {
  const { t } = useTranslation('verdicts');
  return (chance) => {
    const { key, count } = sayChance(chance);
    return key === 'whole' ? t('paysIn.whole', { count }) : t(`paysIn.${key}`);
  };
}
