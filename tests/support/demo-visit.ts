import type { Browser } from 'playwright-core';
import { afterAll, beforeAll } from 'vitest';
import { openBrowser } from './browser.ts';
import { type DemoApp, startDemoApp } from './demo-app.ts';

export type DemoVisit = { app: DemoApp; browser: Browser };

/** Of this worker's files: a context of the browser knows nothing of the others. It ends with the worker. */
let shared: Promise<Browser> | null = null;

async function shareBrowser(): Promise<Browser> {
  const browser = await (shared ??= openBrowser());
  if (browser.isConnected()) return browser;
  shared = openBrowser();
  return shared;
}

/**
 * Opens the product with a demo of its own, and a browser, for the tests of a file; called at its head.
 * @param prepare what has to be there before the product starts; gives further settings, a mail server say
 * @returns filled when the tests begin
 */
export function openDemoForFile(
  prepare: () => Promise<NodeJS.ProcessEnv> = () => Promise.resolve({}),
): DemoVisit {
  const visit = {} as DemoVisit;
  beforeAll(async () => {
    visit.app = await startDemoApp(await prepare());
    visit.browser = await shareBrowser();
  });
  afterAll(async () => {
    await Promise.all(visit.browser?.contexts().map((context) => context.close()) ?? []);
    await visit.app?.close();
  });
  return visit;
}
