import type { Browser, BrowserContext, CDPSession, Page } from 'playwright-core';

/** A phone on a slow line: 400 ms to the server and back, 400 kB/s, a processor four times slower than this one. */
const line = { offline: false, latency: 400, downloadThroughput: 400_000, uploadThroughput: 400_000 };
const slowdown = 4;
const settleMs = 2000;
const longestMs = 60_000;

/** What one visit took. */
export type PageVisit = {
  /** From the navigation's start to the paint that first shows the verdict, ms. */
  verdictMs: number;
  /** Bytes on the line until the page was quiet. */
  bytes: number;
  requests: number;
};

/** The first paint of what the product marks as its verdict, ms; asked once, so that measuring takes no time from the page. */
const verdictPaint = `new Promise((resolve) => {
  new PerformanceObserver((list) => {
    const shown = list.getEntries().find(({ identifier }) => identifier === 'verdict');
    if (shown) resolve(shown.renderTime);
  }).observe({ type: 'element', buffered: true });
})`;

/**
 * Opens a page over the slow line and waits until its verdict is seen.
 * @param context whose cache, cold or warm, the page finds
 * @throws Error when no verdict is seen within the driver's time
 */
export async function visitPage(context: BrowserContext, path: string): Promise<PageVisit> {
  const page = await context.newPage();
  try {
    const session = await context.newCDPSession(page);
    const traffic = await throttle(session);
    await page.goto(path, { waitUntil: 'load', timeout: longestMs });
    const verdictMs = await Promise.race([page.evaluate<number>(verdictPaint), giveUp(page)]);
    // What the page asks for last, a script's own requests say, is counted too.
    await page.waitForTimeout(settleMs);
    return { verdictMs, ...traffic() };
  } finally {
    await page.close();
  }
}

async function giveUp(page: Page): Promise<never> {
  await page.waitForTimeout(longestMs);
  throw new Error(`no verdict is seen on ${page.url()}`);
}

/** @returns how much has come over the line since */
async function throttle(session: CDPSession): Promise<() => Pick<PageVisit, 'bytes' | 'requests'>> {
  let bytes = 0;
  let requests = 0;
  session.on('Network.loadingFinished', ({ encodedDataLength }) => {
    bytes += encodedDataLength;
    if (encodedDataLength > 0) requests += 1;
  });
  await session.send('Network.enable');
  await session.send('Network.emulateNetworkConditions', line);
  await session.send('Emulation.setCPUThrottlingRate', { rate: slowdown });
  return () => ({ bytes, requests });
}

/** A phone with an empty cache. */
export function openPhone(browser: Browser, baseURL: string): Promise<BrowserContext> {
  return browser.newContext({ baseURL, locale: 'en-CA', viewport: { width: 360, height: 740 } });
}
