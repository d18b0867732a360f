import { useTranslation } from 'react-i18next';
import type { FieldError } from 'react-hook-form';

/** Turns the error of a form's field into words: the reason our schemas name, else the kind of the zod issue. */
export function useFieldErrorText(): (error: FieldError | undefined) => string | undefined {
  const { t, i18n } = useTranslation('errors');
  return (error) => {
    if (!error) return undefined;
    const known = [error.message, error.type].find(
      (reason) => reason && i18n.exists(`errors:fields.${reason}`),
    );
    // The key was just found to exist; its type cannot be known here.
    return known ? t(`fields.${known}` as 'fields.custom') : t('fields.custom');
  };
}
