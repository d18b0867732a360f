import type { Page } from 'playwright-core';
import { expect, it } from 'vitest';
import { languages } from '#shared/language.ts';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import { openVisit, signInByFixture } from '#tests/support/visit.ts';

const demo = openDemoForFile();

/** From a small phone to a laptop; 640 is a laptop at 200 %, and tables turn into cards a little over that. */
const widths = [320, 480, 640, 700, 768, 1024];

const roads = [
  ['advisor', async (page: Page) => ['/weigh-ups', await findWeighUp(page), '/trials']],
  ['agronomist', () => Promise.resolve(['/desk', '/desk/usual-variances'])],
  ['administrator', () => Promise.resolve(['/accounts', '/accounts/audit-log'])],
] as const;

async function findWeighUp(page: Page): Promise<string> {
  const { weighUps } = await (await page.request.get('/api/weigh-ups')).json();
  return `/weigh-ups/${weighUps[0].id}`;
}

/** Widths at which the page scrolls sideways, with by how much. */
async function findTooNarrow(page: Page): Promise<string[]> {
  const found: string[] = [];
  for (const width of widths) {
    await page.setViewportSize({ width, height: 800 });
    const over: number = await page.evaluate(
      'document.documentElement.scrollWidth - document.documentElement.clientWidth',
    );
    if (over > 0) found.push(`${width}: ${over}`);
  }
  return found;
}

it.each(languages)(
  'no page scrolls sideways at any width (%s)',
  async (language) => {
    const tooNarrow: Record<string, string[]> = {};
    for (const [role, listPaths] of roads) {
      const { page, context, close } = await openVisit(demo.browser, demo.app.url, language, 1280);
      // The weigh-ups of the demo belong to one advisor, who may read in either language.
      await signInByFixture(context, role, 'en');
      await context.request.patch('/api/me', { data: { language } });
      for (const path of await listPaths(page)) {
        await page.goto(path);
        await page.getByRole('heading', { level: 1 }).waitFor();
        await page.waitForLoadState('networkidle');
        const found = await findTooNarrow(page);
        if (found.length > 0) tooNarrow[path] = found;
      }
      await close();
    }
    expect(tooNarrow).toEqual({});
  },
  120_000,
);

/** What stands under something else at its middle, of the fields that the key leads to until the numbers are saved. */
async function findHidden(page: Page): Promise<string[]> {
  const hidden: string[] = [];
  for (let press = 0; press < 80; press += 1) {
    await page.keyboard.press('Tab');
    const { name, isHidden } = await page.evaluate<{ name: string; isHidden: boolean }>(`(() => {
      const field = document.activeElement;
      const { left, top, width, height } = field.getBoundingClientRect();
      const seen = document.elementFromPoint(left + width / 2, top + height / 2);
      const name = (field.labels?.[0] ?? field).textContent;
      return { name, isHidden: seen === null || !(field.contains(seen) || seen.contains(field)) };
    })()`);
    if (isHidden) hidden.push(name);
    if (name === say('en', 'weigh-up:money.save')) return hidden;
  }
  throw new Error('no key leads to the saving of the numbers');
}

it.each([
  ['a phone', 360, 740],
  ['a laptop at 200 %', 640, 360],
])(
  'no field of the money panel is hidden from whoever goes by key: %s',
  async (_screen, width, height) => {
    const { page, context, close } = await openVisit(demo.browser, demo.app.url, 'en', width);
    await page.setViewportSize({ width, height });
    await signInByFixture(context, 'advisor', 'en');
    await context.request.patch('/api/me', { data: { language: 'en' } });
    await page.goto(await findWeighUp(page));
    const panel = page.getByRole('region', { name: say('en', 'weigh-up:money.title') });
    await panel.getByLabel(say('en', 'weigh-up:money.middle'), { exact: true }).fill('271');
    await panel.getByLabel(say('en', 'weigh-up:money.low'), { exact: true }).focus();
    expect(await findHidden(page)).toEqual([]);
    await close();
  },
  60_000,
);

it('a dialog that stands in a card of a table begins its lines where lines begin', async () => {
  const { page, context, close } = await openVisit(demo.browser, demo.app.url, 'en', 360);
  await signInByFixture(context, 'advisor', 'en');
  await page.goto(`${await findWeighUp(page)}#method`);
  await page.getByText(/trials behind the figures/).click();
  await page
    .getByRole('button', { name: /^Tick off the trial/ })
    .first()
    .click();
  await page.getByText(say('en', 'record:tickOff.text')).waitFor();
  const side = await page.evaluate("getComputedStyle(document.querySelector('dialog[open] p')).textAlign");
  expect(side).toBe('left');
  await close();
});

it('where colours are forced, the navigation marks the page that one is on and no other', async () => {
  const { page, context, close } = await openVisit(demo.browser, demo.app.url, 'en', 1280);
  await page.emulateMedia({ forcedColors: 'active' });
  await signInByFixture(context, 'advisor', 'en');
  await page.goto('/trials');
  await page.getByRole('heading', { level: 1 }).waitFor();
  // A line in the colour of the words is seen; one in that of the page is not.
  const marked = await page.evaluate(`[...document.querySelectorAll('header nav a')]
    .filter((link) => getComputedStyle(link).borderBottomColor === getComputedStyle(link).color)
    .map((link) => link.textContent)`);
  expect(marked).toEqual(['Trials']);
  await close();
});
