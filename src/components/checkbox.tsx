import { useId, type ComponentProps, type ReactNode } from 'react';

type CheckboxProps = Omit<ComponentProps<'input'>, 'type'> & { label: ReactNode; hint?: ReactNode };

/** A box with its words beside it; the whole line can be touched. */
export function Checkbox({ label, hint, className = '', ...rest }: CheckboxProps) {
  const hintId = useId();
  return (
    <label className={`tap-target flex items-start gap-3 py-2 ${className}`}>
      <input
        type="checkbox"
        aria-describedby={hint ? hintId : undefined}
        {...rest}
        className="mt-0.5 size-5 shrink-0 accent-action"
      />
      <span>
        {label}
        {hint && (
          <span id={hintId} className="block text-sm text-faded">
            {hint}
          </span>
        )}
      </span>
    </label>
  );
}
