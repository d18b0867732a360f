import { useTranslation } from 'react-i18next';
import type { AnalysisOutcome, TrialAnalysisView } from '#shared/trial.ts';
import { useFormat } from './use-format.ts';

/** Why a figure is missing, one sentence for each outcome. */
export function OutcomeList({ outcomes }: { outcomes: readonly AnalysisOutcome[] }) {
  const { t, i18n } = useTranslation('analysis');
  if (outcomes.length === 0) return null;
  return (
    <section className="rounded-lg border border-edge bg-card px-4 py-4 sm:px-5">
      <h2 className="mb-2">{t('outcomesTitle')}</h2>
      <ul className="flex max-w-prose flex-col gap-2">
        {outcomes.map(({ code, values }) => (
          <li key={`${code} ${JSON.stringify(values)}`}>
            {i18n.exists(`analysis:outcomes.${code}`)
              ? // The key was just found to exist; its type cannot be known here.
                t(`outcomes.${code}` as 'outcomes.no-values', values)
              : t('outcomes.other', { code })}
          </li>
        ))}
      </ul>
    </section>
  );
}

const recoveries = ['lsd', 'cv', 'se', 'residual-ms'] as const;

/** How the error of a trial without plots was recovered from what was printed. */
export function RecoveredError({ from }: { from: string | null }) {
  const { t } = useTranslation('analysis');
  if (from === null) return null;
  const known = recoveries.find((recovery) => recovery === from);
  return (
    <section className="max-w-prose">
      <h2 className="mb-2">{t('recovered.title')}</h2>
      <p>
        {known ? t(`recovered.${known}`) : t('recovered.other', { from })} {t('recovered.limits')}
      </p>
    </section>
  );
}

/** The tests of what is left after the model, in sentences. */
export function DiagnosticList({ diagnostics }: { diagnostics: TrialAnalysisView['diagnostics'] }) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  if (!diagnostics) return null;
  const { shapiroWilk, brownForsythe, largestStudentised } = diagnostics;
  if (!shapiroWilk && !brownForsythe && !largestStudentised) return null;
  return (
    <section className="max-w-prose">
      <h2 className="mb-2">{t('diagnostics.title')}</h2>
      <ul className="flex flex-col gap-1">
        {shapiroWilk && (
          <li>
            {t('diagnostics.normal', {
              w: format.number(shapiroWilk.w, { decimals: 3 }),
              p: format.pValue(shapiroWilk.p),
            })}
          </li>
        )}
        {brownForsythe && (
          <li>
            {t('diagnostics.spread', {
              f: format.number(brownForsythe.f, { decimals: 2 }),
              df1: format.number(brownForsythe.df1),
              df2: format.number(brownForsythe.df2),
              p: format.pValue(brownForsythe.p),
            })}
          </li>
        )}
        {largestStudentised && (
          <li>
            {t('diagnostics.outlier', {
              plot: largestStudentised.plot,
              value: format.number(largestStudentised.value, { decimals: 1 }),
              p: format.pValue(largestStudentised.pBonferroni),
            })}
          </li>
        )}
      </ul>
    </section>
  );
}
