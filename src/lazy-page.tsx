import { lazy, type ComponentType, type LazyExoticComponent } from 'react';
import { ApiError } from './api-client.ts';
import { loadSentences } from './i18n.ts';
import type { Namespace } from './locale-resources.ts';

/** Waits between tries: signal comes and goes at a kitchen table. */
const waitsMs = [500, 2000];

async function tryAgain<Loaded>(load: () => Promise<Loaded>): Promise<Loaded> {
  for (const wait of waitsMs) {
    try {
      return await load();
    } catch {
      await new Promise((resolve) => setTimeout(resolve, wait));
    }
  }
  return load().catch((error: unknown) => {
    throw new ApiError('offline', 0, { cause: error });
  });
}

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
    const [Page] = await Promise.all([tryAgain(load), loadSentences(namespaces)]);
    return { default: Page };
  });
}
