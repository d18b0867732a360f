import type { ResourceLanguage } from 'i18next';

/** A style sheet at its address, or in the page itself under the hash by which the security policy lets it through. */
export type CopyPageStyle = { address: string } | { text: string; hash: string };

/** What the page of a copy is made of beside its text. */
export type CopyPageFiles = {
  style: CopyPageStyle;
  icon: string;
  script: string;
  /** Style sheet that names the fonts. */
  fonts: string;
};

/** Why there is no copy to show. */
export type CopyFailure = 'link-unknown' | 'link-expired' | 'link-revoked' | 'away';

/** The sentences of a copy in one language, by namespace. */
export type CopySentences = ResourceLanguage;
