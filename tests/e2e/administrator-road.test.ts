import { describe, expect, it } from 'vitest';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import { expectSoundPage, openVisit, signInByFixture, widths } from '#tests/support/visit.ts';

const demo = openDemoForFile();

describe.each(['en', 'fr'] as const)('an administrator who reads %s', (language) => {
  it.each(widths[language])(
    'creates an advisor, suspends the account and brings it back at %i px',
    async (width) => {
      const visit = await openVisit(demo.browser, demo.app.url, language, width);
      const { page, context } = visit;
      await signInByFixture(context, 'administrator', language);
      await context.request.patch('/api/me', { data: { language } });
      const name = `Perrin Ashdale ${language}${width}`;
      const email = `perrin.${language}${width}@example.org`;
      const password = 'twelve-signs-and-more';

      await page.goto('/accounts/new');
      await page.getByLabel(say(language, 'accounts:newPage.name')).fill(name);
      await page.getByLabel(say(language, 'accounts:newPage.email')).fill(email);
      await page.getByLabel(say(language, 'accounts:newPage.password')).fill('short');
      await page.getByRole('button', { name: say(language, 'accounts:newPage.create') }).click();
      expect(
        await page.getByLabel(say(language, 'accounts:newPage.password')).getAttribute('aria-invalid'),
      ).toBe('true');
      await expectSoundPage(page);
      await page.getByLabel(say(language, 'accounts:newPage.password')).fill(password);
      await page.getByRole('button', { name: say(language, 'accounts:newPage.create') }).click();
      await page.getByText(say(language, 'accounts:newPage.created', { name })).waitFor();
      await expectSoundPage(page);

      const signIn = async (): Promise<number> => {
        const stranger = await demo.browser.newContext({ baseURL: demo.app.url });
        const status = (await stranger.request.post('/api/session', { data: { email, password } })).status();
        await stranger.close();
        return status;
      };
      expect(await signIn()).toBe(200);

      const change = async (step: 'suspend' | 'bringBack', done: string): Promise<void> => {
        await page.getByRole('button', { name: say(language, 'accounts:changeOf', { name }) }).click();
        const dialog = page.getByRole('dialog');
        await dialog.getByRole('button', { name: say(language, `accounts:changeDialog.${step}`) }).click();
        await dialog.getByText(say(language, `accounts:changeDialog.${step}Text`, { name })).waitFor();
        await dialog.getByRole('button', { name: say(language, `accounts:changeDialog.${step}`) }).click();
        await page.getByText(say(language, `accounts:changeDialog.${done}`, { name })).waitFor();
      };
      await change('suspend', 'suspended');
      expect(await signIn()).not.toBe(200);
      await change('bringBack', 'broughtBack');
      expect(await signIn()).toBe(200);

      await page.goto('/accounts/audit-log');
      await page.getByText(say(language, 'accounts:audit.actions.account.suspended')).first().waitFor();
      await expectSoundPage(page);
      await visit.close();
    },
  );
});
