import { connect } from 'node:net';
import type { BrowserContext, Page } from 'playwright-core';
import { describe, expect, it } from 'vitest';
import type { Language, Role } from '#shared/account.ts';
import { firstAnswersId, languageCookieName, unitCookieName, verdictId } from '#shared/page-exchange.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { openDemoForFile } from '#tests/support/demo-visit.ts';
import { say } from '#tests/support/say.ts';
import { openVisit, signInByFixture } from '#tests/support/visit.ts';

const demo = openDemoForFile();

/** Works as somebody of that role, or as nobody. */
async function visitAs(
  role: Role | null,
  language: Language,
  work: (context: BrowserContext) => Promise<void>,
): Promise<void> {
  const { context, close } = await openVisit(demo.browser, demo.app.url, language, 360);
  if (role !== null) await signInByFixture(context, role, language);
  await work(context);
  await close();
}

const readJson = async (context: BrowserContext, path: string) => (await context.request.get(path)).json();

/** The demo's weigh-up, which is the English-speaking advisor's. */
async function readDemoWeighUp(context: BrowserContext): Promise<WeighUp> {
  const { weighUps } = await readJson(context, '/api/weigh-ups');
  return (await readJson(context, `/api/weigh-ups/${weighUps[0].id}`)).weighUp;
}

/** The document of a page: what it says about keeping it, the files it names beforehand, the answers in it, and what it asks for. */
async function readDocument(context: BrowserContext, path: string, headers: Record<string, string> = {}) {
  const reply = await context.request.get(path, { headers });
  const html = await reply.text();
  const [, data = ''] = new RegExp(`id="${firstAnswersId}">(.*?)</script>`, 's').exec(html) ?? [];
  const named = (attribute: string) => new RegExp(`${attribute}="(.*?)"`).exec(html)?.[1] ?? '';
  const preloads = `${named('data-ahead')} ${(html.match(/rel="modulepreload"[^>]*/g) ?? []).join(' ')}`;
  return {
    html,
    status: reply.status(),
    keeping: reply.headers()['cache-control'],
    names: [...preloads.matchAll(/\/assets\/([\w-]+)-[\w-]{8}\.js/g)].map(([, name]) => name),
    answers: JSON.parse(data) as Record<string, unknown>,
    asks: named('data-asks').split(' '),
  };
}

/** A reply with its head and the lengths of its parts, letter by letter. */
async function readAsSent({ hostname, port, host, pathname }: URL, cookie: string): Promise<string> {
  const socket = connect(Number(port), hostname);
  socket.write(`GET ${pathname} HTTP/1.1\r\nHost: ${host}\r\nCookie: ${cookie}\r\nConnection: close\r\n\r\n`);
  const parts: Buffer[] = [];
  for await (const part of socket) parts.push(part as Buffer);
  return Buffer.concat(parts).toString('utf8');
}

describe('the document of a page', () => {
  it('carries for an advisor what the API would answer, and is kept nowhere', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const asked = ['/api/me', `/api/weigh-ups/${id}`, '/api/catalogue'];
      const { keeping, names, answers } = await readDocument(context, `/weigh-ups/${id}?view=table`);
      expect(Object.keys(answers).toSorted()).toEqual(asked.toSorted());
      for (const path of asked) {
        const { result, ...reply } = (await readJson(context, path)) as { result?: object };
        // The farm's part and the prices are put to a stored answer each time.
        expect(answers[path]).toMatchObject({ ...reply, ...(result && { result }) });
      }
      expect(keeping).toBe('no-store');
      expect(names).toEqual(expect.arrayContaining(['weigh-up-page', 'sentences-en']));
      const list = await readDocument(context, '/weigh-ups');
      expect(list.answers['/api/weigh-ups']).toEqual(await readJson(context, '/api/weigh-ups'));
    }));

  it('that begins with its verdict leaves to be asked for, after that, all but who is signed in', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const path = `/weigh-ups/${id}?unit=bu-ac`;
      const { keeping, names, answers, asks } = await readDocument(context, path);
      expect(answers).toEqual({ '/api/me': await readJson(context, '/api/me') });
      expect(asks.toSorted()).toEqual([`/api/weigh-ups/${id}`, '/api/catalogue'].toSorted());
      expect(keeping).toBe('no-store');
      expect(names).toEqual(expect.arrayContaining(['weigh-up-page', 'sentences-en']));
    }));

  it('carries nothing of a weigh-up for nobody, for another advisor and for another role', async () => {
    let path = '';
    await visitAs('advisor', 'en', async (context) => {
      path = `/weigh-ups/${(await readDemoWeighUp(context)).id}`;
    });
    await visitAs(null, 'en', async (context) => {
      const { status, answers, keeping, names } = await readDocument(context, path);
      expect([status, answers]).toEqual([200, { '/api/me': { me: null } }]);
      expect(keeping).toBe('no-cache');
      expect(names).toContain('sign-in-page');
      expect(names).not.toContain('weigh-up-page');
    });
    await visitAs('advisor', 'fr', async (context) => {
      const { answers, names } = await readDocument(context, path);
      expect(Object.keys(answers).toSorted()).toEqual(['/api/catalogue', '/api/me']);
      expect(names).toContain('sentences-fr');
    });
    await visitAs('administrator', 'en', async (context) => {
      const { answers } = await readDocument(context, path);
      expect(Object.keys(answers)).not.toContain(`/api${path}`);
      expect(Object.keys((await readDocument(context, '/weigh-ups')).answers)).toEqual(['/api/me']);
    });
  });

  it('begins before its answers are read, in the language of whoever asks', () =>
    visitAs('advisor', 'en', async (context) => {
      const cookie = (await context.cookies()).map(({ name, value }) => `${name}=${value}`).join('; ');
      const sent = await readAsSent(new URL('/weigh-ups', demo.app.url), cookie);
      // Each part stands under a line with its length, however many of them the network then carries together.
      const [, firstPart = '', rest = ''] =
        /\r\n\r\n[\da-f]+\r\n(.*?)\r\n[\da-f]+\r\n(.*)$/s.exec(sent) ?? [];
      expect(firstPart).toMatch(/^<!doctype html>\s*<html lang="en">/);
      expect(firstPart).not.toContain('</head>');
      expect(rest).toContain(`id="${firstAnswersId}"`);
    }));

  it('waits for no weighing: an answer that is not stored yet is left to the page', () =>
    visitAs('advisor', 'en', async (context) => {
      const weighUp = await readDemoWeighUp(context);
      const { weighUp: made } = await (
        await context.request.post('/api/weigh-ups', {
          data: { ...weighUp, growerName: '</script><b>$&', candidateIds: weighUp.candidateIds.slice(0, 2) },
        })
      ).json();
      const path = `/weigh-ups/${made.id}`;
      const early = await readDocument(context, path);
      expect([...Object.keys(early.answers), ...early.asks]).not.toContain(`/api${path}`);
      await readJson(context, `/api${path}`);
      expect((await readDocument(context, path)).asks).toContain(`/api${path}`);
      const { html, answers } = await readDocument(context, `${path}?view=table`);
      expect(answers[`/api${path}`]).toMatchObject({ weighUp: { growerName: '</script><b>$&' } });
      expect(html).not.toContain('</script><b>');
    }));

  it('names the sentences of the language chosen here, else of the one that the browser asks for', () =>
    visitAs(null, 'en', async (context) => {
      const chosen = { cookie: `other=1; ${languageCookieName}=fr` };
      expect((await readDocument(context, '/sign-in', chosen)).names).toContain('sentences-fr');
      const asked = { 'accept-language': 'fr-CA,fr;q=0.9' };
      expect((await readDocument(context, '/sign-in', asked)).names).toContain('sentences-fr');
      expect((await readDocument(context, '/sign-in')).names).toContain('sentences-en');
    }));
});

describe('the top of a weigh-up’s page', () => {
  /** Opens the page; whether its document begins with its top. */
  const openWithTop = async (page: Page, path: string): Promise<boolean> => {
    const document = await page.goto(path);
    return !(await document?.text())?.includes('<div id="root"></div>');
  };

  /** Where the page's name and the verdict stand, once the client has rendered the page or where it never does. */
  async function placeTop(language: Language, width: number, hasScripts: boolean, path: string) {
    const context = await demo.browser.newContext({
      ...{ baseURL: demo.app.url, viewport: { width, height: 740 }, javaScriptEnabled: hasScripts },
      locale: language === 'en' ? 'en-CA' : 'fr-CA',
    });
    await signInByFixture(context, 'advisor', 'en');
    const page = await context.newPage();
    // What the security policy refuses, the style in the page say, is told here alone.
    const complaints: string[] = [];
    page.on('console', (message) => message.type() === 'error' && complaints.push(message.text()));
    // A server that is busy with other tests may leave the answers, and the top with them, to the client.
    await expect.poll(() => openWithTop(page, path), { timeout: 20_000 }).toBe(true);
    if (hasScripts) await page.getByRole('heading', { name: say('en', 'method:title') }).waitFor();
    // Both in the same type face: the system's stands there until ours has come.
    await page.evaluate('document.body.offsetHeight && document.fonts.ready.then(() => undefined)');
    const boxes = await Promise.all(
      ['h1', 'main p > strong'].map((place) => page.locator(place).first().boundingBox()),
    );
    const text = await page.locator('main').innerText();
    await context.close();
    expect(complaints).toEqual([]);
    return { boxes, text };
  }

  it('is seen before any script and does not move when the client takes over', async () => {
    await visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      for (const width of [360, 1280]) {
        const path = `/weigh-ups/${id}?unit=bu-ac`;
        const before = await placeTop('en', width, false, path);
        const after = await placeTop('en', width, true, path);
        expect(before.boxes).toEqual(after.boxes);
        expect(after.text.startsWith(before.text.trimEnd())).toBe(true);
        expect(before.text).toMatch(/\d\sac\b/);
      }
    });
  });

  it('speaks the account’s language and the unit chosen in this browser', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const read = async (cookie: string) => {
        const session = (await context.cookies()).map(({ name, value }) => `${name}=${value}`).join('; ');
        return (await readDocument(context, `/weigh-ups/${id}`, { cookie: `${session}; ${cookie}` })).html;
      };
      expect(await read('other=1')).toContain('\u00a0ha');
      expect(await read(`${unitCookieName}=bu-ac`)).toContain('\u00a0ac');
      await context.request.patch('/api/me', { data: { language: 'fr' } });
      const french = await read('other=1');
      expect(french).toContain('<html lang="fr">');
      expect(french).toContain(say('fr', 'common:signOut'));
      await context.request.patch('/api/me', { data: { language: 'en' } });
    }));

  it('is not sent where the page begins otherwise: the table, another page, nobody', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const empty = '<div id="root"></div>';
      expect((await readDocument(context, `/weigh-ups/${id}`)).html).not.toContain(empty);
      for (const path of [`/weigh-ups/${id}?view=table`, '/weigh-ups', `/trials/${id}`])
        expect((await readDocument(context, path)).html).toContain(empty);
      await visitAs(null, 'en', async (stranger) => {
        expect((await readDocument(stranger, `/weigh-ups/${id}`)).html).toContain(empty);
      });
    }));
});

describe('a first visit', () => {
  it('shows the verdict from few files, and asks once for what it is made from', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const page = await context.newPage();
      const asked: string[] = [];
      page.on('request', (request) => asked.push(new URL(request.url()).pathname));
      await page.goto(`/weigh-ups/${id}`);
      await page.locator('main p > strong').first().waitFor();
      // The verdict is there before any file is asked for: they are counted when the page is whole.
      await page.getByRole('heading', { name: say('en', 'method:title') }).waitFor();
      await page.waitForLoadState('networkidle');
      const files = asked.filter((path) => path.startsWith('/assets/'));
      expect(files.filter((path) => path.endsWith('.js')).length).toBeGreaterThan(2);
      expect(files.length).toBeLessThanOrEqual(14);
      const ofTop = ['/api/me', '/api/catalogue', `/api/weigh-ups/${id}`];
      expect(asked.filter((path) => ofTop.includes(path)).toSorted()).toEqual(ofTop.slice(1));
      // Both are on their way before the client's code is.
      expect(asked.indexOf('/api/catalogue')).toBeLessThan(asked.findIndex((path) => path.endsWith('.js')));
    }));

  it('keeps the verdict in view until what it is made from has come, and says so where it does not come', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const page = await context.newPage();
      const held: (() => Promise<void>)[] = [];
      await page.route(`**/api/weigh-ups/${id}`, (route) => {
        held.push(() => route.continue());
      });
      await page.goto(`/weigh-ups/${id}`);
      await page.evaluate('document.fonts.ready.then(() => undefined)');
      await page.waitForTimeout(1500);
      expect(await page.locator(`[inert] #${verdictId}`).isVisible()).toBe(true);
      expect(held).toHaveLength(1);
      await held[0]?.();
      await page.getByRole('heading', { name: say('en', 'method:title') }).waitFor();
      expect(held).toHaveLength(1);

      await page.unroute(`**/api/weigh-ups/${id}`);
      await page.route(`**/api/weigh-ups/${id}`, (route) => route.abort());
      await page.goto(`/weigh-ups/${id}`);
      await page.getByText(say('en', 'errors:offline')).first().waitFor();
    }));

  it('names no file that the browser would fetch before the verdict is painted, in a copy neither', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const made = await context.request.post(`/api/weigh-ups/${id}/grower-copies`, {
        data: { language: 'en' },
      });
      for (const path of [`/weigh-ups/${id}`, (await made.json()).path as string]) {
        const html = await (await context.request.get(path)).text();
        expect(html).toContain(`id="${verdictId}"`);
        const named = html.replace(/<noscript>.*?<\/noscript>/gs, '').match(/<[^>]+\s(?:src|rel)="[^>]+>/g);
        // The icon waits for the whole page by itself, and what is expected is the verdict.
        expect(named?.map((tag) => /rel="(\w+)"/.exec(tag)?.[1])).toEqual(['icon', 'expect']);
      }
    }));

  it('lays out what stands further down in a copy once the verdict is painted', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const order = { data: { language: 'en' } };
      const made = await context.request.post(`/api/weigh-ups/${id}/grower-copies`, order);
      const { path } = (await made.json()) as { path: string };
      expect(await (await context.request.get(path)).text()).toMatch(/content-visibility:\s*auto/);
      const page = await context.newPage();
      await page.goto(path);
      const laidOut = `['article', '#answer ~ section', 'footer'].map(
        (part) => getComputedStyle(document.querySelector('main ' + part)).contentVisibility,
      )`;
      await expect.poll(() => page.evaluate(laidOut)).toEqual(['visible', 'visible', 'visible']);
    }));

  it('is read in one face until its style has come, and stays so for nobody: scripts or none', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const weight = `getComputedStyle(document.querySelector('#${verdictId} strong')).fontWeight`;
      const page = await context.newPage();
      await page.route('**/*.css', () => undefined);
      await page.goto(`/weigh-ups/${id}`, { waitUntil: 'commit' });
      await page.locator(`#${verdictId} strong`).first().waitFor();
      expect(await page.evaluate(weight)).toBe('400');
      await page.unroute('**/*.css');
      await page.goto(`/weigh-ups/${id}`);
      await expect.poll(() => page.evaluate(weight)).toBe('700');
      const bare = await demo.browser.newContext({ baseURL: demo.app.url, javaScriptEnabled: false });
      await signInByFixture(bare, 'advisor', 'en');
      const still = await bare.newPage();
      await still.goto(`/weigh-ups/${id}`);
      expect(await still.evaluate(weight)).toBe('700');
      await bare.close();
    }));

  it('is whole after the verdict, and an address leads to its section', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const page = await context.newPage();
      await page.goto(`/weigh-ups/${id}#farm`);
      await page.getByLabel(say('en', 'weigh-up:farm.usualYield')).waitFor();
      await page.getByRole('heading', { name: say('en', 'method:title') }).waitFor();
      await expect
        .poll(() => page.evaluate<number>('window.scrollY'), { timeout: 15_000 })
        .toBeGreaterThan(900);
    }));

  it('goes on where it was being read when it is loaded again, and begins at its top when opened anew', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id } = await readDemoWeighUp(context);
      const page = await context.newPage();
      await page.goto(`/weigh-ups/${id}`);
      const foot = page.getByRole('heading', { name: say('en', 'method:title') });
      await foot.waitFor();
      // Far below the end of what the server has rendered.
      await page.evaluate('window.scrollTo(0, 3000)');
      const before = await page.evaluate<number>('window.scrollY');
      expect(before).toBeGreaterThan(2000);
      await page.reload();
      await foot.waitFor();
      await expect.poll(() => page.evaluate<number>('window.scrollY')).toBe(before);
      // Another page, and the same one opened anew, begin at their top.
      await page.goto('/weigh-ups');
      await page.goto(`/weigh-ups/${id}`);
      await foot.waitFor();
      expect(await page.evaluate('window.scrollY')).toBe(0);
      await page.close();
    }));

  it('leaves nothing behind after signing out: going back leads to the sign-in page', () =>
    visitAs('advisor', 'en', async (context) => {
      const { id, growerName } = await readDemoWeighUp(context);
      const page = await context.newPage();
      await page.goto(`/weigh-ups/${id}`);
      await page.getByText(growerName).first().waitFor();
      await page.getByRole('button', { name: say('en', 'common:signOut') }).click();
      const password = page.getByLabel(say('en', 'sign-in:password'));
      await password.waitFor();
      await page.goBack();
      await password.waitFor();
      expect(await page.content()).not.toContain(growerName);
    }));
});

/** Paths with a role that may open them; `:first` is the first of the demo's. */
const openedBy: readonly [Role, readonly string[]][] = [
  ['advisor', ['/weigh-ups', '/weigh-ups/new', '/trials', '/trials/:first']],
  ['agronomist', ['/desk/import', '/desk/usual-variances', '/desk/trials/:first']],
  ['administrator', ['/accounts', '/accounts/audit-log']],
];

describe('a browser that has nothing of the product yet', () => {
  // Files that pages share may depend on each other: whichever page is opened first must be able to start with them.
  it.each(openedBy)('opens pages of the %s by their address', async (role, addresses) => {
    for (const address of addresses) {
      await visitAs(role, 'en', async (context) => {
        const first = async () => {
          const { trials } = await readJson(context, '/api/trials');
          return trials[0].id as string;
        };
        const path = address.endsWith(':first') ? address.replace(':first', await first()) : address;
        const [page] = context.pages();
        await page?.goto(path);
        const heading = page?.getByRole('heading', { level: 1 });
        await heading?.waitFor();
        expect([path, await heading?.textContent()]).not.toContain(say('en', 'common:brokenTitle'));
      });
    }
  });
});
