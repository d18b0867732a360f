import { lazy, type ComponentType, type LazyExoticComponent } from 'react';
import { i18n } from './i18n.ts';
import type { Namespace } from './locale-resources.ts';

/**
 * A page whose code and sentences are fetched together when it is first opened.
 * @param load imports the page's module and picks the page
 * @param namespaces sentences that the page needs besides `common` and `errors`
 */
export function lazyPage(
  load: () => Promise<ComponentType>,
  namespaces: readonly Namespace[],
): LazyExoticComponent<ComponentType> {
  return lazy(async () => {
    const [Page] = await Promise.all([load(), i18n.loadNamespaces(namespaces)]);
    return { default: Page };
  });
}
