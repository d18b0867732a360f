import { currencySign } from '#shared/format-number.ts';
import { fromReader, fromReaderPer, readerUnit, toReader, toReaderPer } from '#shared/reader-units.ts';
import { NumberInput, type NumberInputProps } from './number-input.tsx';
import { useReaderUnits } from './reader-units-context.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

/** A figure that was typed has no more decimals than this. */
const typedDecimals = 4;
/** Decimals of a figure that no reader of this unit has typed. */
const shownDecimals = 2;

/**
 * A converted figure as it is shown: what was typed comes back as it was typed, in spite of the last digits that
 * converting costs; what comes from another unit is rounded.
 */
export function showConverted(value: number): number {
  const typed = Number(value.toFixed(typedDecimals));
  return Math.abs(typed - value) <= Math.abs(value) * 1e-9 ? typed : Number(value.toFixed(shownDecimals));
}

type ConvertedInputProps = Omit<NumberInputProps, 'decimals'>;

type ConvertedFigureProps = ConvertedInputProps & {
  toShown: (stored: number) => number;
  toStored: (shown: number) => number;
};

function ConvertedInput({ value, onValueChange, toShown, toStored, ...rest }: ConvertedFigureProps) {
  const isFigure = typeof value === 'number' && Number.isFinite(value);
  return (
    <NumberInput
      {...rest}
      value={isFigure ? showConverted(toShown(value)) : value}
      // NaN, text that is no figure, stays NaN.
      onValueChange={(typed) => onValueChange(typed === null ? null : toStored(typed))}
    />
  );
}

/** A figure with its unit: a yield or an area, held in t/ha or ha, is typed in the unit that the page is read in. */
export function MeasureInput({ unit, ...rest }: ConvertedInputProps & { unit: string }) {
  const units = useReaderUnits();
  const format = useFormat();
  if (readerUnit(unit, units) === unit) return <NumberInput {...rest} unit={format.unit(unit)} />;
  return (
    <ConvertedInput
      {...rest}
      unit={format.unit(unit)}
      toShown={(stored) => toReader(stored, unit, units)}
      toStored={(shown) => fromReader(shown, unit, units)}
    />
  );
}

type PriceInputProps = Omit<ConvertedInputProps, 'unit'> & {
  currency: string;
  per: 't' | 'ha';
  /** Where a heading over several fields says it already. */
  isUnitHidden?: boolean;
};

/** Money held per t or ha and typed per what the page is read in: a bushel, an acre. */
export function PriceInput({ currency, per, isUnitHidden = false, ...rest }: PriceInputProps) {
  const units = useReaderUnits();
  const format = useFormat();
  const sign = currencySign(currency, useLanguage());
  const unit = isUnitHidden ? '' : `${sign}/${format.unit(per)}`;
  if (readerUnit(per, units) === per) return <NumberInput {...rest} unit={unit} />;
  return (
    <ConvertedInput
      {...rest}
      unit={unit}
      toShown={(stored) => toReaderPer(stored, per, units)}
      toStored={(shown) => fromReaderPer(shown, per, units)}
    />
  );
}
