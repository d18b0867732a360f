import { useTranslation } from 'react-i18next';
import type { BilingualName } from '#shared/catalogue.ts';
import { useFormat } from './use-format.ts';

type NoVerdictProps = { crop: BilingualName; region: BilingualName; from: number; to: number };

/** A region without trials gets no verdict: said calmly, with why and what helps. */
export function NoVerdict({ crop, region, from, to }: NoVerdictProps) {
  const { t } = useTranslation('verdicts');
  const format = useFormat();
  return (
    <section className="max-w-prose rounded-lg border border-edge bg-card px-5 py-5">
      <h2 className="mb-2">{t('noTrials.title')}</h2>
      <p>{t('noTrials.why', { crop: format.name(crop), region: format.name(region), from, to })}</p>
      <p className="mt-2">{t('noTrials.next')}</p>
    </section>
  );
}
