import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { currencySign } from '#shared/format-number.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { MoneyBasis } from '#shared/money-basis.ts';
import { weighMoney } from '#shared/partial-budget.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import type { CandidateResult, WeighUp } from '#shared/weigh-up.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { NumberInput } from '#src/components/number-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { useSeasons } from '#src/components/use-seasons.ts';

/** What one press changes, per tonne. */
const step = 5;

/** The frozen assumptions with one price in place of the range: what the grower asks is "at this price". */
export function withPrice(assumptions: MoneyAssumptions, price: number): MoneyAssumptions {
  return { ...assumptions, priceLow: price, priceMiddle: price, priceHigh: price };
}

type OwnPriceProps = { weighUp: WeighUp; basis: MoneyBasis; candidates: readonly CandidateResult[] };

/** The grower's own price, reckoned in the page and marked as such; the copy stays what it is. */
export function OwnPrice({ weighUp, basis, candidates }: OwnPriceProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const language = useLanguage();
  const { assumptions } = weighUp;
  const frozen = assumptions.priceMiddle;
  const [price, setPrice] = useState<number | null>(frozen);
  const perTonne = findWorstCostPerTonne(assumptions);
  const isFigure = price !== null && Number.isFinite(price);
  const isCovered = isFigure && price > perTonne;
  const write = (value: number) => format.moneyPer(value, assumptions.currency, 't');
  const change = (by: number) => setPrice(Math.max((isFigure ? price : frozen) + by, 0));
  const error = !isFigure
    ? t('own.unreadable')
    : isCovered
      ? undefined
      : t('own.tooLow', { amount: write(perTonne) });
  return (
    <section
      aria-labelledby="own-price-title"
      className="rounded-lg border border-rule bg-card p-4 print:hidden"
    >
      <h2 id="own-price-title">{t('own.title')}</h2>
      <p className="mb-3 text-sm text-faded">{t('own.lead')}</p>
      <div className="flex items-end gap-2">
        <Field label={t('own.price')} error={error} className="grow">
          <NumberInput
            value={price}
            onValueChange={setPrice}
            unit={`${currencySign(assumptions.currency, language)}/t`}
          />
        </Field>
        <Button aria-label={t('own.less')} onClick={() => change(-step)}>
          −
        </Button>
        <Button aria-label={t('own.more')} onClick={() => change(step)}>
          +
        </Button>
      </div>
      <div role="status" className="mt-3">
        {isCovered && (
          <>
            <p className="font-semibold">
              {price === frozen
                ? t('own.asFrozen')
                : t('own.marked', { price: write(price), frozen: write(frozen) })}
            </p>
            <OwnResults weighUp={weighUp} basis={basis} candidates={candidates} price={price} />
          </>
        )}
      </div>
      {price !== frozen && (
        <Button tone="quiet" className="mt-2" onClick={() => setPrice(frozen)}>
          {t('own.reset')}
        </Button>
      )}
    </section>
  );
}

function OwnResults({ weighUp, basis, candidates, price }: OwnPriceProps & { price: number }) {
  const { t } = useTranslation(['copy', 'verdicts']);
  const format = useFormat();
  const seasons = useSeasons();
  const { areaHectares } = weighUp;
  const assumptions = withPrice(weighUp.assumptions, price);
  const { currency } = assumptions;
  return (
    <ul className="mt-1 flex flex-col gap-1">
      {candidates.map((candidate) => {
        const { varietyId, varietyName: name, verdict } = candidate;
        const money = verdict === 'thin' ? null : weighMoney(candidate, basis, assumptions);
        if (money === null) return <li key={varietyId}>{`${name} · ${t('verdicts:cantSay')}`}</li>;
        const values = {
          name,
          amount: format.money(money.returnPerHectare, currency, { isSigned: true }),
          total: format.money(money.returnPerHectare * areaHectares, currency, { isSigned: true }),
          area: format.area(areaHectares),
        };
        return (
          <li key={varietyId}>
            {money.chancePays === null
              ? t('copy:own.result', values)
              : t('copy:own.resultChance', { ...values, seasons: seasons(money.chancePays) })}
          </li>
        );
      })}
    </ul>
  );
}
