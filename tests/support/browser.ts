import { type Browser, chromium } from 'playwright-core';
import { findChromium } from '#server/setup/chromium-program.mjs';

/**
 * Starts Chromium, without the traffic to its maker's hosts that it would begin with. Close it when done.
 * @throws Error when none is installed
 */
export function openBrowser(): Promise<Browser> {
  const executablePath = findChromium();
  if (executablePath === null) throw new Error('Chromium was not found; npm test installs it.');
  return chromium.launch({
    executablePath,
    args: [
      // Chromium's sandbox does not work for root, nor in most containers.
      '--no-sandbox',
      '--disable-gpu',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
      '--disable-dev-shm-usage',
    ],
  });
}
