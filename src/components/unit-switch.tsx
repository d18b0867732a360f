import { useTranslation } from 'react-i18next';
import { sayUnit } from '#shared/format-number.ts';
import { yieldUnits, type YieldUnit } from '#shared/units.ts';
import { useReaderUnits } from './reader-units-context.tsx';
import { Select } from './select.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

/** Offers the units of yield; bushels are told with the weight that they are reckoned by. */
export function UnitSwitch({ onChoose }: { onChoose: (unit: YieldUnit) => void }) {
  const { t } = useTranslation('common');
  const format = useFormat();
  const language = useLanguage();
  const { yieldUnit, bushelWeightLb } = useReaderUnits();
  const bushel = format.quantity(bushelWeightLb, 'lb', {
    decimals: Number.isInteger(bushelWeightLb) ? 0 : 1,
  });
  return (
    <label className="flex max-w-full items-center gap-2 text-sm print:hidden">
      <span className="font-semibold">{t('units.label')}</span>
      <Select
        value={yieldUnit}
        onChange={(event) => {
          const chosen = yieldUnits.find((unit) => unit === event.target.value);
          if (chosen) onChoose(chosen);
        }}
        options={yieldUnits.map((unit) => ({
          value: unit,
          label:
            unit === 'bu/ac'
              ? t('units.bushels', { unit: sayUnit(unit, language), weight: bushel })
              : sayUnit(unit, language),
        }))}
      />
    </label>
  );
}
