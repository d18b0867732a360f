/** The languages that every page, mail and printed sheet is written in. */
export const languages = ['en', 'fr'] as const;
export type Language = (typeof languages)[number];

/**
 * The language that a tag names (`fr`, `fr-CA`), English for any other.
 * Without a schema library: the small script of the grower copy reads it too.
 */
export function readLanguage(tag: string | undefined): Language {
  return languages.find((language) => language === tag?.slice(0, 2)) ?? 'en';
}
