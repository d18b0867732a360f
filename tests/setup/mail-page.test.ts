import { request } from 'node:http';
import { createTransport } from 'nodemailer';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { openMailPage } from '#server/setup/mail-page.mjs';
import { openMailSink } from '#server/setup/mail-sink.mjs';

let sink: Awaited<ReturnType<typeof openMailSink>>;
let page: Awaited<ReturnType<typeof openMailPage>>;
beforeAll(async () => {
  sink = await openMailSink();
  page = await openMailPage(sink.mails);
});
afterAll(async () => {
  await page.close();
  await sink.close();
});

const read = async (headers: Record<string, string> = {}) => {
  const reply = await fetch(page.url, { headers });
  return { status: reply.status, text: await reply.text() };
};

test('shows what was sent, in the reader’s language, and lets nothing in it act', async () => {
  expect((await read()).text).toContain('No mail has been sent yet.');
  await createTransport(sink.url).sendMail({
    from: 'gavelrow@example.org',
    to: 'maren@example.org',
    subject: 'Exemplaire <de> l’été, long assez pour que l’en-tête soit plié en plusieurs lignes',
    text: 'À lire :\nhttps://example.org/copy/abc\n<script>1</script>',
    html: '<p>À lire</p><script>1</script>',
  });
  const { text } = await read({ 'accept-language': 'fr-CA,fr;q=0.9' });
  expect(text).toContain('lang="fr"');
  expect(text).toContain('maren@example.org');
  expect(text).toContain(
    '<h2>Exemplaire &lt;de&gt; l’été, long assez pour que l’en-tête soit plié en plusieurs lignes</h2>',
  );
  expect(text).toContain('<a href="https://example.org/copy/abc" rel="noreferrer">');
  expect(text).toContain('<iframe sandbox');
  expect(text).not.toContain('<script');
});

test('does not answer to another name than this machine’s', async () => {
  // fetch() does not let a caller choose the host, which is what a rebound name would send.
  const status = await new Promise((resolve, reject) => {
    request(page.url, { headers: { host: 'elsewhere.example.org' } }, (reply) => {
      reply.resume();
      resolve(reply.statusCode);
    })
      .once('error', reject)
      .end();
  });
  expect(status).toBe(403);
});
