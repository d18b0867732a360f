import { useMemo } from 'react';
import { useTranslation } from 'react-i18next';
import { formatNumber, sayChance } from '#shared/format-number.ts';
import { readLanguage } from '#shared/language.ts';
import { writeFigures } from '#shared/write-figures.ts';
import { useReaderUnits } from './reader-units-context.tsx';
import { useReaderZone } from './reader-zone-context.tsx';

/** Figures, money, dates and names as the page's language and the units that it is read in have them; see `writeFigures`. */
export function useFormat() {
  const units = useReaderUnits();
  const timeZone = useReaderZone();
  const { t, i18n } = useTranslation('common');
  const language = readLanguage(i18n.language);
  return useMemo(
    () => ({
      ...writeFigures(language, units, timeZone),
      /** `91 of 100`, `fewer than 1 of 100`, `more than 99 of 100`. */
      chance: (probability: number) => {
        const { key, count } = sayChance(probability);
        return t(`chance.${key}`, { number: formatNumber(count, language) });
      },
    }),
    [language, units, timeZone, t],
  );
}
