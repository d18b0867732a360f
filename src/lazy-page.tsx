import { lazy, useState, type ComponentType } from 'react';
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

/** A page that is fetched when it is first opened, or before. */
export type LazyPage = ComponentType & {
  /**
   * Fetches the page now; one that does not come is tried again when it is opened.
   * @param started sentences can be loaded from then on
   */
  prepare: (started: Promise<void>) => Promise<void>;
};

/**
 * A page whose code and sentences are fetched together when it is first opened.
 * @param load imports the page's module and picks the page
 * @param namespaces sentences that the page needs besides `common` and `errors`
 */
export function lazyPage(load: () => Promise<ComponentType>, namespaces: readonly Namespace[]): LazyPage {
  let prepared: ComponentType | null = null;
  const PageWhenLoaded = lazy(async () => {
    const [Page] = await Promise.all([tryAgain(load), loadSentences(namespaces)]);
    return { default: Page };
  });
  function Opened() {
    // What is opened stays the same component, also when a page that came late has been prepared meanwhile.
    const [Page] = useState<ComponentType>(() => prepared ?? PageWhenLoaded);
    return <Page />;
  }
  const prepare = async (started: Promise<void>): Promise<void> => {
    try {
      [prepared] = await Promise.all([load(), started.then(() => loadSentences(namespaces))]);
    } catch {
      // Opening the page tries again, and says so where that fails as well.
    }
  };
  return Object.assign(Opened, { prepare });
}
