import type { ResourceKey } from 'i18next';

/** Every French sentence of the application by namespace, in one file; those of copies and mails travel with them. */
export const sentences = import.meta.glob<ResourceKey>(
  ['/locales/fr/*.json', '!/locales/fr/{copy,mail,print}.json'],
  { eager: true, import: 'default' },
);
