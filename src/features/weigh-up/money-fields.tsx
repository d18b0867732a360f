import { memo, useState, type ReactNode } from 'react';
import { Controller, type Path } from 'react-hook-form';
import { Field } from '#src/components/field.tsx';
import { MeasureInput, PriceInput } from '#src/components/measure-input.tsx';
import { NumberInput } from '#src/components/number-input.tsx';
import { Select, type SelectOption } from '#src/components/select.tsx';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import type { MoneyDraft } from './money-form.ts';
import type { MoneyFormApi } from './use-money-form.ts';

/** What a figure is in: money per tonne or hectare and areas are typed in the reader's units, a plain unit stays. */
type FigureUnit =
  { currency: string; per: 't' | 'ha'; isUnitHidden?: boolean } | { measure: 'ha' } | { plain: string };

type FigureFieldProps = {
  form: MoneyFormApi;
  name: Path<MoneyDraft>;
  label: string;
  hint?: string | undefined;
  /** Of the field as a whole: where its parts stand in the group around it. */
  className?: string;
} & FigureUnit;

/** One figure of the panel, with its unit, hint and error; an edit of one does not draw the others anew. */
export const FigureField = memo(function FigureField(props: FigureFieldProps) {
  const { form, name, label, hint, className, ...unit } = props;
  const fieldErrorText = useFieldErrorText();
  return (
    <Controller
      control={form.control}
      name={name}
      render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
        <Field label={label} hint={hint} error={fieldErrorText(error)} className={className}>
          <UnitInput
            unit={unit}
            value={typeof value === 'number' ? value : null}
            onValueChange={onChange}
            onBlur={onBlur}
            ref={ref}
          />
        </Field>
      )}
    />
  );
});

type UnitInputProps = Omit<Parameters<typeof NumberInput>[0], 'unit' | 'decimals'> & { unit: FigureUnit };

function UnitInput({ unit, ...rest }: UnitInputProps) {
  if ('per' in unit) return <PriceInput {...rest} {...unit} />;
  if ('measure' in unit) return <MeasureInput {...rest} unit={unit.measure} />;
  return <NumberInput {...rest} unit={unit.plain} />;
}

type ChoiceFieldProps = {
  form: MoneyFormApi;
  name: Path<MoneyDraft>;
  label: string;
  options: readonly SelectOption[];
};

/** A choice of the panel among a few. */
export function ChoiceField({ form, name, label, options }: ChoiceFieldProps) {
  return (
    <Controller
      control={form.control}
      name={name}
      render={({ field: { value, onChange, onBlur, ref } }) => (
        <Field label={label}>
          <Select options={options} value={String(value)} onChange={onChange} onBlur={onBlur} ref={ref} />
        </Field>
      )}
    />
  );
}

type FieldGroupProps = { title: string; hasError: boolean; children: ReactNode };

/** Fields that are seldom touched, folded under a name; what does not fit is never folded away. */
export function FieldGroup({ title, hasError, children }: FieldGroupProps) {
  const [isOpen, setIsOpen] = useState(false);
  return (
    <details open={isOpen || hasError} onToggle={(event) => setIsOpen(event.currentTarget.open)}>
      <summary className="tap-target flex items-center font-semibold text-action underline underline-offset-4">
        {title}
      </summary>
      <div className="flex flex-col gap-3 pt-1 pb-2">{children}</div>
    </details>
  );
}
