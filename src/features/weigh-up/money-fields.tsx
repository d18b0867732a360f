import { memo, useState, type ReactNode } from 'react';
import { Controller, type Path } from 'react-hook-form';
import { Field } from '#src/components/field.tsx';
import { MeasureInput, PriceInput } from '#src/components/measure-input.tsx';
import { NumberInput } from '#src/components/number-input.tsx';
import { Select, type SelectOption } from '#src/components/select.tsx';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { moneyForm, type MoneyDraft } from './money-form.ts';
import type { MoneyFormApi } from './use-money-form.ts';

/** What a figure is in: money per tonne or hectare and areas are typed in the reader's units, a plain unit stays. */
type FigureUnit =
  { currency: string; per: 't' | 'ha'; isUnitHidden?: boolean } | { measure: 'ha' } | { plain: string };

/** Every figure and choice of the form by its path. */
function listNames(part: object, at: readonly string[] = []): Path<MoneyDraft>[] {
  return Object.entries(part as Record<string, unknown>).flatMap(([key, value]) => {
    const path = [...at, key];
    if (typeof value === 'object' && value !== null) return listNames(value, path);
    // The keys are those of the form.
    return [path.join('.') as Path<MoneyDraft>];
  });
}

/** Prices are held against each other and against costs, costs against prices: told anew where an edit changes that. */
function recheckOthers(form: MoneyFormApi): void {
  const draft = form.getValues();
  const issues = moneyForm.safeParse(draft).error?.issues ?? [];
  const refused = new Set(issues.filter(({ code }) => code === 'custom').map(({ path }) => path.join('.')));
  for (const name of listNames(draft)) {
    const isMarked = form.getFieldState(name).error?.type === 'custom';
    // One by one: checked together, every field of the panel would be drawn anew.
    if (isMarked || refused.has(name)) void form.trigger(name);
  }
}

type FigureFieldProps = {
  form: MoneyFormApi;
  name: Path<MoneyDraft>;
  label: string;
  hint?: string | undefined;
} & FigureUnit;

/** One figure of the panel, with its unit, hint and error; an edit of one does not draw the others anew. */
export const FigureField = memo(function FigureField({ form, name, label, hint, ...unit }: FigureFieldProps) {
  const fieldErrorText = useFieldErrorText();
  return (
    <Controller
      control={form.control}
      name={name}
      render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
        <Field label={label} hint={hint} error={fieldErrorText(error)}>
          <UnitInput
            unit={unit}
            value={typeof value === 'number' ? value : null}
            onValueChange={(figure) => {
              onChange(figure);
              recheckOthers(form);
            }}
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
          <Select
            options={options}
            value={String(value)}
            onChange={(event) => {
              onChange(event.target.value);
              recheckOthers(form);
            }}
            onBlur={onBlur}
            ref={ref}
          />
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
