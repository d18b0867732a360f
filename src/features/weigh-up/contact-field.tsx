import type { Ref } from 'react';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';

type ContactFieldProps = {
  kind: 'tel' | 'email';
  label: string;
  hint?: string;
  /** What is wrong, in words. */
  error: string | undefined;
  value: string;
  onValueChange: (text: string) => void;
  className: string;
  ref: Ref<HTMLInputElement>;
};

/** A phone number of one's own, or somebody else's address, which the browser must not fill with one's own. */
export function ContactField({ kind, value, onValueChange, ref, ...field }: ContactFieldProps) {
  return (
    <Field {...field}>
      <TextInput
        ref={ref}
        type={kind}
        autoComplete={kind === 'tel' ? 'tel' : 'off'}
        value={value}
        onChange={(event) => onValueChange(event.target.value)}
      />
    </Field>
  );
}
