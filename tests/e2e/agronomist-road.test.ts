import { describe, expect, it } from 'vitest';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import { expectSoundPage, openVisit, signInByFixture, widths } from '#tests/support/visit.ts';

const demo = openDemoForFile();

/** Worked example D of the trade's training texts: rice, t/ha, nitrogen 0 to 120, four blocks; error MS 0.163, LSD 0.621. */
const nitrogen = {
  N0: [2.1, 2.8, 2.7, 2.9],
  N50: [3.2, 3.4, 4.1, 4.2],
  N60: [4.9, 4.6, 4.6, 5.0],
  N90: [5.3, 5.2, 5.1, 6.1],
  N120: [3.4, 4.6, 4.6, 3.8],
};

function writeCsv(decimal: '.' | ',', spoil?: string): Buffer {
  const delimiter = decimal === ',' ? ';' : ',';
  const rows = Object.entries(nitrogen).flatMap(([entry, values], e) =>
    values.map((value, b) => [
      String(e * 4 + b + 1),
      entry,
      String(b + 1),
      value.toFixed(1).replace('.', decimal),
    ]),
  );
  if (spoil !== undefined && rows[6] !== undefined) rows[6][3] = spoil;
  const lines = [['plot', 'entry', 'block', 'yield'], ...rows].map((row) => row.join(delimiter));
  return Buffer.from(`${lines.join('\r\n')}\r\n`);
}

describe.each(['en', 'fr'] as const)('an agronomist who reads %s', (language) => {
  it.each(widths[language])(
    'brings a file in, reads its analysis, publishes and withdraws it at %i px',
    async (width) => {
      const visit = await openVisit(demo.browser, demo.app.url, language, width);
      const { page } = visit;
      await signInByFixture(visit.context, 'agronomist', language);
      await page.goto('/desk');
      await page.getByRole('heading', { level: 1, name: say(language, 'desk:title') }).waitFor();
      await expectSoundPage(page);

      await page.goto('/desk/import');
      await page.getByLabel(say(language, 'desk:importPage.crop')).selectOption('spring-barley');
      await page.getByLabel(say(language, 'desk:importPage.site')).selectOption({ index: 1 });
      await page.getByLabel(say(language, 'desk:importPage.season')).fill('2021');
      await page.getByLabel(say(language, 'desk:importPage.design')).selectOption('rcbd');
      await page.getByLabel(say(language, 'desk:importPage.name')).fill(`Nitrogen ${language} ${width}`);
      const file = page.locator('input[type=file]');
      const decimal = language === 'fr' ? ',' : '.';
      await file.setInputFiles({
        name: 'plots.csv',
        mimeType: 'text/csv',
        buffer: writeCsv(decimal, 'three'),
      });
      await page.getByRole('button', { name: say(language, 'desk:importPage.check') }).click();
      await page.getByText(say(language, 'desk:report.failTitle')).waitFor();
      await page.getByText('three').first().waitFor();
      await expectSoundPage(page);

      await file.setInputFiles({ name: 'plots.csv', mimeType: 'text/csv', buffer: writeCsv(decimal) });
      await page.getByRole('button', { name: say(language, 'desk:importPage.check') }).click();
      await page.getByText(say(language, 'desk:report.passTitle')).waitFor();
      // The published LSD at 5 %, 0.621, at the two decimals its standard error carries.
      await page
        .getByText(language === 'en' ? /0\.62/ : /0,62/)
        .first()
        .waitFor();
      await expectSoundPage(page);
      await page.getByRole('button', { name: say(language, 'desk:importPage.store') }).click();
      await page.waitForURL(/\/desk\/trials\/[0-9a-f-]{36}/);
      await page.getByText(say(language, 'desk:trial.neverPublished')).waitFor();
      await expectSoundPage(page);

      await page.getByRole('button', { name: say(language, 'desk:trial.publish'), exact: true }).click();
      const dialog = page.getByRole('dialog');
      await dialog.getByRole('button', { name: say(language, 'desk:trial.publish'), exact: true }).click();
      // A publication without a reason is refused in the form, before it is asked for.
      expect(await dialog.getByRole('textbox').getAttribute('aria-invalid')).toBe('true');
      await dialog.getByRole('textbox').fill('Season report');
      await dialog.getByRole('button', { name: say(language, 'desk:trial.publish'), exact: true }).click();
      await page.getByText(say(language, 'desk:trial.published')).first().waitFor();
      await page.getByRole('button', { name: say(language, 'desk:trial.withdraw'), exact: true }).click();
      await dialog.getByRole('textbox').fill('Entries were mixed up');
      await dialog.getByRole('button', { name: say(language, 'desk:trial.withdraw'), exact: true }).click();
      await page.getByText(say(language, 'desk:trial.withdrawn')).first().waitFor();
      await expectSoundPage(page);
      await visit.close();
    },
  );
});
