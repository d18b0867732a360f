import { sql } from 'drizzle-orm';
import type { Response } from 'supertest';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { readPdf } from '#tests/support/read-pdf.ts';
import { openRecordWorld, type RecordWorld } from './record-world.ts';

/** The first one waits until what writes PDFs is loaded in its thread. */
const patience = 60_000;

let record: RecordWorld;
beforeAll(async () => {
  record = await openRecordWorld();
});
afterAll(() => record.world.close());

type Made = { weighUpId: string; copyId: string; path: string };

async function makeCopy(language: 'en' | 'fr' = 'fr'): Promise<Made> {
  const { id } = await record.make();
  const { body } = await record.advisor.agent
    .post(`/api/weigh-ups/${id}/grower-copies`)
    .send({ language })
    .expect(200);
  return { weighUpId: id, copyId: body.copy.id, path: body.path };
}

/** supertest keeps a body that it does not know as bytes only when it is told to. */
const download = (address: string): Promise<Response> =>
  record.world
    .visitor()
    .get(address)
    .buffer(true)
    .parse((reply, done) => {
      const chunks: Buffer[] = [];
      reply.on('data', (chunk: Buffer) => chunks.push(chunk));
      reply.on('end', () => done(null, Buffer.concat(chunks)));
    });

const openingsOf = async (weighUpId: string): Promise<number> =>
  (await record.advisor.agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`)).body.copies[0].openings;

test(
  'a copy is a PDF in its own language, named plainly, kept from search engines and not counted',
  async () => {
    const { path, weighUpId } = await makeCopy();
    const reply = await download(`${path}/pdf`);
    expect(reply.status).toBe(200);
    expect(reply.headers).toMatchObject({
      'content-type': 'application/pdf',
      'x-robots-tag': 'noindex, nofollow',
      'referrer-policy': 'no-referrer',
    });
    expect(reply.headers['content-disposition']).toMatch(
      /^attachment; filename=gavelrow-barley-fr-\d{4}-\d{2}-\d{2}\.pdf$/,
    );
    expect(reply.headers['cache-control']).toContain('private');
    const pdf = await readPdf(reply.body);
    expect(pdf.language).toBe('fr');
    expect(pdf.pages[0]?.height).toBeCloseTo(841.89, 1);
    expect(await openingsOf(weighUpId)).toBe(0);
  },
  patience,
);

test('it says the figures of the weigh-up and its own link, in the other language and on Letter as well', async () => {
  const { path, weighUpId } = await makeCopy();
  const pdf = await readPdf((await download(`${path}/pdf?lang=en&paper=letter`)).body);
  const { weighUp, result } = (await record.advisor.agent.get(`/api/weigh-ups/${weighUpId}`)).body;
  expect(pdf.language).toBe('en');
  expect(pdf.pages[0]?.height).toBe(792);
  expect(pdf.words).toContain(`Ask Test advisor: ${record.advisor.email}`);
  expect(pdf.words).toMatch(new RegExp(`http://127\\.0\\.0\\.1:\\d+${path}`));
  expect(pdf.words).toContain(weighUp.growerName);
  for (const { varietyName, gap, money } of result.candidates) {
    const sign = gap.estimate < 0 ? '−' : '+';
    expect(pdf.words).toContain(
      `By the model, ${varietyName} yields ${sign}${Math.abs(gap.estimate).toFixed(2)} t/ha against Anchor.`,
    );
    const amount = `${money.returnPerHectare < 0 ? '−' : '+'}$${Math.abs(money.returnPerHectare).toFixed(0)}`;
    expect(pdf.words).toContain(`${amount}/ha`);
  }
  for (const { siteName, season } of result.trials) expect(pdf.words).toContain(`${siteName} ${season}`);
});

test('whatever else is asked of it is taken as not asked', async () => {
  const { path } = await makeCopy();
  const pdf = await readPdf((await download(`${path}/pdf?lang=de&paper=a0&unit=stone&lang=en`)).body);
  expect(pdf.language).toBe('fr');
  expect(pdf.pages[0]?.width).toBeCloseTo(595.28, 1);
});

test('the page asks for paper without naming its secret', async () => {
  const { path } = await makeCopy();
  const { text } = await record.world.visitor().get(`${path}?unit=q-ha`).expect(200);
  const link = /href="(\?paper=letter[^"]*)"/.exec(text)?.[1]?.replaceAll('&amp;', '&');
  expect(link).toBe('?paper=letter&lang=fr&unit=q-ha');
  const addresses = [...text.matchAll(/(?:href|src)="([^"]*)"/g)].map(([, address]) => address);
  expect(addresses.join(' ')).not.toContain(path.replace('/copy/', ''));
  const reply = await download(`${path}${link}`);
  expect(reply.type).toBe('application/pdf');
});

test('yields come in the unit that is asked for', async () => {
  const { path } = await makeCopy('en');
  const { words } = await readPdf((await download(`${path}/pdf?unit=kg-ha`)).body);
  expect(words).toMatch(/Birch yields \+\d{3,4} kg\/ha against Anchor/);
});

test('a link that leads nowhere gives no PDF but the page that says so', async () => {
  const unknown = await download(`/copy/${'A'.repeat(32)}/pdf`);
  expect([unknown.status, unknown.type]).toEqual([404, 'text/html']);
  const { path, copyId } = await makeCopy();
  await record.advisor.agent.delete(`/api/grower-copies/${copyId}`).expect(200);
  const revoked = await download(`${path}/pdf`);
  expect([revoked.status, revoked.type]).toEqual([410, 'text/html']);
  const expired = await makeCopy();
  await record.world.database.db.execute(sql`update grower_copies
    set created_at = now() - interval '2 days', expires_at = now() - interval '1 second'
    where id = ${expired.copyId}`);
  expect((await download(`${expired.path}/pdf`)).status).toBe(410);
});
