import { useSyncExternalStore } from 'react';
import { useTranslation } from 'react-i18next';
import { currencySign } from '#shared/format-number.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { NumberInput } from '#src/components/number-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import type { OwnPrice } from './own-price-fragment.ts';

/** What one press changes, per tonne. */
const step = 5;

const neverChanges = () => () => undefined;

/** False on the server and until the script has taken the page over. */
function useIsAlive(): boolean {
  return useSyncExternalStore(
    neverChanges,
    () => true,
    () => false,
  );
}

type OwnPricePanelProps = { assumptions: MoneyAssumptions; own: OwnPrice; isOwn: boolean };

/** Where the grower tries another price. Without scripts it could do nothing, and is not shown. */
export function OwnPricePanel({ assumptions, own, isOwn }: OwnPricePanelProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const language = useLanguage();
  const isAlive = useIsAlive();
  const { currency, priceMiddle: frozen } = assumptions;
  const { price } = own;
  const perTonne = findWorstCostPerTonne(assumptions);
  const isFigure = price !== null && Number.isFinite(price);
  const error = !isFigure
    ? t('own.unreadable')
    : price > perTonne
      ? undefined
      : t('own.tooLow', { amount: format.moneyPer(perTonne, currency, 't') });
  const change = (by: number) => own.choose(Math.max((isFigure ? price : frozen) + by, 0));
  return (
    <section
      aria-labelledby="own-price-title"
      className="rounded-lg border border-rule bg-card p-4 noscript:hidden print:hidden"
    >
      <h2 id="own-price-title">{t('own.title')}</h2>
      <p className="mb-3 text-sm text-faded">{t('own.lead')}</p>
      <fieldset disabled={!isAlive} className="flex items-end gap-2">
        <legend className="sr-only">{t('own.title')}</legend>
        <Field label={t('own.price')} error={error} className="grow">
          <NumberInput
            value={price}
            onValueChange={own.choose}
            unit={`${currencySign(currency, language)}/t`}
          />
        </Field>
        <Button aria-label={t('own.less')} onClick={() => change(-step)}>
          −
        </Button>
        <Button aria-label={t('own.more')} onClick={() => change(step)}>
          +
        </Button>
      </fieldset>
      {isOwn || error !== undefined ? (
        <Button tone="quiet" className="mt-2" onClick={own.reset}>
          {t('own.reset')}
        </Button>
      ) : (
        <p className="mt-3 text-sm">{t('own.asFrozen')}</p>
      )}
    </section>
  );
}
