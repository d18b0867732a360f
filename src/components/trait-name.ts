import type { Trait } from '#shared/catalogue.ts';
import type { Language } from '#shared/account.ts';
import { sayUnit } from '#shared/format-number.ts';

/** A trait as a list offers it: its name and, where it has one, its unit. */
export function nameTrait(trait: Trait, language: Language): string {
  return trait.unit === ''
    ? trait.name[language]
    : `${trait.name[language]} (${sayUnit(trait.unit, language)})`;
}
