import type { Page } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import type { Language } from '#shared/account.ts';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import {
  expectNoSideways,
  expectSoundPage,
  findDemoAccount,
  openVisit,
  widths,
} from '#tests/support/visit.ts';

const demo = openDemoForFile();

const other = (language: Language): Language => (language === 'en' ? 'fr' : 'en');

async function signIn(page: Page, language: Language): Promise<void> {
  const { email, password } = findDemoAccount('advisor', language);
  await page.goto('/');
  await page.getByLabel(say(language, 'sign-in:email')).fill(email);
  await page.getByLabel(say(language, 'sign-in:password')).fill('not the password');
  await page.getByRole('button', { name: say(language, 'sign-in:signIn') }).click();
  await page.getByText(say(language, 'errors:wrong-credentials')).waitFor();
  await expectSoundPage(page);
  await page.getByLabel(say(language, 'sign-in:password')).fill(password);
  await page.getByRole('button', { name: say(language, 'sign-in:signIn') }).click();
  await page.getByRole('heading', { level: 1, name: say(language, 'weigh-up:list.title') }).waitFor();
  await expectSoundPage(page);
}

/** Fills the question in and keeps the first two candidates; returns their names. */
async function askQuestion(page: Page, language: Language): Promise<string[]> {
  await page.goto('/weigh-ups/new');
  const chooseByStart = async (label: string, start: string): Promise<void> => {
    const list = page.getByLabel(label);
    const option = list.locator('option').filter({ hasText: start }).first();
    await list.selectOption((await option.getAttribute('value')) ?? '');
  };
  await chooseByStart(
    say(language, 'weigh-up:new.crop'),
    language === 'en' ? 'Spring barley' : 'Orge de printemps',
  );
  await chooseByStart(
    say(language, 'weigh-up:new.region'),
    language === 'en' ? 'Sarrow Coast' : 'Côte de Sarrow',
  );
  const noVerdict = page.getByRole('heading', { name: say(language, 'verdicts:noTrials.title') });
  await noVerdict.waitFor();
  await expectNoSideways(page);
  await chooseByStart(
    say(language, 'weigh-up:new.region'),
    language === 'en' ? 'Upper Velmar' : 'Haut-Velmar',
  );
  const current = page.getByLabel(say(language, 'weigh-up:new.current'), { exact: true });
  await current.selectOption({ index: 1 });
  const boxes = page.getByRole('checkbox');
  await boxes.nth(3).waitFor();
  const names: string[] = [];
  for (const index of [1, 2]) {
    const box = boxes.nth(index);
    await box.click();
    // The choice is kept in the address, so the tick follows it.
    await page.getByRole('checkbox', { checked: true }).nth(names.length).waitFor();
    names.push(((await box.locator('xpath=ancestor::label').textContent()) ?? '').trim());
  }
  await expectSoundPage(page);
  return names;
}

async function weigh(page: Page, language: Language): Promise<void> {
  await page.getByLabel(say(language, 'weigh-up:new.grower')).fill('Odile Varre');
  await page.getByLabel(say(language, 'weigh-up:new.farmName')).fill('Les Trois Haies');
  await page.getByRole('button', { name: say(language, 'weigh-up:new.create') }).click();
  // The area is still missing: the page stays and says so, with nothing lost.
  await page.getByText(say(language, 'errors:fields.required')).first().waitFor();
  await page.getByLabel(say(language, 'weigh-up:new.area')).fill(language === 'en' ? '120.5' : '120,5');
  await page.getByRole('button', { name: say(language, 'weigh-up:new.create') }).click();
  await page.waitForURL(/\/weigh-ups\/[0-9a-f-]{36}/);
  await page.getByRole('heading', { level: 1 }).waitFor();
}

/** Turns the tablet round: one candidate at a time in large type, turned by the keyboard, and back. */
async function showAtTable(page: Page, language: Language, names: readonly string[]): Promise<void> {
  const [first = '', second = ''] = names;
  const heading = (name: string) => page.getByRole('heading', { level: 2, name });
  await page.getByRole('button', { name: say(language, 'weigh-up:table.open') }).click();
  await heading(first).waitFor();
  await expectSoundPage(page);
  await page.keyboard.press('ArrowRight');
  await heading(second).waitFor();
  expect(await heading(first).isVisible()).toBe(false);
  await page.getByRole('heading', { name: say(language, 'verdicts:cautionsTitle') }).waitFor();
  await expectNoSideways(page);
  await page.keyboard.press('Escape');
  await heading(say(language, 'weigh-up:copies.title')).waitFor();
}

/** The yields, areas and prices of the page in bushels, and back. */
async function readInBushels(page: Page, language: Language): Promise<void> {
  const units = page.getByLabel(say(language, 'common:units.label'));
  await units.selectOption('bu/ac');
  const main = page.getByRole('main');
  expect(await main.textContent()).toMatch(language === 'en' ? /\d\sbu\/ac/ : /\d\sbo\/ac/);
  expect(await main.textContent()).not.toMatch(/\d\st\/ha/);
  await expectNoSideways(page);
  await units.selectOption('t/ha');
}

async function handOver(page: Page, language: Language): Promise<string> {
  // On a phone the section is a line until it is asked for.
  await page.getByRole('link', { name: say(language, 'weigh-up:page.handOver') }).click();
  await page.getByLabel(say(language, 'weigh-up:copies.language')).selectOption(other(language));
  await page.getByRole('button', { name: say(language, 'weigh-up:copies.make') }).click();
  const link = await page.getByLabel(say(language, 'weigh-up:copies.link')).inputValue();
  expect(link).toMatch(/\/copy\/[A-Za-z0-9_-]{22,}$/);
  return link;
}

const verdictWords = (language: Language): RegExp =>
  new RegExp(
    ['ahead', 'behind', 'level', 'open', 'thin']
      .map((code) => say(language, `common:verdict.${code}`))
      .join('|'),
  );

describe.each(['en', 'fr'] as const)('an advisor who reads %s', (language) => {
  it.each(widths[language])('goes from signing in to the grower’s phone at %i px', async (width) => {
    const visit = await openVisit(demo.browser, demo.app.url, language, width);
    const { page } = visit;
    await signIn(page, language);
    const names = await askQuestion(page, language);
    await weigh(page, language);
    const main = page.getByRole('main');
    for (const name of names) await main.getByText(name).first().waitFor();
    // The candidates follow after the answer has been painted.
    await main.getByText(verdictWords(language)).first().waitFor();
    expect(await main.textContent()).toMatch(language === 'en' ? /t\/ha/ : /\d,\d+\s*t\/ha/);
    await expectNoSideways(page);
    await readInBushels(page, language);
    await showAtTable(page, language, names);
    const link = await handOver(page, language);
    await expectSoundPage(page);

    const phone = await openVisit(demo.browser, demo.app.url, other(language), 360);
    await phone.page.goto(link);
    await phone.page.getByText('Odile Varre').first().waitFor();
    expect(await phone.page.getAttribute('html', 'lang')).toBe(other(language));
    const copy = phone.page.locator('body');
    for (const name of names) expect(await copy.textContent()).toContain(name);
    expect(await copy.textContent()).toMatch(verdictWords(other(language)));
    await expectNoSideways(phone.page);

    page.on('dialog', (dialog) => void dialog.accept());
    await page
      .getByRole('button', { name: new RegExp(`^${say(language, 'weigh-up:copies.revoke')}`) })
      .first()
      .click();
    await page
      .getByRole('dialog')
      .getByRole('button', { name: say(language, 'weigh-up:copies.revoke') })
      .click();
    await page.getByText(say(language, 'weigh-up:copies.revokedDone')).waitFor();
    await phone.page.reload();
    await phone.page.getByText(say(other(language), 'copy:failed.link-revoked.title')).waitFor();
    await expectNoSideways(phone.page);
    await phone.close();
    await visit.close();
  });
});
