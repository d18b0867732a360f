import { useTranslation } from 'react-i18next';
import type { TrialDetail } from '#shared/trial.ts';
import { FactRow, type Fact } from './fact-row.tsx';
import { useFormat } from './use-format.ts';

/** How a trial was grown: dates and what was noted, as stored. */
export function ManagementList({ trial }: { trial: TrialDetail }) {
  const { t, i18n } = useTranslation('trials');
  const format = useFormat();
  const write = (value: string | number | boolean): string => {
    if (typeof value === 'boolean') return value ? t('page.yes') : t('page.no');
    return typeof value === 'number'
      ? format.number(value, { decimals: Number.isInteger(value) ? 0 : 1 })
      : value;
  };
  const facts: Fact[] = [
    ...(trial.sownOn ? [{ id: 'sown', label: t('page.sown'), value: format.date(trial.sownOn) }] : []),
    ...(trial.harvestedOn
      ? [{ id: 'harvested', label: t('page.harvested'), value: format.date(trial.harvestedOn) }]
      : []),
    ...Object.entries(trial.management).map(([key, value]) => ({
      id: key,
      label: i18n.exists(`trials:managementKeys.${key}`)
        ? // The key was just found to exist; its type cannot be known here.
          t(`managementKeys.${key}` as 'managementKeys.note')
        : key,
      value: write(value),
    })),
  ];
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('page.management')}</h2>
      {facts.length === 0 ? <p>{t('page.noManagement')}</p> : <FactRow facts={facts} />}
    </section>
  );
}
