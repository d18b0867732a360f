import { useSyncExternalStore } from 'react';
import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import { fromReaderPer } from '#shared/reader-units.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { PriceInput } from '#src/components/measure-input.tsx';
import { useReaderUnits } from '#src/components/reader-units-context.tsx';
import { useFormat } from '#src/components/use-format.ts';
import type { OwnPrice } from './own-price-fragment.ts';

/** What one press changes. */
const stepPerTonne = 5;
const stepPerBushel = 0.1;

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
  const units = useReaderUnits();
  const change = (sign: 1 | -1) => {
    const by = units.yieldUnit === 'bu/ac' ? fromReaderPer(stepPerBushel, 't', units) : stepPerTonne;
    own.choose(Math.max((isFigure ? price : frozen) + sign * by, 0));
  };
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
          <PriceInput value={price} onValueChange={own.choose} currency={currency} per="t" />
        </Field>
        <Button aria-label={t('own.less')} onClick={() => change(-1)}>
          −
        </Button>
        <Button aria-label={t('own.more')} onClick={() => change(1)}>
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
