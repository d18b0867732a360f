import type { BrowserContext, Page } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import type { Language } from '#shared/account.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import {
  expectNoSideways,
  expectSoundPage,
  findDemoAccount,
  openVisit,
  signInByFixture,
} from '#tests/support/visit.ts';

const demo = openDemoForFile();

/** The demo's weigh-up as the server has it now. */
async function readSaved(context: BrowserContext): Promise<WeighUp> {
  const list = await (await context.request.get('/api/weigh-ups')).json();
  const { id } = list.weighUps[0];
  return (await (await context.request.get(`/api/weigh-ups/${id}`)).json()).weighUp;
}

type Table = { language: Language; context: BrowserContext; page: Page; saved: () => Promise<WeighUp> };

/** Sits down at a table with the demo's weigh-up open, and gets up again. */
async function sit(width: number, work: (table: Table) => Promise<void>): Promise<void> {
  // The demo's weigh-up is the English-speaking advisor's.
  const language = 'en';
  const { page, context, close } = await openVisit(demo.browser, demo.app.url, language, width);
  await signInByFixture(context, 'advisor', language);
  // On a phone the farm's part is folded away unless the address asks for it.
  await page.goto(`/weigh-ups/${(await readSaved(context)).id}#farm`);
  await work({ language, context, page, saved: () => readSaved(context) });
  await close();
}

const farm = (page: Page, language: Language) =>
  page.getByRole('region', { name: say(language, 'weigh-up:farm.title') });

describe('two tabs on one weigh-up', () => {
  it('a panel saved in the other tab is met as a conflict: shown, nothing overwritten unseen, nothing typed lost', () =>
    sit(360, async ({ language, context, page, saved }) => {
      const other = await context.newPage();
      await other.goto(page.url());
      const yieldOf = (tab: Page) =>
        farm(tab, language).getByLabel(say(language, 'weigh-up:farm.usualYield'));
      const save = (tab: Page) =>
        farm(tab, language)
          .getByRole('button', { name: say(language, 'weigh-up:farm.save') })
          .click();
      await yieldOf(page).fill('4.4');
      await yieldOf(other).fill('5.1');
      await save(other);
      await other.getByText(say(language, 'weigh-up:farm.saved')).waitFor();
      await save(page);
      await page.getByText(say(language, 'errors:saved-meanwhile')).waitFor();
      expect((await saved()).usualYield).toBe(5.1);
      expect(await yieldOf(page).inputValue()).toBe('4.4');
      await expectNoSideways(page);
      await expect
        .poll(async () => {
          await save(page);
          return (await saved()).usualYield;
        })
        .toBe(4.4);
    }));

  it('a question chosen in one tab and a price saved in the other both stand in the end', () =>
    sit(1280, async ({ language, context, page, saved }) => {
      const before = await saved();
      const other = await context.newPage();
      await other.goto(page.url());
      await other.getByRole('radio', { name: say(language, 'weigh-up:question.best.name') }).check();
      const changed = { ...before, areaHectares: 61 };
      const reply = await context.request.put(`/api/weigh-ups/${before.id}`, {
        data: { revision: before.revision, weighUp: changed },
      });
      expect(reply.status()).toBe(200);
      const save = other.getByRole('button', { name: say(language, 'weigh-up:question.save') });
      await save.click();
      await other.getByText(say(language, 'errors:saved-meanwhile')).waitFor();
      expect(await saved()).toMatchObject({ question: 'several', areaHectares: 61 });
      await expect
        .poll(async () => {
          if (await save.isEnabled()) await save.click();
          return (await saved()).question;
        })
        .toBe('best');
      expect((await saved()).areaHectares).toBe(61);
      await other.getByText(say(language, 'verdicts:best.show')).first().waitFor();
      await expectNoSideways(other);
    }));
});

/** The session ends as it does when its time has run out: its cookie is worth nothing any more. */
const expireSession = (context: BrowserContext) => context.clearCookies();

async function signInAgain(page: Page, language: Language): Promise<void> {
  const dialog = page.getByRole('dialog', { name: say(language, 'sign-in:expiredTitle') });
  await dialog.waitFor();
  await expectSoundPage(page);
  const { password } = findDemoAccount('advisor', language);
  await dialog.getByLabel(say(language, 'sign-in:password')).fill(password);
  await dialog.getByRole('button', { name: say(language, 'sign-in:signIn') }).click();
  await dialog.waitFor({ state: 'hidden' });
}

describe('a session that runs out while somebody types', () => {
  it('on a weigh-up: one signs in over the page, and what was typed is saved', () =>
    sit(360, async ({ language, context, page, saved }) => {
      const before = (await saved()).usualYield;
      const field = farm(page, language).getByLabel(say(language, 'weigh-up:farm.usualYield'));
      await field.fill('3.9');
      await expireSession(context);
      await farm(page, language)
        .getByRole('button', { name: say(language, 'weigh-up:farm.save') })
        .click();
      await signInAgain(page, language);
      await page.getByText(say(language, 'weigh-up:farm.saved')).waitFor();
      expect(before).not.toBe(3.9);
      expect((await saved()).usualYield).toBe(3.9);
    }));

  it('on a new weigh-up: the draft asks for the sign-in, and goes on being kept', () =>
    sit(1280, async ({ language, context, page, saved }) => {
      const { currentVarietyId } = await saved();
      await page.goto(`/weigh-ups/new?crop=spring-barley&region=upper-velmar&current=${currentVarietyId}`);
      const grower = page.getByLabel(say(language, 'weigh-up:new.grower'));
      await grower.waitFor();
      await expireSession(context);
      await grower.fill('Wren Castle');
      await signInAgain(page, language);
      await page.getByText(say(language, 'record:drafts.kept')).waitFor();
      expect(await grower.inputValue()).toBe('Wren Castle');
      const { drafts } = await (await context.request.get('/api/weigh-up-drafts')).json();
      expect(drafts).toMatchObject([{ content: { growerName: 'Wren Castle' } }]);
    }));
});
