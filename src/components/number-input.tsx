import { useState, type ComponentProps } from 'react';
import { formatNumber } from '#shared/format-number.ts';
import { parseNumber } from '#shared/parse-number.ts';
import { useFieldWiring } from './field.tsx';
import { controlShape } from './text-input.tsx';
import { useLanguage } from './use-language.ts';

export type NumberInputProps = Omit<ComponentProps<'input'>, 'value' | 'onChange' | 'type'> & {
  /** null for nothing; NaN for text that is no figure, which a zod number refuses. */
  value: number | null | undefined;
  onValueChange: (value: number | null) => void;
  /** Shown behind the figure and read with it: `t/ha`, `$/t`. */
  unit?: string;
  /** Decimals shown when the field is left; without it as many as were typed. */
  decimals?: number;
};

function countDecimals(value: number): number {
  return Math.min((value.toString().split('.')[1] ?? '').length, 6);
}

/** A figure typed as the language writes it: decimal comma or point, thousands spaced or not. */
export function NumberInput({
  value,
  onValueChange,
  unit,
  decimals,
  className = '',
  onBlur,
  onFocus,
  ...rest
}: NumberInputProps) {
  const language = useLanguage();
  const wiring = useFieldWiring();
  // What is typed stays as typed until the field is left; a text that is no figure stays for correction.
  const [typed, setTyped] = useState<string | null>(null);
  const isFigure = typeof value === 'number' && Number.isFinite(value);
  const written = isFigure
    ? formatNumber(value, language, { decimals: decimals ?? countDecimals(value) })
    : '';
  const unitId = unit && wiring.id ? `${wiring.id}-unit` : undefined;
  const described = [wiring['aria-describedby'], unitId].filter((part) => part !== undefined).join(' ');
  return (
    <span className="relative flex items-center">
      <input
        {...wiring}
        {...rest}
        type="text"
        inputMode="decimal"
        autoComplete="off"
        aria-describedby={described === '' ? undefined : described}
        value={typed ?? written}
        onFocus={(event) => {
          setTyped(written === '' ? typed : written);
          onFocus?.(event);
        }}
        onChange={(event) => {
          setTyped(event.target.value);
          onValueChange(parseNumber(event.target.value, language));
        }}
        onBlur={(event) => {
          const read = parseNumber(event.target.value, language);
          if (read === null || Number.isFinite(read)) setTyped(null);
          onBlur?.(event);
        }}
        className={`${controlShape} text-right font-semibold ${className}`}
        style={unit ? { paddingRight: `${unit.length * 0.6 + 1.4}em` } : undefined}
      />
      {unit && (
        <span id={unitId} className="pointer-events-none absolute right-3 text-sm text-faded">
          {unit}
        </span>
      )}
    </span>
  );
}
