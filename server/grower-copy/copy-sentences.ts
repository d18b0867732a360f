import type { Language } from '#shared/language.ts';
import type { CopySentences } from '#src/features/grower-copy/render-copy-page.ts';
import enCautions from '#locales/en/cautions.json' with { type: 'json' };
import enCommon from '#locales/en/common.json' with { type: 'json' };
import enCopy from '#locales/en/copy.json' with { type: 'json' };
import enDrawings from '#locales/en/drawings.json' with { type: 'json' };
import enMethod from '#locales/en/method.json' with { type: 'json' };
import enPrint from '#locales/en/print.json' with { type: 'json' };
import enVerdicts from '#locales/en/verdicts.json' with { type: 'json' };
import frCautions from '#locales/fr/cautions.json' with { type: 'json' };
import frCommon from '#locales/fr/common.json' with { type: 'json' };
import frCopy from '#locales/fr/copy.json' with { type: 'json' };
import frDrawings from '#locales/fr/drawings.json' with { type: 'json' };
import frMethod from '#locales/fr/method.json' with { type: 'json' };
import frPrint from '#locales/fr/print.json' with { type: 'json' };
import frVerdicts from '#locales/fr/verdicts.json' with { type: 'json' };

/** The sentences of a copy in both languages, by namespace. */
export type BilingualSentences = Record<Language, CopySentences>;

const english = {
  cautions: enCautions,
  common: enCommon,
  copy: enCopy,
  drawings: enDrawings,
  method: enMethod,
  print: enPrint,
  verdicts: enVerdicts,
};

/** Every key by which a copy may ask for a sentence, with its namespace: `copy:failed.away.title`. */
export type CopySentenceKey = {
  [Namespace in keyof typeof english]: `${Namespace}:${KeyIn<(typeof english)[Namespace]>}`;
}[keyof typeof english];

/** Keys of nested texts, joined by dots; the forms of a plural are one key. */
type KeyIn<Texts> = {
  [Name in keyof Texts & string]: Texts[Name] extends string
    ? WithoutForm<Name>
    : `${Name}.${KeyIn<Texts[Name]>}`;
}[keyof Texts & string];

type WithoutForm<Name extends string> = Name extends `${infer Plain}_${'one' | 'other'}` ? Plain : Name;

/** Every sentence that a copy may say, as it is today. */
export const presentSentences: BilingualSentences = {
  en: english,
  fr: {
    cautions: frCautions,
    common: frCommon,
    copy: frCopy,
    drawings: frDrawings,
    method: frMethod,
    print: frPrint,
    verdicts: frVerdicts,
  },
};
