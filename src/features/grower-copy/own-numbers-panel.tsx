import { useSyncExternalStore } from 'react';
import { useTranslation } from 'react-i18next';
import { findMostPerHectare } from '#shared/money-limits.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { fromReaderPer } from '#shared/reader-units.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { PriceInput } from '#src/components/measure-input.tsx';
import { useReaderUnits } from '#src/components/reader-units-context.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { refuseOwnNumber, type SeedOfVariety } from './own-assumptions.ts';
import {
  forgetOwnNumbers,
  isPossible,
  keepOwnNumber,
  type OwnName,
  type OwnNumbers,
} from './own-numbers-fragment.ts';

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

type OwnField = {
  value: number | null;
  /** Why what was typed does not count. */
  refused: ReturnType<typeof refuseOwnNumber>;
  choose: (value: number | null) => void;
};

/** What stands in the field of a number: the copy's own until another is typed. */
function openField(
  name: OwnName,
  frozen: number | null,
  own: OwnNumbers,
  assumptions: MoneyAssumptions,
): OwnField {
  const value = own.get(name);
  return {
    value: value === undefined ? frozen : value,
    refused: value === undefined ? null : refuseOwnNumber(name, value, assumptions),
    choose: (typed) => keepOwnNumber(name, typed, frozen),
  };
}

type OwnNumbersPanelProps = {
  assumptions: MoneyAssumptions;
  seeds: readonly SeedOfVariety[];
  own: OwnNumbers;
};

/** Where the grower tries other prices, of the crop and of seed. Without scripts it could do nothing, and is not shown. */
export function OwnNumbersPanel({ assumptions, seeds, own }: OwnNumbersPanelProps) {
  const { t } = useTranslation('copy');
  const isAlive = useIsAlive();
  return (
    <section
      aria-labelledby="own-price-title"
      className="rounded-lg border border-rule bg-card p-4 noscript:hidden print:hidden"
    >
      <h2 id="own-price-title">{t('own.title')}</h2>
      <p className="mb-3 text-sm text-faded">{t('own.lead')}</p>
      <OwnPriceField assumptions={assumptions} own={own} isAlive={isAlive} />
      {isAlive && seeds.length > 0 && (
        <details className="mt-3">
          <summary className="tap-target py-2.5 font-semibold">{t('own.seeds')}</summary>
          <p className="mb-2 text-sm text-faded">{t('own.seedsLead')}</p>
          <div className="flex flex-col gap-3">
            {seeds.map((seed) => (
              <OwnSeedField key={seed.name} seed={seed} assumptions={assumptions} own={own} />
            ))}
          </div>
        </details>
      )}
      {own.size > 0 ? (
        <Button tone="quiet" className="mt-2" onClick={forgetOwnNumbers}>
          {t('own.reset')}
        </Button>
      ) : (
        <p className="mt-3 text-sm">{t('own.asFrozen')}</p>
      )}
    </section>
  );
}

type OwnPriceFieldProps = { assumptions: MoneyAssumptions; own: OwnNumbers; isAlive: boolean };

function OwnPriceField({ assumptions, own, isAlive }: OwnPriceFieldProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const units = useReaderUnits();
  const { currency, priceMiddle: frozen } = assumptions;
  const { value, refused, choose } = openField('price', frozen, own, assumptions);
  const amount = format.moneyPer(findWorstCostPerTonne(assumptions), currency, 't');
  const error = refused === null ? undefined : t(`own.${refused}`, { amount });
  const change = (sign: 1 | -1) => {
    const by = units.yieldUnit === 'bu/ac' ? fromReaderPer(stepPerBushel, 't', units) : stepPerTonne;
    choose(Math.max((isPossible('price', value) ? value : frozen) + sign * by, 0));
  };
  return (
    <fieldset disabled={!isAlive} className="flex items-end gap-2">
      <legend className="sr-only">{t('own.title')}</legend>
      <Field label={t('own.price')} error={error} className="grow">
        <PriceInput value={value} onValueChange={choose} currency={currency} per="t" />
      </Field>
      <Button aria-label={t('own.less')} onClick={() => change(-1)}>
        −
      </Button>
      <Button aria-label={t('own.more')} onClick={() => change(1)}>
        +
      </Button>
    </fieldset>
  );
}

type OwnSeedFieldProps = { seed: SeedOfVariety; assumptions: MoneyAssumptions; own: OwnNumbers };

function OwnSeedField({ seed: { name, varietyName, frozen }, assumptions, own }: OwnSeedFieldProps) {
  const { t } = useTranslation('copy');
  const format = useFormat();
  const { value, refused, choose } = openField(name, frozen, own, assumptions);
  const amount = format.moneyPer(findMostPerHectare(assumptions.priceMiddle), assumptions.currency, 'ha');
  const error = refused === null ? undefined : t(`own.${refused}`, { amount });
  const hint = frozen === null ? t('own.seedOpen') : undefined;
  return (
    <Field label={t('own.seedOf', { name: varietyName })} hint={hint} error={error}>
      <PriceInput value={value} onValueChange={choose} currency={assumptions.currency} per="ha" />
    </Field>
  );
}
