import type { Browser, BrowserContext, CDPSession, Page } from 'playwright-core';

/** A phone on a slow line: 400 ms to the server and back, 400 kB/s, a processor four times slower than this one. */
const line = { offline: false, latency: 400, downloadThroughput: 400_000, uploadThroughput: 400_000 };
const slowdown = 4;
const settleMs = 2000;

/** What one visit took. */
export type PageVisit = {
  /** From the navigation's start to the paint that first shows the verdict, ms. */
  verdictMs: number;
  /** Bytes on the line until the page was quiet. */
  bytes: number;
  requests: number;
};

/** Marks the verdict's paragraph before it is painted, and notes the paint in which it appears. */
const watchVerdict = `
  new PerformanceObserver((list) => {
    for (const entry of list.getEntries()) globalThis.verdictShownAt ??= entry.renderTime;
  }).observe({ type: 'element', buffered: true });
  new MutationObserver(() => {
    document.querySelector('main p > strong.font-bold')?.parentElement.setAttribute('elementtiming', 'verdict');
  }).observe(document, { childList: true, subtree: true });
`;

/**
 * Opens a page over the slow line and waits until its verdict is seen.
 * @param context whose cache, cold or warm, the page finds
 */
export async function visitPage(context: BrowserContext, path: string): Promise<PageVisit> {
  const page = await context.newPage();
  try {
    await page.addInitScript({ content: watchVerdict });
    const session = await context.newCDPSession(page);
    const traffic = await throttle(session);
    await page.goto(path, { waitUntil: 'commit' });
    const verdictMs = await waitForVerdict(page);
    await page.waitForLoadState('load');
    // What the page asks for last, a script's own requests say, is counted too.
    await page.waitForTimeout(settleMs);
    return { verdictMs, ...traffic() };
  } finally {
    await page.close();
  }
}

/** The page's policy forbids the driver to wait inside of it, so it is asked now and then. */
async function waitForVerdict(page: Page): Promise<number> {
  for (let look = 0; look < 600; look += 1) {
    const shownAt = await page.evaluate<number>('globalThis.verdictShownAt ?? 0');
    if (shownAt > 0) return shownAt;
    await page.waitForTimeout(100);
  }
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
