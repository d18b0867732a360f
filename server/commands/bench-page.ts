import { fileURLToPath } from 'node:url';
import { chromium, type Browser } from 'playwright-core';
import { seedDemo } from '#server/demo/seed-demo.ts';
import { findChromium } from '#server/setup/chromium-program.mjs';
import { startBuiltServer } from './bench/built-server.ts';
import { askDemoQuestion, signInAdvisor } from './bench/demo-question.ts';
import { median } from './bench/quantile-of.ts';
import { serveOneSentence } from './bench/one-sentence-page.ts';
import { openPhone, visitPage, type PageVisit } from './bench/page-visit.ts';

// How soon the verdict is seen on a phone with a slow line, from the built product with the demo: medians of visits.

const visits = Number(process.argv[2] ?? 5);
const projectRoot = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/** Without a target where there is nothing to reach but something to compare with. */
type Row = { page: string; targetMs: number | null; measured: PageVisit[] };

/** Each visit pair by a phone of its own: first with an empty cache, then with what the first one left in it. */
async function visitTwice(
  browser: Browser,
  url: string,
  path: string,
  isSignedIn: boolean,
): Promise<{ cold: PageVisit[]; warm: PageVisit[] }> {
  const [cold, warm]: [PageVisit[], PageVisit[]] = [[], []];
  for (let visit = 0; visit < visits; visit += 1) {
    const phone = await openPhone(browser, url);
    if (isSignedIn) await signInAdvisor(phone.request);
    cold.push(await visitPage(phone, path));
    warm.push(await visitPage(phone, path));
    await phone.close();
  }
  return { cold, warm };
}

function describeRow({ page, targetMs, measured }: Row): string {
  const times = measured.map(({ verdictMs }) => verdictMs);
  const ms = median(times);
  const cells = [
    page,
    (ms / 1000).toFixed(2),
    `${(Math.min(...times) / 1000).toFixed(2)}–${(Math.max(...times) / 1000).toFixed(2)}`,
    (median(measured.map(({ bytes }) => bytes)) / 1000).toFixed(0),
    String(median(measured.map(({ requests }) => requests))),
    targetMs === null ? '–' : (targetMs / 1000).toFixed(1),
    targetMs === null ? '–' : ms < targetMs ? 'yes' : 'NO',
  ];
  return `| ${cells.join(' | ')} |`;
}

const executablePath = findChromium();
if (executablePath === null) throw new Error('Chromium was not found; npm test installs it.');
const server = await startBuiltServer(projectRoot, seedDemo);
const browser = await chromium.launch({ executablePath, args: ['--no-sandbox', '--disable-gpu'] });
try {
  const office = await openPhone(browser, server.url);
  const { weighUp, copy } = await askDemoQuestion(office.request);
  await office.close();
  const oneSentence = await serveOneSentence();
  const ofFloor = await visitTwice(browser, oneSentence.url, '/', false);
  oneSentence.close();
  const ofCopy = await visitTwice(browser, server.url, copy, false);
  const ofWeighUp = await visitTwice(browser, server.url, weighUp, true);
  const rows: Row[] = [
    { page: 'a page of one sentence', targetMs: null, measured: ofFloor.cold },
    { page: 'a page of one sentence, again', targetMs: null, measured: ofFloor.warm },
    { page: 'grower copy, first visit', targetMs: 1200, measured: ofCopy.cold },
    { page: 'grower copy, again', targetMs: 1200, measured: ofCopy.warm },
    { page: 'weigh-up, first visit', targetMs: 3000, measured: ofWeighUp.cold },
    { page: 'weigh-up, again', targetMs: 1000, measured: ofWeighUp.warm },
  ];
  console.log(`Verdict in view: median of ${visits} visits at 400 ms, 400 kB/s, processor ÷ 4.\n`);
  console.log('| page | s | least–most | kB | requests | under | met |');
  console.log('|---|---|---|---|---|---|---|');
  for (const row of rows) console.log(describeRow(row));
  const isMet = ({ measured, targetMs }: Row) =>
    targetMs === null || median(measured.map(({ verdictMs }) => verdictMs)) < targetMs;
  process.exitCode = rows.every(isMet) ? 0 : 1;
} finally {
  await browser.close();
  await server.close();
}
