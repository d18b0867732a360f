import { useTranslation } from 'react-i18next';
import { languages, type Language } from '#shared/language.ts';
import { useLanguage } from './use-language.ts';

/** Offers each other language in that language's own name. */
export function LanguageSwitch({ onChoose }: { onChoose: (language: Language) => void }) {
  const { t } = useTranslation('common');
  const current = useLanguage();
  return languages
    .filter((language) => language !== current)
    .map((language, place) => (
      <button
        // Keyed by its place, so that the button pressed keeps the focus when its language turns into the other.
        key={place}
        type="button"
        lang={language}
        onClick={() => onChoose(language)}
        className="tap-target px-1 text-action underline underline-offset-4 hover:decoration-2"
      >
        {t(`languageName.${language}`)}
      </button>
    ));
}
