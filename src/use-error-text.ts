import { useTranslation } from 'react-i18next';
import { ApiError } from './api-client.ts';

/** Turns whatever was thrown into the sentence of its code. */
export function useErrorText(): (error: unknown) => string {
  const { t } = useTranslation('errors');
  return (error) => (error instanceof ApiError ? t(error.code, error.values) : t('unexpected'));
}
