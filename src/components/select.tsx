import type { ComponentProps } from 'react';
import { useFieldWiring } from './field.tsx';
import { controlShape } from './text-input.tsx';

export type SelectOption = { value: string; label: string; isDisabled?: boolean };

type SelectProps = Omit<ComponentProps<'select'>, 'children'> & {
  options: readonly SelectOption[];
  /** First line with the empty value: "Choose a crop". */
  placeholder?: string;
};

/** The browser's own list, which works by touch, keyboard and screen reader alike. */
export function Select({ options, placeholder, className = '', ...rest }: SelectProps) {
  return (
    <select {...useFieldWiring()} {...rest} className={`${controlShape} ${className}`}>
      {placeholder !== undefined && <option value="">{placeholder}</option>}
      {options.map((option) => (
        <option key={option.value} value={option.value} disabled={option.isDisabled}>
          {option.label}
        </option>
      ))}
    </select>
  );
}
