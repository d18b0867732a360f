import type { APIRequestContext, BrowserContext, Page } from 'playwright-core';
import { beforeAll, describe, expect, it } from 'vitest';
import { languages, type Language } from '#shared/language.ts';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import {
  expectNoSideways,
  expectSoundPage,
  openVisit,
  signInByFixture,
  widths,
} from '#tests/support/visit.ts';

const demo = openDemoForFile();
let office: BrowserContext;

beforeAll(async () => {
  office = await demo.browser.newContext({ baseURL: demo.app.url });
  await signInByFixture(office, 'advisor', 'en');
});

type Made = { path: string; copy: { id: string } };

async function makeCopy(request: APIRequestContext, language: Language): Promise<Made> {
  const { weighUps } = (await (await request.get('/api/weigh-ups')).json()) as { weighUps: { id: string }[] };
  const reply = await request.post(`/api/weigh-ups/${weighUps[0]?.id ?? ''}/grower-copies`, {
    data: { language },
  });
  expect(reply.status()).toBe(200);
  return (await reply.json()) as Made;
}

/** The demo's own question; see server/demo/store-demo-weigh-up.ts. */
const candidates = ['Quillane', 'Ostermay', 'Marrasby', 'Ilvane', 'Larkhollow'];

const candidateOf = (page: Page, name: string) =>
  page.getByRole('article').filter({ has: page.getByRole('heading', { level: 2, name }) });

describe.each(languages)('a grower who reads %s', (language) => {
  const tenth = language === 'fr' ? ',' : '.';

  it('reads and opens everything with scripts off', async () => {
    const { path } = await makeCopy(office.request, language);
    const phone = await demo.browser.newContext({
      baseURL: demo.app.url,
      javaScriptEnabled: false,
      viewport: { width: 360, height: 740 },
    });
    const page = await phone.newPage();
    await page.goto(path);
    const main = page.getByRole('main');
    for (const name of candidates) {
      await main.getByRole('heading', { level: 2, name }).waitFor();
      const story = candidateOf(page, name).locator('details').first();
      expect(await story.getAttribute('open')).toBeNull();
      await story.locator('summary').first().click();
      await story.getByRole('heading', { level: 3 }).first().waitFor();
    }
    await main.getByRole('heading', { name: say(language, 'verdicts:cautionsTitle') }).waitFor();
    await main.getByText(say(language, 'copy:howTitle')).click();
    await main.getByRole('heading', { name: say(language, 'method:trialsUsed') }).waitFor();
    // What could do nothing is not shown.
    expect(await main.getByRole('textbox').count()).toBe(0);
    expect(await main.getByRole('button').count()).toBe(0);
    await page.getByRole('link', { name: 'q/ha' }).click();
    await main
      .getByText(/\d\u00a0q\/ha/)
      .first()
      .waitFor();
    await page
      .getByRole('link', { name: say(language, `common:languageName.${language === 'en' ? 'fr' : 'en'}`) })
      .click();
    expect(await page.getAttribute('html', 'lang')).toBe(language === 'en' ? 'fr' : 'en');
    await main
      .getByText(/\d\u00a0q\/ha/)
      .first()
      .waitFor();
    await phone.close();
  });

  it.each(widths[language])(
    'tries an own price, in other units and the other language, at %i px',
    async (width) => {
      const { path, copy } = await makeCopy(office.request, language);
      const visit = await openVisit(demo.browser, demo.app.url, language, width);
      const { page } = visit;
      const complaints: string[] = [];
      page.on('console', (message) => {
        if (['error', 'warning'].includes(message.type())) complaints.push(message.text());
      });
      const asked: string[] = [];
      page.on('request', (request) => asked.push(request.url()));
      await page.goto(path);
      await expectNoSideways(page);
      const worth = candidateOf(page, 'Quillane').locator('p').first();
      const frozen = (await worth.textContent()) ?? '';
      const price = page.getByRole('textbox', { name: say(language, 'copy:own.price') });
      await price.fill(`400${tenth}5`);
      await page.getByText(/^(Your own number|Votre chiffre)\s*:/).waitFor();
      expect(await worth.textContent()).not.toBe(frozen);
      expect(await worth.textContent()).toContain(say(language, 'copy:own.mark'));
      await candidateOf(page, 'Quillane').locator('summary').first().click();
      await expectSoundPage(page);

      await page.getByRole('link', { name: /^(bu|bo)\/ac/ }).click();
      await page.waitForURL(/unit=bu-ac/);
      await page.getByText(/^(Your own number|Votre chiffre)\s*:/).waitFor();
      expect(new URL(page.url()).hash).toBe('#price=400.5');
      const other: Language = language === 'en' ? 'fr' : 'en';
      await page.getByRole('link', { name: say(language, `common:languageName.${other}`) }).click();
      await page.waitForURL(new RegExp(`lang=${other}`));
      await page.getByText(/^(Your own number|Votre chiffre)\s*:/).waitFor();
      await page
        .getByRole('button', { name: say(other, 'copy:own.reset') })
        .first()
        .click();
      expect(await page.getByText(/^(Your own number|Votre chiffre)\s*:/).count()).toBe(0);
      await expectNoSideways(page);
      // The server never hears of the price, nor anybody else of anything.
      for (const url of asked)
        expect([new URL(url).origin, url.includes('400.5')]).toEqual([demo.app.url, false]);
      expect(complaints).toEqual([]);

      await office.request.delete(`/api/grower-copies/${copy.id}`);
      expect((await page.reload())?.status()).toBe(410);
      await page
        .getByRole('heading', { level: 1, name: say(other, 'copy:failed.link-revoked.title') })
        .waitFor();
      await expectSoundPage(page);
      await visit.close();
    },
  );
});
