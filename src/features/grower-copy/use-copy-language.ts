import { useEffect } from 'react';
import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import { language as languageCode, type Language } from '#shared/account.ts';
import { useUrlPatch } from '#src/url-state.ts';

/**
 * The language of a copy: that of the address where the reader chose one, else the copy's own. Kept in the link alone,
 * so that reading a copy changes no setting of whoever made it.
 * @param made language the copy was made in; undefined until it has come
 */
export function useCopyLanguage(made: Language | undefined): (language: Language) => void {
  const { i18n } = useTranslation();
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const asked = languageCode.safeParse(search.get('lang'));
  const wanted = asked.success ? asked.data : made;
  useEffect(() => {
    if (wanted !== undefined && i18n.language !== wanted) void i18n.changeLanguage(wanted);
  }, [i18n, wanted]);
  return (language) => patch({ lang: language });
}
