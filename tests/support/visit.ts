import AxeBuilder from '@axe-core/playwright';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { expect } from 'vitest';
import type { Language, Role } from '#shared/account.ts';
import { demoAccounts, type DemoAccount } from '#server/demo/demo-accounts.ts';

/**
 * A phone held upright and a desktop, in CSS pixels. A road is walked once in each language and on each screen: French
 * on a phone is the tightest of the four.
 */
export const widths: Record<Language, readonly number[]> = { en: [1280], fr: [360] };

export type Visit = { page: Page; context: BrowserContext; close: () => Promise<void> };

/**
 * Opens the product as a person with that language and screen would. Errors of the page's scripts, which a person may
 * not notice, fail the test when the visit is closed.
 */
export async function openVisit(
  browser: Browser,
  url: string,
  language: Language,
  width: number,
): Promise<Visit> {
  const context = await browser.newContext({
    baseURL: url,
    locale: language === 'en' ? 'en-CA' : 'fr-CA',
    viewport: { width, height: width < 500 ? 740 : 900 },
    reducedMotion: 'reduce',
  });
  const page = await context.newPage();
  const failures: string[] = [];
  page.on('pageerror', (error) => failures.push(error.message));
  page.setDefaultTimeout(30_000);
  return {
    page,
    context,
    close: async () => {
      await context.close();
      expect(failures).toEqual([]);
    },
  };
}

/** Signs a demo account in without its form; the road of an advisor goes through the form itself. */
export async function signInByFixture(
  context: BrowserContext,
  role: Role,
  language: Language,
): Promise<void> {
  const account = findDemoAccount(role, language);
  const reply = await context.request.post('/api/session', {
    data: { email: account.email, password: account.password },
  });
  expect(reply.status()).toBe(200);
}

/** The demo account of a role that reads the language; the administrator's stands for both. */
export function findDemoAccount(role: Role, language: Language): DemoAccount {
  const ofRole = Object.values<DemoAccount>(demoAccounts).filter((account) => account.role === role);
  const account = ofRole.find((candidate) => candidate.language === language) ?? ofRole[0];
  if (account === undefined) throw new Error(`the demo has no ${role}`);
  return account;
}

/** Nothing serious or critical by axe, and nothing that scrolls sideways. It takes seconds on a long page. */
export async function expectSoundPage(page: Page): Promise<void> {
  // In the page itself, which has no frames: else all that passed goes through a second page, which takes four times as long.
  const axe = new AxeBuilder({ page }).setLegacyMode().options({ resultTypes: ['violations'] });
  const { violations } = await axe.analyze();
  const serious = violations
    .filter(({ impact }) => impact === 'serious' || impact === 'critical')
    .map(({ id, nodes }) => `${id}: ${nodes.map(({ html }) => html.slice(0, 160)).join(' | ')}`);
  expect(serious).toEqual([]);
  await expectNoSideways(page);
}

export async function expectNoSideways(page: Page): Promise<void> {
  const overflow = await page.evaluate<number>(
    'document.documentElement.scrollWidth - document.documentElement.clientWidth',
  );
  expect(overflow).toBeLessThanOrEqual(0);
}
