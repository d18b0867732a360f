import { useTranslation } from 'react-i18next';
import type { AnalysisOutcome } from '#shared/trial.ts';
import { useTermName } from './anova-table.tsx';

/** Why a figure is missing, one sentence for each outcome. */
export function OutcomeList({ outcomes }: { outcomes: readonly AnalysisOutcome[] }) {
  const { t, i18n } = useTranslation('analysis');
  const termName = useTermName();
  if (outcomes.length === 0) return null;
  return (
    <section className="rounded-lg border border-edge bg-card px-4 py-4 sm:px-5">
      <h2 className="mb-2">{t('outcomesTitle')}</h2>
      <ul className="flex max-w-prose flex-col gap-2">
        {outcomes.map(({ code, values }) => (
          <li key={`${code} ${JSON.stringify(values)}`}>
            {i18n.exists(`analysis:outcomes.${code}`)
              ? // The key was just found to exist; its type cannot be known here.
                t(`outcomes.${code}` as 'outcomes.no-values', nameTerms(values, termName))
              : t('outcomes.other', { code })}
          </li>
        ))}
      </ul>
    </section>
  );
}

/** Terms of the model, such as `rep:block`, in the words of the analysis of variance. */
function nameTerms(
  values: AnalysisOutcome['values'],
  termName: (term: string) => string,
): AnalysisOutcome['values'] {
  return Object.fromEntries(
    Object.entries(values).map(([name, value]) => [
      name,
      termValues.has(name) ? String(value).split(', ').map(termName).join(', ') : value,
    ]),
  );
}

const termValues: ReadonlySet<string> = new Set(['terms', 'components']);

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
