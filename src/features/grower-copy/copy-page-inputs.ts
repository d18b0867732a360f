import type { ResourceLanguage } from 'i18next';

/** A style sheet or a script in the page itself, under the hash by which the security policy lets it through. */
type InPage = { text: string; hash: string };

/** What the page of a copy is made of beside its text. */
export type CopyPageFiles = {
  style: { address: string } | InPage;
  /** Fetches fonts and script after the first paint; null where the page names them itself, as in development. */
  afterPaint: InPage | null;
  icon: string;
  script: string;
  /** Style sheet that names the fonts. */
  fonts: string;
};

/** Why there is no copy to show. */
export type CopyFailure = 'link-unknown' | 'link-expired' | 'link-revoked' | 'away';

/** The sentences of a copy in one language, by namespace. */
export type CopySentences = ResourceLanguage;
