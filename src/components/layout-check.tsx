import { useTranslation } from 'react-i18next';
import type { LayoutFindingView } from '#shared/trial.ts';

/** Whether the field lies as its design asks; a sound layout is said as well. */
export function LayoutCheck({ findings }: { findings: readonly LayoutFindingView[] | null }) {
  const { t } = useTranslation('analysis');
  if (findings === null) return null;
  return (
    <section className="max-w-prose">
      <h2 className="mb-2">{t('layout.title')}</h2>
      {findings.length === 0 ? (
        <p>{t('layout.sound')}</p>
      ) : (
        <ul className="flex flex-col gap-1">
          {findings.map(({ code, values }) => (
            <li key={`${code} ${JSON.stringify(values)}`}>
              {/* The values bring `count` wherever a sentence has plural forms. */}
              {t(`layout.${code}` as 'layout.plot-named-twice', values)}
            </li>
          ))}
        </ul>
      )}
    </section>
  );
}
