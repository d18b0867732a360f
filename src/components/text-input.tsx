import type { ComponentProps } from 'react';
import { useFieldWiring } from './field.tsx';

/** The frame of every control that takes text, so that they stand in one line. */
export const controlShape =
  'tap-target w-full rounded-md border border-edge bg-card px-3 py-2 text-base text-ink aria-invalid:border-2 aria-invalid:border-stop';

/** One line of text; spreads `register('name')` of react-hook-form. */
export function TextInput({ className = '', ...rest }: ComponentProps<'input'>) {
  return <input type="text" {...useFieldWiring()} {...rest} className={`${controlShape} ${className}`} />;
}

/** Several lines of text, for reasons and notes. */
export function TextArea({ className = '', rows = 3, ...rest }: ComponentProps<'textarea'>) {
  return <textarea {...useFieldWiring()} {...rest} rows={rows} className={`${controlShape} ${className}`} />;
}
