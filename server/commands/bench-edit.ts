import { fileURLToPath } from 'node:url';
import { chromium, type Locator, type Page } from 'playwright-core';
import { seedDemo } from '#server/demo/seed-demo.ts';
import { findChromium } from '#server/setup/chromium-program.mjs';
import { answerId, verdictId } from '#shared/page-exchange.ts';
import { startBuiltServer } from './bench/built-server.ts';
import { askDemoQuestion } from './bench/demo-question.ts';
import { timeEdits, type TimedKey } from './bench/edit-timing.ts';
import { median, quantileOf } from './bench/quantile-of.ts';

// How soon a figure that is typed is answered on the screen, from the built product with the demo: from key to paint.

const edits = Number(process.argv[2] ?? 30);
const targetMs = 50;
const projectRoot = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

type Row = { key: string; measured: TimedKey[] };

function describeRow({ key, measured }: Row): string {
  const paints = measured.map(({ paintMs }) => paintMs);
  const cells = [
    key,
    String(median(paints)),
    String(quantileOf(paints, 0.9)),
    String(paints[0] ?? NaN),
    median(measured.map(({ scriptMs }) => scriptMs)).toFixed(0),
    isMet(measured) ? 'yes' : 'NO',
  ];
  return `| ${cells.join(' | ')} |`;
}

const isMet = (measured: readonly TimedKey[]): boolean =>
  median(measured.map(({ paintMs }) => paintMs)) < targetMs;

const executablePath = findChromium();
if (executablePath === null) throw new Error('Chromium was not found; npm test installs it.');
const server = await startBuiltServer(projectRoot, seedDemo);
const browser = await chromium.launch({ executablePath, args: ['--no-sandbox', '--disable-gpu'] });
try {
  const desk = await browser.newContext({
    baseURL: server.url,
    locale: 'en-CA',
    viewport: { width: 1280, height: 900 },
  });
  const { weighUp, copy, candidateIds } = await askDemoQuestion(desk.request);
  const ofPage = `:has(> #${verdictId})`;
  const ofCopy = `#${answerId}`;
  const middle = (page: Page): Locator => page.getByLabel('Middle', { exact: true });
  const seed = (page: Page): Locator => page.getByLabel(/^Seed, /).last();
  const own = (page: Page): Locator => page.locator(`${ofCopy} fieldset:not([disabled]) input`).first();
  const time = async (path: string, fieldOf: (page: Page) => Locator, answer: string, start?: string) => {
    const page = await desk.newPage();
    await page.goto(path, { waitUntil: 'networkidle' });
    if (start !== undefined) await fieldOf(page).fill(start);
    const measured = await timeEdits(page, fieldOf(page), answer, edits);
    await page.close();
    return measured;
  };
  const price = await time(weighUp, middle, ofPage);
  const rowOpen = await time(`${weighUp}?open=${candidateIds[0] ?? ''}`, middle, ofPage);
  // In whole dollars, since cents change no figure that is shown.
  const seedCost = await time(weighUp, seed, ofPage, '70');
  const ownPrice = await time(copy, own, ofCopy);
  const rows: Row[] = [
    { key: 'price, a digit', measured: price.digits },
    { key: 'price, a digit taken away', measured: price.removals },
    { key: 'price, a digit, with a row open', measured: rowOpen.digits },
    { key: 'seed cost, a digit', measured: seedCost.digits },
    { key: 'own price of a copy, a digit', measured: ownPrice.digits },
  ];
  console.log(`From key to paint, ms in steps of 8: ${edits} keys of each, four candidates, 1280 px.\n`);
  console.log('| key | median | slowest tenth | first | of it scripts | median under 50 |');
  console.log('|---|---|---|---|---|---|');
  for (const row of rows) console.log(describeRow(row));
  process.exitCode = rows.every(({ measured }) => isMet(measured)) ? 0 : 1;
} finally {
  await browser.close();
  await server.close();
}
