import type { Page } from 'playwright-core';
import { afterAll, expect, it } from 'vitest';
import type { Language } from '#shared/account.ts';
import { openMailSink } from '#server/setup/mail-sink.mjs';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { readPdf } from '#tests/support/read-pdf.ts';
import { say } from '#tests/support/say.ts';
import { expectSoundPage, openVisit, signInByFixture } from '#tests/support/visit.ts';

let sink: Awaited<ReturnType<typeof openMailSink>>;

// The last to be closed, as it is asked for first.
afterAll(() => sink?.close());

const demo = openDemoForFile(async () => {
  sink = await openMailSink();
  return { SMTP_URL: sink.url, MAIL_FROM: 'gavelrow@example.org' };
});

const mine: Language = 'en';
const theirs: Language = 'fr';
const grower = 'wren@example.org';

/** Signed amounts as a page or a paper says them, per hectare or in all, in either language. */
const amountsIn = (text: string | null): string[] =>
  (text ?? '')
    .replace(/\s/g, ' ')
    .match(/[+−](?:\$\d[\d,]*|\d[\d ]* \$)(?:\/ha)?/g)
    ?.map((found) => found.replaceAll(' ', '')) ?? [];

/** The question with the farm's place by a town's name, and two candidates: one ticked, one searched for and moved to the front. */
async function ask(page: Page): Promise<[first: string, second: string]> {
  await page.goto('/weigh-ups/new?crop=spring-barley&region=upper-velmar');
  const place = page.getByLabel(say(mine, 'weigh-up:farm.place'));
  await place.fill('penhollow');
  await place.press('Tab');
  await page.getByLabel(say(mine, 'weigh-up:new.current'), { exact: true }).selectOption({ index: 1 });
  const rows = page.getByRole('row').filter({ has: page.getByRole('checkbox') });
  // Of those alone whose worth can be told: the road is about money as well.
  const told = rows.filter({ hasNotText: say(mine, 'verdicts:cantSay') }).getByRole('rowheader');
  await told.nth(1).waitFor();
  const nameOf = async (row: number) => ((await told.nth(row).textContent()) ?? '').trim();
  const [second, first] = [await nameOf(0), await nameOf(1)];
  await page.getByRole('checkbox', { name: second, exact: true }).click();
  await page.getByRole('checkbox', { checked: true }).waitFor();
  await page.getByLabel(say(mine, 'weigh-up:new.search')).fill(first.toUpperCase());
  await expect.poll(() => rows.count()).toBe(1);
  await page.getByRole('checkbox', { name: first, exact: true }).click();
  await page.getByRole('button', { name: say(mine, 'weigh-up:new.kept.up', { name: first }) }).click();
  const kept = page.getByRole('region', { name: say(mine, 'weigh-up:new.kept.title') });
  await expect.poll(() => kept.getByRole('listitem').first().textContent()).toContain(first);
  expect(new URL(page.url()).searchParams.has('farm')).toBe(true);
  await expectSoundPage(page);
  return [first, second];
}

async function weigh(page: Page): Promise<string> {
  await page.getByLabel(say(mine, 'weigh-up:new.grower')).fill('Wren Castle');
  await page.getByLabel(say(mine, 'weigh-up:new.farmName')).fill('Low Field');
  await page.getByLabel(say(mine, 'weigh-up:new.area')).fill('48.5');
  await page.getByRole('button', { name: say(mine, 'weigh-up:new.create') }).click();
  await page.waitForURL(/\/weigh-ups\/[0-9a-f-]{36}/);
  await page.getByRole('region', { name: say(mine, 'weigh-up:money.title') }).waitFor();
  return /[0-9a-f-]{36}/.exec(page.url())?.[0] ?? '';
}

/** Types a price: the returns follow before anything is saved, and stay when it is. */
async function editPrice(page: Page): Promise<void> {
  const panel = page.getByRole('region', { name: say(mine, 'weigh-up:money.title') });
  const shown = async () => amountsIn(await page.getByRole('main').textContent());
  const before = await shown();
  expect(before.length).toBeGreaterThan(0);
  const high = await panel.getByLabel(say(mine, 'weigh-up:money.high'), { exact: true }).inputValue();
  await panel.getByLabel(say(mine, 'weigh-up:money.middle'), { exact: true }).fill(high);
  await expect.poll(shown).not.toEqual(before);
  const after = await shown();
  await panel.getByRole('button', { name: say(mine, 'weigh-up:money.save') }).click();
  await page.getByText(say(mine, 'weigh-up:money.saved')).waitFor();
  expect(await shown()).toEqual(after);
  await expectSoundPage(page);
}

/** First to an address that the mail server refuses, which the page says with what to do; then to the right one. */
async function handOver(page: Page): Promise<string> {
  await page.getByRole('link', { name: say(mine, 'weigh-up:page.handOver') }).click();
  await page.getByLabel(say(mine, 'weigh-up:copies.language')).selectOption(theirs);
  const address = page.getByLabel(say(mine, 'weigh-up:copies.email'));
  const send = page.getByRole('button', { name: say(mine, 'weigh-up:copies.makeAndSend') });
  await address.fill('refused@example.org');
  await send.click();
  await page.getByText(say(mine, 'weigh-up:copies.mail.failure.recipient-refused')).waitFor();
  await expectSoundPage(page);
  await address.fill(grower);
  await send.click();
  return readMailedLink(1);
}

/** The link of the grower's n-th mail, once it has come. */
async function readMailedLink(count: number): Promise<string> {
  const mails = () => sink.mails().filter(({ recipients }) => recipients.includes(grower));
  await expect.poll(() => mails().length, { timeout: 20_000 }).toBe(count);
  const link = /http\S+\/copy\/[A-Za-z0-9_-]{22,}/.exec(mails().at(-1)?.text ?? '')?.[0];
  if (link === undefined) throw new Error('the mail holds no link');
  return link;
}

/** Reads the amounts of the copy, and tries a price of one's own, which moves them in the page and nowhere else. */
async function readOnPhone(page: Page, link: string, names: readonly string[]): Promise<string[]> {
  await page.goto(link);
  await page.getByText('Wren Castle').first().waitFor();
  expect(await page.getAttribute('html', 'lang')).toBe(theirs);
  const body = page.locator('body');
  for (const name of names) expect(await body.textContent()).toContain(name);
  await expectSoundPage(page);
  const candidates = page.getByRole('region', { name: say(theirs, 'copy:candidates') });
  const shown = async () => amountsIn(await candidates.innerText());
  const inFull = async () => amountsIn(await candidates.textContent());
  const [frozen, frozenInFull] = [await shown(), await inFull()];
  expect(frozen.length).toBeGreaterThan(0);
  await page.getByRole('textbox', { name: say(theirs, 'copy:own.price') }).fill('350,5');
  await expect.poll(inFull).not.toEqual(frozenInFull);
  await page
    .getByRole('button', { name: say(theirs, 'copy:own.reset') })
    .first()
    .click();
  await expect.poll(inFull).toEqual(frozenInFull);
  return frozen;
}

/** What a phone shows that runs no scripts. */
async function readWithoutScripts(link: string): Promise<string[]> {
  const context = await demo.browser.newContext({
    javaScriptEnabled: false,
    viewport: { width: 360, height: 740 },
  });
  const page = await context.newPage();
  await page.goto(link);
  const text = await page.getByRole('region', { name: say(theirs, 'copy:candidates') }).innerText();
  await context.close();
  return amountsIn(text);
}

/** Withdraws a trial that the weigh-up rests on, as its agronomist would. */
async function withdrawTrial(weighUpId: string, advisor: Page): Promise<{ site: string; season: number }> {
  const read = await advisor.request.get(`/api/weigh-ups/${weighUpId}`);
  const { trialId, siteName, season } = (await read.json()).result.trials[0];
  const { context, close } = await openVisit(demo.browser, demo.app.url, mine, 1280);
  await signInByFixture(context, 'agronomist', mine);
  const { trial } = await (await context.request.get(`/api/desk/trials/${trialId}`)).json();
  const reply = await context.request.post(`/api/desk/trials/${trialId}/withdrawals`, {
    data: { revision: trial.revision, reason: 'The plots were mixed up' },
  });
  expect(reply.status()).toBe(200);
  await close();
  return { site: siteName, season };
}

it('from the question at the table to a corrected copy on the grower’s phone', async () => {
  const { page, context, close } = await openVisit(demo.browser, demo.app.url, mine, 1280);
  await signInByFixture(context, 'advisor', mine);
  const names = await ask(page);
  const weighUpId = await weigh(page);
  await editPrice(page);
  const link = await handOver(page);

  const phone = await openVisit(demo.browser, demo.app.url, theirs, 360);
  const frozen = await readOnPhone(phone.page, link, names);
  expect(await readWithoutScripts(link)).toEqual(frozen);
  const pdf = await readPdf(await (await phone.context.request.get(`${link}/pdf`)).body());
  expect(pdf.language).toMatch(new RegExp(`^${theirs}`));
  for (const amount of frozen) expect(amountsIn(pdf.words)).toContain(amount);

  const withdrawn = await withdrawTrial(weighUpId, page);
  const notice = say(theirs, 'verdicts:changes.withdrawn', withdrawn);
  await phone.page.reload();
  await phone.page.getByText(notice).waitFor();
  expect(await readWithoutScripts(link)).toEqual(frozen);
  await expectSoundPage(phone.page);

  await page.goto('/weigh-ups');
  await page.getByRole('heading', { name: say(mine, 'weigh-up:copies.affected.title') }).waitFor();
  await expectSoundPage(page);
  const { copies } = await (await page.request.get('/api/affected-copies')).json();
  const old = copies.find(({ sentTo }: { sentTo: string | null }) => sentTo === grower);
  await page
    .getByRole('button', { name: say(mine, 'weigh-up:copies.affected.renewAndSend', { to: grower }) })
    .click();
  const fresh = await readMailedLink(2);
  await expectSoundPage(page);
  expect(fresh).not.toBe(link);
  await phone.page.goto(fresh);
  await phone.page.getByText('Wren Castle').first().waitFor();
  expect(await phone.page.getByText(notice).count()).toBe(0);

  expect((await page.request.delete(`/api/grower-copies/${old.copyId}`)).status()).toBe(200);
  expect((await phone.page.goto(link))?.status()).toBe(410);
  await phone.page.getByText(say(theirs, 'copy:failed.link-revoked.title')).waitFor();
  await expectSoundPage(phone.page);
  await phone.close();
  await close();
}, 180_000);
