import { readFileSync } from 'node:fs';
import { createServer } from 'node:http';
import { join } from 'node:path';
import { projectRoot } from './ground.mjs';

const headers = {
  'Content-Security-Policy': "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'",
  'Referrer-Policy': 'no-referrer',
  'X-Content-Type-Options': 'nosniff',
  'X-Robots-Tag': 'noindex',
  'Cache-Control': 'no-store',
};

const style = `
  body { margin: 0 auto; padding: 24px; max-width: 720px; background: #faf6ec; color: #22261f; font: 16px/1.5 sans-serif }
  article { margin: 24px 0; padding: 16px; background: #fffdf7; border: 1px solid #d8d0bb }
  pre { white-space: pre-wrap; overflow-wrap: anywhere; font: inherit }
  iframe { width: 100%; height: 560px; border: 1px solid #d8d0bb }
  p { margin: 0 }`;

/**
 * Shows what the mail sink holds: a page on loopback with a port of its own, and no part of the product.
 * @param {() => readonly (import('./read-mail.mjs').ReadMail & { recipients: string[], at: Date })[]} listMails
 * @returns {Promise<{ url: string, close: () => Promise<void> }>}
 */
export async function openMailPage(listMails) {
  const server = createServer((request, response) => {
    // The name is asked for too, so that no page of another site reaches this one by a name that it points here.
    const host = (request.headers.host ?? '').replace(/:\d+$/, '');
    if (request.method !== 'GET' || !['localhost', '127.0.0.1'].includes(host)) {
      response.writeHead(403, headers).end();
      return;
    }
    const language = /^fr\b/i.test(request.headers['accept-language'] ?? '') ? 'fr' : 'en';
    response
      .writeHead(200, { ...headers, 'Content-Type': 'text/html; charset=utf-8' })
      .end(writePage(listMails(), language));
  });
  await new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  return {
    url: `http://localhost:${server.address().port}`,
    close: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}

function writePage(mails, language) {
  const { sink } = JSON.parse(readFileSync(join(projectRoot, 'locales', language, 'mail.json'), 'utf8'));
  const say = (key, values = {}) =>
    escapeHtml(sink[key].replace(/\{\{(\w+)\}\}/g, (_, name) => String(values[name])));
  const writeMail = ({ subject, from, recipients, at, text, html }) => `<article>
<h2>${escapeHtml(subject)}</h2>
<p>${say('to', { to: recipients.join(', ') })}</p>
<p>${say('from', { from })}</p>
<p>${say('at', { at: at.toLocaleString(language === 'fr' ? 'fr-CA' : 'en-GB') })}</p>
<h3>${say('text')}</h3>
<pre>${withLinks(escapeHtml(text))}</pre>
<h3>${say('html')}</h3>
<iframe sandbox title="${escapeHtml(subject)}" srcdoc="${escapeHtml(html)}"></iframe>
</article>`;
  return `<!doctype html>
<html lang="${language}">
<head><meta charset="utf-8"><meta name="viewport" content="width=device-width">
<title>${say('title')}</title><style>${style}</style></head>
<body><h1>${say('title')}</h1><p>${say('lead')}</p>
${mails.length === 0 ? `<p>${say('empty')}</p>` : [...mails].reverse().map(writeMail).join('\n')}
</body></html>
`;
}

const withLinks = (escaped) =>
  escaped.replace(/https?:\/\/[^\s<]+/g, (link) => `<a href="${link}" rel="noreferrer">${link}</a>`);

const entities = { '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' };
const escapeHtml = (text) => text.replace(/[&<>"']/g, (sign) => entities[sign]);
