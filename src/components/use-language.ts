import { useTranslation } from 'react-i18next';
import { language, type Language } from '#shared/account.ts';

/** The language the page is in. */
export function useLanguage(): Language {
  const { i18n } = useTranslation();
  return language.catch('en').parse(i18n.language);
}
