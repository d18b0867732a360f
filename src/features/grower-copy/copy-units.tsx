import { useTranslation } from 'react-i18next';
import { sayUnit } from '#shared/format-number.ts';
import { writeUnitParameter } from '#shared/reader-units.ts';
import { yieldUnits } from '#shared/units.ts';
import { useReaderUnits } from '#src/components/reader-units-context.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';

/** The copy in other units, each by a plain link; bushels are told with the weight that they are reckoned by. */
export function CopyUnits({ hasBushel }: { hasBushel: boolean }) {
  const { t } = useTranslation('common');
  const format = useFormat();
  const language = useLanguage();
  const { yieldUnit: current, bushelWeightLb } = useReaderUnits();
  const weight = format.quantity(bushelWeightLb, 'lb', {
    decimals: Number.isInteger(bushelWeightLb) ? 0 : 1,
  });
  return (
    <nav aria-label={t('units.label')} className="flex flex-wrap items-center gap-x-3 text-sm print:hidden">
      <span className="text-faded">{t('units.label')}</span>
      {yieldUnits
        .filter((unit) => hasBushel || unit !== 'bu/ac')
        .map((unit) => (
          <a
            key={unit}
            href={`?${new URLSearchParams({ lang: language, unit: writeUnitParameter(unit) }).toString()}`}
            aria-current={unit === current ? 'true' : undefined}
            data-carries-price=""
            className="tap-target inline-flex items-center justify-center aria-[current]:font-bold aria-[current]:no-underline"
          >
            {unit === 'bu/ac'
              ? t('units.bushels', { unit: sayUnit(unit, language), weight })
              : sayUnit(unit, language)}
          </a>
        ))}
    </nav>
  );
}
