import type { Page } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import { languages, type Language } from '#shared/language.ts';
import type { WeighUp, WeighUpLine, WeighUpResult } from '#shared/weigh-up.ts';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { readPdf } from '#tests/support/read-pdf.ts';
import { say } from '#tests/support/say.ts';
import { openVisit, signInByFixture } from '#tests/support/visit.ts';

const demo = openDemoForFile();

/** Of each, sizes in points. */
const papers = { A4: [595, 842], Letter: [612, 792] } as const;

// Where a line ends is the paper's affair.
const bare = (words: string): string => words.replace(/\s/g, '');

async function print(page: Page, format: keyof typeof papers) {
  const pdf = await readPdf(await page.pdf({ format }));
  const [width, height] = papers[format];
  for (const sheet of pdf.pages) {
    // Browsers go up to whole pixels.
    expect(Math.abs(sheet.width - width)).toBeLessThan(1.5);
    expect(Math.abs(sheet.height - height)).toBeLessThan(1.5);
  }
  const sheets = pdf.pages.map(({ texts }) => bare(texts.map(({ text }) => text).join('')));
  return { sheets, words: bare(pdf.words) };
}

async function openFirstWeighUp(page: Page, language: Language): Promise<string> {
  // The weigh-ups of the demo belong to one advisor, who may read in either language.
  await signInByFixture(page.context(), 'advisor', 'en');
  await page.request.patch('/api/me', { data: { language } });
  const { weighUps } = (await (await page.request.get('/api/weigh-ups')).json()) as {
    weighUps: WeighUpLine[];
  };
  const id = weighUps[0]?.id ?? '';
  await page.goto(`/weigh-ups/${id}`);
  await page.getByRole('heading', { name: say(language, 'verdicts:cautionsTitle') }).waitFor();
  await page.locator('h2 button[aria-expanded="false"]').first().click();
  await page.locator('h2 button[aria-expanded="true"]').waitFor();
  return id;
}

/** What is written of a candidate's cautions on the screen, with the words of its trials. */
async function readShown(page: Page): Promise<{ cautions: string[]; trials: string[] }> {
  const list = page.getByRole('main').locator('#cautions li p');
  const trials = page.locator('#method details details tbody tr th');
  return { cautions: await list.allTextContents(), trials: await trials.allTextContents() };
}

describe('pages on paper', () => {
  it.each(languages)('prints a weigh-up whole and without its forms: %s', async (language) => {
    const { page, close } = await openVisit(demo.browser, demo.app.url, language, 1280);
    await openFirstWeighUp(page, language);
    const shown = await readShown(page);
    expect(shown.cautions.length).toBeGreaterThan(3);
    expect(shown.trials.length).toBeGreaterThan(3);
    for (const format of ['A4', 'Letter'] as const) {
      // The first sheet is the whole answer: it says where the evidence stops.
      const [first] = (await print(page, format)).sheets;
      for (const text of shown.cautions) expect(first, format).toContain(bare(text));
    }
    const { words } = await print(page, language === 'en' ? 'A4' : 'Letter');
    for (const text of [...shown.cautions, ...shown.trials]) expect(words).toContain(bare(text));
    expect(words).toContain(bare(say(language, 'method:trialsUsed')));
    const story = bare(say(language, 'verdicts:story.trials'));
    expect(words.split(story)).toHaveLength(2);
    for (const key of [
      'weigh-up:money.title',
      'weigh-up:money.low',
      'weigh-up:copies.title',
      'weigh-up:question.panel',
      'weigh-up:farm.title',
      'weigh-up:page.back',
      'record:decision.title',
      'record:tickOff.out',
      'common:drawing.showTable',
      'common:signOut',
    ])
      expect(words, key).not.toContain(bare(say(language, key)));
    // What was folded and open before is so again.
    expect(await page.locator('#method details details').getAttribute('open')).toBeNull();
    expect(await page.locator('h2 button[aria-expanded="true"]').count()).toBe(1);
    await close();
  });

  it.each(languages)('prints a grower copy whole, no script running: %s', async (language) => {
    const visit = await openVisit(demo.browser, demo.app.url, language, 1280);
    const id = await openFirstWeighUp(visit.page, language);
    const { cautions, trials } = await readShown(visit.page);
    const made = await visit.page.request.post(`/api/weigh-ups/${id}/grower-copies`, {
      data: { language, validDays: 30 },
    });
    const { path } = (await made.json()) as { path: string };
    await visit.close();
    const still = await demo.browser.newContext({ baseURL: demo.app.url, javaScriptEnabled: false });
    const page = await still.newPage();
    await page.goto(path);
    const candidates = await page.locator('article h2').allTextContents();
    const { sheets, words } = await print(page, language === 'en' ? 'Letter' : 'A4');
    await still.close();
    for (const text of [...cautions, ...trials, ...candidates]) expect(words).toContain(bare(text));
    // The first sheet is the whole answer, and says how to find the page it was printed from.
    for (const text of [...cautions, ...candidates, say(language, 'copy:question'), `${demo.app.url}${path}`])
      expect(sheets[0]).toContain(bare(text));
    // Every candidate's story is unfolded, and no sheet is begun without need.
    const stories = words.split(bare(say(language, 'verdicts:story.trials'))).length - 1;
    expect(stories).toBe(candidates.length);
    expect(sheets.length).toBeLessThanOrEqual(7);
    for (const key of ['copy:own.title', 'copy:onPaper', 'common:units.label'])
      expect(words, key).not.toContain(bare(say(language, key)));
  });

  it('breaks a weigh-up of eight candidates where it must, and says so on the sheet', async () => {
    const { page, close } = await openVisit(demo.browser, demo.app.url, 'fr', 1280);
    const id = await openFirstWeighUp(page, 'fr');
    const { weighUp } = (await (await page.request.get(`/api/weigh-ups/${id}`)).json()) as {
      weighUp: WeighUp;
    };
    const { cropId, regionId, currentVarietyId, seasonFrom, seasonTo } = weighUp;
    const asked = { cropId, regionId, currentVarietyId, seasonFrom, seasonTo };
    const { result } = (await (await page.request.get('/api/candidates', { params: asked })).json()) as {
      result: WeighUpResult;
    };
    const candidateIds = result.candidates.slice(0, 8).map(({ varietyId }) => varietyId);
    const made = await page.request.post('/api/weigh-ups', { data: { ...weighUp, candidateIds } });
    await page.goto(`/weigh-ups/${((await made.json()) as { weighUp: WeighUp }).weighUp.id}`);
    await page.locator('#cautions li').first().waitFor();
    const { cautions } = await readShown(page);
    const { sheets } = await print(page, 'Letter');
    const count = cautions.length;
    expect(sheets[0]).toContain(bare(say('fr', 'verdicts:cautionsOnPaper', { count })));
    const both = sheets.slice(0, 2).join('');
    for (const text of cautions) expect(both).toContain(bare(text));
    // A table wider than its sheet would have shrunk all of them.
    for (const name of result.candidates.slice(0, 8)) expect(both).toContain(bare(name.varietyName));
    await close();
  });
});
