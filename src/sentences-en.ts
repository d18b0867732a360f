import type { ResourceKey } from 'i18next';

/** Every English sentence of the application by namespace, in one file; those of copies and mails travel with them. */
export const sentences = import.meta.glob<ResourceKey>(
  ['/locales/en/*.json', '!/locales/en/{copy,mail,print}.json'],
  { eager: true, import: 'default' },
);
