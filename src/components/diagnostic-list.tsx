import { useTranslation } from 'react-i18next';
import type { AnalysisDiagnostics } from '#shared/trial.ts';
import { useFormat } from './use-format.ts';

/** Tests whose sentence is `analysis:diagnostics.<key>` with F, its degrees of freedom and p. */
const fTests = [
  ['brownForsythe', 'spread'],
  ['brownForsytheBlocks', 'spreadBlocks'],
  ['nonAdditivity', 'additive'],
  ['rowTrend', 'rowTrend'],
  ['colTrend', 'colTrend'],
] as const;

/** The tests of what is left after the model, in sentences. */
export function DiagnosticList({ diagnostics }: { diagnostics: AnalysisDiagnostics | null }) {
  const { t } = useTranslation('analysis');
  const sentences = useDiagnosticSentences(diagnostics);
  if (sentences.length === 0) return null;
  return (
    <section className="max-w-prose">
      <h2 className="mb-2">{t('diagnostics.title')}</h2>
      <p className="mb-2 text-faded">{t('diagnostics.lead')}</p>
      <ul className="flex flex-col gap-1">
        {sentences.map((sentence) => (
          <li key={sentence}>{sentence}</li>
        ))}
      </ul>
    </section>
  );
}

function useDiagnosticSentences(diagnostics: AnalysisDiagnostics | null): string[] {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  if (diagnostics === null) return [];
  const { shapiroWilk, largestStudentised, moran, repeatability } = diagnostics;
  const figure = (value: number, decimals: number) => format.number(value, { decimals });
  return [
    shapiroWilk && t('diagnostics.normal', { w: figure(shapiroWilk.w, 3), p: format.pValue(shapiroWilk.p) }),
    ...fTests.map(([name, key]) => {
      const test = diagnostics[name];
      return (
        test &&
        t(`diagnostics.${key}`, {
          f: figure(test.f, 2),
          df1: format.number(test.df1),
          df2: format.number(test.df2),
          p: format.pValue(test.p),
        })
      );
    }),
    moran &&
      t('diagnostics.neighbours', {
        i: figure(moran.i, 2),
        expected: figure(moran.expected, 2),
        p: format.pValue(moran.p),
      }),
    largestStudentised &&
      t('diagnostics.outlier', {
        plot: largestStudentised.plot,
        value: figure(largestStudentised.value, 1),
        p: format.pValue(largestStudentised.pBonferroni),
      }),
    repeatability !== null && t('diagnostics.repeatability', { value: figure(repeatability, 2) }),
  ].filter((sentence) => typeof sentence === 'string');
}
