import { useTranslation } from 'react-i18next';
import { readLanguage, type Language } from '#shared/language.ts';

/** The language the page is in. */
export function useLanguage(): Language {
  const { i18n } = useTranslation();
  return readLanguage(i18n.language);
}
