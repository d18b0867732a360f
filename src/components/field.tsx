import { createContext, useContext, useId, type ReactNode } from 'react';

/** What ties a control to its label, hint and error. */
export type FieldWiring = {
  id: string;
  'aria-describedby': string | undefined;
  'aria-invalid': true | undefined;
  required: boolean | undefined;
};

const FieldContext = createContext<FieldWiring | null>(null);

/** The wiring of the surrounding Field; nothing where a control stands alone and is labelled by itself. */
export function useFieldWiring(): Partial<FieldWiring> {
  return useContext(FieldContext) ?? {};
}

type FieldProps = {
  label: ReactNode;
  hint?: ReactNode;
  /** What is wrong, in words; see `useFieldErrorText`. */
  error?: string | undefined;
  isRequired?: boolean;
  className?: string;
  children: ReactNode;
};

/** Label above, control, hint and error in words; the control inside wires itself to them. */
export function Field({ label, hint, error, isRequired, className = '', children }: FieldProps) {
  const id = useId();
  const hintId = hint ? `${id}-hint` : undefined;
  const errorId = error ? `${id}-error` : undefined;
  const described = [hintId, errorId].filter((part) => part !== undefined).join(' ');
  const wiring: FieldWiring = {
    id,
    'aria-describedby': described === '' ? undefined : described,
    'aria-invalid': error ? true : undefined,
    required: isRequired,
  };
  return (
    <div className={`flex flex-col gap-1 ${className}`}>
      <label htmlFor={id} className="text-sm font-semibold">
        {label}
      </label>
      {hint && (
        <p id={hintId} className="text-sm text-faded">
          {hint}
        </p>
      )}
      <FieldContext value={wiring}>{children}</FieldContext>
      {error && (
        <p id={errorId} className="flex items-start gap-1.5 text-sm font-semibold text-stop">
          <span aria-hidden="true">▲</span>
          {error}
        </p>
      )}
    </div>
  );
}
