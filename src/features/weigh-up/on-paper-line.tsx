import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import { tellPrices } from '#shared/price-sentences.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
import { useFormat } from '#src/components/use-format.ts';
import { usePrinting } from '#src/use-printing.ts';

/** Over a printed weigh-up: of which day and from which data its figures are, and when they were put on paper. */
export function OnPaperLine({ result }: { result: WeighUpResult }) {
  const { t } = useTranslation(['weigh-up', 'method']);
  const format = useFormat();
  if (!usePrinting()) return null;
  return (
    <p className="mb-2 border-b border-rule pb-1 text-sm text-faded">
      {t('weigh-up:page.onPaper', {
        date: format.date(result.computedAt),
        versions: t('method:trialVersions', { count: result.trials.length }),
        engine: result.engineVersion,
        printed: format.date(new Date().toISOString()),
      })}
    </p>
  );
}

/** On paper the prices stand under the returns that hang on them: the form that holds them is left out. */
export function PricesOnPaper({ money }: { money: MoneyAssumptions }) {
  const { t } = useTranslation(['verdicts']);
  const format = useFormat();
  if (!usePrinting()) return null;
  return <p className="text-sm text-faded">{tellPrices(money, t, format)}</p>;
}
