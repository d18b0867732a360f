import { useTranslation } from 'react-i18next';
import { sayPaysIn, saySeasons } from '#shared/say-seasons.ts';

/** Says a chance as seasons of a hundred: `91 of 100 seasons`, `fewer than 1 of 100 seasons`. */
export function useSeasons(): (chance: number) => string {
  const { t } = useTranslation(['verdicts']);
  return (chance) => saySeasons(chance, t);
}

/** Says beside a strip how often a candidate pays, in as few words as fit there. */
export function usePaysIn(): (chance: number) => string {
  const { t } = useTranslation(['verdicts']);
  return (chance) => sayPaysIn(chance, t);
}
