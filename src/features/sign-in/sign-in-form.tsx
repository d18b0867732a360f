import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { signIn, signInInput, type Me, type SignInInput } from '#shared/account.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { fieldIssues } from '#src/field-issues.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';

type SignInFormProps = { defaultEmail?: string; onSignedIn: (me: Me) => void };

/** E-mail and password. A refusal keeps what was typed and says so above the fields. */
export function SignInForm({ defaultEmail = '', onSignedIn }: SignInFormProps) {
  const { t } = useTranslation('sign-in');
  const errorText = useErrorText();
  const fieldErrorText = useFieldErrorText();
  const form = useForm<SignInInput>({
    resolver: zodResolver(signInInput, fieldIssues),
    defaultValues: { email: defaultEmail, password: '' },
  });
  const entry = useMutation({
    mutationFn: async (body: SignInInput) => (await callApi(signIn, { body })).me,
    onSuccess: onSignedIn,
    onError: () => form.setFocus('password', { shouldSelect: true }),
  });
  const { errors } = form.formState;
  return (
    <form
      noValidate
      onSubmit={(event) => void form.handleSubmit((body) => entry.mutate(body))(event)}
      className="flex max-w-sm flex-col gap-4"
    >
      {entry.isError && <ErrorState message={errorText(entry.error)} />}
      <Field label={t('email')} error={fieldErrorText(errors.email)} isRequired>
        <TextInput type="email" autoComplete="username" inputMode="email" {...form.register('email')} />
      </Field>
      <Field label={t('password')} error={fieldErrorText(errors.password)} isRequired>
        <TextInput type="password" autoComplete="current-password" {...form.register('password')} />
      </Field>
      <Button type="submit" tone="main" isBusy={entry.isPending}>
        {t('signIn')}
      </Button>
    </form>
  );
}
