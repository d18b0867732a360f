import { mkdir } from 'node:fs/promises';
import { fileURLToPath } from 'node:url';
import { chromium, type Browser, type Page } from 'playwright-core';
import { demoAccounts } from '#server/demo/demo-accounts.ts';
import { findChromium } from '#server/setup/chromium-program.mjs';

/** Takes the pictures of the README from a running product with the demo in it: `npm run screenshots -- [address]`. */
const address = process.argv[2] ?? 'http://localhost:3000';
const folder = fileURLToPath(new URL('../../.pictures/', import.meta.url));

/** Small enough for a repository, sharp enough to read. */
const quality = 72;

type Picture = {
  name: string;
  language: 'en' | 'fr';
  width: number;
  height: number;
  open: (page: Page) => Promise<void>;
};

async function askJson<T>(page: Page, path: string): Promise<T> {
  const reply = await page.request.get(path);
  if (!reply.ok()) throw new Error(`${path} answered ${reply.status()}`);
  // What the product's own contract promises; a picture is the only thing at stake.
  return (await reply.json()) as T;
}

async function openWeighUp(page: Page): Promise<void> {
  const { weighUps } = await askJson<{ weighUps: { id: string }[] }>(page, '/api/weigh-ups');
  await page.goto(`/weigh-ups/${weighUps[0]?.id ?? ''}`);
  // The verdict is painted first, the rest behind it.
  await page.getByRole('figure').first().waitFor();
}

async function openTrial(page: Page): Promise<void> {
  const { trials } = await askJson<{ trials: { id: string; design: string; entries: number }[] }>(
    page,
    '/api/trials?crop=spring-barley&region=upper-velmar',
  );
  const trial = trials.find((line) => line.design === 'incomplete-blocks') ?? trials[0];
  await page.goto(`/trials/${trial?.id ?? ''}`);
}

async function openCopy(page: Page): Promise<void> {
  const { weighUps } = await askJson<{ weighUps: { id: string }[] }>(page, '/api/weigh-ups');
  const reply = await page.request.post(`/api/weigh-ups/${weighUps[0]?.id ?? ''}/grower-copies`, {
    data: { language: 'fr', validDays: 30, timeZone: 'America/Halifax' },
  });
  const made = (await reply.json()) as { path: string; copy: { id: string } };
  await page.goto(made.path);
  await page.getByRole('heading', { level: 1 }).waitFor();
  await page.waitForLoadState('networkidle');
  // The picture needs no link that stays open.
  await page.request.delete(`/api/grower-copies/${made.copy.id}`);
}

const pictures: Picture[] = [
  { name: 'weigh-up', language: 'en', width: 1280, height: 1020, open: openWeighUp },
  { name: 'trial', language: 'en', width: 1280, height: 1100, open: openTrial },
  { name: 'grower-copy', language: 'fr', width: 390, height: 1100, open: openCopy },
];

async function take(browser: Browser, picture: Picture): Promise<void> {
  const { name, language, width, height } = picture;
  const context = await browser.newContext({
    baseURL: address,
    locale: language === 'en' ? 'en-CA' : 'fr-CA',
    viewport: { width, height },
    reducedMotion: 'reduce',
  });
  const { email, password } = demoAccounts.advisor;
  await context.request.post('/api/session', { data: { email, password } });
  // The account's language wins over the browser's.
  await context.request.patch('/api/me', { data: { language } });
  const page = await context.newPage();
  await picture.open(page);
  await page.getByRole('heading', { level: 1 }).waitFor();
  await page.waitForLoadState('networkidle');
  await page.screenshot({ path: `${folder}${name}.jpg`, type: 'jpeg', quality });
  await context.close();
  console.log(`.pictures/${name}.jpg`);
}

const executablePath = findChromium();
if (executablePath === null) throw new Error('Chromium was not found; npm test installs it.');
await mkdir(folder, { recursive: true });
const browser = await chromium.launch({ executablePath, args: ['--no-sandbox', '--disable-gpu'] });
try {
  for (const picture of pictures) await take(browser, picture);
} finally {
  await browser.close();
}
